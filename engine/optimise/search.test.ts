// The whole chain on the closed-form condenser of the project's method notes, section 13.3: coolant flow M, h_i = a v^0.8,
// Fanning f = b v^-0.2, outside and wall resistance R. Their figures come from an independent calculation.
import { describe, expect, it } from 'vitest'
import type { Sign } from './falling.ts'
import { bestOnFalling } from './falling.ts'
import type { Trial } from './line.ts'
import { advance, beginSearch, doTask, type Problem, runSearch, type SearchState, tasksOf } from './search.ts'

const M = 50
const rho = 995.6
const d = 0.0157
const a = 4300
const b = 6.37166e-3
const UA = 2e5
const K = (b * rho ** 2 * UA) / (2 * M)
const outside = 1 / 6000 + 1e-4
const area = (v: number, R: number) => UA * (R + v ** -0.8 / a)
const drop = (v: number, R: number) => K * (R * v ** 2.8 + v ** 2 / a)
const length = (v: number, R: number, passes: number) => (area(v, R) * rho * v * d) / (4 * M * passes)

/** Combinations over `of`, the velocity from 0.2 to 10 m/s (or to `fastest`) along the axis. */
function problemOf<T>(
  of: readonly T[],
  trial: (choice: T, v: number) => Trial,
  falling: readonly Sign[] | null,
  fastest = 10,
): Problem & { opened: number[] } {
  let evaluations = 0
  const opened: number[] = []
  return {
    opened,
    axes: [{ low: 0.2, high: fastest }],
    combinations: of.length,
    open: (k) => {
      opened.push(k)
      return {
        trial: ([v]) => {
          evaluations++
          return trial(of[k], v)
        },
        falling: falling && { signs: falling },
      }
    },
    bound: (k) => (falling === null ? 0 : trial(of[k], fastest).objective),
    spent: () => ({ evaluations, rowMarches: evaluations }),
  }
}

const underDrop =
  (R: number, most = 40e3) =>
  (_: unknown, v: number): Trial => ({ objective: area(v, R), excess: [drop(v, R) / most - 1] })

describe.each([
  ['taking the objective as falling', true],
  ['taking nothing for granted', false],
])('the search over combinations, %s', (_, known) => {
  const signs = (...given: Sign[]) => (known ? given : null)

  it('T1: no outside resistance, the pressure drop binds; twice the drop', () => {
    const state = runSearch(problemOf(['one'], underDrop(0), signs(1)), beginSearch(1))
    const [best] = state.leaders
    expect(best.x[0]).toBeCloseTo(3.690099, 5)
    expect(best.objective).toBeCloseTo(16.365569, 4)
    expect(best.binding).toEqual([0])
    const doubled = runSearch(problemOf(['one'], underDrop(0, 80e3), signs(1)), beginSearch(1))
    expect(doubled.leaders[0].objective / best.objective).toBeCloseTo(0.75786, 5)
  })

  it('T2: with outside resistance, under the dense grid', () => {
    const state = runSearch(problemOf(['one'], underDrop(outside), signs(1)), beginSearch(1))
    const [best] = state.leaders
    expect(best.x[0]).toBeCloseTo(2.103165, 5)
    expect(best.objective).toBeCloseTo(78.993704, 4)
    expect(best.objective).toBeLessThan(78.994335)
    expect(length(best.x[0], outside, 1)).toBeCloseTo(12.984, 3)
  })

  it('T3: a cost with its least inside the range', () => {
    const alpha = (120 * UA) / a
    const beta = (0.8 * K * M) / (a * rho * 0.7)
    const cost = (_: unknown, v: number): Trial => ({
      objective: alpha * v ** -0.8 + beta * v ** 2,
      excess: [],
    })
    const [best] = runSearch(problemOf(['one'], cost, null), beginSearch(1)).leaders
    expect(best.x[0]).toBeCloseTo(2.515901, 4)
    expect(best.objective).toBeCloseTo(3735.2186, 4)
    expect((beta * best.x[0] ** 2) / (alpha * best.x[0] ** -0.8)).toBeCloseTo(0.4, 4)
    expect(best.binding).toEqual([])
  })

  const T4 = (passes: number, v: number): Trial => ({
    objective: area(v, outside),
    excess: [drop(v, outside) / 40e3 - 1, length(v, outside, passes) / 6 - 1],
  })

  it.each([
    [1, 0.6415, 119.681, 1],
    [2, 1.8886, 81.301, 1],
    [4, 2.10317, 78.994, 0],
  ])('T4: %i passes alone', (passes, v, least, binds) => {
    // Length rises with velocity here: tubes get fewer at a given coolant flow.
    const [best] = runSearch(problemOf([passes], T4, signs(1, 1), 3), beginSearch(1)).leaders
    expect(best.x[0]).toBeCloseTo(v, 4)
    expect(best.objective).toBeCloseTo(least, 3)
    expect(best.binding).toEqual([binds])
  })

  it('T4: of 1, 2 and 4 passes four are best, whatever the order and the number of workers', () => {
    const passes = [1, 2, 4]
    const problem = problemOf(passes, T4, signs(1, 1), 3)
    const straight = runSearch(problem, beginSearch(3))
    expect(passes[straight.leaders[0].combination]).toBe(4)
    expect(straight.leaders[0].objective).toBeCloseTo(78.994, 3)
    expect(length(straight.leaders[0].x[0], outside, 4)).toBeCloseTo(3.246, 3)
    // Stored as JSON after every step, the tasks done backwards by others.
    let state: SearchState = beginSearch(3)
    while (state.stage !== 'done') {
      const results = tasksOf(problem, state)
        .reverse()
        .map((task) => doTask(problemOf(passes, T4, signs(1, 1), 3), state, task))
      state = JSON.parse(JSON.stringify(advance(problem, state, results)))
    }
    expect(state).toEqual(JSON.parse(JSON.stringify(straight)))
  })
})

