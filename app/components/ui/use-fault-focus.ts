import { type RefObject, useEffect, useRef } from 'react'
import { focusFirstFault } from './field.tsx'

/** Puts the reader at the first field with a fault whenever a refusal arrives. */
export function useFaultFocus(refusal: unknown): RefObject<HTMLFormElement | null> {
  const form = useRef<HTMLFormElement>(null)
  useEffect(() => {
    if (refusal) focusFirstFault(form.current)
  }, [refusal])
  return form
}
