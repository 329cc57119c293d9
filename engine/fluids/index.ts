/** Saturation properties of the library's fluids, of coolants, of constants and of uploads. */
export * from './fixed.ts'
export * from './library.ts'
export * from './local.ts'
export {
  COOLANT_CP,
  COOLANT_K,
  COOLANT_LENGTH,
  COOLANT_MU,
  COOLANT_RHO,
  type CoolantModel,
  CP_L,
  CP_V,
  type FluidModel,
  fillCoolant,
  fillFilm,
  fillSaturation,
  fillVapour,
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
  saturationPressure,
  saturationSlope,
  saturationTemperature,
  surfaceTension,
} from './model.ts'
export * from './properties.ts'
