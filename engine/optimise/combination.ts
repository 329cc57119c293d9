// The best of one discrete combination over its continuous variables.
import { latinHypercubeShare } from '#engine/sweep/plan.ts'
import { bestOnFalling, type Sign } from './falling.ts'
import { BINDING, bestOnLine, type Trial } from './line.ts'
import { nelderMead } from './nelder-mead.ts'

export interface Range {
  low: number
  high: number
}

/** A combination ready to be tried. */
export interface Opened {
  trial(x: readonly number[]): Trial | null
  /**
   * Set when the objective falls as the first axis rises, or `reversed` as it sinks: how the excess over each limit goes
   * as the axis rises.
   */
  falling: { signs: readonly Sign[]; reversed?: boolean } | null
}

export type Found =
  | { status: 'feasible'; x: number[]; objective: number; binding: number[] }
  /** The nearest there is to meeting every limit; x is empty when no point can be evaluated. */
  | { status: 'infeasible'; x: number[] }
  | { status: 'above'; lower: number }

export interface Effort {
  /** Trials of the first look along an axis. */
  looks: number
  /** Closeness in ln x of what is sought without a bracket. */
  tolerance: number
  /** Starts of the simplex, for two axes and more beside the first. */
  starts: number
}

/** While combinations are compared, and for the few that may be the answer. */
export const QUICK: Effort = { looks: 12, tolerance: 1e-4, starts: 4 }
export const THOROUGH: Effort = { looks: 40, tolerance: 1e-7, starts: 12 }

/** The answer depends on its arguments alone. With a `ceiling`, a search that cannot come under it may end early. */
export function bestOfCombination(
  { trial, falling }: Opened,
  axes: readonly Range[],
  effort: Effort,
  ceiling?: number,
): Found {
  if (axes.length === 0) return found([], trial([]))
  const [first, ...others] = axes
  if (falling !== null && others.length === 1 && ceiling !== undefined) {
    const lower = lowerOf(trial, first, others[0], falling.reversed === true)
    if (lower > ceiling) return { status: 'above', lower }
  }

  const alongFirst = (
    rest: readonly number[],
    top?: number,
  ): { x: number; trial: Trial } | 'above' | null => {
    const at = (x: number) => trial([x, ...rest])
    if (falling !== null) {
      const { signs, reversed } = falling
      const turned = (x: number) => (reversed ? within(first, 1 / x) : x)
      const answer = bestOnFalling({
        low: reversed ? 1 / first.high : first.low,
        high: reversed ? 1 / first.low : first.high,
        trial: (x) => at(turned(x)),
        signs: reversed ? signs.map((sign) => (sign === null ? null : ((-sign || 0) as Sign))) : signs,
        ceiling: top,
      })
      if (answer.kind === 'above') return 'above'
      if (answer.kind !== 'unknown')
        return answer.trial === null ? null : { x: turned(answer.x), trial: answer.trial }
    }
    const answer = bestOnLine({ ...first, trial: at, looks: effort.looks })
    return answer === null ? null : { x: answer.x, trial: answer }
  }

  if (others.length === 0) {
    const best = alongFirst([], ceiling)
    if (best === 'above') return { status: 'above', lower: ceiling as number }
    return best === null ? { status: 'infeasible', x: [] } : found([best.x], best.trial)
  }

  const inner = (rest: readonly number[]): Trial | null => {
    const best = alongFirst(rest)
    return best === null || best === 'above' ? null : best.trial
  }
  const rest = others.length === 1 ? alongOther(inner, others[0], effort) : alongOthers(inner, others, effort)
  if (rest === null) return { status: 'infeasible', x: [] }
  const best = alongFirst(rest)
  return best === null || best === 'above'
    ? { status: 'infeasible', x: [] }
    : found([best.x, ...rest], best.trial)
}

/** Looks along the second axis before a combination is searched. */
const BOUND_LOOKS = 5

/**
 * What nothing of a combination is under, from a few looks along the second axis, the first where the objective is least
 * and no limit counts: the least of them, less four times what a parabola through three neighbours could dip between two.
 */
