// The simplex against functions whose least is known, and against fmin's, where that one works.
import { readFileSync } from 'node:fs'
import { runInNewContext } from 'node:vm'
import { describe, expect, it } from 'vitest'
import { nelderMead } from './nelder-mead.ts'

type Fmin = { nelderMead: (f: (x: number[]) => number, start: number[]) => { x: number[]; fx: number } }
// The package calls itself an ES module and ships a script: read as what it is.
const built = { exports: {} as Fmin }
runInNewContext(readFileSync(new URL('../../node_modules/fmin/build/fmin.js', import.meta.url), 'utf8'), {
  exports: built.exports,
  module: built,
})
const fmin = built.exports

const rosenbrock = ([x, y]: readonly number[]) => (1 - x) ** 2 + 100 * (y - x * x) ** 2
const bowl = ([x, y]: readonly number[]) => (x - 3) ** 2 + 2 * (y + 1) ** 2 + 5

describe('nelderMead', () => {
  it('finds the least of a curved valley and of a bowl', () => {
    const valley = nelderMead(rosenbrock, [-1.2, 1], { steps: [0.5, 0.5], tolerance: 1e-10 })
    expect(valley.converged).toBe(true)
    expect(valley.x[0]).toBeCloseTo(1, 6)
    expect(valley.x[1]).toBeCloseTo(1, 6)
    expect(nelderMead(bowl, [0, 0], { steps: [1, 1] }).value).toBeCloseTo(5, 10)
  })

  it('comes to the same place as fmin', () => {
    const own = nelderMead(bowl, [1, 1], { steps: [0.05, 0.05], tolerance: 1e-9 })
    const other = fmin.nelderMead(bowl, [1, 1])
    expect(own.value).toBeLessThanOrEqual(other.fx + 1e-9)
    own.x.forEach((value, j) => {
      expect(value).toBeCloseTo(other.x[j], 2)
    })
  })

  it('makes every kind of move, the shrink at which fmin throws included', () => {
    const moves = { reflect: 0, expand: 0, contractOutside: 0, contractInside: 0, shrink: 0 }
    const problems: [(x: readonly number[]) => number, number[]][] = [
      [rosenbrock, [-1.2, 1]],
      [bowl, [40, 40]],
      // A ridge that no reflection or contraction improves upon.
      [
        ([x, y]) => Math.max(Math.abs(x), Math.abs(y)) + 0.2 * Math.abs(Math.sin(8 * x) * Math.sin(8 * y)),
        [1.1, 0.9],
      ],
      [([x, y]) => (x * x + y * y) ** 0.25 + Math.abs(Math.sin(20 * (x + y))), [2, 1]],
    ]
    for (const [f, start] of problems)
      for (const step of [0.01, 0.1, 1]) {
        const done = nelderMead(f, start, { steps: [step, step], maxEvaluations: 2000 })
        for (const kind of Object.keys(moves) as (keyof typeof moves)[]) moves[kind] += done.moves[kind]
      }
    for (const [kind, times] of Object.entries(moves)) expect(times, kind).toBeGreaterThan(0)
  })

  it('walks away from corners without a value, and says when its evaluations run out', () => {
    const walled = ([x, y]: readonly number[]) => (x < 1 ? Number.POSITIVE_INFINITY : bowl([x, y]))
    expect(nelderMead(walled, [1.5, 0], { steps: [-1, 1] }).x[0]).toBeCloseTo(3, 3)
    expect(nelderMead(rosenbrock, [-1.2, 1], { steps: [1, 1], maxEvaluations: 12 }).converged).toBe(false)
  })
})
