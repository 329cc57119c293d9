// Studies against exhaustive enumeration: every combination at every step of a stated grid.
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { KEY_RESULT_INDEX, KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { evaluateRange } from '#engine/sweep/evaluate-range.ts'
import { planSweep } from '#engine/sweep/plan.ts'
import { uniform } from '#engine/sweep/random.ts'
import { parseStudy, type Study } from '#engine/sweep/study.ts'
import { bestOfCombination, QUICK, THOROUGH } from './combination.ts'
import { createOptimiser, optimise } from './optimise.ts'
import type { SearchState } from './search.ts'
import { spaceOf } from './space.ts'

// biome-ignore lint/suspicious/noExplicitAny: a study file as read
type Raw = any

function study(name: string, change: (raw: Raw) => void): Study {
  const raw = JSON.parse(readFileSync(new URL(`../../studies/${name}.json`, import.meta.url), 'utf8'))
  change(raw)
  const parsed = parseStudy(raw)
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
  return parsed.study
}

/** The same study with so many steps along each continuous variable. */
function withSteps(of: Study, steps: Readonly<Record<string, number>>): Study {
  const { axes } = spaceOf(of)
  const variables = of.sweep.variables.map((variable) => {
    const axis = 'path' in variable ? axes.find(({ path }) => path === variable.path) : undefined
    return axis ? { path: axis.path, from: axis.low, to: axis.high, count: steps[axis.path] } : variable
  })
  return { ...of, sweep: { ...of.sweep, variables } }
}

function exhaustive(of: Study): number {
  const plan = planSweep(of)
  const out = new Float64Array(plan.points * KEY_RESULTS.length)
  evaluateRange(plan, 0, plan.points, out)
  const column = KEY_RESULT_INDEX[of.objective] * plan.points
  let least = Number.POSITIVE_INFINITY
  for (let i = 0; i < plan.points; i++)
    if (
      out[KEY_RESULT_INDEX.outcome * plan.points + i] === 0 &&
      out[KEY_RESULT_INDEX.limitsNotMet * plan.points + i] === 0
    )
      least = Math.min(least, out[column + i])
  return least
}

const ammonia = study('ammonia-condenser', (raw) => {
  raw.sweep.variables = [
    { catalogue: ['19.05x2.108', '25.4x2.108', '31.75x2.769'] },
    { path: 'bundle.rows', values: [6, 8, 12] },
    { path: 'bundle.tubesPerRow', values: [8, 10] },
    { path: 'bundle.passes', values: [1, 2, 4] },
    { path: 'drive.velocity', from: 1, to: 3, count: 2 },
  ]
  raw.limits.coolantPressureDrop = { max: 20_000 }
})

const PROBLEMS: [string, Study, Record<string, number>][] = [
  ['an ammonia condenser, velocity', ammonia, { 'drive.velocity': 161 }],
  [
    'a chiller condenser, wall subcooling',
    study('chiller-condenser', (raw) => {
      raw.sweep.variables = [
        { path: 'fluid', values: ['r134a', 'r290'] },
        { catalogue: ['15.875x1.245', '19.05x1.245'] },
        { path: 'bundle.rows', values: [8, 14] },
        { path: 'bundle.passes', values: [2, 4] },
        { path: 'drive.wallSubcooling', from: '3 K', to: '7.8 K', count: 13 },
      ]
      raw.limits.length = { max: '9 m' }
    }),
    { 'drive.wallSubcooling': 161 },
  ],
  [
    'a steam condenser, velocity and pitch',
    study('low-pressure-steam-condenser', (raw) => {
      raw.sweep.variables = [
        { path: 'bundle.layout', values: ['triangular30', 'square90'] },
        { path: 'bundle.rows', values: [16, 20] },
        { path: 'bundle.pitchRatio', from: 1.25, to: 1.6, count: 8 },
        { path: 'drive.velocity', from: 1.4, to: 2.6, count: 7 },
      ]
    }),
    { 'bundle.pitchRatio': 41, 'drive.velocity': 25 },
  ],
  [
    'yearly cost, velocity',
    study('ammonia-condenser', (raw) => {
      raw.objective = 'yearlyCost'
      raw.case.economics = { tubePrice: 120, energyPrice: 0.4 }
      raw.sweep.variables = [
        { path: 'bundle.rows', values: [6, 8, 12] },
        { path: 'bundle.passes', values: [2, 4] },
        { path: 'drive.velocity', from: 1, to: 2.4, count: 2 },
      ]
    }),
    { 'drive.velocity': 401 },
  ],
  [
    'a length that gives the duty, and the tube mass',
    study('ammonia-condenser', (raw) => {
      const { duty: _, ...open } = raw.case
      raw.case = open
      raw.objective = 'tubeMass'
      raw.sweep.variables = [
        { path: 'bundle.rows', values: [6, 8, 12] },
        { catalogue: ['19.05x2.108', '25.4x2.108'] },
        { path: 'bundle.length', from: 1, to: 9, count: 2 },
      ]
      raw.limits = { duty: { min: '250 kW' }, coolantPressureDrop: { max: '60 kPa' } }
    }),
    { 'bundle.length': 801 },
  ],
  [
    'length and velocity that give the duty',
    study('ammonia-condenser', (raw) => {
      const { duty: _, ...open } = raw.case
      raw.case = open
      raw.sweep.variables = [
        { path: 'bundle.rows', values: [6, 8, 12] },
        { path: 'drive.velocity', from: 1, to: 3, count: 2 },
        { path: 'bundle.length', from: 1, to: 9, count: 2 },
      ]
      raw.limits = { duty: { min: '250 kW' }, coolantPressureDrop: { max: '50 kPa' } }
    }),
    { 'bundle.length': 121, 'drive.velocity': 21 },
  ],
  [
    'coolant flow and saturation temperature',
    study('ammonia-condenser', (raw) => {
      const { velocity: _, ...drive } = raw.case.drive
      raw.case.drive = drive
      raw.sweep.variables = [
        { path: 'bundle.rows', values: [8, 12] },
        { path: 'drive.massFlow', from: 5, to: 30, count: 2 },
        { path: 'saturationTemperature', values: [306.15, 308.15] },
      ]
      raw.limits = { coolantPressureDrop: { max: 30_000 }, coolantOutletTemperature: { max: 305.15 } }
    }),
    { 'drive.massFlow': 161, saturationTemperature: 9 },
  ],
  [
    'velocity, pitch and diameter at once',
    study('low-pressure-steam-condenser', (raw) => {
      raw.sweep.variables = [
        { path: 'bundle.layout', values: ['triangular60'] },
        { path: 'bundle.rows', values: [14, 18] },
        { path: 'bundle.pitchRatio', from: 1.25, to: 1.6, count: 2 },
        { path: 'drive.velocity', from: 1.4, to: 2.6, count: 2 },
        { path: 'tube.outsideDiameter', from: 0.019, to: 0.03, count: 2 },
      ]
      raw.limits.coolantPressureDrop = { max: '10 kPa' }
      raw.optimise = { variables: [{ path: 'tube.outsideDiameter', from: 0.019, to: 0.03 }] }
    }),
    { 'bundle.pitchRatio': 13, 'drive.velocity': 13, 'tube.outsideDiameter': 13 },
  ],
  [
    'tubes chosen from the velocity',
    study('ammonia-condenser', (raw) => {
      raw.case.drive.massFlow = 12
      raw.case.bundle.tubesPerRow = 'auto'
      raw.sweep.variables = [
        { path: 'bundle.rows', values: [6, 8] },
        { path: 'bundle.passes', values: [2, 4] },
        { path: 'drive.velocity', from: 0.6, to: 2.4, count: 2 },
      ]
      raw.limits = { coolantPressureDrop: { max: 20_000 } }
    }),
    { 'drive.velocity': 301 },
  ],
]

describe('the optimum of a study', () => {
  it.each(PROBLEMS)('%s: no more than the least of a dense grid, met by its own case', (_, of, steps) => {
    const least = exhaustive(withSteps(of, steps))
    const optimum = optimise(of)
    if (optimum === null) throw new Error('nothing found')
    expect(optimum.objective).toBeLessThanOrEqual(least * (1 + 1e-9))
    expect(optimum.objective / least).toBeGreaterThan(0.98)
    const own = {
      outsideArea: optimum.result.outsideArea,
      tubeMass: optimum.result.bundle.tubeMass,
      yearlyCost: optimum.result.yearlyCost,
      pumpingPower: optimum.result.pumpingPower,
    }[of.objective]
    expect((own as number) / optimum.objective).toBeCloseTo(1, 9)
    if (optimum.rerated !== null) expect(Math.abs(optimum.rerated)).toBeLessThan(1e-7)
  })

  it.each(PROBLEMS)('%s: nothing tried is under its bound', (_, of) => {
    const { problem } = createOptimiser(of)
    let tried = 0
    for (let k = 0; k < problem.combinations; k++) {
      const bound = problem.bound(k)
      const { trial } = problem.open(k)
      for (let i = 0; i < 40; i++) {
        const x = problem.axes.map(({ low, high }, j) => low * (high / low) ** uniform(9, j, 40 * k + i))
        const found = trial(x)
        if (found === null || !found.excess.every((over) => over <= 0)) continue
        tried++
        expect(bound).not.toBe(null)
        expect(found.objective).toBeGreaterThanOrEqual((bound as number) * (1 - 1e-9))
      }
    }
    expect(tried).toBeGreaterThan(0)
  })

  it.each(['ammonia-condenser', 'chiller-condenser', 'low-pressure-steam-condenser'])(
    '%s: combinations taken as falling come to what a search without that knowledge comes to',
    (name) => {
      const { problem } = createOptimiser(study(name, () => {}))
      let feasible = 0
      for (let i = 0; i < (problem.axes.length > 1 ? 4 : 30); i++) {
        const k = Math.floor(uniform(3, 1, i) * problem.combinations)
        const known = bestOfCombination(problem.open(k), problem.axes, QUICK)
        const general = bestOfCombination({ ...problem.open(k), falling: null }, problem.axes, {
          ...THOROUGH,
          tolerance: 1e-6,
        })
        expect(known.status).toBe(general.status)
        if (known.status !== 'feasible' || general.status !== 'feasible') continue
        feasible++
        expect(known.objective / general.objective).toBeCloseTo(1, 5)
      }
      expect(feasible).toBeGreaterThan(1)
    },
  )

  it('of one value each is that one point, as the sweep has it', () => {
    const single = study('ammonia-condenser', (raw) => {
      raw.sweep.variables = [
        { path: 'bundle.rows', values: [8] },
        { path: 'drive.velocity', values: [1.5] },
      ]
    })
    const optimum = optimise(single)
    expect(optimum?.objective).toBe(exhaustive(single))
    expect(optimum?.searched).toMatchObject({ combinations: 1 })
  })

  it('is the same in any order, by other workers and after a stop', () => {
    const optimiser = createOptimiser(ammonia)
    let state: SearchState = optimiser.begin()
    while (state.stage !== 'done') {
      const another = createOptimiser(ammonia)
      const results = another
        .tasks(state)
        .reverse()
        .map((task) => another.run(state, task))
      state = JSON.parse(JSON.stringify(optimiser.advance(state, JSON.parse(JSON.stringify(results)))))
    }
    expect(optimiser.optimum(state)).toEqual(optimise(ammonia))
  })

  it('is the least of what its variables allow one by one', () => {
    const best = optimise(ammonia)
    const byPasses = [1, 2, 4].map((passes) => optimise(ammonia, { 'bundle.passes': passes }))
    const least = Math.min(...byPasses.map((found) => found?.objective ?? Number.POSITIVE_INFINITY))
    expect(best?.objective).toBe(least)
    expect(() => optimise(ammonia, { 'bundle.shape': 'circular' })).toThrow(/no discrete variable/)
  })

  it('takes every whole number of a range, only what a list names, and bounds of the study in their place', () => {
    const space = spaceOf(study('ammonia-condenser', () => {}))
    expect(space.discrete.find(({ path }) => path === 'bundle.rows')?.values).toHaveLength(13)
    expect(space.discrete.find(({ path }) => path === 'bundle.tubesPerRow')?.values).toEqual([6, 8, 10, 12])
    expect(space.axes).toMatchObject([{ path: 'drive.velocity', low: 1, high: 3 }])
    const bounded = spaceOf(
      study('ammonia-condenser', (raw) => {
        raw.optimise = {
          variables: [
            { path: 'drive.velocity', from: 0.5, to: 2 },
            { path: 'bundle.tubesPerRow', from: 6, to: 12 },
            { path: 'bundle.pitchRatio', from: 1.25, to: 1.5 },
          ],
        }
      }),
    )
    expect(bounded.axes.map(({ path, low }) => [path, low])).toEqual([
      ['drive.velocity', 0.5],
      ['bundle.pitchRatio', 1.25],
    ])
    expect(bounded.discrete.find(({ path }) => path === 'bundle.tubesPerRow')?.values).toHaveLength(7)
  })

  it('takes the same space from a sampled design', () => {
    const space = spaceOf(
      study('ammonia-condenser', (raw) => {
        raw.sweep = {
          design: 'latinHypercube',
          samples: 20,
          variables: [
            { path: 'bundle.rows', from: 4, to: 16 },
            { path: 'drive.velocity', from: 1, to: 3, scale: 'geometric' },
            { path: 'bundle.layout', values: ['triangular30', 'square90'] },
          ],
        }
      }),
    )
    expect(space.combinations).toBe(26)
    expect(space.axes).toMatchObject([{ low: 1, high: 3 }])
  })

  it('is refused over more combinations than a search takes on', () => {
    const vast = study('ammonia-condenser', (raw) => {
      raw.optimise = {
        variables: [
          { path: 'bundle.rows', from: 1, to: 400 },
          { path: 'bundle.tubesPerRow', from: 1, to: 400 },
        ],
      }
    })
    expect(() => createOptimiser(vast)).toThrow(/combinations of discrete variables; at most 200000/)
  })

  it('does not exist where the limits contradict each other', () => {
    expect(optimise({ ...ammonia, limits: { ...ammonia.limits, length: { max: 0.1 } } })).toBe(null)
  })
})
