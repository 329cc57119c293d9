// Least objective along one continuous variable under limits: brackets, roots on the limits, golden section between.

/** What a trial reports: its objective, and for each limit how far it is from being met (at or under 0: met). */
export interface Trial {
  objective: number
  /** Relative excess over each limit; +Infinity where the point has no such value. */
  excess: readonly number[]
}

export interface LineProblem {
  low: number
  high: number
  /** null when the point cannot be evaluated. */
  trial(x: number): Trial | null
  /** Trials of the first look over the range, spaced evenly in ln x. */
  looks?: number
  /** Closeness in ln x. */
  tolerance?: number
}

export interface LineResult {
  x: number
  objective: number
  excess: readonly number[]
  feasible: boolean
  /** Limits on which the answer lies. */
  binding: number[]
  /** Set when the answer lies on an end of the range. */
  atEnd: 'low' | 'high' | null
  trials: number
}

/** On a limit to one part in a million. */
export const BINDING = 1e-6

const worstExcess = (trial: Trial | null): number =>
  trial === null || !Number.isFinite(trial.objective)
    ? Number.POSITIVE_INFINITY
    : trial.excess.length === 0
      ? Number.NEGATIVE_INFINITY
      : Math.max(...trial.excess)

/**
 * The best x in [low, high]. Nothing is assumed monotonic: an even look in ln x finds where the limits change sides,
 * each change is closed by a bracketed root and its feasible side kept, and the objective is searched by golden
 * section around the best of what is feasible. With no feasible x, the one with the least worst excess.
 */
export function bestOnLine(problem: LineProblem): LineResult | null {
  const { low, high, tolerance = 1e-10 } = problem
  const looks = Math.max(3, problem.looks ?? 24)
  if (!(low > 0 && high >= low))
    throw new RangeError(`range ${low} to ${high}; both ends above zero, low first`)
  let trials = 0
  const known = new Map<number, Trial | null>()
  const at = (s: number): Trial | null => {
    const seen = known.get(s)
    if (seen !== undefined) return seen
    trials++
    const trial = problem.trial(s === s0 ? low : s === s1 ? high : Math.exp(s))
    known.set(s, trial)
    return trial
  }
  const s0 = Math.log(low)
  const s1 = Math.log(high)
  const worst = (s: number) => worstExcess(at(s))
  const value = (s: number) => (worst(s) <= 0 ? (at(s) as Trial).objective : Number.POSITIVE_INFINITY)

  const grid: number[] =
    s1 === s0
      ? [s0]
      : Array.from({ length: looks }, (_, k) => (k === looks - 1 ? s1 : s0 + ((s1 - s0) * k) / (looks - 1)))
  const stops = [...grid]
  for (let k = 0; k + 1 < grid.length; k++) {
    const left = worst(grid[k]) <= 0
    const right = worst(grid[k + 1]) <= 0
    if (left !== right)
      stops.push(edge(worst, left ? grid[k] : grid[k + 1], left ? grid[k + 1] : grid[k], tolerance))
  }

  let best = pick(stops, value)
  if (best === null) {
    // Nothing met every limit: the least worst excess may still dip under zero between two looks.
    const nearest = pick(grid, worst)
    if (nearest === null) return null
    const dip = around(grid, nearest, worst, tolerance)
    if (worst(dip) <= 0) {
      for (const outside of neighbours(grid, nearest)) stops.push(edge(worst, dip, outside, tolerance))
      stops.push(dip)
      best = pick(stops, value)
    }
    if (best === null) return finish(dip, false)
  }
  stops.sort((a, b) => a - b)
  const inner = around(stops, best, value, tolerance)
  if (value(inner) < value(best)) best = inner
  return finish(best, true)

  function finish(s: number, feasible: boolean): LineResult {
    const trial = at(s) as Trial
    return {
      x: s === s0 ? low : s === s1 ? high : Math.exp(s),
      objective: trial.objective,
      excess: trial.excess,
      feasible,
      binding: trial.excess.flatMap((excess, k) => (Math.abs(excess) <= BINDING ? [k] : [])),
      atEnd: s === s1 ? 'high' : s === s0 ? 'low' : null,
      trials,
    }
  }
}

/** The point with the least finite value, the first of equals. */
function pick(points: readonly number[], value: (s: number) => number): number | null {
  let best: number | null = null
  let least = Number.POSITIVE_INFINITY
  for (const s of points) {
    const v = value(s)
    if (v < least) {
      least = v
      best = s
    }
  }
  return best
}

function neighbours(points: readonly number[], s: number): number[] {
  const k = points.indexOf(s)
  return [points[k - 1], points[k + 1]].filter((p) => p !== undefined)
}

/** Share of the way to the next point that is tried beside a point at the end of what is feasible. */
const END_STEP = 1e-3

/** Golden section between the neighbours of s. */
function around(
  points: readonly number[],
  s: number,
  value: (s: number) => number,
  tolerance: number,
): number {
  const near = neighbours(points, s)
  if (near.length === 0) return s
  let a = Math.min(s, ...near)
  let b = Math.max(s, ...near)
  // At the end of what is feasible, with the objective worse right beside it: there is nothing further in.
  const open = near.filter((p) => Number.isFinite(value(p)))
  if (open.length === 1 && value(s + END_STEP * (open[0] - s)) > value(s)) return s
  const ratio = (Math.sqrt(5) - 1) / 2
  let c = b - ratio * (b - a)
  let d = a + ratio * (b - a)
  // The value of a smooth least cannot tell steps under about the root of the machine's precision apart.
  const enough = Math.max(tolerance, 1e-8)
  for (let k = 0; k < 60 && b - a > enough; k++) {
    if (value(c) <= value(d)) {
      b = d
      d = c
      c = b - ratio * (b - a)
    } else {
      a = c
      c = d
      d = a + ratio * (b - a)
    }
  }
  return pick([s, a, b, c, d], value) ?? s
}

/**
 * Where the worst excess crosses zero between a met point and one not met: the met side, to `tolerance`. False position
 * (Illinois) while both sides are finite, halving otherwise and whenever a step gains too little.
 */
function edge(worst: (s: number) => number, met: number, notMet: number, tolerance: number): number {
  let inside = met
  let outside = notMet
  let fInside = worst(inside)
  let fOutside = worst(outside)
  let stale = 0
  for (let k = 0; k < 200 && Math.abs(outside - inside) > tolerance; k++) {
    const width = outside - inside
    let s = inside + width / 2
    if (stale < 3 && Number.isFinite(fInside) && Number.isFinite(fOutside) && fOutside > fInside) {
      const share = fInside / (fInside - fOutside)
      // Kept off the ends, so that the bracket always closes from both sides.
      s = inside + width * Math.min(Math.max(share, 1e-3), 1 - 1e-3)
      if (Math.abs(width) < 1e3 * tolerance) s = inside + width * Math.min(Math.max(share, 0.25), 0.75)
    }
    if (s === inside || s === outside) break
    const f = worst(s)
    const before = Math.abs(outside - inside)
    if (f <= 0) {
      inside = s
      fInside = f
      if (f === 0) break
      fOutside /= 2
    } else {
      outside = s
      fOutside = f
      fInside /= 2
    }
    stale = Math.abs(outside - inside) > 0.5 * before ? stale + 1 : 0
    if (stale === 0 || stale >= 3) {
      fInside = worst(inside)
      fOutside = worst(outside)
      if (stale > 3) stale = 0
    }
  }
  return inside
}
