// Measured points against what the engine predicts: parity, and the factor on one part of the calculation that fits.
import { KEY_RESULT_INDEX, KEY_RESULTS, OUTCOMES } from '#engine/bundle/key-results.ts'
import { MULTIPLIER_GROUPS, type MultiplierGroup, unitMultipliers } from '#engine/bundle/multipliers.ts'
import { PointSolver } from '#engine/bundle/point-solver.ts'
import type { Case, Correction } from '#engine/case.ts'
import { median, studentQuantile } from './distributions.ts'

/** Results that a test stand measures and a case predicts. */
export const MEASURABLE = [
  'duty',
  'meanCoefficient',
  'overallCoefficient',
  'coolantPressureDrop',
  'vapourPressureDrop',
  'coolantOutletTemperature',
  'coolantMassFlow',
] as const
export type Measurable = (typeof MEASURABLE)[number]

export interface MeasuredPoint {
  name: string
  case: Case
  measured: number
}

export interface ParityPoint {
  name: string
  measured: number
  /** Null where the case has no result; `reason` says why. */
  predicted: number | null
  /** Measured over predicted, less 1. */
  off: number | null
  reason: string | null
  /** Robust z-score of ln (measured / predicted). */
  score: number | null
  outlier: boolean
}

export interface Parity {
  result: Measurable
  points: ParityPoint[]
  /** Share of the points with a prediction that are within ±10, 20 and 30 %. */
  within: { share: number; of: number }[]
  /** Log mean of measured over predicted and the mean of |off|. */
  bias: number | null
  meanError: number | null
}

export interface Fit {
  group: MultiplierGroup
  label: string
  /** Log mean of the factors that bring each point to what was measured, outliers left out. */
  factor: number
  /** 95 % interval of the factor; null with fewer than two points. */
  interval: { low: number; high: number } | null
  /** Standard deviation of ln factor between points; null with fewer than two. */
  scatter: number | null
  /** With the outliers in. */
  withOutliers: { factor: number; interval: { low: number; high: number } | null }
  points: {
    name: string
    factor: number | null
    reason: string | null
    score: number | null
    outlier: boolean
  }[]
  outliers: string[]
  used: number
  statement: string
}

/** A robust z-score above this is an outlier: B. Iglewicz, D. C. Hoaglin, "How to detect and handle outliers" (1993). */
export const OUTLIER = 3.5
/** Factors are sought between these. */
const LEAST = 0.2
const MOST = 5
const CONFIDENCE = 0.95

/** Each point beside its prediction. */
export function parityOf(points: readonly MeasuredPoint[], result: Measurable): Parity {
  const column = KEY_RESULT_INDEX[result]
  const solver = new PointSolver()
  const key = new Float64Array(KEY_RESULTS.length)
  const rows = points.map(({ name, case: kase, measured }) => {
    solver.load(kase)
    const outcome = solver.solve()
    solver.keyResults(key, 0, 1)
    const value = key[column]
    const predicted = outcome === 0 && Number.isFinite(value) ? value : null
    return {
      name,
      measured,
      predicted,
      off: predicted === null ? null : measured / predicted - 1,
      reason:
        predicted !== null
          ? null
          : outcome === 0
            ? 'this result is null for the case'
            : OUTCOMES[outcome].text,
    }
  })
  const scores = robustScores(rows.map(({ off }) => (off === null || !(off > -1) ? null : Math.log1p(off))))
  const known = rows.flatMap(({ off }) => (off === null ? [] : [off]))
  const logs = known.filter((off) => off > -1).map(Math.log1p)
  return {
    result,
    points: rows.map((row, k) => ({ ...row, score: scores[k], outlier: isOutlier(scores[k]) })),
    within: [0.1, 0.2, 0.3].map((share) => ({
      share,
      of: known.length === 0 ? 0 : known.filter((off) => Math.abs(off) <= share).length / known.length,
    })),
    bias: logs.length === 0 ? null : Math.exp(mean(logs)),
    meanError: known.length === 0 ? null : mean(known.map(Math.abs)),
  }
}

/**
 * The factor on one group that fits the points: of each point the one that brings its prediction to what was measured, of
 * all the log mean with Student's interval. Null when no point has one.
 */
export function fitGroup(
  points: readonly MeasuredPoint[],
  result: Measurable,
  group: MultiplierGroup,
): Fit | null {
  const search = new FactorSearch(result, group)
  const single = points.map((point) => ({ name: point.name, ...search.find(point) }))
  const scores = robustScores(single.map(({ factor }) => (factor === null ? null : Math.log(factor))))
  const rows = single.map((row, k) => ({ ...row, score: scores[k], outlier: isOutlier(scores[k]) }))
  const logs = (kept: typeof rows) =>
    kept.flatMap(({ factor }) => (factor === null ? [] : [Math.log(factor)]))
  const all = logs(rows)
  const used = logs(rows.filter(({ outlier }) => !outlier))
  if (used.length === 0) return null
  const { label } = MULTIPLIER_GROUPS.find(({ id }) => id === group) as { label: string }
  const outliers = rows.flatMap(({ name, outlier }) => (outlier ? [name] : []))
  const factor = Math.exp(mean(used))
  const interval = intervalOf(used)
  const figures = (value: number) => value.toPrecision(3)
  return {
    group,
    label,
    factor,
    interval,
    scatter: used.length < 2 ? null : deviation(used),
    withOutliers: { factor: Math.exp(mean(all)), interval: intervalOf(all) },
    points: rows,
    outliers,
    used: used.length,
    statement: `${label}: factor ${figures(factor)}${
      interval === null ? '' : ` (95 % between ${figures(interval.low)} and ${figures(interval.high)})`
    } from ${used.length} of ${points.length} points${outliers.length > 0 ? `; left out as outliers: ${outliers.join(', ')}` : ''}.`,
  }
}

