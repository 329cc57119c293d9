/**
 * The fluid's series about one temperature: what a solver that comes back with a slightly different state needs instead
 * of the whole series again. Nothing is allocated; a caller keeps many of them in one array.
 */
import {
  COOLANT_SERIES,
  COOLANT_STRIDE,
  type CoolantModel,
  type FluidModel,
  LIQUID,
  outsideRange,
  STRIDE,
  saturationPressure,
  saturationSlope,
  TERMS,
  VAPOUR,
} from './model.ts'

/** Places of a vapour line: pressure, then value and two coefficients in d = ln(p/pressure) each. */
export const LINE_P = 0
export const LINE_T = 1
/** Of the logarithm of the vapour density; the first of the three is the density itself. */
export const LINE_RHO_V = 4
export const LINE_H_FG = 7
export const LINE_MU_V = 10
export const VAPOUR_LINE = 13

/** Places of a film line: temperature, then value and slope of each [1/K]. */
export const LINE_REFERENCE = 0
export const LINE_RHO_L = 1
export const LINE_CP_L = 3
export const LINE_MU_L = 5
export const LINE_K_L = 7
export const FILM_LINE = 9

/** Places of a coolant line, as those of a film line. */
export const LINE_RHO = 1
export const LINE_CP = 3
export const LINE_MU = 5
export const LINE_K = 7
export const COOLANT_LINE = 9

/** Value, slope and half the curvature in temperature of the series last asked for. */
const about = new Float64Array(3)

/** Clenshaw's recurrence of the series at c[i], differentiated twice. */
function expand(c: Float64Array, i: number, x: number, scale: number): void {
  const y = x + x
  const b5 = c[i + 5]
  const b4 = y * b5 + c[i + 4]
  const b3 = y * b4 + (c[i + 3] - b5)
  const b2 = y * b3 + (c[i + 2] - b4)
  const b1 = y * b2 + (c[i + 1] - b3)
  const d4 = b5 + b5
  const d3 = y * d4 + (b4 + b4)
  const d2 = y * d3 + (b3 + b3 - d4)
  const d1 = y * d2 + (b2 + b2 - d3)
  const e3 = 4 * d4
  const e2 = y * e3 + 4 * d3
  const e1 = y * e2 + (4 * d2 - e3)
  about[0] = x * b1 + (c[i] - b2)
  about[1] = (b1 + x * d1 - d2) * scale
  about[2] = 0.5 * (d1 + d1 + x * e1 - e2) * scale * scale
}

/**
 * Saturation temperature, vapour density, latent heat and vapour viscosity as they go with pressure, about the state at
 * `T` [K]. Beyond the table the properties stay and ln p is straight in 1/T, as in `fillVapour`.
 */
export function fillVapourLine(model: FluidModel, T: number, out: Float64Array, at: number): void {
  const c = model.data
  const t = Math.min(Math.max(T, model.minTemperature), model.maxTemperature)
  let base = 0
  while (t > c[base]) base += STRIDE
  const scale = c[base + 2]
  const x = (t - c[base + 1]) * scale
  const first = base + VAPOUR
  let t1: number
  let t2: number
  const beyond = outsideRange(model, T)
  if (beyond) {
    const p = saturationPressure(model, T)
    out[at + LINE_P] = p
    t1 = p / saturationSlope(model, T)
    t2 = (t1 * t1) / T
  } else {
    expand(c, first, x, scale)
    out[at + LINE_P] = Math.exp(about[0])
    t1 = 1 / about[1]
    t2 = -about[2] * t1 * t1 * t1
  }
  out[at + LINE_T] = T
  out[at + LINE_T + 1] = t1
  out[at + LINE_T + 2] = t2
  if (beyond) t1 = t2 = 0
  expand(c, first + TERMS, x, scale)
  out[at + LINE_RHO_V] = Math.exp(about[0])
  out[at + LINE_RHO_V + 1] = about[1] * t1
  out[at + LINE_RHO_V + 2] = about[1] * t2 + about[2] * t1 * t1
  expand(c, first + 2 * TERMS, x, scale)
  out[at + LINE_H_FG] = about[0]
  out[at + LINE_H_FG + 1] = about[1] * t1
  out[at + LINE_H_FG + 2] = about[1] * t2 + about[2] * t1 * t1
  expand(c, first + 4 * TERMS, x, scale)
  out[at + LINE_MU_V] = about[0]
  out[at + LINE_MU_V + 1] = about[1] * t1
  out[at + LINE_MU_V + 2] = about[1] * t2 + about[2] * t1 * t1
}

/** Value at c[i] and its slope into out[at] and out[at + 1]. */
function slope(c: Float64Array, i: number, x: number, scale: number, out: Float64Array, at: number): void {
  const y = x + x
  const b5 = c[i + 5]
  const b4 = y * b5 + c[i + 4]
  const b3 = y * b4 + (c[i + 3] - b5)
  const b2 = y * b3 + (c[i + 2] - b4)
  const b1 = y * b2 + (c[i + 1] - b3)
  const d4 = b5 + b5
  const d3 = y * d4 + (b4 + b4)
  const d2 = y * d3 + (b3 + b3 - d4)
  const d1 = y * d2 + (b2 + b2 - d3)
  out[at] = x * b1 + (c[i] - b2)
  out[at + 1] = (b1 + x * d1 - d2) * scale
}

/** Density, specific heat, viscosity and conductivity of the liquid, with their slopes, at `T` [K]. */
export function fillFilmLine(model: FluidModel, T: number, out: Float64Array, at: number): void {
  const c = model.data
  const t = Math.min(Math.max(T, model.minTemperature), model.maxTemperature)
  let base = 0
  while (t > c[base]) base += STRIDE
  const x = (t - c[base + 1]) * c[base + 2]
  const scale = t === T ? c[base + 2] : 0
  const first = base + LIQUID
  out[at + LINE_REFERENCE] = T
  slope(c, first, x, scale, out, at + LINE_RHO_L)
  slope(c, first + TERMS, x, scale, out, at + LINE_CP_L)
  slope(c, first + 2 * TERMS, x, scale, out, at + LINE_MU_L)
  slope(c, first + 3 * TERMS, x, scale, out, at + LINE_K_L)
}

/** Density, specific heat, viscosity and conductivity of a coolant, with their slopes, at `T` [K]. */
export function fillCoolantLine(model: CoolantModel, T: number, out: Float64Array, at: number): void {
  const c = model.data
  const t = Math.min(Math.max(T, model.minTemperature), model.maxTemperature)
  let base = 0
  while (t > c[base]) base += COOLANT_STRIDE
  const x = (t - c[base + 1]) * c[base + 2]
  const scale = t === T ? c[base + 2] : 0
  const first = base + COOLANT_SERIES
  out[at + LINE_REFERENCE] = T
  slope(c, first, x, scale, out, at + LINE_RHO)
  slope(c, first + TERMS, x, scale, out, at + LINE_CP)
  slope(c, first + 2 * TERMS, x, scale, out, at + LINE_MU)
  slope(c, first + 3 * TERMS, x, scale, out, at + LINE_K)
}
