/**
 * The numeric record of a fluid or coolant and its evaluation: piecewise Chebyshev series in temperature,
 * several properties in one Clenshaw sweep, nothing allocated.
 *
 * Library fluids, fixed properties and fitted uploads share one record, so every call site stays monomorphic.
 *
 * Layout of `data`, one block of STRIDE numbers per temperature segment, coldest first:
 *   [0] upper temperature of the segment (+Infinity in the last)      [1] middle   [2] 1 / half width   [K]
 *   [LIQUID …]  TERMS × (rho_l, cp_l, mu_l, k_l, sigma), term by term, term 0 first
 *   [VAPOUR …]  TERMS × (ln p, ln rho_v, h_fg, cp_v, mu_v, k_v)
 *   [INVERSE …] upper ln p, middle, 1 / half width, then TERMS of T(ln p)
 * Adjoining segments meet in value and slope. Outside the range temperature is clamped to its ends, except
 * that ln p goes on as a straight line in 1/T; the caller says so with a note (`outsideRange`).
 */

/** Chebyshev terms of every series in every segment. */
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

/** Blocks of a coolant: upper temperature, middle, 1 / half width, TERMS × (rho, cp, mu, k). */
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

/** True where the data does not reach `T` [K] (also for NaN); the evaluators then answer with the nearest end. */
export function outsideRange(model: FluidModel | CoolantModel, T: number): boolean {
  return !(T >= model.minTemperature && T <= model.maxTemperature)
}

/** Liquid properties only (RHO_L, CP_L, MU_L, K_L, SIGMA) at `T` [K]: the film's share, evaluated at every step of a wall solve. */
export function fillFilm(model: FluidModel, T: number, out: Float64Array): void {
  const c = model.data
  const t =
    T < model.minTemperature ? model.minTemperature : T > model.maxTemperature ? model.maxTemperature : T
  let base = 0
  while (t > c[base]) base += STRIDE
  const x = (t - c[base + 1]) * c[base + 2]
  const y = x + x
  let i = base + LIQUID + LIQUID_SERIES * (TERMS - 1)
  const first = base + LIQUID
  let r1 = 0
  let r2 = 0
  let c1 = 0
  let c2 = 0
  let m1 = 0
  let m2 = 0
  let k1 = 0
  let k2 = 0
  let s1 = 0
  let s2 = 0
  for (; i > first; i -= LIQUID_SERIES) {
    const r = y * r1 + (c[i] - r2)
    r2 = r1
    r1 = r
    const p = y * c1 + (c[i + 1] - c2)
    c2 = c1
    c1 = p
    const m = y * m1 + (c[i + 2] - m2)
    m2 = m1
    m1 = m
    const k = y * k1 + (c[i + 3] - k2)
    k2 = k1
    k1 = k
    const s = y * s1 + (c[i + 4] - s2)
    s2 = s1
    s1 = s
  }
  out[RHO_L] = x * r1 + (c[i] - r2)
  out[CP_L] = x * c1 + (c[i + 1] - c2)
  out[MU_L] = x * m1 + (c[i + 2] - m2)
  out[K_L] = x * k1 + (c[i + 3] - k2)
  out[SIGMA] = x * s1 + (c[i + 4] - s2)
}

/** The vapour's share of the state (P, RHO_V, H_FG, CP_V, MU_V, K_V) at `T` [K]. */
export function fillVapour(model: FluidModel, T: number, out: Float64Array): void {
  const c = model.data
  const t =
    T < model.minTemperature ? model.minTemperature : T > model.maxTemperature ? model.maxTemperature : T
  let base = 0
  while (t > c[base]) base += STRIDE
  const x = (t - c[base + 1]) * c[base + 2]
  const y = x + x
  let i = base + VAPOUR + VAPOUR_SERIES * (TERMS - 1)
  const first = base + VAPOUR
  let p1 = 0
  let p2 = 0
  let r1 = 0
  let r2 = 0
  let h1 = 0
  let h2 = 0
  let c1 = 0
  let c2 = 0
  let m1 = 0
  let m2 = 0
  let k1 = 0
  let k2 = 0
  for (; i > first; i -= VAPOUR_SERIES) {
    const p = y * p1 + (c[i] - p2)
    p2 = p1
    p1 = p
    const r = y * r1 + (c[i + 1] - r2)
    r2 = r1
    r1 = r
    const h = y * h1 + (c[i + 2] - h2)
    h2 = h1
    h1 = h
    const d = y * c1 + (c[i + 3] - c2)
    c2 = c1
    c1 = d
    const m = y * m1 + (c[i + 4] - m2)
    m2 = m1
    m1 = m
    const k = y * k1 + (c[i + 5] - k2)
    k2 = k1
    k1 = k
  }
  out[P] = T === t || model.fixed ? Math.exp(x * p1 + (c[i] - p2)) : saturationPressure(model, T)
  out[RHO_V] = Math.exp(x * r1 + (c[i + 1] - r2))
  out[H_FG] = x * h1 + (c[i + 2] - h2)
  out[CP_V] = x * c1 + (c[i + 3] - c2)
  out[MU_V] = x * m1 + (c[i + 4] - m2)
  out[K_V] = x * k1 + (c[i + 5] - k2)
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
  let b1 = 0
  let b2 = 0
  let d1 = 0
  let d2 = 0
  let i = base + VAPOUR + VAPOUR_SERIES * (TERMS - 1)
  const first = base + VAPOUR
  for (; i > first; i -= VAPOUR_SERIES) {
    const d = y * d1 + (2 * b1 - d2)
    d2 = d1
    d1 = d
    const b = y * b1 + (c[i] - b2)
    b2 = b1
    b1 = b
  }
  pair[0] = x * b1 + (c[i] - b2)
  pair[1] = (b1 + x * d1 - d2) * scale
}

