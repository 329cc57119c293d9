/** Whole states as objects, for listings and sheets (not for the solver). */
import { fluidModel } from './library.ts'
import {
  CP_L,
  CP_V,
  type FluidModel,
  fillSaturation,
  H_FG,
  K_L,
  K_V,
  MU_L,
  MU_V,
  outsideRange,
  P,
  RHO_L,
  RHO_V,
  SATURATION_LENGTH,
  SIGMA,
} from './model.ts'

/** A saturation state, SI. */
export type SaturationState = {
  temperature: number
  pressure: number
  liquidDensity: number
  vapourDensity: number
  latentHeat: number
  liquidSpecificHeat: number
  vapourSpecificHeat: number
  liquidViscosity: number
  vapourViscosity: number
  liquidConductivity: number
  vapourConductivity: number
  surfaceTension: number
}

/** The saturation state at each temperature [K]. Throws RangeError, naming the range, outside the table. */
export function properties(fluid: string | FluidModel, temperatures: readonly number[]): SaturationState[] {
  const model = typeof fluid === 'string' ? fluidModel(fluid) : fluid
  const out = new Float64Array(SATURATION_LENGTH)
  return temperatures.map((temperature) => {
    if (outsideRange(model, temperature))
      throw new RangeError(
        `${temperature} K is outside the table of ${model.id}; allowed is ${model.minTemperature} K to ${model.maxTemperature} K`,
      )
    fillSaturation(model, temperature, out)
    return {
      temperature,
      pressure: out[P],
      liquidDensity: out[RHO_L],
      vapourDensity: out[RHO_V],
      latentHeat: out[H_FG],
      liquidSpecificHeat: out[CP_L],
      vapourSpecificHeat: out[CP_V],
      liquidViscosity: out[MU_L],
      vapourViscosity: out[MU_V],
      liquidConductivity: out[K_L],
      vapourConductivity: out[K_V],
      surfaceTension: out[SIGMA],
    }
  })
}
