// Least objective along a variable that the objective falls with: the greatest value that every limit allows.
import type { Trial } from './line.ts'

/** How a limit's excess goes as the variable rises; null where nothing is known. */
export type Sign = 1 | 0 | -1 | null

export interface FallingProblem {
  low: number
  high: number
  trial(x: number): Trial | null
  /** Of each limit. */
  signs: readonly Sign[]
  /** A search that cannot come to this or under it ends. */
  ceiling?: number
}

export type Falling =
  /** `x` is best. */
  | { kind: 'best'; x: number; trial: Trial }
  /** No x meets every limit; where the least is missing, if any point there can be evaluated. */
  | { kind: 'infeasible'; x: number; trial: Trial | null }
  /** Nothing under `lower`, which is above the ceiling. */
  | { kind: 'above'; lower: number }
  /** A limit of unknown sign is in the way: to be searched in general. */
  | { kind: 'unknown' }

/** The answer keeps at most this much of its limit unused. */
const UNUSED = 1e-6
/** First guess of d ln value / d ln x of what rises: pressure drops go with about the square. */
const FIRST_SLOPE = 2

/**
 * Only one value is tried where it meets every limit: the greatest. Otherwise what rises is brought to its limit by
 * secants in logarithms, kept in a bracket. A limit that falls and is not met there cannot be met: less x makes
 * it worse, more x breaks what rises.
 */
export function bestOnFalling({ low, high, trial, signs, ceiling }: FallingProblem): Falling {
  const s0 = Math.log(low)
  const s1 = Math.log(high)
  let s = s1
  let met = Number.NEGATIVE_INFINITY
  let best: { s: number; trial: Trial } | null = null
  let notMet = Number.POSITIVE_INFINITY
  let last: { s: number; y: number } | null = null
  const xOf = (s: number) => (s === s0 ? low : s === s1 ? high : Math.exp(s))
  for (let n = 0; n < 80; n++) {
    const found = trial(xOf(s))
    const none: Falling = { kind: 'infeasible', x: xOf(s), trial: found }
    let rising = Number.NEGATIVE_INFINITY
    let beyond = found === null || !Number.isFinite(found.objective)
    if (found !== null) {
      for (let k = 0; k < found.excess.length; k++) {
        const excess = found.excess[k]
        if (excess === Number.POSITIVE_INFINITY) beyond = true
        else if (signs[k] === null && excess > 0) return { kind: 'unknown' }
        else if (signs[k] === 0 && excess > 0) return none
        else if (signs[k] === 1) rising = Math.max(rising, excess)
      }
    }
    if (beyond) rising = Number.POSITIVE_INFINITY
    if (rising > 0) {
      notMet = s
      if (s === s0) return none
      if (found !== null) {
        if (found.excess.some((excess, k) => signs[k] === -1 && excess > 0 && Number.isFinite(excess)))
          return none
        if (ceiling !== undefined && found.objective > ceiling)
          return { kind: 'above', lower: found.objective }
      }
    } else {
      met = s
      best = { s, trial: found as Trial }
      if (s === s1 || rising > -UNUSED) break
    }
    if (notMet - met < 1e-13) break
    // Aimed at just inside the limit.
    const y = Math.log1p(rising) + 0.5 * UNUSED
    let next = Number.NaN
    if (Number.isFinite(y)) {
      const slope: number = last === null ? FIRST_SLOPE : (y - last.y) / (s - last.s)
      if (slope > 0.05) next = s - y / slope
      last = { s, y }
    } else last = null
    const floor = met === Number.NEGATIVE_INFINITY ? s0 : met
    if (met === Number.NEGATIVE_INFINITY && next <= s0) next = s0
    else if (!(next > floor && next < notMet)) next = 0.5 * (floor + notMet)
    // A bracket that closes from one side only is halved now and then.
    if (n % 6 === 5 && met > Number.NEGATIVE_INFINITY) next = 0.5 * (met + notMet)
    if (next === s) break
    s = next
  }
  if (best === null) return { kind: 'infeasible', x: low, trial: null }
  const x = xOf(best.s)
  return {
    kind: best.trial.excess.some((excess) => excess > 0) ? 'infeasible' : 'best',
    x,
    trial: best.trial,
  }
}
