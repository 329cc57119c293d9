// Toasts, only for what finished elsewhere or can be undone. A fault of a field stays at the field.
import { useEffect, useSyncExternalStore } from 'react'

type Told = { id: number; message: string; undo?: () => void }

const SHOWN = 3
let told: readonly Told[] = []
let last = 0
const listeners = new Set<() => void>()
const none: readonly Told[] = []

function set(next: readonly Told[]) {
  told = next
  for (const listener of listeners) listener()
}

const dismiss = (id: number) => set(told.filter((entry) => entry.id !== id))

/** Says what was done; with `undo`, offers to take it back for as long as it stands. */
export function tell(message: string, undo?: () => void): void {
  set([...told, { id: ++last, message, undo }].slice(-SHOWN))
}

export function Toaster() {
  const shown = useSyncExternalStore(
    (listener) => {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
    () => told,
    () => none,
  )
  return (
    <div
      role="status"
      className="screen-only pointer-events-none fixed inset-x-4 bottom-4 z-50 grid justify-items-start gap-2"
    >
      {shown.map((entry) => (
        <Toast key={entry.id} {...entry} />
      ))}
    </div>
  )
}

function Toast({ id, message, undo }: Told) {
  useEffect(() => {
    const timer = setTimeout(() => dismiss(id), undo ? 12_000 : 5_000)
    return () => clearTimeout(timer)
  }, [id, undo])
  return (
    <div className="pointer-events-auto flex items-center gap-4 rounded-md bg-ink px-4 py-2.5 text-sheet shadow-float">
      {message}
      {undo ? (
        <button
          type="button"
          className="font-bold underline underline-offset-3"
          onClick={() => {
            dismiss(id)
            undo()
          }}
        >
          Undo
        </button>
      ) : null}
    </div>
  )
}
