// Toasts, only for what finished elsewhere or can be undone. A fault of a field stays at the field.
import { Toaster as Sonner, toast } from 'sonner'

export function Toaster() {
  return (
    <Sonner
      position="bottom-left"
      visibleToasts={3}
      toastOptions={{
        unstyled: true,
        classNames: {
          toast:
            'flex w-full items-center justify-between gap-4 rounded-md border border-line bg-ink px-4 py-3 text-body text-sheet shadow-float',
          actionButton: 'shrink-0 font-bold underline underline-offset-3',
        },
      }}
    />
  )
}

/** Says what was done; with `undo`, offers to take it back for as long as it stands. */
export function tell(message: string, undo?: () => void): void {
  toast(message, { duration: undo ? 10_000 : 5_000, action: undo ? { label: 'Undo', onClick: undo } : undefined })
}
