// What the progress route answers, and the arithmetic behind it.

import type { RunState } from '#drizzle/schema/run.ts'
import type { SweptValue } from '#engine/sweep/study.ts'

/** Key results by id, null where a point has no such value. */
export type KeyResultValues = Record<string, number | null>

export type PointInput = { path: string; label: string; value: SweptValue }

/** The best point so far: what it was chosen by, its inputs, and its key results by id. */
export type BestSoFar = { point: number; objective: number; inputs: PointInput[]; results: KeyResultValues }

export type RunProgress = {
  runId: string
  state: RunState
  paused: boolean
  /** Points stored, of `points` planned. */
  done: number
  points: number
  meetingLimits: number
  /** Over the last half minute of storing; null until there is something to measure, and at the end. */
  pointsPerSecond: number | null
  secondsLeft: number | null
  /** From the first chunk taken to the end, or to now. */
  seconds: number | null
  best: BestSoFar | null
  /** Why points have no values, commonest first. */
  failures: { code: string; text: string; count: number }[]
  fault: string | null
  /** Nobody serves the queue for this run's engine version: the run waits for a worker. */
  waitingForWorker: boolean
}

/** True when nothing more will change, so that polling may end. */
export const isFinal = (state: RunState): boolean =>
  state === 'done' || state === 'cancelled' || state === 'failed'
