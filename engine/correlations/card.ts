/** The data card every correlation carries, and the quantities its range may name. */

/** The choices of a case's `methods` field. */
export type MethodChoice =
  | 'film'
  | 'latentHeat'
  | 'propertyTemperature'
  | 'inundation'
  | 'vapourShear'
  | 'fins'
  | 'dropwise'
  | 'gas'
  | 'tubeSide'
  | 'tubeFriction'
  | 'vapourPressureDrop'
  | 'twoPhase'

/** What a card belongs to: a method choice, or a part of the calculation that offers no choice. */
export type CardChoice =
  | MethodChoice
  | 'filmReference'
  | 'coolantPressureDrop'
  | 'wall'
  | 'geometry'
  | 'economics'
  | 'vapourSide'

/** Fluid properties a method may need beyond the four every case has (named as in the case file). */
export type FluidProperty =
  | 'vapourDensity'
  | 'liquidSpecificHeat'
  | 'surfaceTension'
  | 'vapourViscosity'
  | 'vapourConductivity'
  | 'vapourSpecificHeat'

/**
 * How well the numbers of a card are established.
 *
 * - `printed value checked`: reproduces a figure printed in a named book or paper.
 * - `formula seen`: the formula was seen in a public copy; values are our own evaluation.
 * - `limit-checked, from memory`: constants from memory that reproduce a known exact limit.
 * - `plausibility checked, from memory`: constants from memory, agreeing with an independent published band.
 * - `from memory, unverified`: constants from memory, no copy seen, no check beyond arithmetic.
 * - `derived`: follows from a stated derivation, checked by an independent route.
 * - `assumption`: an engineering choice made here.
 * - `definition`: true by definition.
 */
export type Evidence =
  | 'printed value checked'
  | 'formula seen'
  | 'limit-checked, from memory'
  | 'plausibility checked, from memory'
  | 'from memory, unverified'
  | 'derived'
  | 'assumption'
  | 'definition'

/** Quantities a range may be stated for, with label and SI unit. */
export const RANGE_QUANTITIES = {
  filmReynolds: { label: 'film Reynolds number 2 Γ/µ', unit: '' },
  plateFilmReynolds: { label: 'film Reynolds number 4 Γ/µ of a plate', unit: '' },
  jakob: { label: 'Jakob number cp ΔT/hfg', unit: '' },
  liquidPrandtl: { label: 'liquid Prandtl number', unit: '' },
  reducedTemperature: { label: 'saturation over critical temperature', unit: '' },
  filmSuperheatGroup: { label: 'k ΔT/(µ hfg)', unit: '' },
  twoPhaseReynolds: { label: 'Re~ = ρl U D/µl (vapour velocity, liquid properties)', unit: '' },
  shearGroup: { label: 'F = g D µ hfg/(U² k ΔT)', unit: '' },
  vapourQuality: { label: 'vapour mass fraction', unit: '' },
  martinelli: { label: 'Lockhart–Martinelli parameter X_tt', unit: '' },
  rows: { label: 'rows', unit: '' },
  rowsJakob: { label: '(N − 1) Ja', unit: '' },
  galileo: { label: 'modified Galileo number', unit: '' },
  coolantReynolds: { label: 'coolant Reynolds number', unit: '' },
  coolantPrandtl: { label: 'coolant Prandtl number', unit: '' },
  wallPrandtlRatio: { label: 'Pr/Pr at the wall', unit: '' },
  vapourReynolds: { label: 'vapour Reynolds number with U_max', unit: '' },
  crossflowReynolds: { label: 'Re over the flow length π D/2', unit: '' },
  prandtlOrSchmidt: { label: 'Prandtl or Schmidt number', unit: '' },
  transversePitchRatio: { label: 'a = sT/D', unit: '' },
  rowPitchRatio: { label: 'b = sL/D', unit: '' },
  pitchRatio: { label: 'pitch over outside diameter', unit: '' },
  relativeRoughness: { label: 'roughness over inside diameter', unit: '' },
  outsideDiameter: { label: 'outside diameter', unit: 'm' },
  tubeGap: { label: 'vertical gap between tubes', unit: 'm' },
  finSpacing: { label: 'fin spacing', unit: 'm' },
  finHeight: { label: 'fin height', unit: 'm' },
  floodedFraction: { label: 'flooded fraction of the circumference', unit: '' },
  saturationTemperature: { label: 'saturation temperature', unit: 'K' },
  saturationPressure: { label: 'saturation pressure', unit: 'Pa' },
  wallSubcooling: { label: 'wall subcooling', unit: 'K' },
  gasMassFraction: { label: 'gas mass fraction', unit: '' },
  interestRate: { label: 'interest rate', unit: '' },
} as const

export type RangeQuantity = keyof typeof RANGE_QUANTITIES

/** A closed interval, or the plain statement that the source names none (never to be read as "any"). */
export type Range = readonly [number, number] | 'not stated'

export interface Card {
  /** `choice.method`, unique in the registry. */
  readonly id: string
  readonly choice: CardChoice
  /** The id a case names under `methods[choice]`; absent when the card is not a selectable method. */
  readonly methodId?: string
  readonly name: string
  readonly equation: string
  readonly symbols: Readonly<Record<string, string>>
  readonly source: readonly string[]
  readonly range: Readonly<Partial<Record<RangeQuantity, Range>>>
  readonly rangeText?: string
  /** Published scatter in words. */
  readonly scatter: string
  /** 1-sigma of the natural logarithm of the multiplier for the uncertainty study; null when none applies. */
  readonly sigmaLn: number | null
  readonly evidence: Evidence
  /** True for the default of its choice. */
  readonly default?: boolean
  /** Fluid properties needed beyond liquid density, latent heat, liquid viscosity and liquid conductivity. */
  readonly requires: readonly FluidProperty[]
  /** Whether a case may choose this method today. */
  readonly available: boolean
  readonly notes?: readonly string[]
}

/** Position of a value against a range: 0 inside or range not stated, otherwise the factor it lies outside by. */
export function outsideRange(range: Range | undefined, value: number): number {
  if (range === undefined || range === 'not stated') return 0
  if (value > range[1]) return value / range[1]
  if (value < range[0]) return value / range[0]
  return 0
}

/** 1-sigma of ln multiplier from "90 % of the data within ±X": ln(1 + X)/1.645. */
export function sigmaFromBand(band: number): number {
  return Math.log(1 + band) / 1.645
}

/** 1-sigma of ln multiplier from a mean absolute error: 1.253 MAE. */
export function sigmaFromMeanError(meanAbsoluteError: number): number {
  return 1.253 * meanAbsoluteError
}