describe('bounds', () => {
  it('leave combinations out that cannot be best, and never the best', () => {
    // 200 tubes of resistances from small to large: the least resistance is best.
    const of = Array.from({ length: 200 }, (_, k) => 1e-4 + ((k * 37) % 200) * 2e-6)
    const trial = (R: number, v: number): Trial => ({
      objective: area(v, R),
      excess: [drop(v, R) / 40e3 - 1],
    })
    const problem = problemOf(of, trial, [1])
    const state = runSearch(problem, beginSearch(of.length))
    expect(of[state.leaders[0].combination]).toBe(1e-4)
    expect(state.leftOut + state.givenUp).toBeGreaterThan(100)
    expect(state.leftOut + state.solved).toBe(200)
    const all = of.map((_, k) => runSearch(problem, beginSearch(of.length, [k])).leaders[0].objective)
    expect(state.leaders[0].objective).toBe(Math.min(...all))
  })

  it('of equals the first is the answer', () => {
    const state = runSearch(problemOf(['a', 'b', 'c'], underDrop(outside), [1]), beginSearch(3))
    expect(state.leaders[0].combination).toBe(0)
  })

  it('a step refuses to go on without the result of a task', () => {
    const problem = problemOf(['a'], underDrop(outside), [1])
    expect(() => advance(problem, beginSearch(1), [])).toThrow(/lacks the result/)
  })
})

describe('the greatest value that every limit allows', () => {
  const along = (trial: (x: number) => Trial | null, signs: Sign[], ceiling?: number) => {
    let trials = 0
    const answer = bestOnFalling({
      low: 0.5,
      high: 5,
      signs,
      ceiling,
      trial: (x) => {
        trials++
        return trial(x)
      },
    })
    return { answer, trials }
  }

  it('is the end of the range after one trial when nothing stands against it', () => {
    const { answer, trials } = along((x) => ({ objective: 1 / x, excess: [x / 9 - 1] }), [1])
    expect(answer).toMatchObject({ kind: 'best', x: 5 })
    expect(trials).toBe(1)
  })

  it('is found within few trials where a power law meets its limit', () => {
    const { answer, trials } = along((x) => ({ objective: 1 / x, excess: [x ** 1.75 / 3 - 1] }), [1])
    expect(answer.kind).toBe('best')
    expect(answer.kind === 'best' && answer.x / 3 ** (1 / 1.75)).toBeCloseTo(1, 6)
    expect(answer.kind === 'best' && answer.trial.excess[0]).toBeLessThanOrEqual(0)
    expect(trials).toBeLessThan(8)
  })

  it('is found under a stretch that cannot be evaluated', () => {
    const { answer } = along((x) => (x > 2.2 ? null : { objective: 1 / x, excess: [x ** 3 / 8 - 1] }), [1])
    expect(answer.kind === 'best' && answer.x).toBeCloseTo(2, 6)
  })

  it('does not exist where what falls and what rises leave no room, and the least missing is shown', () => {
    const { answer } = along((x) => ({ objective: 1 / x, excess: [x / 2 - 1, 2.5 / x - 1] }), [1, -1])
    expect(answer.kind).toBe('infeasible')
    expect(along((x) => ({ objective: 1 / x, excess: [6 / x - 1] }), [-1]).answer).toMatchObject({
      kind: 'infeasible',
      x: 5,
    })
    expect(along((x) => ({ objective: 1 / x, excess: [x / 0.4 - 1] }), [1]).answer).toMatchObject({
      kind: 'infeasible',
      x: 0.5,
    })
  })

  it('is left to the general search when a limit of unknown sign is not met', () => {
    expect(along((x) => ({ objective: 1 / x, excess: [x / 2 - 1] }), [null]).answer.kind).toBe('unknown')
  })

  it('is given up once all that is left is above the ceiling', () => {
    const { answer, trials } = along((x) => ({ objective: 1 / x, excess: [x / 1 - 1] }), [1], 0.1)
    expect(answer).toMatchObject({ kind: 'above', lower: 0.2 })
    expect(trials).toBe(1)
  })
})
