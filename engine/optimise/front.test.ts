import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { evaluate } from '#engine/evaluate.ts'
import { planSweep } from '#engine/sweep/plan.ts'
import { uniform } from '#engine/sweep/random.ts'
import { parseStudy, type Study } from '#engine/sweep/study.ts'
import { withLimit } from './feasibility.ts'
import { DEFAULT_FRONT, frontEnds, paretoFront, refinedFront, sweptFront } from './front.ts'
import { optimise } from './optimise.ts'

function study(velocities: number): Study {
  const raw = JSON.parse(
    readFileSync(new URL('../../studies/ammonia-condenser.json', import.meta.url), 'utf8'),
  )
  raw.sweep.variables = [
    { catalogue: ['25.4x2.108', '31.75x2.769'] },
    { path: 'bundle.rows', values: [6, 8, 10] },
    { path: 'bundle.passes', values: [2, 4] },
    { path: 'drive.velocity', from: 1, to: 2.4, count: velocities },
  ]
  raw.limits = { length: { max: '6 m' } }
  const parsed = parseStudy(raw)
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
  return parsed.study
}

describe('the front of two columns', () => {
  it('is what comparing every pair gives, in any direction', () => {
    const n = 400
    const x = Array.from({ length: n }, (_, i) => Math.round(uniform(1, 1, i) * 40))
    const y = Array.from({ length: n }, (_, i) => Math.round(uniform(1, 2, i) * 40))
    x[7] = Number.NaN
    for (const [mostX, mostY] of [
      [false, false],
      [true, false],
      [false, true],
      [true, true],
    ]) {
      const wx = mostX ? -1 : 1
      const wy = mostY ? -1 : 1
      const beats = (a: number, b: number) =>
        wx * x[a] <= wx * x[b] && wy * y[a] <= wy * y[b] && (x[a] !== x[b] || y[a] !== y[b] || a < b)
      const plain = x.flatMap((_, b) =>
        Number.isNaN(x[b]) || x.some((_, a) => a !== b && !Number.isNaN(x[a]) && beats(a, b)) ? [] : [b],
      )
      const front = paretoFront(x, y, { x: { most: mostX }, y: { most: mostY } })
      expect([...front].sort((a, b) => a - b)).toEqual(plain)
    }
    expect(paretoFront([], [])).toEqual([])
  })
})

describe('the front of a study', () => {
  const of = study(5)

  it('between the swept points has optima that no swept point of a dense sweep beats', () => {
    const refined = refinedFront(of, DEFAULT_FRONT, 6)
    expect(refined.length).toBeGreaterThan(5)
    const dense = sweptFront(planSweep(study(281)), DEFAULT_FRONT)
    for (const { x, y } of refined) {
      const under = dense.filter((point) => point.x <= x)
      for (const point of under) expect(y).toBeLessThanOrEqual(point.y * (1 + 1e-6))
    }
    for (let k = 1; k < refined.length; k++) {
      expect(refined[k].x).toBeGreaterThan(refined[k - 1].x)
      expect(refined[k].y).toBeLessThan(refined[k - 1].y)
    }
    for (const { case: found, x, y } of refined) {
      const { outsideArea, coolant } = evaluate(found)
      expect(outsideArea).toBe(y)
      expect(coolant?.pressureDrop).toBe(x)
    }
    const coarse = sweptFront(planSweep(of), DEFAULT_FRONT)
    expect(coarse.length).toBeGreaterThan(3)
    // Each swept point of the front is the optimum's equal or worse under its own pressure drop.
    for (const { x, y } of coarse) {
      const best = optimise(withLimit(of, 'coolantPressureDrop', 'max', x))
      expect(best?.objective as number).toBeLessThanOrEqual(y * (1 + 1e-6))
    }
  })

  it('ends at the least of each result', () => {
    const ends = frontEnds(of, DEFAULT_FRONT)
    expect(ends?.bestY.y).toBeCloseTo(optimise(of)?.objective as number, 3)
    const dense = sweptFront(planSweep(study(281)), DEFAULT_FRONT)
    // It gives way by a hair, so that the other result has room.
    expect(ends?.bestX.x).toBeLessThanOrEqual(dense[0].x * (1 + 1.1e-5))
  })

  it('of results that go to much as well as to little', () => {
    const axes = { x: { result: 'pumpingPower' }, y: { result: 'overallCoefficient', most: true } }
    const refined = refinedFront(of, axes, 2)
    expect(refined.length).toBeGreaterThan(2)
    for (let k = 1; k < refined.length; k++) {
      expect(refined[k].x).toBeGreaterThan(refined[k - 1].x)
      expect(refined[k].y).toBeGreaterThan(refined[k - 1].y)
    }
  })

  it('is empty where nothing meets every limit', () => {
    expect(refinedFront(withLimit(of, 'length', 'max', 0.1), DEFAULT_FRONT, 3)).toEqual([])
  })
})
