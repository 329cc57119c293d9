/**
 * The numeric record of a fluid or coolant and its evaluation: piecewise Chebyshev series in temperature,
 * several properties per look-up, nothing allocated.
 *
 * Library fluids, fixed properties and fitted uploads share one record, so every call site stays monomorphic.
 *
 * Layout of `data`, one block of STRIDE numbers per temperature segment, coldest first:
 *   [0] upper temperature of the segment (+Infinity in the last)      [1] middle   [2] 1 / half width   [K]
 *   [LIQUID …]  rho_l, cp_l, mu_l, k_l, sigma: TERMS coefficients each, term 0 first
 *   [VAPOUR …]  ln p, ln rho_v, h_fg, cp_v, mu_v, k_v: likewise
 *   [INVERSE …] upper ln p, middle, 1 / half width, then TERMS of T(ln p)
 * Adjoining segments meet in value and slope. Outside the range temperature is clamped to its ends, except
 * that ln p goes on as a straight line in 1/T; the caller says so with a note (`outsideRange`).
 */

/** Chebyshev terms of every series in every segment; `series` and `logPressure` are written out for six. */
export const TERMS = 6
const LIQUID_SERIES = 5
const VAPOUR_SERIES = 6
export const LIQUID = 3
export const VAPOUR = LIQUID + LIQUID_SERIES * TERMS
export const INVERSE = VAPOUR + VAPOUR_SERIES * TERMS
export const STRIDE = INVERSE + 3 + TERMS

/** Places in the array that `fillSaturation`, `fillFilm` and `fillVapour` write; SI units. */
export const P = 0
export const RHO_L = 1
export const RHO_V = 2
export const H_FG = 3
export const CP_L = 4
export const CP_V = 5
export const MU_L = 6
export const MU_V = 7
export const K_L = 8
export const K_V = 9
export const SIGMA = 10
/** Length of an array that holds a full saturation state. */
export const SATURATION_LENGTH = 11

/** Places in the array that `fillCoolant` writes; SI units. */
export const COOLANT_RHO = 0
export const COOLANT_CP = 1
export const COOLANT_MU = 2
export const COOLANT_K = 3
export const COOLANT_LENGTH = 4

/** A fluid as numbers: what the solver holds. All fluids have this one shape. */
export type FluidModel = {
  readonly id: string
  readonly data: Float64Array
  readonly segments: number
  /** Temperature range of the data [K]. */
  readonly minTemperature: number
  readonly maxTemperature: number
  /** NaN where unknown. [K], [Pa], [kg/mol] */
  readonly criticalTemperature: number
  readonly criticalPressure: number
  readonly molarMass: number
  /** Properties do not depend on temperature; `saturationPressure` and its inverse have no meaning. */
  readonly fixed: boolean
}

/** Blocks of a coolant: upper temperature, middle, 1 / half width, then TERMS each of rho, cp, mu, k. */
export const COOLANT_SERIES = 3
export const COOLANT_STRIDE = COOLANT_SERIES + 4 * TERMS

/** A coolant as numbers. */
export type CoolantModel = {
  readonly id: string
  readonly data: Float64Array
  readonly segments: number
  readonly minTemperature: number
  readonly maxTemperature: number
  /** NaN for constants given by hand. [K] */
  readonly freezingTemperature: number
  readonly fixed: boolean
}

/**
 * Clenshaw's sum of the six-term series that begins at c[i], at x in [-1, 1].
 * Written out, because the loop's counter and its empty first steps cost a third of the whole evaluation.
 */
function series(c: Float64Array, i: number, x: number): number {
  const y = x + x
  const b5 = c[i + 5]
  const b4 = y * b5 + c[i + 4]
  const b3 = y * b4 + (c[i + 3] - b5)
  const b2 = y * b3 + (c[i + 2] - b4)
  const b1 = y * b2 + (c[i + 1] - b3)
  return x * b1 + (c[i] - b2)
}

/** `T` held inside the data's range; NaN stays NaN. */
function clamp(model: FluidModel | CoolantModel, T: number): number {
  return Math.min(Math.max(T, model.minTemperature), model.maxTemperature)
}

/** True where the data does not reach `T` [K] (also for NaN); the evaluators then answer with the nearest end. */
export function outsideRange(model: FluidModel | CoolantModel, T: number): boolean {
  return !(T >= model.minTemperature && T <= model.maxTemperature)
}

/** Liquid properties only (RHO_L, CP_L, MU_L, K_L, SIGMA) at `T` [K]: the film's share, evaluated at every step of a wall solve. */
export function fillFilm(model: FluidModel, T: number, out: Float64Array): void {
  const c = model.data
  const t = clamp(model, T)
  let base = 0
  while (t > c[base]) base += STRIDE
  const x = (t - c[base + 1]) * c[base + 2]
  const at = base + LIQUID
  out[RHO_L] = series(c, at, x)
  out[CP_L] = series(c, at + TERMS, x)
  out[MU_L] = series(c, at + 2 * TERMS, x)
  out[K_L] = series(c, at + 3 * TERMS, x)
  out[SIGMA] = series(c, at + 4 * TERMS, x)
}

