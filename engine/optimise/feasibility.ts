// Why nothing meets every limit, and which single limit would have to give way, by how little.
import { KEY_RESULT_INDEX, OUTCOMES } from '#engine/bundle/key-results.ts'
import { LIMITS, type Limit, type LimitId, type LimitInfo } from '#engine/sweep/limits.ts'
import { OBJECTIVE_LABELS } from '#engine/sweep/objective.ts'
import type { Study } from '#engine/sweep/study.ts'
import { formatQuantity } from '#engine/units.ts'
import { beginSearch, type Candidate, runSearch, type SearchState } from './search.ts'
import { type Constraint, constraintsOf, type Side, StudyProblem } from './study-problem.ts'

export interface Relaxation {
  id: LimitId
  side: Side
  from: number
  /** The value that lets something meet every limit, rounded to what a person would type. */
  to: number
  /** |to / from - 1| */
  change: number
  /** What then meets every limit, with the objective it has there. */
  combination: number
  x: number[]
  objective: number
}

export interface Infeasibility {
  /** One limit alone, the least change first; empty when no single one is enough. */
  relaxations: Relaxation[]
  /** Where no single one is enough: all of these together. */
  together: { id: LimitId; side: Side; from: number; to: number }[]
  statement: string
}

/** The parts of the question, each a search of its own that a worker may run: one for each side of each limit. */
export const relaxable = (study: Study): Constraint[] => constraintsOf(study)

/** The least that one side of one limit must give way for, everything else as it is; null when that is not enough. */
export function relaxationOf(study: Study, { id, side, bound, column }: Constraint): Relaxation | null {
  if (id === null) return null
  const problem = new StudyProblem(study, {
    goal: { column, most: side === 'min' },
    lifted: { id, side },
  })
  const best = bestOf(runSearch(problem, beginSearch(problem.combinations)))
  if (best === null) return null
  const value = side === 'min' ? -best.objective : best.objective
  const unit = unitOf(id, value)
  for (let steps = 0; steps < WIDENED; steps++) {
    const to = outward(value, side, unit, steps)
    if (!(to > 0)) return null
    // With the limit there, the least objective of what then meets every limit.
    const relaxed = new StudyProblem(withLimit(study, id, side, to))
    const found = bestOf(runSearch(relaxed, beginSearch(relaxed.combinations)))
    if (found === null) continue
    const { combination, x, objective } = found
    return { id, side, from: bound, to, change: Math.abs(to / bound - 1), combination, x, objective }
  }
  return null
}

/** Everything about a study in which nothing meets every limit; `found`: what `relaxationOf` gave for each part. */
export function explainInfeasible(study: Study, found?: readonly (Relaxation | null)[]): Infeasibility {
  const parts = found ?? relaxable(study).map((constraint) => relaxationOf(study, constraint))
  const relaxations = parts.filter((part) => part !== null).sort((a, b) => a.change - b.change)
  if (relaxations.length > 0) {
    const [first] = relaxations
    const info = infoOf(first.id)
    const say = (value: number) => formatQuantity(value, info.dimension, 'si', { digits: 4 })
    return {
      relaxations,
      together: [],
      statement: `Nothing meets every limit. The smallest change that helps: ${info.label.toLowerCase()} ${
        first.side === 'max' ? 'at most' : 'at least'
      } ${say(first.to)} instead of ${say(first.from)}.`,
    }
  }
  const problem = new StudyProblem(study, { goal: 'worst' })
  const best =
    problem.constraints.length === 0 ? null : bestOf(runSearch(problem, beginSearch(problem.combinations)))
  if (best === null || !Number.isFinite(problem.objectiveAt(best.combination, best.x)))
    return { relaxations, together: [], statement: nothingEvaluated(study) }
  const key = problem.keyResultsAt(best.combination, best.x)
  const together = problem.constraints.flatMap(({ id, side, bound, column }) =>
    id !== null && (side === 'max' ? key[column] > bound : key[column] < bound)
      ? [{ id, side, from: bound, to: outward(key[column], side, unitOf(id, key[column]), 0) }]
      : [],
  )
  const words = together.map(({ id, side, to }) => {
    const { label, dimension } = infoOf(id)
    return `${label.toLowerCase()} ${side === 'max' ? 'at most' : 'at least'} ${formatQuantity(to, dimension, 'si', { digits: 4 })}`
  })
  return {
    relaxations,
    together,
    statement: `Nothing meets every limit, and no single one is to blame. Together these would do: ${words.join(', ')}.`,
  }
}

/** A copy of the study with one side of one limit set. */
export function withLimit(study: Study, id: LimitId, side: Side, value: number): Study {
  const limit: Limit = { ...study.limits[id], [side]: value }
  return { ...study, limits: { ...study.limits, [id]: limit } }
}

const bestOf = (state: SearchState): Candidate | null => state.leaders[0] ?? null
const infoOf = (id: LimitId) => LIMITS.find((limit) => limit.id === id) as LimitInfo

/** A hair's breadth may be too little room for a search: the value is widened so many times at most. */
const WIDENED = 4

/** What a value is rounded to: a tenth of a kelvin, or the third figure. */
const unitOf = (id: LimitId, value: number): number =>
  infoOf(id).dimension === 'temperature' ? 0.1 : 10 ** (Math.floor(Math.log10(Math.abs(value))) - 2)

/** Rounded away from what would not do, and `more` units further. */
function outward(value: number, side: Side, unit: number, more: number): number {
  const steps = value / unit
  const rounded = side === 'max' ? Math.ceil(steps + 1e-3) + more : Math.floor(steps - 1e-3) - more
  return Number((rounded * unit).toPrecision(12))
}

/** How many combinations are looked at to say why none can be evaluated. */
const LOOKS = 400

function nothingEvaluated(study: Study): string {
  const problem = new StudyProblem(study)
  const counts = new Map<number, number>()
  const step = Math.max(1, Math.floor(problem.combinations / LOOKS))
  for (let k = 0; k < problem.combinations; k += step) {
    const middle = problem.axes.map(({ low, high }) => Math.sqrt(low * high))
    const outcome = problem.keyResultsAt(k, middle)[KEY_RESULT_INDEX.outcome]
    counts.set(outcome, (counts.get(outcome) ?? 0) + 1)
  }
  const [[outcome]] = [...counts].sort((a, b) => b[1] - a[1])
  if (outcome === 0)
    return `${OBJECTIVE_LABELS[study.objective]} has no value in this study. What helps: ${
      study.objective === 'tubeMass' ? 'a tube material and a wall thickness' : 'a coolant'
    } in the case, or another objective.`
  const { text, remedy } = OUTCOMES[outcome]
  return `No combination can be evaluated, most often because ${text}. What helps: ${remedy}.`
}
