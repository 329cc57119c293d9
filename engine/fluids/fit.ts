/** Least-squares fits of piecewise Chebyshev series (ml-matrix), for the library's tables and for uploads alike. */
import { Matrix, QrDecomposition } from 'ml-matrix'
import {
  COOLANT_CP,
  COOLANT_K,
  COOLANT_LENGTH,
  COOLANT_MU,
  COOLANT_RHO,
  COOLANT_SERIES,
  COOLANT_STRIDE,
  type CoolantModel,
  CP_L,
  CP_V,
  type FluidModel,
  fillCoolant,
  fillSaturation,
  H_FG,
  INVERSE,
  K_L,
  K_V,
  LIQUID,
  MU_L,
  MU_V,
  P,
  RHO_L,
  RHO_V,
  SATURATION_LENGTH,
  SIGMA,
  STRIDE,
  TERMS,
  VAPOUR,
} from './model.ts'

/** Weight of the rows that make neighbouring segments meet: leaves a gap of about (fit error) / weight². */
const JOINT_WEIGHT = 1e5

function chebyshev(x: number, terms: number): number[] {
  const t = [1, x]
  for (let k = 2; k < terms; k++) t.push(2 * x * t[k - 1] - t[k - 2])
  return t.slice(0, terms)
}

function chebyshevSlope(x: number, terms: number): number[] {
  // dT_k/dx = k U_(k-1)
  const u = [1, 2 * x]
  for (let k = 2; k < terms; k++) u.push(2 * x * u[k - 1] - u[k - 2])
  const d = [0]
  for (let k = 1; k < terms; k++) d.push(k * u[k - 1])
  return d
}

/**
 * Coefficients [segment][term] of the series nearest to (x, y). `relative` weighs each point by 1/|y|.
 * Segments meet in value and slope. `terms` may be smaller than TERMS for short tables; the rest are zeros.
 */
export function fitPiecewise(
  x: readonly number[],
  y: readonly number[],
  ends: readonly number[],
  options: { relative: boolean; terms?: number },
): number[][] {
  const terms = options.terms ?? TERMS
  const segments = ends.length - 1
  const rows: number[][] = []
  const right: number[] = []
  const row = () => new Array<number>(segments * terms).fill(0)
  const typical = (at: number) => {
    let best = 0
    for (let i = 1; i < x.length; i++) if (Math.abs(x[i] - at) < Math.abs(x[best] - at)) best = i
    return options.relative ? 1 / Math.abs(y[best]) : 1
  }
  for (let i = 0; i < x.length; i++) {
    let s = 0
    while (s < segments - 1 && x[i] > ends[s + 1]) s++
    const z = (2 * x[i] - ends[s] - ends[s + 1]) / (ends[s + 1] - ends[s])
    const weight = options.relative ? 1 / Math.abs(y[i]) : 1
    const r = row()
    chebyshev(z, terms).forEach((t, k) => {
      r[s * terms + k] = t * weight
    })
    rows.push(r)
    right.push(y[i] * weight)
  }
  for (let s = 0; s + 1 < segments; s++) {
    const weight = JOINT_WEIGHT * typical(ends[s + 1])
    const value = row()
    chebyshev(1, terms).forEach((t, k) => {
      value[s * terms + k] = t * weight
    })
    chebyshev(-1, terms).forEach((t, k) => {
      value[(s + 1) * terms + k] = -t * weight
    })
    rows.push(value)
    right.push(0)
    const slope = row()
    const width = ends[s + 1] - ends[s]
    const next = ends[s + 2] - ends[s + 1]
    chebyshevSlope(1, terms).forEach((t, k) => {
      slope[s * terms + k] = t * weight
    })
    chebyshevSlope(-1, terms).forEach((t, k) => {
      slope[(s + 1) * terms + k] = (-t * weight * width) / next
    })
    rows.push(slope)
    right.push(0)
  }
  const solution = new QrDecomposition(new Matrix(rows)).solve(Matrix.columnVector(right)).to1DArray()
  const result: number[][] = []
  for (let s = 0; s < segments; s++) {
    const part = solution.slice(s * terms, (s + 1) * terms)
    while (part.length < TERMS) part.push(0)
    result.push(part)
  }
  return result
}

/** Columns of a saturation table, SI. */
export type SaturationColumns = {
  T: number[]
  p: number[]
  rhoL: number[]
  rhoV: number[]
  hFg: number[]
  cpL: number[]
  cpV: number[]
  muL: number[]
  muV: number[]
  kL: number[]
  kV: number[]
  sigma: number[]
}

