// What a study's files are made from, whoever writes them: the web export and the command line build the same.
import { KEY_RESULTS, OUTCOMES } from '#engine/bundle/key-results.ts'
import type { Case } from '#engine/case.ts'
import { noteCodes } from '#engine/notes.ts'
import type { Result } from '#engine/result.ts'
import { LIMITS } from '#engine/sweep/limits.ts'
import { pointInputs, type SweepPlan } from '#engine/sweep/plan.ts'
import type { SweptValue } from '#engine/sweep/study.ts'
import type { Band } from '#engine/uncertainty/bands.ts'

export type ReportedPoint = {
  label: string
  point: number | null
  case: Case
  result: Result
  /** How sure the area or duty is, where it was found out. */
  band?: Band | null
  statement?: string
}

export type StudyReport = {
  plan: SweepPlan
  /** Demo data, labelled as invented wherever it goes. */
  invented: boolean
  /** Where the numbers come from, as label and text: run, revision, engine version, dates, content hash. */
  origin: readonly (readonly [string, string])[]
  /** Points reported, from 0: fewer than the plan's where a run was cancelled. */
  points: number
  /** Where given, only points marked here are listed. */
  only?: Uint8Array
  /** Key results of `count` points from `first`, column by column; a point without results is NaN throughout. */
  table(first: number, count: number): Promise<Float64Array>
  /** The best point, and the refined one where there is one. */
  best: readonly ReportedPoint[]
}

export const CAUTIONS = [
  'Screening results, not a certified design: pressure equipment, refrigerant charge and ventilation follow local codes and licensed practice.',
  'Values outside a method’s range are marked by notes, never hidden and never silently clipped.',
  'Tube vibration and supports are not covered.',
]

/** How many points are read and written at a time. */
export const SLICE = 2000

const OUTCOME = KEY_RESULTS.findIndex(({ id }) => id === 'outcome')
const LIMITS_NOT_MET = KEY_RESULTS.findIndex(({ id }) => id === 'limitsNotMet')
const NOTES = KEY_RESULTS.findIndex(({ id }) => id === 'notes')

/** Heads of the table of points: snake case, the unit last. */
export const pointHeads = (plan: SweepPlan): string[] => [
  'point',
  ...plan.variables.map(({ column }) => column),
  ...KEY_RESULTS.map(({ column }) => column),
]

export type Cell = number | string | null

/** One row of the table of points: numbers in SI at full precision, codes as words. */
export function pointRow(
  plan: SweepPlan,
  point: number,
  table: Float64Array,
  k: number,
  count: number,
): Cell[] {
  const row: Cell[] = [point, ...inputsOf(plan, point)]
  for (let c = 0; c < KEY_RESULTS.length; c++) {
    const value = table[c * count + k]
    if (c === OUTCOME) row.push(Number.isFinite(value) ? OUTCOMES[value].code : 'notComputed')
    else if (c === LIMITS_NOT_MET) row.push(limitsNotMet(value))
    else if (c === NOTES) row.push(noteCodes(value).join(' '))
    else row.push(Number.isFinite(value) ? value : null)
  }
  return row
}

const inputsOf = (plan: SweepPlan, point: number): SweptValue[] => pointInputs(plan, point)

export function limitsNotMet(mask: number): string {
  if (!(mask > 0)) return ''
  return LIMITS.filter((_, bit) => Math.floor(mask / 2 ** bit) % 2 === 1)
    .map(({ id }) => id)
    .join(' ')
}
