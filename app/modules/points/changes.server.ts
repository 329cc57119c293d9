// What another run of the same definition found otherwise, usually with a later engine.
import { AppError } from '#app/http/errors.ts'
import { getRun } from '#app/modules/runs/runs.server.ts'
import { KEY_RESULTS, OUTCOMES } from '#engine/bundle/key-results.ts'
import { columnOf, storedPoints } from './column-cache.server.ts'

export type ColumnChange = {
  id: string
  /** Points whose value is another, or is there in one run only. */
  points: number
  /** The largest change among points with both values, as a share of the earlier value. */
  largest: { point: number; before: number; after: number; share: number } | null
}

export type RunChanges = {
  engineBefore: string
  engineAfter: string
  points: number
  /** Points that came to another outcome, by what it was and what it is. */
  outcomes: { before: string; after: string; points: number }[]
  /** Key results that differ anywhere, in storage order. */
  columns: ColumnChange[]
  bestBefore: number | null
  bestAfter: number | null
}

/** Compares two finished runs of one revision, point by point. */
export async function runChanges(earlierId: string, laterId: string): Promise<RunChanges> {
  const [earlier, later] = await Promise.all([getRun(earlierId), getRun(laterId)])
  if (earlier.revisionId !== later.revisionId)
    throw new AppError('bad-request', 'The two runs are of different definitions; compare their studies.')
  for (const run of [earlier, later])
    if (run.state !== 'done' || run.pointsDroppedAt)
      throw new AppError('conflict', 'Both runs must have ended, with their points still kept.')
  const changes: RunChanges = {
    engineBefore: earlier.engineVersion,
    engineAfter: later.engineVersion,
    points: later.points,
    outcomes: [],
    columns: [],
    bestBefore: earlier.bestPoint,
    bestAfter: later.bestPoint,
  }
  if (earlier.contentHash === later.contentHash) return changes
  const [stored, storedLater] = await Promise.all([storedPoints(earlier), storedPoints(later)])
  for (const { id, column } of KEY_RESULTS) {
    const [before, after] = await Promise.all([
      columnOf(earlier, column, stored.chunks),
      columnOf(later, column, storedLater.chunks),
    ])
    if (id === 'outcome') changes.outcomes = outcomeChanges(before, after)
    const change = columnChange(id, before, after)
    if (change.points > 0) changes.columns.push(change)
  }
  return changes
}

/** Point by point; NaN equals NaN. */
export function columnChange(id: string, before: Float64Array, after: Float64Array): ColumnChange {
  let points = 0
  let largest: ColumnChange['largest'] = null
  for (let point = 0; point < after.length; point++) {
    if (Object.is(before[point], after[point])) continue
    points++
    const share = Math.abs(after[point] / before[point] - 1)
    if (Number.isFinite(share) && share > (largest?.share ?? 0))
      largest = { point, before: before[point], after: after[point], share }
  }
  return { id, points, largest }
}

function outcomeChanges(before: Float64Array, after: Float64Array): RunChanges['outcomes'] {
  const counts = new Map<number, number>()
  for (let point = 0; point < after.length; point++)
    if (before[point] !== after[point]) {
      const pair = before[point] * OUTCOMES.length + after[point]
      counts.set(pair, (counts.get(pair) ?? 0) + 1)
    }
  return [...counts]
    .map(([pair, points]) => ({
      before: OUTCOMES[Math.floor(pair / OUTCOMES.length)].code,
      after: OUTCOMES[pair % OUTCOMES.length].code,
      points,
    }))
    .sort((a, b) => b.points - a.points)
}
