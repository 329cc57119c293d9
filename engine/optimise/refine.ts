// The best point of a sweep, moved between the swept values: along each continuous variable in turn, under the same
// limits, whole tubes kept as they are. Length follows from the duty at every step.
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { PointSolver } from '#engine/bundle/point-solver.ts'
import { type Case, parseCase } from '#engine/case.ts'
import type { Result } from '#engine/result.ts'
import { flattenLimits, keyResultColumn, LIMITS, type LimitId } from '#engine/sweep/limits.ts'
import { OBJECTIVE_LABELS, objectiveColumn } from '#engine/sweep/objective.ts'
import { type PlanVariable, planSweep } from '#engine/sweep/plan.ts'
import { getPath, type Study, withPath } from '#engine/sweep/study.ts'
import { formatQuantity } from '#engine/units.ts'
import { bestOnLine, type Trial } from './line.ts'

/** Variables that may take any value between the swept ones; sizes sold in steps are not among them. */
const CONTINUOUS = [
  'drive.velocity',
  'drive.massFlow',
  'drive.outletTemperature',
  'drive.wallSubcooling',
  'bundle.length',
  'bundle.pitchRatio',
  'saturationTemperature',
]
/** Rounds over all variables; a round that gains less than this ends it. */
const ROUNDS = 6
const GAIN = 1e-9
/** A result this close to its limit is on it. */
const ON_LIMIT = 1e-5

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
  for (let round = 0; round < ROUNDS && ranges.length > 0; round++) {
    const begun = objective
    for (const { variable, low, high } of ranges) {
      solver.load(current)
      const found = bestOnLine({
        low,
        high,
        trial: (x) => {
          solver.set(variable.path, x)
          return look()
        },
      })
      if (!found?.feasible || !(found.objective < objective)) continue
      objective = found.objective
      current = withPath(current, variable.path, found.x)
      trace.push({ path: variable.path, value: found.x, objective, trials: found.trials })
    }
    if (ranges.length === 1 || !(begun - objective > GAIN * begun)) break
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
function continuousRanges(study: Study, best: Case): { variable: PlanVariable; low: number; high: number }[] {
  return planSweep(study).variables.flatMap((variable) => {
    if (!CONTINUOUS.includes(variable.path) || typeof getPath(best, variable.path) !== 'number') return []
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