export function lowerOf(trial: Opened['trial'], first: Range, second: Range, reversed: boolean): number {
  const x = reversed ? first.low : first.high
  const values = Array.from({ length: BOUND_LOOKS }, (_, k) => {
    const share = k / (BOUND_LOOKS - 1)
    const y =
      share === 0 ? second.low : share === 1 ? second.high : second.low * (second.high / second.low) ** share
    return trial([x, y])?.objective ?? Number.NaN
  })
  let bend = 0
  for (let k = 1; k + 1 < BOUND_LOOKS; k++)
    bend = Math.max(bend, Math.abs(values[k - 1] - 2 * values[k] + values[k + 1]))
  const lower = Math.min(...values) - 0.5 * bend
  return Number.isNaN(lower) ? Number.NEGATIVE_INFINITY : lower
}

/** 1/(1/x) may miss the end of a range by the last bit. */
const within = ({ low, high }: Range, x: number): number =>
  x <= low * (1 + 1e-15) ? low : x >= high * (1 - 1e-15) ? high : x

function alongOther(
  inner: (rest: readonly number[]) => Trial | null,
  range: Range,
  { looks, tolerance }: Effort,
): number[] | null {
  const answer = bestOnLine({ ...range, trial: (y) => inner([y]), looks: Math.ceil(0.7 * looks), tolerance })
  return answer === null ? null : [answer.x]
}

/** What does not meet every limit is worse than all that does, the more so the further off. */
const NOT_MET = 1e30
const merit = (trial: Trial | null): number => {
  if (trial === null || !Number.isFinite(trial.objective)) return Number.POSITIVE_INFINITY
  const worst = Math.max(0, ...trial.excess)
  return worst > 0 ? NOT_MET * (1 + worst) : trial.objective
}

/** Several axes: simplexes from an even spread of starts, the best of them polished along each axis. */
function alongOthers(
  inner: (rest: readonly number[]) => Trial | null,
  ranges: readonly Range[],
  { starts, tolerance }: Effort,
): number[] | null {
  const place = (u: readonly number[]) =>
    ranges.map(({ low, high }, j) =>
      u[j] <= 0 ? low : u[j] >= 1 ? high : Math.exp(Math.log(low) + u[j] * Math.log(high / low)),
    )
  const known = new Map<string, number>()
  const value = (u: readonly number[]) => {
    const x = place(u)
    const key = x.join(' ')
    const seen = known.get(key)
    if (seen !== undefined) return seen
    const fresh = merit(inner(x))
    known.set(key, fresh)
    return fresh
  }
  let best: number[] | null = null
  let least = Number.POSITIVE_INFINITY
  for (let i = 0; i < starts; i++) {
    const start = ranges.map((_, j) => latinHypercubeShare(1, j, i, starts))
    const run = nelderMead(value, start, {
      steps: start.map((u) => (u < 0.5 ? 0.2 : -0.2)),
      tolerance: Math.max(1e-3, tolerance),
      valueTolerance: 1e-6,
      maxEvaluations: 40 * ranges.length,
    })
    if (run.value < least) {
      least = run.value
      best = run.x.map((u) => Math.min(1, Math.max(0, u)))
    }
  }
  if (best === null) return null
  for (let step = 0.05; step > Math.max(1e-4, tolerance); ) {
    let moved = false
    for (let j = 0; j < ranges.length; j++)
      for (const way of [1, -1]) {
        const u: number[] = [...best]
        u[j] = Math.min(1, Math.max(0, u[j] + way * step))
        const there = value(u)
        if (there < least) {
          least = there
          best = u
          moved = true
        }
      }
    if (!moved) step *= 0.4
  }
  return place(best)
}

function found(x: number[], trial: Trial | null): Found {
  if (trial === null) return { status: 'infeasible', x: [] }
  const { objective, excess } = trial
  if (!Number.isFinite(objective) || excess.some((over) => !(over <= 0))) return { status: 'infeasible', x }
  return {
    status: 'feasible',
    x,
    objective,
    binding: excess.flatMap((over, k) => (over >= -10 * BINDING ? [k] : [])),
  }
}