/** What a fit needs to know of a fluid besides its table. */
export type FluidIdentity = Omit<
  FluidModel,
  'data' | 'segments' | 'minTemperature' | 'maxTemperature' | 'fixed'
>

/** Points per segment at which the inverse T(ln p) is fitted to the pressure series. */
const INVERSE_POINTS = 24

/** A fluid record fitted to `columns` on the segments between `ends`. */
export function fitFluid(
  identity: FluidIdentity,
  columns: SaturationColumns,
  ends: readonly number[],
  terms = TERMS,
): FluidModel {
  const segments = ends.length - 1
  const data = new Float64Array(segments * STRIDE)
  const T = columns.T
  const put = (offset: number, series: number[][]) => {
    for (let s = 0; s < segments; s++)
      for (let k = 0; k < TERMS; k++) data[s * STRIDE + offset + k] = series[s][k]
  }
  const relative = (y: number[]) => fitPiecewise(T, y, ends, { relative: true, terms })
  const logarithm = (y: number[]) => fitPiecewise(T, y.map(Math.log), ends, { relative: false, terms })
  const liquid = [columns.rhoL, columns.cpL, columns.muL, columns.kL, columns.sigma]
  liquid.forEach((y, n) => {
    put(LIQUID + n * TERMS, relative(y))
  })
  const lnP = logarithm(columns.p)
  const vapour = [
    lnP,
    logarithm(columns.rhoV),
    relative(columns.hFg),
    relative(columns.cpV),
    relative(columns.muV),
    relative(columns.kV),
  ]
  vapour.forEach((series, n) => {
    put(VAPOUR + n * TERMS, series)
  })
  const value = (s: number, z: number) => chebyshev(z, TERMS).reduce((sum, t, k) => sum + t * lnP[s][k], 0)
  const inverseX: number[] = []
  const inverseY: number[] = []
  const inverseEnds = [value(0, -1)]
  for (let s = 0; s < segments; s++) {
    for (let n = 0; n < INVERSE_POINTS; n++) {
      const z = -Math.cos((Math.PI * (n + 0.5)) / INVERSE_POINTS)
      inverseX.push(value(s, z))
      inverseY.push(0.5 * (ends[s] + ends[s + 1] + z * (ends[s + 1] - ends[s])))
    }
    inverseEnds.push(value(s, 1))
  }
  const inverse = fitPiecewise(inverseX, inverseY, inverseEnds, { relative: false })
  for (let s = 0; s < segments; s++) {
    const base = s * STRIDE
    const last = s === segments - 1
    data[base] = last ? Number.POSITIVE_INFINITY : ends[s + 1]
    data[base + 1] = 0.5 * (ends[s] + ends[s + 1])
    data[base + 2] = 2 / (ends[s + 1] - ends[s])
    data[base + INVERSE] = last ? Number.POSITIVE_INFINITY : inverseEnds[s + 1]
    data[base + INVERSE + 1] = 0.5 * (inverseEnds[s] + inverseEnds[s + 1])
    data[base + INVERSE + 2] = 2 / (inverseEnds[s + 1] - inverseEnds[s])
    for (let k = 0; k < TERMS; k++) data[base + INVERSE + 3 + k] = inverse[s][k]
  }
  return {
    ...identity,
    data,
    segments,
    minTemperature: ends[0],
    maxTemperature: ends[segments],
    fixed: false,
  }
}

/** Columns of a coolant table, SI. */
export type CoolantColumns = { T: number[]; rho: number[]; cp: number[]; mu: number[]; k: number[] }

/** A coolant record fitted to `columns` on the segments between `ends`. */
export function fitCoolant(
  identity: { id: string; freezingTemperature: number },
  columns: CoolantColumns,
  ends: readonly number[],
): CoolantModel {
  const segments = ends.length - 1
  const data = new Float64Array(segments * COOLANT_STRIDE)
  const series = [columns.rho, columns.cp, columns.mu, columns.k].map((y) =>
    fitPiecewise(columns.T, y, ends, { relative: true }),
  )
  for (let s = 0; s < segments; s++) {
    const base = s * COOLANT_STRIDE
    data[base] = s === segments - 1 ? Number.POSITIVE_INFINITY : ends[s + 1]
    data[base + 1] = 0.5 * (ends[s] + ends[s + 1])
    data[base + 2] = 2 / (ends[s + 1] - ends[s])
    for (let k = 0; k < TERMS; k++)
      for (let n = 0; n < 4; n++) data[base + COOLANT_SERIES + n * TERMS + k] = series[n][s][k]
  }
  return {
    ...identity,
    data,
    segments,
    minTemperature: ends[0],
    maxTemperature: ends[segments],
    fixed: false,
  }
}

