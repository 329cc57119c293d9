// What was typed and could not be saved yet, kept in the tab: it outlives a session that ended in the middle, a reload
// and a crash of the page, and goes with the tab.
import type { Definition } from './form-fields.ts'

const keyOf = (place: string) => `rowfall unsaved ${place}`

/** `version`: the save it was typed on top of. */
export function keepUnsaved(place: string, version: number, definition: string): void {
  try {
    sessionStorage.setItem(keyOf(place), JSON.stringify({ version, definition }))
  } catch {
    // A tab without storage loses at most what a second of typing holds.
  }
}

export function dropUnsaved(place: string): void {
  try {
    sessionStorage.removeItem(keyOf(place))
  } catch {
    // Nothing was kept either.
  }
}

/** What a tab still holds, if nothing was saved over it since; else nothing, and it is let go. */
export function takeUnsaved(place: string, version: number, saved: string): Definition | null {
  try {
    const held = JSON.parse(sessionStorage.getItem(keyOf(place)) ?? 'null') as {
      version: number
      definition: string
    } | null
    if (held === null) return null
    if (held.version === version && held.definition !== saved)
      return JSON.parse(held.definition) as Definition
  } catch {
    // Unreadable is the same as absent.
  }
  dropUnsaved(place)
  return null
}
