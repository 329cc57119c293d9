import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { MULTIPLIER_IDS } from '#engine/bundle/multipliers.ts'
import { evaluate } from '#engine/evaluate.ts'
import { createOptimiser } from '#engine/optimise/optimise.ts'
import { runSearch } from '#engine/optimise/search.ts'
import { parseStudy, type Study } from '#engine/sweep/study.ts'
import { bandOf } from './bands.ts'
import { lengthFor, robustOptimum } from './robust.ts'

function study(): Study {
  const raw = JSON.parse(
    readFileSync(new URL('../../studies/ammonia-condenser.json', import.meta.url), 'utf8'),
  )
  raw.sweep.variables = [
    { path: 'bundle.rows', values: [8, 10, 12] },
    { path: 'bundle.passes', values: [2, 4] },
    { path: 'drive.velocity', from: 1, to: 3, count: 5 },
  ]
  raw.limits = { coolantPressureDrop: { max: '30 kPa' }, length: { max: '8 m' } }
  const parsed = parseStudy(raw)
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
  return parsed.study
}

describe('the least area that meets the duty with a given probability', () => {
  const of = study()
  const optimiser = createOptimiser(of)
  const state = runSearch(optimiser.problem, optimiser.begin())
  const options = { samples: 60, seed: 3 }

  it('is the nominal optimum where nothing is uncertain', () => {
    const sigmas = Object.fromEntries(MULTIPLIER_IDS.map((id) => [id, 0]))
    const robust = robustOptimum(optimiser, state, { ...options, probability: 0.9, sigmas })
    expect((robust?.objective as number) / state.leaders[0].objective).toBeCloseTo(1, 5)
    expect(robust?.margin).toBeCloseTo(0, 9)
  })

  it('grows with the probability, meets every limit at its length and the duty as often as asked', () => {
    let before = 0
    for (const probability of [0.5, 0.8, 0.95]) {
      const robust = robustOptimum(optimiser, state, { ...options, probability })
      if (robust === null) throw new Error('nothing found')
      expect(robust.objective).toBeGreaterThan(before)
      before = robust.objective
      const rated = evaluate(robust.case)
      expect((rated.outsideArea as number) / robust.objective).toBeCloseTo(1, 9)
      expect(rated.coolant?.pressureDrop as number).toBeLessThanOrEqual(30_000 * (1 + 1e-6))
      expect(rated.tubeLength as number).toBeLessThanOrEqual(8 * (1 + 1e-6))
      const sized = optimiser.problem.caseAt(robust.combination, robust.x)
      const band = bandOf(sized, { ...options, length: robust.length })
      expect(Math.abs((band?.meets as number) - probability)).toBeLessThan(1.5 / options.samples)
    }
  })

  it('refuses what is no probability and what has no duty', () => {
    expect(() => lengthFor(of.case, { probability: 1 })).toThrow(/above 0 and under 1/)
    const { duty: _, ...open } = of.case
    const rate = { ...open, bundle: { ...open.bundle, length: 3 } }
    expect(() => lengthFor(rate, { probability: 0.9 })).toThrow(/follows only from a duty/)
  })
})
