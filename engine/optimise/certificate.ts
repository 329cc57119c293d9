// That an optimum is one: nothing on a dense grid of its continuous variables and nothing in the study's own sweep is
// better by more than a twentieth of a percent.
import { KEY_RESULT_INDEX, KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { evaluateRange } from '#engine/sweep/evaluate-range.ts'
import { objectiveColumn } from '#engine/sweep/objective.ts'
import { latinHypercubeShare, planSweep, type SweepPlan } from '#engine/sweep/plan.ts'
import type { Optimiser } from './optimise.ts'
import { POLISHED, type SearchState, type Spent } from './search.ts'
import type { StudyProblem } from './study-problem.ts'

/** What is better by less than this leaves the optimum standing. */
export const TOLERANCE = 5e-4
/** Steps of the grid along each variable, by their number; more variables than these are sampled. */
const STEPS = [1, 361, 61, 17]
const SAMPLES = 6000
/** Steps of the second grid, close around the optimum, by the number of variables. */
const NEAR_STEPS = [1, 81, 21, 9]
/** How far that one reaches, as a share of each range. */
const NEAR = 0.04

export interface GridCheck {
  /** What is checked, in words. */
  how: string
  points: number
  feasible: number
  /** The least objective of a point that meets every limit. */
  least: number | null
  /** By how much it is under the optimum, relative; negative where it is above. */
  under: number | null
}

export interface Certificate {
  holds: boolean
  tolerance: number
  checks: GridCheck[]
  statement: string
  spent: Spent
}

/** The best point of a finished run, where one is stored: it saves sweeping the study again. */
export type Swept = { points: number; feasible: number; least: number | null }

/** Points a sweep of a certificate evaluates at once. */
const SLICE = 2000

/** The study's own points, evaluated here. */
export function sweepLeast(plan: SweepPlan): Swept {
  const out = new Float64Array(KEY_RESULTS.length * SLICE)
  const objective = objectiveColumn(plan.study.objective)
  let feasible = 0
  let least: number | null = null
  for (let first = 0; first < plan.points; first += SLICE) {
    const count = Math.min(SLICE, plan.points - first)
    evaluateRange(plan, first, count, out)
    const at = (column: number, k: number) => out[column * count + k]
    for (let k = 0; k < count; k++) {
      if (at(KEY_RESULT_INDEX.outcome, k) !== 0 || at(KEY_RESULT_INDEX.limitsNotMet, k) !== 0) continue
      const value = at(objective, k)
      if (!Number.isFinite(value)) continue
      feasible++
      if (least === null || value < least) least = value
    }
  }
  return { points: plan.points, feasible, least }
}

/** Checks what a finished search found. `swept`: what the study's run found, if it has one. */
export function certify(optimiser: Optimiser, state: SearchState, swept?: Swept): Certificate {
  const { problem, space, study } = optimiser
  const leaders = state.leaders.slice(0, POLISHED)
  const [best] = leaders
  if (!best) throw new RangeError('the search found nothing that a certificate could speak of')
  const before = problem.spent()
  const checks: GridCheck[] = []
  const judged = (how: string, { points, feasible, least }: Swept) =>
    checks.push({ how, points, feasible, least, under: least === null ? null : 1 - least / best.objective })

  const variables = space.axes.map(({ label }) => label.toLowerCase()).join(' and ')
  if (space.axes.length > 0) {
    const whole = places(space.axes, STEPS)
    const what = leaders.length > 1 ? `the best ${leaders.length} combinations` : 'the best combination'
    judged(
      `${variables} over the whole range, ${whole.how}, in ${what}`,
      sum(leaders.map(({ combination }) => leastOf(problem, combination, whole.points))),
    )
    const near = places(
      space.axes.map(({ low, high }, j) => {
        const reach = (high / low) ** NEAR
        return { low: Math.max(low, best.x[j] / reach), high: Math.min(high, best.x[j] * reach) }
      }),
      NEAR_STEPS,
    )
    judged(
      `${variables} within ${NEAR * 100} % of the range around the optimum, ${near.how}`,
      leastOf(problem, best.combination, near.points),
    )
  }
  const plan = planSweep(study)
  judged("the study's own points", swept ?? sweepLeast(plan))

  const holds = checks.every(({ under }) => under === null || under <= TOLERANCE)
  const after = problem.spent()
  return {
    holds,
    tolerance: TOLERANCE,
    checks,
    statement: statementOf(checks, holds),
    spent: {
      evaluations: after.evaluations - before.evaluations,
      rowMarches: after.rowMarches - before.rowMarches,
    },
  }
}

function statementOf(checks: readonly GridCheck[], holds: boolean): string {
  const points = checks.reduce((total, check) => total + check.points, 0)
  const where = checks.map(({ how, points: n }) => `${how} (${n} points)`).join('; ')
  if (holds) return `Of ${points} points none is better by more than ${TOLERANCE * 100} %: ${where}.`
  const [worst] = [...checks].sort((a, b) => (b.under ?? -1) - (a.under ?? -1))
  return `Not the optimum: a point is ${((worst.under as number) * 100).toPrecision(2)} % better, found in ${worst.how}. Checked: ${where}.`
}

function places(
  ranges: readonly { low: number; high: number }[],
  stepsBy: readonly number[],
): { points: number[][]; how: string } {
  const between = (j: number, u: number) => {
    const { low, high } = ranges[j]
    return u <= 0 ? low : u >= 1 ? high : low * Math.exp(u * Math.log(high / low))
  }
  const steps = stepsBy[ranges.length]
  if (steps === undefined)
    return {
      points: Array.from({ length: SAMPLES }, (_, i) =>
        ranges.map((_, j) => between(j, latinHypercubeShare(1, j, i, SAMPLES))),
      ),
      how: `${SAMPLES} points of a Latin hypercube with seed 1`,
    }
  let points: number[][] = [[]]
  for (let j = 0; j < ranges.length; j++)
    points = points.flatMap((point) =>
      Array.from({ length: steps }, (_, k) => [...point, between(j, k / (steps - 1))]),
    )
  return { points, how: `${ranges.map(() => steps).join(' × ')} steps even in the logarithm` }
}

function leastOf(problem: StudyProblem, combination: number, points: readonly number[][]): Swept {
  const { trial } = problem.open(combination)
  let feasible = 0
  let least: number | null = null
  for (const x of points) {
    const found = trial(x)
    if (found === null || !Number.isFinite(found.objective) || found.excess.some((over) => !(over <= 0)))
      continue
    feasible++
    if (least === null || found.objective < least) least = found.objective
  }
  return { points: points.length, feasible, least }
}

function sum(parts: readonly Swept[]): Swept {
  return parts.reduce((total, part) => ({
    points: total.points + part.points,
    feasible: total.feasible + part.feasible,
    least:
      total.least === null
        ? part.least
        : part.least === null
          ? total.least
          : Math.min(total.least, part.least),
  }))
}
