// Everything a point is made of, as numbers and records of one shape.
import type { Layout } from '#engine/correlations/geometry.ts'
import { type CoolantModel, type FluidModel, fixedFluid } from '#engine/fluids/index.ts'

/** Most rows and passes a case may have; the march's arrays are made for as many. */
export const MAX_ROWS = 500
export const MAX_PASSES = 64

/** NaN stands for "not given". */
export class PointState {
  fluid: FluidModel = fixedFluid({
    liquidDensity: 1,
    latentHeat: 1,
    liquidViscosity: 1,
    liquidConductivity: 1,
  })
  saturationTemperature = Number.NaN
  saturationPressure = Number.NaN
  duty = Number.NaN
  length = Number.NaN
  coolantDrive = true
  wallSubcooling = Number.NaN
  coolant: CoolantModel | null = null
  inletTemperature = Number.NaN
  velocity = Number.NaN
  massFlow = Number.NaN
  outletTemperature = Number.NaN
  insideFouling = 0
  outsideDiameter = Number.NaN
  wallThickness = Number.NaN
  conductivity = Number.NaN
  tubeDensity = Number.NaN
  roughness = 0
  outsideFouling = 0
  circular = false
  layout: Layout = 'triangular30'
  pitchRatio = Number.NaN
  rows = 1
  /** NaN: chosen from the coolant ("auto"). */
  tubesPerRow = Number.NaN
  passes = 1
  entryTop = false
}

/** Method ids in the order of the numbers that the march switches on. */
export const FILM = ['nusselt', 'chen'] as const
export const INUNDATION = [
  'condensateFlow',
  'drainageMode',
  'nusselt',
  'kern',
  'eissenberg',
  'chen',
  'none',
] as const
export const SHEAR = ['butterworth', 'shekriladzeGomelauri', 'rose', 'fujiiUeharaKurata', 'none'] as const
export const DROP = ['gaddisGnielinski', 'zukauskas', 'jakob', 'none'] as const
export const TUBE_SIDE = ['gnielinski', 'siederTate', 'dittusBoelter'] as const
