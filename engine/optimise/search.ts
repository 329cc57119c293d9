// The search over all combinations as steps that any number of workers may share: the state is plain data, a step hands
// out tasks that depend on nothing but the state, and the answer is the same whoever does them and in what order.
import {
  bestOfCombination,
  type Effort,
  type Found,
  type Opened,
  QUICK,
  type Range,
  THOROUGH,
} from './combination.ts'

export interface Problem {
  axes: readonly Range[]
  combinations: number
  open(combination: number): Opened
  /** Nothing of the combination is under this; null when none of it can meet every limit. */
  bound(combination: number): number | null
  /** What all calls so far have cost. */
  spent(): Spent
}

export interface Spent {
  evaluations: number
  /** Marches through all rows of a bundle. */
  rowMarches: number
}

export type Task =
  | { kind: 'bounds'; first: number; count: number }
  | { kind: 'solve'; combination: number; ceiling: number | null }
  | { kind: 'polish'; combination: number }

export type TaskResult = { task: Task; bounds?: (number | null)[]; found?: Found; spent: Spent }

export type Candidate = { combination: number; x: number[]; objective: number; binding: number[] }

export interface TraceStep extends Candidate, Spent {}

export interface SearchState {
  stage: 'bounds' | 'solve' | 'polish' | 'done'
  /** Only combinations for which these hold are searched; null: all. */
  among: number[] | null
  /** Of each combination searched; null: proved infeasible. */
  bounds: (number | null)[]
  /** Places in `among` (or all) in the order of their bounds. */
  order: number[]
  next: number
  waves: number
  solved: number
  /** Left out because their bound is above the best, and given up on the way for the same reason. */
  leftOut: number
  givenUp: number
  infeasible: number
  /** The best few, the best first. */
  leaders: Candidate[]
  trace: TraceStep[]
  spent: Spent
}

/** Combinations whose bounds make one task. */
const BOUNDS_A_TASK = 200
/** Tasks handed out together; the first waves are small, so that the later ones know what to beat. */
const WAVE = 32
/** Kept for what is decided among the best few, and of them looked at more closely. */
const LEADERS = 8
export const POLISHED = 3

const place = (state: SearchState, k: number): number => (state.among === null ? k : state.among[k])

/** `bounds`: of all combinations, from a search already made. */
export function beginSearch(
  combinations: number,
  among: number[] | null = null,
  bounds?: readonly (number | null)[],
): SearchState {
  const known = bounds?.length === combinations
  const taken = !known ? [] : among === null ? [...bounds] : among.map((k) => bounds[k])
  const state: SearchState = {
    stage: (among?.length ?? combinations) === 0 ? 'done' : 'bounds',
    among,
    bounds: taken,
    order: [],
    next: 0,
    waves: 0,
    solved: 0,
    leftOut: 0,
    givenUp: 0,
    infeasible: 0,
    leaders: [],
    trace: [],
    spent: { evaluations: 0, rowMarches: 0 },
  }
  return known && state.stage === 'bounds' ? ordered(state) : state
}

/** Goes on from the bounds to the combinations, the least bound first. */
function ordered(state: SearchState): SearchState {
  const bound = (k: number) => state.bounds[k] as number
  const order = Array.from(state.bounds, (_, k) => k).filter((k) => state.bounds[k] !== null)
  order.sort((a, b) => bound(a) - bound(b) || a - b)
  return {
    ...state,
    order,
    infeasible: state.bounds.length - order.length,
    next: 0,
    stage: order.length === 0 ? 'done' : 'solve',
  }
}

/** The tasks of the next step: all of them are to be done before `advance`. */
export function tasksOf(problem: Problem, state: SearchState): Task[] {
  const total = state.among?.length ?? problem.combinations
  if (state.stage === 'bounds') {
    const tasks: Task[] = []
    for (let first = state.next; first < total && tasks.length < WAVE; first += BOUNDS_A_TASK)
      tasks.push({ kind: 'bounds', first, count: Math.min(BOUNDS_A_TASK, total - first) })
    return tasks
  }
  if (state.stage === 'solve') {
    const size = Math.min(WAVE, 2 ** (state.waves + 1))
    const ceiling = state.leaders[0]?.objective ?? null
    return state.order
      .slice(state.next, state.next + size)
      .map((k) => ({ kind: 'solve', combination: place(state, k), ceiling }))
  }
  if (state.stage === 'polish')
    return state.leaders.slice(0, POLISHED).map(({ combination }) => ({ kind: 'polish', combination }))
  return []
}

