// Why an optimum is where it is: what its limits are worth, what lies a step away, what each fluid and tube can do.
import { KEY_RESULT_INDEX, OUTCOMES } from '#engine/bundle/key-results.ts'
import { LIMITS, type LimitId } from '#engine/sweep/limits.ts'
import type { Study, SweptValue } from '#engine/sweep/study.ts'
import type { Dimension } from '#engine/units.ts'
import { bestOfCombination, THOROUGH } from './combination.ts'
import { withLimit } from './feasibility.ts'
import { bindingLimits, inputsOf, type Optimiser, type OptimumInput } from './optimise.ts'
import { beginSearch, type Candidate, runSearch, type SearchState } from './search.ts'
import { combinationDigits, combinationOf, combinationValues } from './space.ts'
import { type Side, StudyProblem } from './study-problem.ts'

/** How far a limit or an end of a range is moved to see what it is worth. */
const MOVED = 0.01
/** The same for a temperature, whose zero means nothing here [K]. */
const MOVED_TEMPERATURE = 0.1

export interface Worth {
  kind: 'limit' | 'range'
  /** Limit, or path of the variable whose range ends there. */
  id: string
  label: string
  side: Side
  dimension: Dimension
  value: number
  /** d objective / d value, SI over SI: negative where giving way saves. Null when neither side can be searched. */
  slope: number | null
  /** `slope` for the step that a person thinks in: 1 kPa, 1 m, 1 K, 1 m/s. */
  perStep: { step: number; words: string; change: number } | null
  /** What it was taken from: each value with the best objective of the same combination there, null where infeasible. */
  from: { value: number; objective: number | null }[]
}

export interface Neighbour {
  path: string
  label: string
  from: SweptValue
  to: SweptValue
  step: 'next' | 'previous' | 'other'
  /** Null when nothing of it meets every limit. */
  best: { objective: number; change: number; inputs: OptimumInput[]; binding: LimitId[] } | null
  /** What stands in the way where `best` is null: limits in the order of their excess, or why nothing can be evaluated. */
  breaks: { id: LimitId; excess: number }[]
  reason: string | null
}

export interface BestWith {
  path: string
  label: string
  value: SweptValue
  /** Null when nothing with this value meets every limit. */
  best: { objective: number; change: number; inputs: OptimumInput[]; binding: LimitId[] } | null
  isOptimum: boolean
}

/** Steps that people think in, by dimension [SI]. */
const STEP: Readonly<Partial<Record<Dimension, { step: number; words: string }>>> = {
  pressure: { step: 1000, words: 'per kPa' },
  length: { step: 1, words: 'per metre' },
  temperature: { step: 1, words: 'per K' },
  temperatureDifference: { step: 1, words: 'per K' },
  velocity: { step: 1, words: 'per m/s' },
  massFlow: { step: 1, words: 'per kg/s' },
  power: { step: 1000, words: 'per kW' },
}

/** What each limit on which the optimum lies is worth, and each end of a range: from re-optimising with it moved. */
export function worthOf({ problem, study, space }: Optimiser, best: Candidate): Worth[] {
  const again = (changed: Study): number | null => {
    const moved = new StudyProblem(changed)
    // Of the same discrete choice: bounds of axes move, the list of combinations does not.
    const found = bestOfCombination(moved.open(best.combination), moved.axes, THOROUGH)
    return found.status === 'feasible' ? found.objective : null
  }
  const worth = (
    what: Pick<Worth, 'kind' | 'id' | 'label' | 'side' | 'dimension' | 'value'>,
    changed: (value: number) => Study,
  ): Worth => {
    const by = what.dimension === 'temperature' ? MOVED_TEMPERATURE : MOVED * what.value
    const from = [what.value - by, what.value, what.value + by].map((value) => ({
      value,
      objective: value === what.value ? best.objective : again(changed(value)),
    }))
    const known = from.filter(({ objective }) => objective !== null)
    const [first] = known
    const last = known[known.length - 1]
    const slope =
      known.length < 2
        ? null
        : ((last.objective as number) - (first.objective as number)) / (last.value - first.value)
    const step = STEP[what.dimension] ?? { step: by, words: `per ${MOVED * 100} %` }
    return { ...what, slope, perStep: slope === null ? null : { ...step, change: slope * step.step }, from }
  }
  const limits = [...new Set(best.binding)].flatMap((k) => {
    const { id, side, bound } = problem.constraints[k]
    const info = LIMITS.find((limit) => limit.id === id)
    if (id === null || !info) return []
    return [
      worth(
        { kind: 'limit', id, label: info.label, side, dimension: info.dimension, value: bound },
        (value) => withLimit(study, id, side, value),
      ),
    ]
  })
  const ends = space.axes.flatMap(({ path, label, dimension, low, high }, j) => {
    const side = best.x[j] >= high ? ('max' as const) : best.x[j] <= low ? ('min' as const) : null
    if (side === null) return []
    return [
      worth(
        { kind: 'range', id: path, label, side, dimension, value: side === 'max' ? high : low },
        (value) => withBound(study, path, side === 'max' ? low : value, side === 'max' ? value : high),
      ),
    ]
  })
  return [...limits, ...ends]
}

