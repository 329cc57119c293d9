import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { parseStudy, type Study } from '#engine/sweep/study.ts'
import { certify, TOLERANCE } from './certificate.ts'
import { explainInfeasible, relaxable, relaxationOf, withLimit } from './feasibility.ts'
import { createOptimiser, optimise } from './optimise.ts'
import { runSearch } from './search.ts'

// biome-ignore lint/suspicious/noExplicitAny: a study file as read
type Raw = any

function study(name: string, change: (raw: Raw) => void): Study {
  const raw = JSON.parse(readFileSync(new URL(`../../studies/${name}.json`, import.meta.url), 'utf8'))
  change(raw)
  const parsed = parseStudy(raw)
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
  return parsed.study
}

const small = (limits: Raw, more: (raw: Raw) => void = () => {}) =>
  study('ammonia-condenser', (raw) => {
    raw.sweep.variables = [
      { catalogue: ['25.4x2.108', '31.75x2.769'] },
      { path: 'bundle.rows', values: [6, 8] },
      { path: 'bundle.passes', values: [2, 4] },
      { path: 'drive.velocity', from: 1, to: 3, count: 5 },
    ]
    raw.limits = limits
    more(raw)
  })

function searched(of: Study) {
  const optimiser = createOptimiser(of)
  return { optimiser, state: runSearch(optimiser.problem, optimiser.begin()) }
}

describe('the certificate of an optimum', () => {
  it('holds where nothing on two grids and in the sweep is better, and says how that was seen', () => {
    const { optimiser, state } = searched(small({ coolantPressureDrop: { max: '30 kPa' } }))
    const certificate = certify(optimiser, state)
    expect(certificate.holds).toBe(true)
    expect(certificate.checks.map(({ points }) => points)).toEqual([2 * 361, 81, 40])
    for (const { under, feasible } of certificate.checks) {
      expect(feasible).toBeGreaterThan(0)
      expect(under).toBeLessThanOrEqual(TOLERANCE)
    }
    expect(certificate.statement).toMatch(/^Of 843 points none is better by more than 0.05 %/)
    expect(certificate.statement).toContain('coolant velocity over the whole range, 361 steps')
  })

  it('holds for two variables together', () => {
    const { optimiser, state } = searched(
      study('low-pressure-steam-condenser', (raw) => {
        raw.sweep.variables = [
          { path: 'bundle.rows', values: [16] },
          { path: 'bundle.pitchRatio', from: 1.25, to: 1.6, count: 3 },
          { path: 'drive.velocity', from: 1.4, to: 2.6, count: 3 },
        ]
      }),
    )
    const certificate = certify(optimiser, state)
    expect(certificate.holds).toBe(true)
    expect(certificate.checks[0].points).toBe(61 * 61)
  })

  it('does not hold for a place that is no optimum, and says by how much', () => {
    const { optimiser, state } = searched(small({ coolantPressureDrop: { max: '30 kPa' } }))
    const [best] = state.leaders
    const worse = { ...best, objective: best.objective * 1.02 }
    const certificate = certify(optimiser, { ...state, leaders: [worse] })
    expect(certificate.holds).toBe(false)
    expect(certificate.statement).toMatch(/^Not the optimum: a point is (2|1\.9\d*|2\.0) % better/)
  })

  it('takes what a finished run found for a sweep of its own', () => {
    const { optimiser, state } = searched(small({ coolantPressureDrop: { max: '30 kPa' } }))
    const certificate = certify(optimiser, state, { points: 7, feasible: 1, least: 1 })
    expect(certificate.holds).toBe(false)
    expect(certificate.checks[2]).toMatchObject({ points: 7, least: 1 })
  })
})

describe('a study in which nothing meets every limit', () => {
  it.each([
    ['length against pressure drop', small({ length: { max: 3 }, coolantPressureDrop: { max: '8 kPa' } })],
    ['a velocity that the range does not reach', small({ coolantVelocity: { min: 3.2 } })],
    [
      'an outlet that is too warm',
      small({ coolantOutletTemperature: { max: '27.9 degC' }, length: { max: 8 } }),
    ],
    ['a bundle that does not fit', small({ bundleWidth: { max: 0.2 }, length: { max: 8 } })],
    [
      'a duty that the length does not give',
      small({ duty: { min: '250 kW' }, coolantPressureDrop: { max: '30 kPa' } }, (raw) => {
        const { duty: _, ...open } = raw.case
        raw.case = { ...open, bundle: { ...open.bundle, length: 1.5 } }
      }),
    ],
  ])('%s: the value that it names makes it feasible', (_, of) => {
    expect(optimise(of)).toBe(null)
    const { relaxations, statement } = explainInfeasible(of)
    expect(relaxations.length).toBeGreaterThan(0)
    for (const { id, side, to, from, objective } of relaxations) {
      expect(side === 'max' ? to > from : to < from).toBe(true)
      const relaxed = optimise(withLimit(of, id, side, to))
      expect(relaxed?.objective).toBe(objective)
      // The least that does, but for rounding.
      const step = id === 'coolantOutletTemperature' ? 0.15 : 0.011 * to
      const less = side === 'max' ? to - step : to + step
      expect(optimise(withLimit(of, id, side, less))).toBe(null)
    }
    expect(statement).toMatch(/^Nothing meets every limit\. The smallest change that helps: /)
    expect(
      relaxable(of)
        .map((limit) => relaxationOf(of, limit)?.to)
        .filter((to) => to !== undefined)
        .sort(),
    ).toEqual(relaxations.map(({ to }) => to).sort())
  })

  it('names all limits together where no single one is enough', () => {
    const of = small({ length: { max: 1 }, coolantPressureDrop: { max: '50 Pa' }, bundleWidth: { max: 0.1 } })
    const { relaxations, together, statement } = explainInfeasible(of)
    expect(relaxations).toEqual([])
    expect(together.length).toBeGreaterThan(1)
    expect(statement).toContain('no single one is to blame')
    const relaxed = together.reduce((study, { id, side, to }) => withLimit(study, id, side, to), of)
    expect(optimise(relaxed)).not.toBe(null)
  })

  it('says that its objective has no value where nothing can give it one', () => {
    const of = study('chiller-condenser', (raw) => {
      raw.objective = 'pumpingPower'
      raw.limits = { length: { max: '9 m' } }
      raw.case.drive.coolant = undefined
      raw.sweep.variables = raw.sweep.variables.slice(2, 3)
    })
    expect(optimise(of)).toBe(null)
    expect(explainInfeasible(of)).toMatchObject({
      relaxations: [],
      statement:
        'Pumping power has no value in this study. What helps: a coolant in the case, or another objective.',
    })
  })

  it('says what is wrong where nothing can be evaluated at all', () => {
    const of = small({}, (raw) => {
      raw.case.duty = '250 MW'
    })
    expect(optimise(of)).toBe(null)
    expect(explainInfeasible(of).statement).toMatch(
      /^No combination can be evaluated, most often because no length/,
    )
  })
})