/** Largest relative deviations accepted from a fit; half of what the library promises stays in reserve. */
export type Goal = { thermodynamic: number; transport: number }

/** A segment holds at least this many table rows, more than TERMS, so that no series can swing between them. */
const ROWS_PER_SEGMENT = 8

/**
 * Segment ends by splitting, again and again, the segment with the worst deviation at its middle row, until `worst`
 * reports nothing above 1 or no segment can be split. `worst(ends)` gives the worst deviation over its goal per segment.
 */
function refine(T: readonly number[], start: number, worst: (ends: number[]) => number[]): number[] {
  let cuts: number[] = []
  for (let s = 0; s <= start; s++) cuts.push(Math.round(((T.length - 1) * s) / start))
  for (;;) {
    const ends = cuts.map((i) => T[i])
    const deviations = worst(ends)
    let pick = -1
    for (let s = 0; s < deviations.length; s++) {
      if (deviations[s] <= 1 || cuts[s + 1] - cuts[s] < 2 * ROWS_PER_SEGMENT) continue
      if (pick < 0 || deviations[s] > deviations[pick]) pick = s
    }
    if (pick < 0) return ends
    const middle = Math.round((cuts[pick] + cuts[pick + 1]) / 2)
    cuts = [...cuts.slice(0, pick + 1), middle, ...cuts.slice(pick + 1)]
  }
}

const segmentOf = (T: number, ends: readonly number[]) => {
  let s = 0
  while (s < ends.length - 2 && T > ends[s + 1]) s++
  return s
}

/** A fluid record whose segments are chosen so that the table is met within `goal` wherever rows allow it. */
export function fitFluidTable(
  identity: FluidIdentity,
  columns: SaturationColumns,
  goal: Goal,
  start = 3,
): FluidModel {
  const out = new Float64Array(SATURATION_LENGTH)
  const { T } = columns
  const order: [number, number[], number][] = [
    [P, columns.p, goal.thermodynamic],
    [RHO_L, columns.rhoL, goal.thermodynamic],
    [RHO_V, columns.rhoV, goal.thermodynamic],
    [H_FG, columns.hFg, goal.thermodynamic],
    [CP_L, columns.cpL, goal.thermodynamic],
    [CP_V, columns.cpV, goal.thermodynamic],
    [MU_L, columns.muL, goal.transport],
    [MU_V, columns.muV, goal.transport],
    [K_L, columns.kL, goal.transport],
    [K_V, columns.kV, goal.transport],
    [SIGMA, columns.sigma, goal.transport],
  ]
  const ends = refine(T, start, (candidate) => {
    const model = fitFluid(identity, columns, candidate)
    const worst = new Array<number>(candidate.length - 1).fill(0)
    T.forEach((t, i) => {
      fillSaturation(model, t, out)
      const s = segmentOf(t, candidate)
      for (const [place, y, limit] of order)
        worst[s] = Math.max(worst[s], Math.abs(out[place] / y[i] - 1) / limit)
    })
    return worst
  })
  return fitFluid(identity, columns, ends)
}

/** A coolant record whose segments are chosen so that the table is met within `goal` wherever rows allow it. */
export function fitCoolantTable(
  identity: { id: string; freezingTemperature: number },
  columns: CoolantColumns,
  goal: Goal,
): CoolantModel {
  const out = new Float64Array(COOLANT_LENGTH)
  const { T } = columns
  const ends = refine(T, 2, (candidate) => {
    const model = fitCoolant(identity, columns, candidate)
    const worst = new Array<number>(candidate.length - 1).fill(0)
    T.forEach((t, i) => {
      fillCoolant(model, t, out)
      const s = segmentOf(t, candidate)
      worst[s] = Math.max(
        worst[s],
        Math.abs(out[COOLANT_RHO] / columns.rho[i] - 1) / goal.thermodynamic,
        Math.abs(out[COOLANT_CP] / columns.cp[i] - 1) / goal.thermodynamic,
        Math.abs(out[COOLANT_MU] / columns.mu[i] - 1) / goal.transport,
        Math.abs(out[COOLANT_K] / columns.k[i] - 1) / goal.transport,
      )
    })
    return worst
  })
  return fitCoolant(identity, columns, ends)
}