function withBound(study: Study, path: string, from: number, to: number): Study {
  const others = (study.optimise?.variables ?? []).filter((variable) => variable.path !== path)
  return { ...study, optimise: { variables: [...others, { path, from, to }] } }
}

/** More values of a choice than this are not each tried: only the ones beside it in the list. */
const MANY = 8

/** One discrete step away in every variable, the continuous ones re-optimised: combinations to give to `neighbourAt`. */
export function neighboursOf({ space }: Optimiser, best: Pick<Candidate, 'combination'>) {
  const digits = combinationDigits(space, best.combination)
  return space.discrete.flatMap(({ path, label, values }, j) => {
    const order = values.map((_, n) => n)
    const ordered = typeof values[0] === 'number'
    if (ordered) order.sort((a, b) => (values[a] as number) - (values[b] as number))
    const at = order.indexOf(digits[j])
    const places =
      ordered || values.length > MANY
        ? [at - 1, at + 1].filter((place) => place >= 0 && place < order.length)
        : order.map((_, place) => place).filter((place) => place !== at)
    return places.map((place) => ({
      path,
      label,
      from: values[digits[j]],
      to: values[order[place]],
      step: !ordered ? ('other' as const) : place > at ? ('next' as const) : ('previous' as const),
      combination: combinationOf(
        space,
        digits.map((digit, n) => (n === j ? order[place] : digit)),
      ),
    }))
  })
}

export function neighbourAt(
  { problem }: Optimiser,
  best: Candidate,
  { combination, ...step }: ReturnType<typeof neighboursOf>[number],
): Neighbour {
  const found = bestOfCombination(problem.open(combination), problem.axes, THOROUGH)
  if (found.status === 'feasible')
    return { ...step, best: summary(problem, best, { combination, ...found }), breaks: [], reason: null }
  const x =
    found.status === 'infeasible' && found.x.length === problem.axes.length
      ? found.x
      : problem.axes.map(({ low, high }) => Math.sqrt(low * high))
  const key = problem.keyResultsAt(combination, x)
  const outcome = key[KEY_RESULT_INDEX.outcome]
  const trial = problem.open(combination).trial(x)
  const breaks = (trial?.excess ?? [])
    .flatMap((excess, k) => {
      const id = problem.constraints[k]?.id
      return excess > 0 && Number.isFinite(excess) && id ? [{ id, excess }] : []
    })
    .sort((a, b) => b.excess - a.excess)
  return { ...step, best: null, breaks, reason: outcome === 0 ? null : OUTCOMES[outcome].text }
}

/** The best with each value of one discrete variable; `searched`: the finished search, whose bounds are used again. */
export function bestWithEach(optimiser: Optimiser, searched: SearchState, path: string): BestWith[] {
  const variable = optimiser.space.discrete.find((candidate) => candidate.path === path)
  if (!variable) throw new RangeError(`${path} is no discrete variable of the study`)
  return variable.values.map((value) => bestWith(optimiser, searched, path, value))
}

export function bestWith(
  { problem, space }: Optimiser,
  searched: SearchState,
  path: string,
  value: SweptValue,
): BestWith {
  const j = space.discrete.findIndex((candidate) => candidate.path === path)
  if (j < 0) throw new RangeError(`${path} is no discrete variable of the study`)
  const among: number[] = []
  for (let k = 0; k < space.combinations; k++) if (combinationValues(space, k)[j] === value) among.push(k)
  const state = runSearch(problem, beginSearch(space.combinations, among, searched.bounds))
  const [found] = state.leaders
  const [best] = searched.leaders
  return {
    path,
    label: space.discrete[j].label,
    value,
    best: found ? summary(problem, best ?? found, found) : null,
    isOptimum: found !== undefined && found.combination === best?.combination,
  }
}

function summary(problem: StudyProblem, best: Candidate, found: Candidate): NonNullable<BestWith['best']> {
  return {
    objective: found.objective,
    change: found.objective / best.objective - 1,
    inputs: inputsOf(problem, found),
    binding: bindingLimits(problem, found),
  }
}

export interface Why {
  worth: Worth[]
  neighbours: Neighbour[]
  /** For the fluid and the tube, and every other choice, side by side. */
  best: BestWith[]
}

/** Everything at once; a job does the parts one by one. */
export function whyOptimum(optimiser: Optimiser, searched: SearchState): Why {
  const [best] = searched.leaders
  if (!best) throw new RangeError('the search found nothing to explain')
  return {
    worth: worthOf(optimiser, best),
    neighbours: neighboursOf(optimiser, best).map((step) => neighbourAt(optimiser, best, step)),
    best: comparedPaths(optimiser).flatMap((path) => bestWithEach(optimiser, searched, path)),
  }
}

/** Discrete variables whose values are compared side by side: choices, the fluid and the tube first. */
export const comparedPaths = ({ space }: Optimiser): string[] => {
  const rank = (path: string) => (path === 'fluid' ? 0 : path.startsWith('tube') ? 1 : 2)
  return space.discrete
    .filter(({ values }) => values.length > 1 && typeof values[0] === 'string')
    .map(({ path }) => path)
    .sort((a, b) => rank(a) - rank(b))
}
