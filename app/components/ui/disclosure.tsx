// A button that opens a small panel under it. A native <details>, so that it works before scripts do; with them,
// Escape, a press elsewhere and leaving by Tab close it.
import { type ReactNode, useEffect, useRef } from 'react'
import { type ButtonLook, buttonClass } from './button.tsx'

export function Disclosure({
  label,
  name,
  look = 'quiet',
  small,
  className = '',
  children,
}: {
  label: ReactNode
  /** The button's full name where the label alone does not say what it is for. */
  name?: string
  look?: ButtonLook
  small?: boolean
  className?: string
  children: ReactNode
}) {
  const ref = useRef<HTMLDetailsElement>(null)
  useEffect(() => {
    const details = ref.current
    if (!details) return
    const close = () => {
      details.open = false
    }
    const onPress = (event: Event) => {
      if (!details.contains(event.target as Node)) close()
    }
    const onKey = (event: KeyboardEvent) => {
      if (event.key !== 'Escape' || !details.open) return
      close()
      details.querySelector('summary')?.focus()
    }
    const onLeave = (event: FocusEvent) => {
      if (event.relatedTarget && !details.contains(event.relatedTarget as Node)) close()
    }
    const onChosen = (event: Event) => {
      if ((event.target as HTMLElement).closest('[data-closes]')) close()
    }
    document.addEventListener('pointerdown', onPress)
    details.addEventListener('keydown', onKey)
    details.addEventListener('focusout', onLeave)
    details.addEventListener('click', onChosen)
    return () => {
      document.removeEventListener('pointerdown', onPress)
      details.removeEventListener('keydown', onKey)
      details.removeEventListener('focusout', onLeave)
      details.removeEventListener('click', onChosen)
    }
  }, [])
  return (
    <details ref={ref} className="disclosure relative">
      <summary className={buttonClass(look, small, 'list-none')} aria-label={name}>
        {label}
      </summary>
      <div
        className={`absolute end-0 z-40 mt-1 w-max max-w-[calc(100vw-2rem)] rounded-md border border-line bg-sheet p-1 shadow-float ${className}`}
      >
        {children}
      </div>
    </details>
  )
}
