// Buttons and links that look like buttons; StatusButton says at the thing pressed that it is working.
import { type ComponentProps, useEffect, useRef, useState } from 'react'
import { Link } from 'react-router'

export type ButtonLook = 'main' | 'plain' | 'quiet' | 'danger'

export function buttonClass(look: ButtonLook = 'plain', small = false, className = ''): string {
  return `button button-${look}${small ? ' button-small' : ''} ${className}`.trim()
}

type Looks = { look?: ButtonLook; small?: boolean }

export function Button({
  look,
  small,
  className,
  type = 'button',
  ...rest
}: ComponentProps<'button'> & Looks) {
  return <button type={type} className={buttonClass(look, small, className)} {...rest} />
}

export function LinkButton({ look, small, className, ...rest }: ComponentProps<typeof Link> & Looks) {
  return <Link className={buttonClass(look, small, className)} {...rest} />
}

/** For files and other addresses that the router must not take over. */
export function DownloadLink({ look, small, className, ...rest }: ComponentProps<'a'> & Looks) {
  return (
    <a className={buttonClass(look, small, className)} {...rest}>
      {rest.children}
    </a>
  )
}

/** True once `busy` has lasted `delay` ms, and then for at least `hold` ms: quick is calm, slow is honest. */
export function useSettled(busy: boolean, delay = 400, hold = 300): boolean {
  const [shown, setShown] = useState(false)
  const since = useRef(0)
  useEffect(() => {
    if (busy === shown) return
    const wait = busy ? delay : Math.max(0, hold - (performance.now() - since.current))
    const timer = setTimeout(() => {
      if (busy) since.current = performance.now()
      setShown(busy)
    }, wait)
    return () => clearTimeout(timer)
  }, [busy, shown, delay, hold])
  return shown
}

/** A submit button that shows `working` in its own place while `busy`; a second press while busy does nothing. */
export function StatusButton({
  busy,
  working,
  children,
  onClick,
  ...rest
}: ComponentProps<typeof Button> & { busy: boolean; working: string }) {
  const shown = useSettled(busy)
  return (
    <Button
      type="submit"
      {...rest}
      aria-busy={busy || undefined}
      onClick={(event) => {
        if (busy) event.preventDefault()
        else onClick?.(event)
      }}
    >
      <span className="grid">
        <span className={`col-start-1 row-start-1 ${shown ? 'invisible' : ''}`}>{children}</span>
        <span className={`col-start-1 row-start-1 ${shown ? '' : 'invisible'}`} aria-hidden={!shown}>
          {working}
        </span>
      </span>
    </Button>
  )
}