/** Does one task; pure but for the count of what it costs. */
export function doTask(problem: Problem, state: Pick<SearchState, 'among'>, task: Task): TaskResult {
  const before = problem.spent()
  const result: Omit<TaskResult, 'spent'> = { task }
  if (task.kind === 'bounds')
    result.bounds = Array.from({ length: task.count }, (_, n) =>
      problem.bound(state.among === null ? task.first + n : state.among[task.first + n]),
    )
  else {
    const effort: Effort = task.kind === 'polish' ? THOROUGH : QUICK
    const opened = problem.open(task.combination)
    const ceiling = task.kind === 'solve' ? (task.ceiling ?? undefined) : undefined
    result.found = bestOfCombination(opened, problem.axes, effort, ceiling)
    if (task.kind === 'polish' && result.found.status === 'feasible' && opened.falling !== null) {
      // Once more along the first axis without taking anything as falling or rising.
      const [, ...rest] = result.found.x
      const alone = { trial: ([x]: readonly number[]) => opened.trial([x, ...rest]), falling: null }
      const general = bestOfCombination(alone, problem.axes.slice(0, 1), effort)
      if (general.status === 'feasible' && general.objective < result.found.objective)
        result.found = { ...general, x: [...general.x, ...rest] }
    }
  }
  const after = problem.spent()
  return {
    ...result,
    spent: {
      evaluations: after.evaluations - before.evaluations,
      rowMarches: after.rowMarches - before.rowMarches,
    },
  }
}

/** The state after a step, from the results of its tasks in any order. */
export function advance(problem: Problem, before: SearchState, results: readonly TaskResult[]): SearchState {
  const expected = tasksOf(problem, before)
  const state: SearchState = {
    ...before,
    bounds: [...before.bounds],
    leaders: [...before.leaders],
    trace: [...before.trace],
    spent: { ...before.spent },
  }
  const inOrder = expected.map((task) => {
    const result = results.find((candidate) => sameTask(candidate.task, task))
    if (!result) throw new RangeError(`the step lacks the result of ${JSON.stringify(task)}`)
    return result
  })
  const total = state.among?.length ?? problem.combinations
  for (const { spent } of inOrder) {
    state.spent.evaluations += spent.evaluations
    state.spent.rowMarches += spent.rowMarches
  }
  if (state.stage === 'bounds') {
    for (const { task, bounds } of inOrder)
      if (task.kind === 'bounds' && bounds) {
        state.bounds.push(...bounds)
        state.next = task.first + task.count
      }
    return state.next < total ? state : ordered(state)
  }
  const fresh = inOrder.flatMap(({ task, found }) => {
    if (task.kind === 'bounds' || !found) return []
    if (found.status === 'above') state.givenUp++
    if (found.status === 'infeasible') state.infeasible++
    return found.status === 'feasible'
      ? [{ combination: task.combination, x: found.x, objective: found.objective, binding: found.binding }]
      : []
  })
  const bestBefore = before.leaders[0]?.objective ?? Number.POSITIVE_INFINITY
  const better = (a: Candidate, b: Candidate) => a.objective - b.objective || a.combination - b.combination
  if (state.stage === 'polish') {
    // What the first search found stands unless the second finds less.
    state.leaders = before.leaders
      .map((leader) => {
        const polished = fresh.find(({ combination }) => combination === leader.combination)
        return polished && polished.objective < leader.objective ? polished : leader
      })
      .sort(better)
    state.stage = 'done'
  } else {
    state.leaders = [...state.leaders, ...fresh].sort(better).slice(0, LEADERS)
    state.solved += inOrder.length
    state.next += inOrder.length
    state.waves++
    const top = state.leaders[0]?.objective ?? Number.POSITIVE_INFINITY
    const following = state.order[state.next]
    if (following === undefined || (state.bounds[following] as number) > top) {
      state.leftOut = state.order.length - state.next
      state.stage = state.leaders.length > 0 ? 'polish' : 'done'
    }
  }
  if (state.leaders.length > 0 && state.leaders[0].objective < bestBefore)
    state.trace.push({ ...state.leaders[0], ...state.spent })
  return state
}

const sameTask = (a: Task, b: Task): boolean =>
  a.kind === 'bounds'
    ? b.kind === 'bounds' && a.first === b.first
    : b.kind === a.kind && b.combination === a.combination

/** From wherever it stands to the end, in this thread. */
export function runSearch(problem: Problem, begun: SearchState): SearchState {
  let state = begun
  while (state.stage !== 'done')
    state = advance(
      problem,
      state,
      tasksOf(problem, state).map((task) => doTask(problem, state, task)),
    )
  return state
}

/** Share of the search done, for a progress bar: bounds, then combinations, then the closer look. */
export function searchProgress(state: SearchState): { done: number; of: number } {
  const total = state.among?.length ?? state.bounds.length
  if (state.stage === 'bounds') return { done: state.next, of: Math.max(total, state.next) * 2 }
  if (state.stage === 'done') return { done: 1, of: 1 }
  return { done: state.bounds.length + state.next + state.infeasible, of: 2 * state.bounds.length }
}
