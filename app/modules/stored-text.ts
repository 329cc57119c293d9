// What people type, before it goes into the database: PostgreSQL keeps no NUL in text and no half surrogate in jsonb.

const CONTROL = /[\p{Cc}\p{Cs}]/u
const UNSTORABLE = /\0|\p{Cs}/u

/** A name on one line: white space at its ends and doubled inside is dropped; null when it cannot be shown. */
export function oneLine(text: string): string | null {
  const line = text.trim().replace(/\s+/g, ' ')
  return CONTROL.test(line) ? null : line
}

/** Text that goes along with something else: what cannot be stored is left out, what is too long cut off. */
export function trimmedTo(text: string, length: number): string {
  return text
    .replace(/\0/g, '')
    .trim()
    .slice(0, length)
    .replace(/\p{Cs}/gu, '')
}

/** The first text, key or value, inside a JSON value that cannot be stored. */
export function unstorableIn(value: unknown): string | undefined {
  if (typeof value === 'string') return UNSTORABLE.test(value) ? value : undefined
  if (typeof value !== 'object' || value === null) return undefined
  for (const [key, inner] of Object.entries(value)) {
    const found = UNSTORABLE.test(key) ? key : unstorableIn(inner)
    if (found !== undefined) return found
  }
  return undefined
}
