// What a record is, how good its source may be, and the property sets that the independent calculations share.
import { parseCase } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import type { Result } from '#engine/result.ts'

/** How good the expected value is, best first. */
export const EVIDENCE = [
  'printed value seen',
  'printed value, from memory',
  'printed band seen',
  'formula seen, value computed independently',
  'value held by a public formula library',
  'formula from memory, value computed independently',
  'independent calculation',
  'common practice',
] as const
export type CheckEvidence = (typeof EVIDENCE)[number]

export type ValidationRecord = {
  id: string
  title: string
  source: string
  evidence: CheckEvidence
  /** Card ids that the record speaks for. */
  cards: readonly string[]
  unit: string
  expected: number
  obtained: () => number
  /** Relative. */
  tolerance: number
  why: string
}

type Own = Pick<ValidationRecord, 'id' | 'title' | 'expected' | 'obtained'> & Partial<ValidationRecord>

/** Records that share their source, evidence and so on; what one of them says itself goes before. */
export const group = (
  shared: Omit<ValidationRecord, 'id' | 'title' | 'expected' | 'obtained' | 'unit'> & { unit?: string },
  own: readonly Own[],
): ValidationRecord[] => own.map((record) => ({ unit: '', ...shared, ...record }))

export const NOTES = 'independent double-precision calculation from the printed formula'
export const REMEMBERED = 'independent double-precision calculation from the formula as remembered'
export const SIX_DIGITS = 'printed to six digits'

export type Input = Record<string, unknown>

export function evaluated(input: Input): Result {
  const parsed = parseCase(input)
  if (!parsed.ok) throw new Error(parsed.faults.map(({ path, problem }) => `${path}: ${problem}`).join('; '))
  return evaluate(parsed.case)
}

/** Rounded properties near saturation, inputs of the independent calculations and no source of properties. */
export const STEAM_50 = {
  Ts: 323.15,
  liquidDensity: 990.2,
  latentHeat: 2.382e6,
  liquidViscosity: 5.96e-4,
  liquidConductivity: 0.6375,
  vapourDensity: 0.0831,
  liquidSpecificHeat: 4180,
  surfaceTension: 0.0679,
  vapourViscosity: 1.06e-5,
}
export const STEAM_100 = {
  Ts: 373.15,
  liquidDensity: 961.9,
  latentHeat: 2.2565e6,
  liquidViscosity: 2.97e-4,
  liquidConductivity: 0.677,
  vapourDensity: 0.598,
  liquidSpecificHeat: 4212,
  surfaceTension: 0.0589,
  vapourViscosity: 1.227e-5,
}
export const R134A_40 = {
  Ts: 313.15,
  liquidDensity: 1146.7,
  latentHeat: 1.63e5,
  liquidViscosity: 1.614e-4,
  liquidConductivity: 0.0747,
  vapourDensity: 50.09,
  liquidSpecificHeat: 1498,
  surfaceTension: 6.13e-3,
  vapourViscosity: 1.24e-5,
}
export const R113_48 = {
  Ts: 320.75,
  liquidDensity: 1510,
  latentHeat: 1.438e5,
  liquidViscosity: 5e-4,
  liquidConductivity: 0.0704,
  vapourDensity: 7.38,
  liquidSpecificHeat: 980,
  surfaceTension: 0.0159,
  vapourViscosity: 1.1e-5,
}
export type Properties = typeof STEAM_50

/** The set as a case takes it. */
export const fixed = ({ Ts: _, vapourViscosity: __, ...properties }: Properties) => ({ properties })
