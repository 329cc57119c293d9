// How a run is cut: into chunks that are stored and queued, and into slices that threads take.

import { KEY_RESULT_INDEX, OUTCOMES } from '#engine/bundle/key-results.ts'
import { COLUMNS } from '#engine/sweep/evaluate-range.ts'
import { LIMITS } from '#engine/sweep/limits.ts'

/** Work of one core in a chunk: what a killed worker loses at most, per chunk it holds. */
const CHUNK_SECONDS = 0.15
/** More rows in a stored array read no faster. */
const CHUNK_POINTS_MAX = 5000
const CHUNK_POINTS_MIN = 50
/** More chunks cost the queue and every reader more than they save, however dear a point was when it was measured. */
const CHUNKS_MAX = 1000

/** Points a chunk holds when one point costs so much. */
export function chunkPointsFor(secondsPerPoint: number, points: number): number {
  const wanted = Math.round(CHUNK_SECONDS / Math.max(secondsPerPoint, 1e-9))
  const least = Math.max(CHUNK_POINTS_MIN, Math.ceil(points / CHUNKS_MAX))
  return Math.min(points, Math.max(least, Math.min(CHUNK_POINTS_MAX, wanted)))
}

export const chunkCount = (run: { points: number; chunkPoints: number }): number =>
  Math.ceil(run.points / run.chunkPoints)

export function chunkRange(
  run: { points: number; chunkPoints: number },
  chunk: number,
): { first: number; count: number } {
  const first = chunk * run.chunkPoints
  return { first, count: Math.min(run.chunkPoints, run.points - first) }
}

/** A thread takes about so much at a time: enough to hide the hand-over, little enough to stop at once. */
const SLICE_SECONDS = 0.01
const SLICE_POINTS_MIN = 8

export const slicePointsFor = (secondsPerPoint: number): number =>
  Math.max(SLICE_POINTS_MIN, Math.round(SLICE_SECONDS / Math.max(secondsPerPoint, 1e-9)))

export type ChunkSummary = {
  /** Points by outcome number, without trailing zeros. */
  outcomes: number[]
  meetingLimits: number
  /** Evaluated points by the bit of each limit not met, without trailing zeros. */
  limitsNotMet: number[]
  /** Range of each column over evaluated points; NaN where none has a value. */
  leastResults: Float64Array
  greatestResults: Float64Array
  bestPoint: number | null
  bestObjective: number | null
  bestResults: Float64Array | null
}

const OUTCOME = KEY_RESULT_INDEX.outcome
const LIMITS_NOT_MET = KEY_RESULT_INDEX.limitsNotMet

/** Sums a chunk up. Of equal objectives the lowest point is best, so that the best does not depend on the cut. */
export function summarise(
  table: Float64Array,
  first: number,
  count: number,
  objectiveColumn: number,
): ChunkSummary {
  const outcomes = new Array<number>(OUTCOMES.length).fill(0)
  const limitsNotMet = new Array<number>(LIMITS.length).fill(0)
  let meetingLimits = 0
  let best = -1
  let least = Number.POSITIVE_INFINITY
  for (let k = 0; k < count; k++) {
    const outcome = table[OUTCOME * count + k]
    outcomes[outcome]++
    if (outcome !== 0) continue
    const mask = table[LIMITS_NOT_MET * count + k]
    if (mask !== 0) {
      for (let bit = 0; bit < LIMITS.length; bit++) if (mask & (1 << bit)) limitsNotMet[bit]++
      continue
    }
    meetingLimits++
    const objective = table[objectiveColumn * count + k]
    if (objective < least) {
      least = objective
      best = k
    }
  }
  return {
    outcomes: withoutTrailingZeros(outcomes),
    meetingLimits,
    limitsNotMet: withoutTrailingZeros(limitsNotMet),
    ...ranges(table, count),
    bestPoint: best < 0 ? null : first + best,
    bestObjective: best < 0 ? null : least,
    bestResults:
      best < 0 ? null : Float64Array.from({ length: COLUMNS }, (_, column) => table[column * count + best]),
  }
}

function ranges(table: Float64Array, count: number): Pick<ChunkSummary, 'leastResults' | 'greatestResults'> {
  const leastResults = new Float64Array(COLUMNS).fill(Number.NaN)
  const greatestResults = new Float64Array(COLUMNS).fill(Number.NaN)
  for (let column = 0; column < COLUMNS; column++) {
    let least = Number.POSITIVE_INFINITY
    let greatest = Number.NEGATIVE_INFINITY
    for (let k = 0; k < count; k++) {
      if (table[OUTCOME * count + k] !== 0) continue
      const value = table[column * count + k]
      if (value < least) least = value
      if (value > greatest) greatest = value
    }
    if (least > greatest) continue
    leastResults[column] = least
    greatestResults[column] = greatest
  }
  return { leastResults, greatestResults }
}

function withoutTrailingZeros(counts: number[]): number[] {
  let length = counts.length
  while (length > 0 && counts[length - 1] === 0) length--
  return counts.slice(0, length)
}
