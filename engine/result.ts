// The result of one case, all SI: numbers are finite, or null with a note whose code says why.

import type { Correction, Methods } from './case.ts'
import type { Note } from './notes.ts'

export type DrainageMode = 'droplet' | 'dropletColumn' | 'column' | 'columnSheet' | 'sheet'

export type RowResult = {
  /** 1 at the top, where the vapour enters. */
  row: number
  tubes: number
  saturationTemperature: number
  /** Film-side surface, outside any outside fouling. */
  wallTemperature: number
  coolantTemperature: number | null
  coefficient: number
  wallSubcooling: number
  heatFlux: number
  /** Condensate arriving from above, per metre of tube [kg/(m s)]. */
  condensateIn: number
  /** Mean void-area velocity at the row's mean flow [m/s]; null where the vapour density is unknown. */
  vapourVelocity: number | null
  gasMoleFraction: number
  /** 2 Γ / μ at the bottom of the row. */
  filmReynolds: number
  /** Modified Galileo number ρ σ³ / (μ⁴ g); null where the surface tension is unknown. */
  galileo: number | null
  drainageMode: DrainageMode | null
  factors: { inundation: number; shear: number; gas: number; surface: number }
}

export type PassResult = {
  /** 1 where the coolant enters. */
  pass: number
  rows: number
  inletTemperature: number
  outletTemperature: number
  velocity: number
  reynolds: number
  coefficient: number
  pressureDrop: number
}

export type Result = {
  question: 'size' | 'rate'
  duty: number | null
  condensateRate: number | null
  outsideArea: number | null
  tubeLength: number | null
  tubeCount: number | null
  meanCoefficient: number | null
  meanHeatFlux: number | null
  overallCoefficient: number | null
  meanTemperatureDifference: number | null
  coolant: {
    massFlow: number | null
    velocity: number | null
    reynolds: number | null
    coefficient: number | null
    inletTemperature: number | null
    outletTemperature: number | null
    pressureDrop: number | null
  } | null
  vapour: {
    inletVelocity: number | null
    pressureDrop: number | null
    saturationTemperatureDrop: number | null
    ventFlow?: number | null
  }
  bundle: { width: number | null; height: number | null; tubeMass: number | null }
  pumpingPower: number | null
  yearlyCost: number | null
  filmModeArea?: number | null
  rows: RowResult[]
  passes: PassResult[]
  notes: Note[]
  methods: Methods
  /** As the case gives them; absent where it gives none. */
  corrections?: Correction[]
  engineVersion: string
}