/** The correction that a case carries from a fit. */
export function correctionFrom({ group, factor }: Fit, name: string, source: string): Correction {
  return { name, group, factor: Number(factor.toPrecision(6)), source }
}

type Single = { factor: number | null; reason: string | null }

/** Brings points to what was measured, one after another. */
class FactorSearch {
  private readonly solver = new PointSolver()
  private readonly key = new Float64Array(KEY_RESULTS.length)
  private readonly factors = unitMultipliers()
  private readonly column: number
  private readonly group: MultiplierGroup

  constructor(result: Measurable, group: MultiplierGroup) {
    this.column = KEY_RESULT_INDEX[result]
    this.group = group
  }

  /** The factor of a point: regula falsi in the logarithms of factor and result, in which most laws are nearly straight. */
  find({ case: kase, measured }: MeasuredPoint): Single {
    this.solver.load(kase)
    const aim = Math.log(measured)
    let s = 0
    let off = this.off(s, aim)
    if (Number.isNaN(off)) return { factor: null, reason: OUTCOMES[this.solver.outcome].text }
    const near = this.off(0.01, aim)
    const slope = Number.isNaN(near) ? (off - this.off(-0.01, aim)) / 0.01 : (near - off) / 0.01
    if (!(Math.abs(slope) > 1e-6)) return { factor: null, reason: 'the factor does not move this result' }
    if (off === 0) return { factor: 1, reason: null }
    // From 1 towards what was measured, in growing steps until it lies between two factors.
    const way = off * slope > 0 ? -1 : 1
    const end = way > 0 ? Math.log(MOST) : Math.log(LEAST)
    let far = s
    let offFar = off
    for (let step = Math.min(Math.abs(off / slope) * 1.1, 0.4); offFar * off > 0; step *= 1.6) {
      if (far === end || Number.isNaN(offFar))
        return { factor: null, reason: `no factor from ${LEAST} to ${MOST} comes to what was measured` }
      s = far
      off = offFar
      far = way > 0 ? Math.min(end, far + step) : Math.max(end, far - step)
      offFar = this.off(far, aim)
    }
    let kept = 0
    for (let n = 0; n < 60; n++) {
      if (Math.abs(far - s) < 1e-9 || offFar === 0) break
      const share = Math.min(0.95, Math.max(0.05, off / (off - offFar)))
      const next = Number.isFinite(share) ? s + share * (far - s) : 0.5 * (s + far)
      const there = this.off(next, aim)
      if (Math.abs(there) < 1e-10) return { factor: Math.exp(next), reason: null }
      if (there * off > 0) {
        s = next
        off = there
        if (kept > 0) offFar *= 0.5
        kept = 1
      } else {
        far = next
        offFar = there
        if (kept < 0) off *= 0.5
        kept = -1
      }
    }
    const factor = Math.exp(0.5 * (s + far))
    return Math.abs(this.off(Math.log(factor), aim)) < 1e-5
      ? { factor, reason: null }
      : { factor: null, reason: 'no factor comes to what was measured' }
  }

  /** ln predicted − ln measured at a factor's logarithm. */
  private off(log: number, aim: number): number {
    this.factors[this.group] = Math.exp(log)
    this.solver.setMultipliers(this.factors)
    if (this.solver.solve() !== 0) return Number.NaN
    this.solver.keyResults(this.key, 0, 1)
    return Math.log(this.key[this.column]) - aim
  }
}

/** 0.6745 (value − median)/MAD; where more than half of the values agree the mean deviation stands in for it. */
function robustScores(values: readonly (number | null)[]): (number | null)[] {
  const known = values.filter((value) => value !== null)
  if (known.length < 3) return values.map(() => null)
  const middle = median(known)
  const away = known.map((value) => Math.abs(value - middle))
  const mad = median(away)
  const scale = mad > 1e-12 ? mad / 0.6745 : 1.253314 * mean(away)
  return values.map((value) => (value === null ? null : scale > 1e-12 ? (value - middle) / scale : 0))
}

const isOutlier = (score: number | null): boolean => score !== null && Math.abs(score) > OUTLIER
const mean = (values: readonly number[]) => values.reduce((a, b) => a + b, 0) / values.length
function deviation(values: readonly number[]): number {
  const middle = mean(values)
  return Math.sqrt(values.reduce((sum, value) => sum + (value - middle) ** 2, 0) / (values.length - 1))
}

function intervalOf(logs: readonly number[]): { low: number; high: number } | null {
  const n = logs.length
  if (n < 2) return null
  const half = (studentQuantile(0.5 + CONFIDENCE / 2, n - 1) * deviation(logs)) / Math.sqrt(n)
  return { low: Math.exp(mean(logs) - half), high: Math.exp(mean(logs) + half) }
}
