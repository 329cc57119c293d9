import { useState } from 'react'

/** The first value that came with this key: what is equal stays the same object, and what hangs on it is kept. */
export function useSteady<Value>(value: Value, key: string): Value {
  const [kept, setKept] = useState({ key, value })
  if (kept.key === key) return kept.value
  setKept({ key, value })
  return value
}
