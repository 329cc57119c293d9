/** Fluids and coolants whose properties are given as constants, in the same record as the library's. */
import {
  COOLANT_SERIES,
  COOLANT_STRIDE,
  type CoolantModel,
  type FluidModel,
  INVERSE,
  LIQUID,
  STRIDE,
  TERMS,
  VAPOUR,
} from './model.ts'

/** Constants of a fluid, SI. What is left out is NaN in the record: whoever needs it must refuse first. */
export type FixedFluidProperties = {
  liquidDensity: number
  latentHeat: number
  liquidViscosity: number
  liquidConductivity: number
  vapourDensity?: number
  liquidSpecificHeat?: number
  surfaceTension?: number
  vapourViscosity?: number
  vapourConductivity?: number
  vapourSpecificHeat?: number
  pressure?: number
  /** [kg/mol] */
  molarMass?: number
}

/** Constants of a coolant, SI. */
export type FixedCoolantProperties = {
  density: number
  specificHeat: number
  viscosity: number
  conductivity: number
}

/** A fluid record that answers with the same properties at every temperature. */
export function fixedFluid(properties: FixedFluidProperties): FluidModel {
  const data = new Float64Array(STRIDE)
  data[0] = Number.POSITIVE_INFINITY
  const liquid = [
    properties.liquidDensity,
    properties.liquidSpecificHeat,
    properties.liquidViscosity,
    properties.liquidConductivity,
    properties.surfaceTension,
  ]
  const vapour = [
    properties.pressure === undefined ? undefined : Math.log(properties.pressure),
    properties.vapourDensity === undefined ? undefined : Math.log(properties.vapourDensity),
    properties.latentHeat,
    properties.vapourSpecificHeat,
    properties.vapourViscosity,
    properties.vapourConductivity,
  ]
  liquid.forEach((value, n) => {
    data[LIQUID + n * TERMS] = value ?? Number.NaN
  })
  vapour.forEach((value, n) => {
    data[VAPOUR + n * TERMS] = value ?? Number.NaN
  })
  data[INVERSE] = Number.POSITIVE_INFINITY
  return {
    id: 'fixed',
    data,
    segments: 1,
    minTemperature: 0,
    maxTemperature: Number.POSITIVE_INFINITY,
    criticalTemperature: Number.NaN,
    criticalPressure: Number.NaN,
    molarMass: properties.molarMass ?? Number.NaN,
    fixed: true,
  }
}

/** A coolant record that answers with the same properties at every temperature. */
export function fixedCoolant(properties: FixedCoolantProperties): CoolantModel {
  const data = new Float64Array(COOLANT_STRIDE)
  data[0] = Number.POSITIVE_INFINITY
  data[COOLANT_SERIES] = properties.density
  data[COOLANT_SERIES + TERMS] = properties.specificHeat
  data[COOLANT_SERIES + 2 * TERMS] = properties.viscosity
  data[COOLANT_SERIES + 3 * TERMS] = properties.conductivity
  return {
    id: 'fixed',
    data,
    segments: 1,
    minTemperature: 0,
    maxTemperature: Number.POSITIVE_INFINITY,
    freezingTemperature: Number.NaN,
    fixed: true,
  }
}
