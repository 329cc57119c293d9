import { readFileSync } from 'node:fs'
import { beforeAll, describe, expect, it } from 'vitest'
import { parseStudy, type Study } from '#engine/sweep/study.ts'
import { withLimit } from './feasibility.ts'
import { createOptimiser, type Optimiser, optimise } from './optimise.ts'
import { runSearch, type SearchState } from './search.ts'
import { combinationValues } from './space.ts'
import { bestWithEach, comparedPaths, type Why, whyOptimum } from './why.ts'

function study(): Study {
  const raw = JSON.parse(
    readFileSync(new URL('../../studies/ammonia-condenser.json', import.meta.url), 'utf8'),
  )
  raw.sweep.variables = [
    { path: 'fluid', values: ['r717', 'r134a'] },
    { catalogue: ['19.05x2.108', '25.4x2.108', '31.75x2.769'] },
    { path: 'bundle.rows', values: [8, 6, 10] },
    { path: 'bundle.passes', values: [2, 4] },
    { path: 'drive.velocity', from: 1, to: 3, count: 5 },
  ]
  raw.limits = { coolantPressureDrop: { max: '30 kPa' }, length: { max: '6 m' } }
  const parsed = parseStudy(raw)
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
  return parsed.study
}

describe('why an optimum is one', () => {
  const of = study()
  let optimiser: Optimiser
  let state: SearchState
  let why: Why
  beforeAll(() => {
    optimiser = createOptimiser(of)
    state = runSearch(optimiser.problem, optimiser.begin())
    why = whyOptimum(optimiser, state)
  })
  const fixed = (combination: number, change: Record<string, string | number> = {}) => {
    const values = combinationValues(optimiser.space, combination)
    return {
      ...Object.fromEntries(optimiser.space.discrete.map(({ path }, j) => [path, values[j]])),
      ...change,
    }
  }

  it('prices the limit that binds: as a search with the limit moved much further has it, with the sign of a saving', () => {
    const [best] = state.leaders
    const worth = why.worth.find(({ id }) => id === 'coolantPressureDrop')
    if (!worth?.slope || !worth.perStep) throw new Error('the pressure drop does not bind')
    expect(worth.slope).toBeLessThan(0)
    expect(worth.perStep).toMatchObject({ step: 1000, words: 'per kPa', change: worth.slope * 1000 })
    const at = (kPa: number) =>
      optimise(withLimit(of, 'coolantPressureDrop', 'max', kPa * 1000), fixed(best.combination))
        ?.objective as number
    expect((at(31.5) - at(28.5)) / 3000 / worth.slope).toBeCloseTo(1, 2)
    // A limit that does not bind is worth nothing and is not listed.
    expect(why.worth.map(({ id }) => id)).not.toContain('length')
  })

  it('prices the end of a range that stands in the way', () => {
    const open = { ...of, limits: { length: of.limits.length } }
    const other = createOptimiser(open)
    const found = whyOptimum(other, runSearch(other.problem, other.begin()))
    const worth = found.worth.find(({ id }) => id === 'drive.velocity')
    expect(worth).toMatchObject({ kind: 'range', side: 'max', value: 3 })
    expect(worth?.slope).toBeLessThan(0)
  })

  it('shows each neighbour at its own best, no better than the optimum, or what it breaks', () => {
    const [best] = state.leaders
    const values = fixed(best.combination)
    expect(new Set(why.neighbours.map(({ path }) => path))).toEqual(
      new Set(['fluid', 'tube', 'bundle.rows', 'bundle.passes']),
    )
    for (const neighbour of why.neighbours) {
      expect(neighbour.from).toBe(values[neighbour.path])
      const alone = optimise(of, fixed(best.combination, { [neighbour.path]: neighbour.to }))
      if (neighbour.best) {
        expect(neighbour.best.change).toBeGreaterThanOrEqual(0)
        expect(neighbour.best.objective / (alone?.objective as number)).toBeCloseTo(1, 6)
        expect(neighbour.breaks).toEqual([])
      } else {
        expect(alone).toBe(null)
        expect(neighbour.breaks.length + (neighbour.reason ? 1 : 0)).toBeGreaterThan(0)
      }
    }
    const rows = why.neighbours.filter(({ path }) => path === 'bundle.rows')
    for (const { from, to, step } of rows) expect((to as number) > (from as number)).toBe(step === 'next')
    expect(why.neighbours.some(({ best }) => best === null)).toBe(true)
  })

  it('finds for each fluid and each tube what a search among them alone finds', () => {
    expect(comparedPaths(optimiser)).toEqual(['fluid', 'tube'])
    expect(why.best).toHaveLength(5)
    for (const { path, value, best } of why.best)
      expect(best?.objective).toBe(optimise(of, { [path]: value })?.objective)
    expect(why.best.filter(({ isOptimum }) => isOptimum)).toHaveLength(2)
    expect(() => bestWithEach(optimiser, state, 'drive.velocity')).toThrow(/no discrete variable/)
  })
})