/** The vapour's share of the state (P, RHO_V, H_FG, CP_V, MU_V, K_V) at `T` [K]. */
export function fillVapour(model: FluidModel, T: number, out: Float64Array): void {
  const c = model.data
  const t = clamp(model, T)
  let base = 0
  while (t > c[base]) base += STRIDE
  const x = (t - c[base + 1]) * c[base + 2]
  const at = base + VAPOUR
  out[P] = t === T ? Math.exp(series(c, at, x)) : saturationPressure(model, T)
  out[RHO_V] = Math.exp(series(c, at + TERMS, x))
  out[H_FG] = series(c, at + 2 * TERMS, x)
  out[CP_V] = series(c, at + 3 * TERMS, x)
  out[MU_V] = series(c, at + 4 * TERMS, x)
  out[K_V] = series(c, at + 5 * TERMS, x)
}

/** The whole saturation state at `T` [K]: all SATURATION_LENGTH places of `out`. */
export function fillSaturation(model: FluidModel, T: number, out: Float64Array): void {
  fillFilm(model, T, out)
  fillVapour(model, T, out)
}

/** ln p and its slope in T, inside the range; the results of `logPressure`, kept here so that nothing is allocated. */
const pair = new Float64Array(2)

function logPressure(c: Float64Array, t: number): void {
  let base = 0
  while (t > c[base]) base += STRIDE
  const scale = c[base + 2]
  const x = (t - c[base + 1]) * scale
  const y = x + x
  const i = base + VAPOUR
  const b5 = c[i + 5]
  const b4 = y * b5 + c[i + 4]
  const b3 = y * b4 + (c[i + 3] - b5)
  const b2 = y * b3 + (c[i + 2] - b4)
  const b1 = y * b2 + (c[i + 1] - b3)
  // The same recurrence differentiated.
  const d4 = b5 + b5
  const d3 = y * d4 + (b4 + b4)
  const d2 = y * d3 + (b3 + b3 - d4)
  const d1 = y * d2 + (b2 + b2 - d3)
  pair[0] = x * b1 + (c[i] - b2)
  pair[1] = (b1 + x * d1 - d2) * scale
}

/** Saturation pressure [Pa] at `T` [K]. Beyond the range ln p goes on straight in 1/T. */
export function saturationPressure(model: FluidModel, T: number): number {
  const end = clamp(model, T)
  logPressure(model.data, end)
  return end === T ? Math.exp(pair[0]) : Math.exp(pair[0] + pair[1] * end * (1 - end / T))
}

/** Slope of the saturation line dp/dT [Pa/K] at `T` [K], from the pressure series itself. */
export function saturationSlope(model: FluidModel, T: number): number {
  const end = clamp(model, T)
  logPressure(model.data, end)
  const slope = pair[1]
  if (end === T) return slope * Math.exp(pair[0])
  const ratio = end / T
  return slope * ratio * ratio * Math.exp(pair[0] + slope * end * (1 - ratio))
}

/** Saturation temperature [K] at `p` [Pa]: the inverse of `saturationPressure` to 1e-9 K. NaN unless p > 0. */
export function saturationTemperature(model: FluidModel, p: number): number {
  if (model.fixed || !(p > 0)) return Number.NaN
  const c = model.data
  const lnP = Math.log(p)
  let base = 0
  while (lnP > c[base + INVERSE]) base += STRIDE
  const x = (lnP - c[base + INVERSE + 1]) * c[base + INVERSE + 2]
  // Inside the table a pressure at a joint may fall a rounding beyond its segment; only past the ends the line goes on.
  if ((x < -1 && base === 0) || (x > 1 && base === (model.segments - 1) * STRIDE)) {
    const end = x < 0 ? model.minTemperature : model.maxTemperature
    logPressure(c, end)
    const inverse = 1 / end - (lnP - pair[0]) / (pair[1] * end * end)
    return inverse > 0 ? 1 / inverse : Number.POSITIVE_INFINITY
  }
  let t = series(c, base + INVERSE + 3, x)
  // Newton on ln p: a step of 1e-5 K leaves about 1e-12 K.
  for (let n = 0; n < 6; n++) {
    logPressure(c, t)
    const step = (lnP - pair[0]) / pair[1]
    t += step
    if (step < 1e-5 && step > -1e-5) break
  }
  return t
}

/** Surface tension [N/m] at `T` [K]. */
export function surfaceTension(model: FluidModel, T: number): number {
  const c = model.data
  const t = clamp(model, T)
  let base = 0
  while (t > c[base]) base += STRIDE
  return series(c, base + LIQUID + 4 * TERMS, (t - c[base + 1]) * c[base + 2])
}

/** Coolant properties (COOLANT_RHO, _CP, _MU, _K) at `T` [K]. */
export function fillCoolant(model: CoolantModel, T: number, out: Float64Array): void {
  const c = model.data
  const t = clamp(model, T)
  let base = 0
  while (t > c[base]) base += COOLANT_STRIDE
  const x = (t - c[base + 1]) * c[base + 2]
  const at = base + COOLANT_SERIES
  out[COOLANT_RHO] = series(c, at, x)
  out[COOLANT_CP] = series(c, at + TERMS, x)
  out[COOLANT_MU] = series(c, at + 2 * TERMS, x)
  out[COOLANT_K] = series(c, at + 3 * TERMS, x)
}
