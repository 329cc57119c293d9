// A dialog on the platform's own <dialog>: focus is kept inside, Escape closes, focus returns to the opener.
import { type ReactNode, useEffect, useId, useRef } from 'react'

export function Dialog({
  open,
  onClose,
  title,
  children,
}: {
  open: boolean
  onClose: () => void
  title: string
  children: ReactNode
}) {
  const ref = useRef<HTMLDialogElement>(null)
  const id = useId()
  useEffect(() => {
    const dialog = ref.current
    if (!dialog) return
    if (open && !dialog.open) dialog.showModal()
    if (!open && dialog.open) dialog.close()
  }, [open])
  return (
    // biome-ignore lint/a11y/useKeyWithClickEvents: the platform closes a dialog on Escape; the click is the backdrop's
    <dialog
      ref={ref}
      className="dialog"
      aria-labelledby={id}
      onClose={onClose}
      onClick={(event) => {
        if (event.target === event.currentTarget) event.currentTarget.close()
      }}
    >
      {open ? (
        <div className="grid gap-4">
          <h2 id={id} className="text-head">
            {title}
          </h2>
          {children}
        </div>
      ) : null}
    </dialog>
  )
}

/** The row of buttons that ends a dialog or a form; the main act comes last. */
export function Acts({ children, className = '' }: { children: ReactNode; className?: string }) {
  return <div className={`flex flex-wrap items-center justify-end gap-2 ${className}`}>{children}</div>
}
