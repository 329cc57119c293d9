// What the questions about a run's points take and answer.
import type { Case } from '#engine/case.ts'
import type { Result } from '#engine/result.ts'
import type { SweptValue } from '#engine/sweep/study.ts'
import type { Band } from '#engine/uncertainty/bands.ts'

export type Range = { min?: number; max?: number }

/** Which points; all that is given must hold. Columns are key result ids, variables are sweep paths. */
export type PointFilters = {
  ranges?: Record<string, Range>
  /** Outcome code, for example "evaluated". */
  outcome?: string
  meetingLimits?: boolean
  /** A variable's value, in SI units or as an id. */
  inputs?: Record<string, SweptValue>
}

export type PageQuery = {
  /** A key result id, a variable's path, or "point". */
  sort?: string
  descending?: boolean
  filters?: PointFilters
  limit?: number
  offset?: number
}

export type PointRow = {
  point: number
  /** In the order of the study's variables. */
  inputs: SweptValue[]
  /** In the order of KEY_RESULTS; null where the point has no such value. */
  results: (number | null)[]
}

export type PointsPage = {
  /** Points stored so far. */
  stored: number
  /** Of these, as many pass the filters. */
  matching: number
  offset: number
  rows: PointRow[]
}

export type PlotQuery = {
  /** Key result ids or variable paths. */
  x: string
  y: string
  colour?: string
  /** At most so many points are returned; 20 000 when not given. */
  max?: number
  filters?: PointFilters
}

/** Exact values, thinned evenly over the plot's area where there are more points than asked for. */
export type PlotColumns = {
  matching: number
  point: number[]
  x: number[]
  y: number[]
  colour: (number | null)[] | null
  /** 1 where the point meets every limit. */
  meetsLimits: number[]
  best: number | null
  /** Points of the front, by rising x: no other evaluated point is less in both x and y. */
  front: number[]
}

export type Aggregates = {
  stored: number
  matching: number
  evaluated: number
  meetingLimits: number
  outcomes: { code: string; text: string; count: number }[]
  /** How many evaluated points each limit stops, by limit id. */
  limitsNotMet: Record<string, number>
  /** Of evaluated points, by key result id; absent where no point has a value. */
  ranges: Record<string, { min: number; max: number }>
}

export type KeyResultDifference = { id: string; stored: number | null; now: number | null }

export type PointSheet = {
  runId: string
  point: number
  case: Case
  /** By the running engine, or as stored with the run for its best point. */
  result: Result
  /** Key results as stored with the run, by id. */
  stored: Record<string, number | null>
  storedEngineVersion: string
  engineVersion: string
  /** True where `result` is the stored record, false where it was computed just now. */
  recorded: boolean
  /** How sure the area or duty is, where it was found out when the run ended. */
  band: Band | null
  /** Key results that the running engine finds otherwise; empty when the versions are the same. */
  differences: KeyResultDifference[]
}
