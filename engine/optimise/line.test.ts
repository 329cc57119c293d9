import { describe, expect, it } from 'vitest'
import { bestOnLine, type Trial } from './line.ts'

// The closed-form condenser of the project's method notes, section 13.3: coolant flow M, h_i = a v^0.8, Fanning
// f = b v^-0.2, outside and wall resistance R. Their figures come from an independent calculation.
const M = 50
const rho = 995.6
const d = 0.0157
const a = 4300
const b = 6.37166e-3
const UA = 2e5
const K = (b * rho ** 2 * UA) / (2 * M)
const area = (v: number, R: number) => UA * (R + v ** -0.8 / a)
const drop = (v: number, R: number) => K * (R * v ** 2.8 + v ** 2 / a)
const length = (v: number, R: number, passes: number) => (area(v, R) * rho * v * d) / (4 * M * passes)

const underDrop =
  (R: number, dropMax: number, more: (v: number) => number[] = () => []) =>
  (v: number): Trial => ({ objective: area(v, R), excess: [drop(v, R) / dropMax - 1, ...more(v)] })

describe('least objective on a line', () => {
  it('T1: no outside resistance, the pressure drop binds', () => {
    const found = bestOnLine({ low: 0.2, high: 10, trial: underDrop(0, 40e3) })
    expect(found?.x).toBeCloseTo(3.690099, 5)
    expect(found?.objective).toBeCloseTo(16.365569, 5)
    expect(found?.binding).toEqual([0])
    expect(found?.feasible).toBe(true)
    expect(found?.excess[0]).toBeLessThanOrEqual(0)
    const doubled = bestOnLine({ low: 0.2, high: 10, trial: underDrop(0, 80e3) })
    expect((doubled?.objective ?? 0) / (found?.objective ?? 1)).toBeCloseTo(0.75786, 5)
  })

  const R = 1 / 6000 + 1e-4

  it('T2: with outside resistance, and no worse than a dense grid', () => {
    const found = bestOnLine({ low: 0.2, high: 10, trial: underDrop(R, 40e3) })
    expect(found?.x).toBeCloseTo(2.103165, 5)
    expect(found?.objective).toBeCloseTo(78.993704, 5)
    expect(length(found?.x ?? 0, R, 1)).toBeCloseTo(12.984, 3)
    expect(found?.objective).toBeLessThan(78.994335)
    expect(found?.trials).toBeLessThan(120)
  })

  it('T3: a cost with its least inside the range', () => {
    const alpha = (120 * UA) / a
    const beta = (0.8 * K * M) / (a * rho * 0.7)
    const found = bestOnLine({
      low: 0.2,
      high: 10,
      trial: (v) => ({ objective: alpha * v ** -0.8 + beta * v ** 2, excess: [] }),
    })
    expect(found?.x).toBeCloseTo(2.515901, 5)
    expect(found?.objective).toBeCloseTo(3735.2186, 3)
    const v = found?.x ?? 0
    expect((beta * v ** 2) / (alpha * v ** -0.8)).toBeCloseTo(0.4, 6)
    expect(found?.binding).toEqual([])
    expect(found?.atEnd).toBe(null)
  })

  it('T4: a length limit chooses the passes, then the pressure drop the velocity', () => {
    const best = [1, 2, 4].map((passes) => ({
      passes,
      found: bestOnLine({
        low: 0.2,
        high: 3,
        trial: underDrop(R, 40e3, (v) => [length(v, R, passes) / 6 - 1]),
      }),
    }))
    const [one, two, four] = best.map(({ found }) => found)
    expect(one?.x).toBeCloseTo(0.6415, 4)
    expect(one?.objective).toBeCloseTo(119.681, 3)
    expect(one?.binding).toEqual([1])
    expect(two?.x).toBeCloseTo(1.8886, 4)
    expect(two?.objective).toBeCloseTo(81.301, 3)
    expect(two?.binding).toEqual([1])
    expect(four?.x).toBeCloseTo(2.10317, 4)
    expect(four?.objective).toBeCloseTo(78.994, 3)
    expect(four?.binding).toEqual([0])
    expect(length(four?.x ?? 0, R, 4)).toBeCloseTo(3.246, 3)
    const winner = best.reduce((x, y) => ((x.found?.objective ?? 0) <= (y.found?.objective ?? 0) ? x : y))
    expect(winner.passes).toBe(4)
  })

  it('names the end of the range when no limit holds it back', () => {
    const found = bestOnLine({ low: 0.5, high: 3, trial: underDrop(R, 1e9) })
    expect(found?.x).toBe(3)
    expect(found?.atEnd).toBe('high')
  })

  it('without a feasible point gives the least excess and says it is not feasible', () => {
    const found = bestOnLine({ low: 1, high: 3, trial: underDrop(R, 100) })
    expect(found?.feasible).toBe(false)
    expect(found?.x).toBeCloseTo(1, 6)
    expect(found?.excess[0]).toBeCloseTo(drop(1, R) / 100 - 1, 9)
  })

  it('finds a feasible window narrower than the spacing of its first look', () => {
    // Met only between 1.50 and 1.51.
    const found = bestOnLine({
      low: 0.5,
      high: 5,
      looks: 12,
      trial: (v) => ({ objective: 1 / v, excess: [v / 1.51 - 1, 1.5 / v - 1] }),
    })
    expect(found?.feasible).toBe(true)
    expect(found?.x).toBeCloseTo(1.51, 8)
    expect(found?.binding).toEqual([0])
  })

  it('meets its limit from the side where points cannot be evaluated', () => {
    const found = bestOnLine({
      low: 0.5,
      high: 5,
      trial: (v) => (v > Math.PI / 2 ? null : { objective: -v, excess: [] }),
    })
    expect(found?.feasible).toBe(true)
    expect(found?.x).toBeCloseTo(Math.PI / 2, 8)
  })

  it('gives nothing when no point at all can be evaluated, and refuses a range that is none', () => {
    expect(bestOnLine({ low: 1, high: 2, trial: () => null })).toBe(null)
    expect(() => bestOnLine({ low: 2, high: 1, trial: () => null })).toThrow(/low first/)
  })

  it('takes a range of one value as that value', () => {
    expect(bestOnLine({ low: 2, high: 2, trial: underDrop(R, 1e9) })?.x).toBe(2)
  })
})
