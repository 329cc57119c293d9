// The best point of a sweep, moved between the swept values: along each continuous variable in turn, then all together,
// under the same limits, whole tubes kept as they are. Length follows from the duty at every step.
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { PointSolver } from '#engine/bundle/point-solver.ts'
import { type Case, parseCase } from '#engine/case.ts'
import type { Result } from '#engine/result.ts'
import { flattenLimits, keyResultColumn, LIMITS, type LimitId } from '#engine/sweep/limits.ts'
import { OBJECTIVE_LABELS, objectiveColumn } from '#engine/sweep/objective.ts'
import { type PlanVariable, planSweep } from '#engine/sweep/plan.ts'
import { getPath, type Study, withPath } from '#engine/sweep/study.ts'
import { formatQuantity } from '#engine/units.ts'
import { bestOnLine, type LineResult, type Trial } from './line.ts'
import { nelderMead } from './nelder-mead.ts'
import { CONTINUOUS } from './space.ts'

/** Rounds over all variables; a round that gains less than this ends it. */
const ROUNDS = 6
const GAIN = 1e-9
/** A result this close to its limit is on it. */
const ON_LIMIT = 1e-5

type ContinuousRange = { variable: PlanVariable; low: number; high: number }

export type RefinementStep = { path: string; value: number; objective: number; trials: number }

export type Refinement = {
  case: Case
  result: Result
  /** Objective below that of the point it began from. */
  improved: boolean
  objective: number
  objectiveBefore: number
  trace: RefinementStep[]
  /** Limits the refined point lies on. */
  binding: LimitId[]
  /** Evaluations spent. */
  trials: number
  /** The finding in one sentence, SI. */
  statement: string
}

export function refineBest(study: Study, best: Case): Refinement {
  const limits = flattenLimits(study.limits)
  const column = objectiveColumn(study.objective)
  const solver = new PointSolver()
  const key = new Float64Array(KEY_RESULTS.length)
  let trials = 0

  /** The loaded case as it stands. */
  const look = (): Trial | null => {
    trials++
    if (solver.solve() !== 0) return null
    solver.keyResults(key, 0, 1)
    const excess = limits.columns.map((c, k) => {
      const value = key[c]
      if (!Number.isFinite(value)) return Number.POSITIVE_INFINITY
      const over = Number.isFinite(limits.max[k]) ? value / limits.max[k] - 1 : Number.NEGATIVE_INFINITY
      const under = limits.min[k] > 0 ? 1 - value / limits.min[k] : Number.NEGATIVE_INFINITY
      return Math.max(over, under)
    })
    return { objective: key[column], excess }
  }

  let current = best
  solver.load(current)
  const before = look()?.objective ?? Number.NaN
  let objective = before
  const trace: RefinementStep[] = []
  const ranges = continuousRanges(study, best)
  const along = (from: Case, { variable, low, high }: ContinuousRange): LineResult | null => {
    solver.load(from)
    return bestOnLine({
      low,
      high,
      trial: (x) => {
        solver.set(variable.path, x)
        return look()
      },
    })
  }
  const take = (path: string, value: number, found: LineResult) => {
    objective = found.objective
    current = withPath(current, path, value)
    trace.push({ path, value, objective, trials: found.trials })
  }
  for (let round = 0; round < ROUNDS && ranges.length > 0; round++) {
    const begun = objective
    for (const range of ranges) {
      const found = along(current, range)
      if (found?.feasible && found.objective < objective) take(range.variable.path, found.x, found)
    }
    if (ranges.length === 1 || !(begun - objective > GAIN * begun)) break
  }
  // One at a time stops where a limit binds; with the first always at its best, the others may move along the limit.
  if (ranges.length > 1) {
    const [first, ...others] = ranges
    const at = (logs: readonly number[]) =>
      others.reduce(
        (at, { variable, low, high }, j) =>
          withPath(at, variable.path, Math.min(high, Math.max(low, Math.exp(logs[j])))),
        current,
      )
    const found = nelderMead(
      (logs) => {
        const best = along(at(logs), first)
        return best?.feasible ? best.objective : Number.POSITIVE_INFINITY
      },
      others.map(({ variable }) => Math.log(getPath(current, variable.path) as number)),
      {
        steps: others.map(({ low, high }) => 0.1 * Math.log(high / low)),
        tolerance: 1e-5,
        valueTolerance: 1e-8,
        maxEvaluations: 60 * others.length,
      },
    )
    if (found.value < objective * (1 - GAIN)) {
      current = at(found.x)
      const last = along(current, first)
      if (last?.feasible) {
        take(first.variable.path, last.x, last)
        for (const { variable } of others)
          trace.push({
            path: variable.path,
            value: getPath(current, variable.path) as number,
            objective,
            trials: 0,
          })
      }
    }
  }

  const checked = parseCase(current)
  if (checked.ok) current = checked.case
  solver.load(current)
  const last = look()
  const binding = limits.bits.flatMap((bit, k) =>
    last && last.excess[k] > -ON_LIMIT ? [LIMITS[bit].id] : [],
  )
  const improved = objective < before * (1 - 1e-9)
  solver.load(current)
  solver.solve()
  return {
    case: current,
    result: solver.result(),
    improved,
    objective,
    objectiveBefore: before,
    trace,
    binding,
    trials,
    statement: statement(study, before, objective, improved, trace, binding),
  }
}

/** The swept continuous variables that the case carries, with the ends of what was swept. */
function continuousRanges(study: Study, best: Case): ContinuousRange[] {
  return planSweep(study).variables.flatMap((variable) => {
    if (
      !(CONTINUOUS as readonly string[]).includes(variable.path) ||
      typeof getPath(best, variable.path) !== 'number'
    )
      return []
    const values = variable.values as readonly number[]
    const low = values.reduce((a, b) => Math.min(a, b))
    const high = values.reduce((a, b) => Math.max(a, b))
    return low > 0 && high > low ? [{ variable, low, high }] : []
  })
}

function statement(
  study: Study,
  before: number,
  after: number,
  improved: boolean,
  trace: readonly RefinementStep[],
  binding: readonly LimitId[],
): string {
  const result = KEY_RESULTS[keyResultColumn(study.objective)]
  const say = (value: number) => formatQuantity(value, result.dimension, 'si', { digits: 4 })
  const what = OBJECTIVE_LABELS[study.objective]
  if (!improved) return `${what} ${say(before)}: nothing between the swept values is less.`
  const moved = new Map(trace.map((step) => [step.path, step.value]))
  const variables = planSweep(study).variables
  const where = [...moved].map(([path, value]) => {
    const variable = variables.find((candidate) => candidate.path === path)
    return `${variable?.label.toLowerCase() ?? path} ${formatQuantity(value, variable?.dimension ?? 'none', 'si', { digits: 4 })}`
  })
  const on = binding.map((id) => LIMITS.find((limit) => limit.id === id)?.label.toLowerCase() ?? id)
  const less = ((1 - after / before) * 100).toPrecision(2)
  return `${what} ${say(after)} at ${where.join(' and ')}, ${less} % less than the best swept point${on.length > 0 ? `; at its limit: ${on.join(', ')}` : ''}.`
}