/** Saturation pressure [Pa] at `T` [K]. Beyond the range ln p goes on straight in 1/T. */
export function saturationPressure(model: FluidModel, T: number): number {
  const end =
    T < model.minTemperature ? model.minTemperature : T > model.maxTemperature ? model.maxTemperature : T
  logPressure(model.data, end)
  return end === T ? Math.exp(pair[0]) : Math.exp(pair[0] + pair[1] * end * (1 - end / T))
}

/** Slope of the saturation line dp/dT [Pa/K] at `T` [K], from the pressure series itself. */
export function saturationSlope(model: FluidModel, T: number): number {
  const end =
    T < model.minTemperature ? model.minTemperature : T > model.maxTemperature ? model.maxTemperature : T
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
  const last = (model.segments - 1) * STRIDE
  let base = 0
  while (base < last && lnP > c[base + INVERSE]) base += STRIDE
  const x = (lnP - c[base + INVERSE + 1]) * c[base + INVERSE + 2]
  const y = x + x
  const first = base + INVERSE + 3
  let i = first + TERMS - 1
  let b1 = 0
  let b2 = 0
  for (; i > first; i--) {
    const b = y * b1 + (c[i] - b2)
    b2 = b1
    b1 = b
  }
  let t = x * b1 + (c[first] - b2)
  const lo = model.minTemperature
  const hi = model.maxTemperature
  if (x < -1 || x > 1 || !(t > lo && t < hi)) {
    // The ends need their own look: the straight line in 1/T begins there.
    const end = base === 0 && lnP < c[base + INVERSE + 1] ? lo : hi
    logPressure(c, end)
    const excess = lnP - pair[0]
    if (end === lo ? excess <= 0 : excess >= 0) {
      const inverse = 1 / end - excess / (pair[1] * end * end)
      return inverse > 0 ? 1 / inverse : Number.POSITIVE_INFINITY
    }
    t = end
  }
  for (let n = 0; n < 8; n++) {
    logPressure(c, t)
    const step = (lnP - pair[0]) / pair[1]
    t += step
    if (step < 1e-7 && step > -1e-7) break
    if (t < lo) t = lo
    else if (t > hi) t = hi
  }
  return t
}

/** Surface tension [N/m] at `T` [K]. */
export function surfaceTension(model: FluidModel, T: number): number {
  fillFilm(model, T, scratch)
  return scratch[SIGMA]
}
const scratch = new Float64Array(SATURATION_LENGTH)

/** Coolant properties (COOLANT_RHO, _CP, _MU, _K) at `T` [K]. */
export function fillCoolant(model: CoolantModel, T: number, out: Float64Array): void {
  const c = model.data
  const t =
    T < model.minTemperature ? model.minTemperature : T > model.maxTemperature ? model.maxTemperature : T
  let base = 0
  while (t > c[base]) base += COOLANT_STRIDE
  const x = (t - c[base + 1]) * c[base + 2]
  const y = x + x
  const first = base + COOLANT_SERIES
  let i = first + 4 * (TERMS - 1)
  let r1 = 0
  let r2 = 0
  let c1 = 0
  let c2 = 0
  let m1 = 0
  let m2 = 0
  let k1 = 0
  let k2 = 0
  for (; i > first; i -= 4) {
    const r = y * r1 + (c[i] - r2)
    r2 = r1
    r1 = r
    const p = y * c1 + (c[i + 1] - c2)
    c2 = c1
    c1 = p
    const m = y * m1 + (c[i + 2] - m2)
    m2 = m1
    m1 = m
    const k = y * k1 + (c[i + 3] - k2)
    k2 = k1
    k1 = k
  }
  out[COOLANT_RHO] = x * r1 + (c[i] - r2)
  out[COOLANT_CP] = x * c1 + (c[i + 1] - c2)
  out[COOLANT_MU] = x * m1 + (c[i + 2] - m2)
  out[COOLANT_K] = x * k1 + (c[i + 3] - k2)
}
