// What the engine is checked against: each record with its source, how good that source is, what it prints and what the
// engine obtains. The tests, the report in the repository and the Library's page all walk this one list.
import { bankRecords } from './records/bank.ts'
import { filmRecords } from './records/film.ts'
import type { ValidationRecord } from './records/record.ts'
import { surfaceRecords } from './records/surfaces.ts'
import { tubeSideRecords } from './records/tube-side.ts'
import { vapourRecords } from './records/vapour.ts'

export { type CheckEvidence, EVIDENCE, type ValidationRecord } from './records/record.ts'

export const validationRecords: readonly ValidationRecord[] = [
  ...bankRecords,
  ...filmRecords,
  ...vapourRecords,
  ...tubeSideRecords,
  ...surfaceRecords,
]

export type ValidationRow = Omit<ValidationRecord, 'obtained'> & {
  obtained: number
  deviation: number
  within: boolean
}

/** Every record evaluated now; a few milliseconds. */
export function validationReport(): ValidationRow[] {
  return validationRecords.map(({ obtained, ...record }) => {
    const value = obtained()
    const deviation = value / record.expected - 1
    return { ...record, obtained: value, deviation, within: Math.abs(deviation) <= record.tolerance }
  })
}
