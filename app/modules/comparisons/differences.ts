// Inputs and results of several points side by side: which rows differ, and which are the same for all.
import type { Entry, EntryGroup } from '#app/modules/explore/sheet.ts'

export type ComparedRow = { group: string; label: string; cells: (Entry | null)[]; same: boolean }

/** One row for each label of a group; null where a point has no such entry. */
export function comparedRows(points: readonly EntryGroup[][]): ComparedRow[] {
  const titles = [...new Set(points.flatMap((groups) => groups.map(({ title }) => title)))]
  return titles.flatMap((title) => {
    const entries = points.map((groups) => groups.find((group) => group.title === title)?.entries ?? [])
    const labels = [...new Set(entries.flatMap((list) => list.map(({ label }) => label)))]
    return labels.map((label) => {
      const cells = entries.map((list) => list.find((entry) => entry.label === label) ?? null)
      return { group: title, label, cells, same: cells.every((cell) => sameValue(cell, cells[0])) }
    })
  })
}

/** The drive's fields stand in one group, whichever of the two drives a study has. */
export const drivesAsOne = (groups: EntryGroup[]): EntryGroup[] =>
  groups.map((group) => (/ given$/.test(group.title) ? { ...group, title: 'Drive' } : group))

function sameValue(a: Entry | null, b: Entry | null): boolean {
  if (a === null || b === null) return a === b
  if ('text' in a || 'text' in b) return 'text' in a && 'text' in b && a.text === b.text
  if (a.value === null || b.value === null) return a.value === b.value
  // Unit conversion may leave the last bit different: 3/4 in and 19.05 mm are one tube.
  return Math.abs(a.value - b.value) <= 1e-12 * Math.max(Math.abs(a.value), Math.abs(b.value))
}
