// The optimum of a study: all its combinations, the continuous variables of each, under its limits.
//
//   const optimiser = createOptimiser(study)
//   let state = optimiser.begin()
//   while (state.stage !== 'done')
//     state = optimiser.advance(state, optimiser.tasks(state).map((task) => optimiser.run(state, task)))
//   optimiser.optimum(state)
//
// The state is JSON: stored after a step, a search goes on from it elsewhere. Tasks of one step may run anywhere.

import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { type Case, parseCase } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import type { Result } from '#engine/result.ts'
import { LIMITS, type LimitId } from '#engine/sweep/limits.ts'
import { OBJECTIVE_LABELS, objectiveColumn } from '#engine/sweep/objective.ts'
import { findSweepPath } from '#engine/sweep/paths.ts'
import type { Study, SweptValue } from '#engine/sweep/study.ts'
import { formatQuantity } from '#engine/units.ts'
import {
  advance,
  beginSearch,
  type Candidate,
  doTask,
  runSearch,
  type SearchState,
  type Spent,
  searchProgress,
  type Task,
  type TaskResult,
  type TraceStep,
  tasksOf,
} from './search.ts'
import { combinationValues, type Space } from './space.ts'
import { StudyProblem } from './study-problem.ts'

/** The most combinations a search takes on: each needs at least one evaluation. */
export const MAX_COMBINATIONS = 200_000

export interface OptimumInput {
  path: string
  label: string
  value: SweptValue
  /** A continuous variable on an end of its range. */
  atEnd: 'low' | 'high' | null
}

export interface Optimum {
  combination: number
  x: number[]
  inputs: OptimumInput[]
  case: Case
  result: Result
  objective: number
  /** Limits on which it lies. */
  binding: LimitId[]
  /** The length found, rated again: by how much the duty differs, relative. Null where the length is given. */
  rerated: number | null
  trace: TraceStep[]
  searched: {
    combinations: number
    /** Proved to hold nothing that meets every limit, or searched and found so. */
    infeasible: number
    /** Bound above the optimum: never searched. */
    leftOut: number
    /** Searched until what is left of them was above the best. */
    givenUp: number
    solved: number
  } & Spent
  statement: string
}

export interface Optimiser {
  study: Study
  space: Space
  problem: StudyProblem
  /** `fixed`: only combinations with these values of discrete variables, by path. */
  begin(fixed?: Readonly<Record<string, SweptValue>>): SearchState
  tasks(state: SearchState): Task[]
  run(state: Pick<SearchState, 'among'>, task: Task): TaskResult
  advance(state: SearchState, results: readonly TaskResult[]): SearchState
  progress(state: SearchState): { done: number; of: number }
  /** Null when the search is done and nothing meets every limit. */
  optimum(state: SearchState): Optimum | null
}

export function createOptimiser(study: Study): Optimiser {
  const problem = new StudyProblem(study)
  const { space } = problem
  if (space.combinations > MAX_COMBINATIONS)
    throw new RangeError(
      `${space.combinations} combinations of discrete variables; at most ${MAX_COMBINATIONS}: give fewer values`,
    )
  return {
    study,
    space,
    problem,
    begin: (fixed = {}) => beginSearch(space.combinations, combinationsWith(space, fixed)),
    tasks: (state) => tasksOf(problem, state),
    run: (state, task) => doTask(problem, state, task),
    advance: (state, results) => advance(problem, state, results),
    progress: searchProgress,
    optimum: (state) => (state.leaders.length === 0 ? null : optimumOf(problem, state)),
  }
}

/** The whole search in this thread. */
export function optimise(study: Study, fixed?: Readonly<Record<string, SweptValue>>): Optimum | null {
  const optimiser = createOptimiser(study)
  return optimiser.optimum(runSearch(optimiser.problem, optimiser.begin(fixed)))
}

function combinationsWith(space: Space, fixed: Readonly<Record<string, SweptValue>>): number[] | null {
  const paths = Object.keys(fixed)
  if (paths.length === 0) return null
  for (const path of paths)
    if (!space.discrete.some((variable) => variable.path === path))
      throw new RangeError(`${path} is no discrete variable of the study`)
  return Array.from({ length: space.combinations }, (_, k) => k).filter((k) => {
    const values = combinationValues(space, k)
    return space.discrete.every(({ path }, j) => !(path in fixed) || fixed[path] === values[j])
  })
}

function optimumOf(problem: StudyProblem, state: SearchState): Optimum {
  const { study } = problem
  const [best] = state.leaders
  const checked = parseCase(problem.caseAt(best.combination, best.x))
  if (!checked.ok) throw new RangeError(`the optimum is no case: ${JSON.stringify(checked.faults)}`)
  const result = evaluate(checked.case)
  const inputs = inputsOf(problem, best)
  const binding = bindingLimits(problem, best)
  const { combinations } = problem
  return {
    combination: best.combination,
    x: best.x,
    inputs,
    case: checked.case,
    result,
    objective: best.objective,
    binding,
    rerated: ratedAgain(checked.case, result),
    trace: state.trace,
    searched: {
      combinations: state.among?.length ?? combinations,
      infeasible: state.infeasible,
      leftOut: state.leftOut,
      givenUp: state.givenUp,
      solved: state.solved,
      ...state.spent,
    },
    statement: statementOf(study, best.objective, inputs, binding),
  }
}

export function inputsOf(
  { space }: StudyProblem,
  { combination, x }: Pick<Candidate, 'combination' | 'x'>,
): OptimumInput[] {
  const values = combinationValues(space, combination)
  return [
    ...space.discrete.map(({ path, label }, j) => ({ path, label, value: values[j], atEnd: null })),
    ...space.axes.map(({ path, label, low, high }, j) => ({
      path,
      label,
      value: x[j],
      atEnd: x[j] >= high ? ('high' as const) : x[j] <= low ? ('low' as const) : null,
    })),
  ]
}

export const bindingLimits = (
  { constraints }: StudyProblem,
  { binding }: Pick<Candidate, 'binding'>,
): LimitId[] => [...new Set(binding.map((k) => constraints[k].id).filter((id): id is LimitId => id !== null))]

function ratedAgain(kase: Case, result: Result): number | null {
  if (kase.duty === undefined || result.tubeLength === null || kase.drive.kind !== 'coolant') return null
  const { duty, ...open } = kase
  const rated = evaluate({ ...open, bundle: { ...kase.bundle, length: result.tubeLength } })
  return rated.duty === null ? null : rated.duty / duty - 1
}

function statementOf(
  study: Study,
  objective: number,
  inputs: readonly OptimumInput[],
  binding: readonly LimitId[],
): string {
  const { dimension } = KEY_RESULTS[objectiveColumn(study.objective)]
  const where = inputs.map(({ path, label, value }) => {
    const words = label.toLowerCase()
    return typeof value === 'string' || findSweepPath(path)?.dimension === 'count'
      ? `${words} ${value}`
      : `${words} ${formatQuantity(value, findSweepPath(path)?.dimension ?? 'none', 'si', { digits: 4 })}`
  })
  const on = binding.map((id) => LIMITS.find((limit) => limit.id === id)?.label.toLowerCase() ?? id)
  const least = formatQuantity(objective, dimension, 'si', { digits: 4 })
  return `Least ${OBJECTIVE_LABELS[study.objective].toLowerCase()} ${least} at ${where.join(', ')}${
    on.length > 0 ? `; at its limit: ${on.join(', ')}` : '; no limit binds'
  }.`
}
