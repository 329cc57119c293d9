// What two results cost each other: the points of a sweep that nothing beats in both, and optima between them.
import { KEY_RESULT_INDEX, KEY_RESULTS } from '#engine/bundle/key-results.ts'
import type { Case } from '#engine/case.ts'
import { evaluateRange } from '#engine/sweep/evaluate-range.ts'
import { keyResultColumn, LIMITS } from '#engine/sweep/limits.ts'
import { OBJECTIVES, type Objective } from '#engine/sweep/objective.ts'
import type { SweepPlan } from '#engine/sweep/plan.ts'
import type { Study } from '#engine/sweep/study.ts'
import { inputsOf, type OptimumInput } from './optimise.ts'
import { beginSearch, type Candidate, runSearch } from './search.ts'
import { type Constraint, StudyProblem } from './study-problem.ts'

/** Two key results, each to be little, or much where `most` says so. */
export interface FrontAxes {
  x: FrontAxis
  y: FrontAxis
}
export interface FrontAxis {
  result: string
  most?: boolean
}

export const DEFAULT_FRONT: FrontAxes = {
  x: { result: 'coolantPressureDrop' },
  y: { result: 'outsideArea' },
}

/**
 * Indices of the points that no other point equals or beats in both and beats in one, in the order of x. Of points that are equal
 * in both the first stands for all. NaN stands for a point that does not count.
 */
export function paretoFront(
  x: Float64Array | readonly number[],
  y: Float64Array | readonly number[],
  { x: first, y: second }: { x: { most?: boolean }; y: { most?: boolean } } = { x: {}, y: {} },
): number[] {
  const wx = first.most ? -1 : 1
  const wy = second.most ? -1 : 1
  const order: number[] = []
  for (let i = 0; i < x.length; i++) if (Number.isFinite(x[i]) && Number.isFinite(y[i])) order.push(i)
  order.sort((a, b) => wx * (x[a] - x[b]) || wy * (y[a] - y[b]) || a - b)
  const front: number[] = []
  let least = Number.POSITIVE_INFINITY
  for (const i of order) {
    const value = wy * y[i]
    if (value < least) {
      least = value
      front.push(i)
    }
  }
  return front
}

export interface SweptFrontPoint {
  point: number
  x: number
  y: number
}

/** The front of a study's own points that meet every limit, each exact; evaluates the study. */
export function sweptFront(plan: SweepPlan, axes: FrontAxes): SweptFrontPoint[] {
  const slice = 2000
  const out = new Float64Array(KEY_RESULTS.length * slice)
  const [cx, cy] = [keyResultColumn(axes.x.result), keyResultColumn(axes.y.result)]
  const x = new Float64Array(plan.points).fill(Number.NaN)
  const y = new Float64Array(plan.points).fill(Number.NaN)
  for (let from = 0; from < plan.points; from += slice) {
    const count = Math.min(slice, plan.points - from)
    evaluateRange(plan, from, count, out)
    for (let k = 0; k < count; k++) {
      if (out[KEY_RESULT_INDEX.outcome * count + k] !== 0) continue
      if (out[KEY_RESULT_INDEX.limitsNotMet * count + k] !== 0) continue
      x[from + k] = out[cx * count + k]
      y[from + k] = out[cy * count + k]
    }
  }
  return paretoFront(x, y, axes).map((point) => ({ point, x: x[point], y: y[point] }))
}

export interface FrontPoint {
  combination: number
  place: number[]
  /** The point as a case: what its band, its sheet and a copy are made from. */
  case: Case
  inputs: OptimumInput[]
  x: number
  y: number
}

/** The two ends: the best y there is, and the best x there is with the best y that it leaves. */
export interface FrontEnds {
  bestY: FrontPoint
  bestX: FrontPoint
}

/** Where the front begins and ends; null when nothing meets every limit. */
export function frontEnds(study: Study, axes: FrontAxes): FrontEnds | null {
  const bestY = bestOf(study, axes.y, [], axes)
  const bestX = bestOf(study, axes.x, [], axes)
  if (bestY === null || bestX === null) return null
  // Of all with the best y the least x, and the other way round, to within a hair; who is further off is out already.
  const y = bestOf(study, axes.x, [boundOn(axes.y, bestY.point.y, HAIR)], axes, bestY.among)
  const x = bestOf(study, axes.y, [boundOn(axes.x, bestX.point.x, HAIR)], axes, bestX.among)
  return { bestY: (y ?? bestY).point, bestX: (x ?? bestX).point }
}

/** Room left where a result is held at its own best. */
const HAIR = 1e-5

/** Values of x between the ends, even in the logarithm: one search each. */
export function frontSteps(ends: FrontEnds, count: number): number[] {
  const from = ends.bestX.x
  const to = ends.bestY.x
  if (!(from > 0 && to > 0) || Math.abs(to / from - 1) < 1e-6) return []
  return Array.from(
    { length: count },
    (_, k) => from * Math.exp(((k + 1) / (count + 1)) * Math.log(to / from)),
  )
}

/** The best y of everything whose x is no worse than `bound`. */
export const frontPointAt = (study: Study, axes: FrontAxes, bound: number): FrontPoint | null =>
  bestOf(study, axes.y, [boundOn(axes.x, bound, 0)], axes)?.point ?? null

/** The refined front at once: both ends and `count` searches between; what another of them beats is left out. */
export function refinedFront(study: Study, axes: FrontAxes, count: number): FrontPoint[] {
  const ends = frontEnds(study, axes)
  if (ends === null) return []
  return joinFront(
    ends,
    frontSteps(ends, count).map((bound) => frontPointAt(study, axes, bound)),
    axes,
  )
}

/** The front from its parts. */
export function joinFront(
  ends: FrontEnds,
  between: readonly (FrontPoint | null)[],
  axes: FrontAxes,
): FrontPoint[] {
  const all = [ends.bestX, ...between.filter((point) => point !== null), ends.bestY]
  return paretoFront(
    all.map(({ x }) => x),
    all.map(({ y }) => y),
    axes,
  ).map((k) => all[k])
}

function boundOn({ result, most }: FrontAxis, value: number, room: number): Constraint {
  const limit = LIMITS.find((info) => info.result === result)
  const away = room * Math.abs(value)
  return {
    id: limit?.id ?? null,
    side: most ? 'min' : 'max',
    bound: most ? value - away : value + away,
    column: keyResultColumn(result),
  }
}

/** The best of one result, and the combinations that came near it. */
function bestOf(
  study: Study,
  axis: FrontAxis,
  more: readonly Constraint[],
  axes: FrontAxes,
  among: number[] | null = null,
): { point: FrontPoint; among: number[] } | null {
  const own = !axis.most && (OBJECTIVES as readonly string[]).includes(axis.result)
  const asked: Study = own ? { ...study, objective: axis.result as Objective } : study
  const problem = new StudyProblem(asked, {
    more,
    goal: own ? undefined : { column: keyResultColumn(axis.result), most: axis.most },
  })
  const { leaders } = runSearch(problem, beginSearch(problem.combinations, among))
  const [best] = leaders
  return best
    ? { point: pointOf(problem, best, axes), among: leaders.map(({ combination }) => combination) }
    : null
}

function pointOf(problem: StudyProblem, best: Candidate, axes: FrontAxes): FrontPoint {
  const key = problem.keyResultsAt(best.combination, best.x)
  return {
    combination: best.combination,
    place: best.x,
    case: problem.caseAt(best.combination, best.x),
    inputs: inputsOf(problem, best),
    x: key[keyResultColumn(axes.x.result)],
    y: key[keyResultColumn(axes.y.result)],
  }
}
