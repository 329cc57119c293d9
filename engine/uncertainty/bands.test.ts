import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { MULTIPLIER_IDS } from '#engine/bundle/multipliers.ts'
import { type Case, type CaseInput, parseCase } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import { parseStudy, type Study } from '#engine/sweep/study.ts'
import { bandOf, REPORT } from './bands.ts'
import { quantile } from './distributions.ts'

function checked(input: CaseInput): Case {
  const parsed = parseCase(input)
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
  return parsed.case
}

function shipped(name: string): Study {
  const parsed = parseStudy(
    JSON.parse(readFileSync(new URL(`../../studies/${name}.json`, import.meta.url), 'utf8')),
  )
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
  return parsed.study
}

const ammonia = shipped('ammonia-condenser').case
const steam = shipped('low-pressure-steam-condenser').case
const chiller = shipped('chiller-condenser').case
const CERTAIN = Object.fromEntries(MULTIPLIER_IDS.map((id) => [id, 0]))

const must = <T>(value: T | null): T => {
  if (value === null) throw new Error('null')
  return value
}

describe('the band of a required area', () => {
  it.each([
    ['ammonia', ammonia],
    ['steam', steam],
    ['a given subcooling', chiller],
  ])('%s: lies around the nominal, whose length half of the samples or so meet the duty with', (_, kase) => {
    const band = must(bandOf(kase))
    expect(band.question).toBe('size')
    expect(band.nominal).toBe(evaluate(kase).outsideArea)
    expect(must(band.p10)).toBeLessThan(band.nominal)
    expect(must(band.p90)).toBeGreaterThan(band.nominal)
    expect(must(band.p50) / band.nominal).toBeGreaterThan(0.97)
    expect(must(band.p50) / band.nominal).toBeLessThan(1.05)
    expect(band.meets).toBeGreaterThan(0.35)
    expect(band.meets).toBeLessThan(0.6)
    expect(band.statement).toMatch(
      /^Required area .* in eight of ten cases .* of samples meet the duty with /,
    )
  })

  it('repeats bit for bit with its seed, and moves with another', () => {
    const first = bandOf(ammonia, { samples: 50, seed: 7 })
    expect(bandOf(ammonia, { samples: 50, seed: 7 })).toEqual(first)
    expect(bandOf(ammonia, { samples: 50, seed: 8 })?.p50).not.toBe(first?.p50)
  })

  it('closes on the nominal with no scatter', () => {
    const band = must(bandOf(ammonia, { samples: 20, sigmas: CERTAIN }))
    expect([band.p10, band.p50, band.p90]).toEqual([band.nominal, band.nominal, band.nominal])
    expect(band).toMatchObject({ meets: 1, groups: [], most: null, mostByRerates: true })
  })

  it('has elasticities as the first-order formula gives them, where vapour is still and rows are few', () => {
    const kase = checked({
      ...(ammonia as CaseInput),
      bundle: { ...(ammonia.bundle as CaseInput['bundle']), rows: 1, passes: 1, tubesPerRow: 60 },
    })
    const band = must(bandOf(kase, { samples: 20 }))
    for (const id of ['film', 'tubeSide', 'foulingInside', 'foulingOutside', 'wall']) {
      const group = must(band.groups.find((candidate) => candidate.id === id) ?? null)
      expect(must(group.firstOrder)).toBeCloseTo(must(group.elasticity), 2)
    }
    const sum = band.groups.reduce((total, { firstOrder }) => total + Math.abs(firstOrder ?? 0), 0)
    expect(sum).toBeCloseTo(1, 9)
  })

  it('gives the most important group as re-rates by one percent do, with shares that make up the whole', () => {
    for (const kase of [ammonia, steam]) {
      const band = must(bandOf(kase, { samples: 500 }))
      expect(band.most).toBe(band.groups[0].id)
      expect(band.mostByRerates).toBe(true)
      const total = band.groups.reduce((sum, { share }) => sum + share, 0)
      expect(total).toBeGreaterThan(0.9)
      expect(total).toBeLessThan(1.1)
      for (const { share, shareFirstOrder } of band.groups)
        expect(Math.abs(share - shareFirstOrder)).toBeLessThan(0.1)
    }
  })

  it('follows the lognormal of its one factor', () => {
    // A given subcooling: area is inversely proportional to the film's coefficient.
    const still = { ...chiller, methods: { ...chiller.methods, vapourShear: 'none' as const } }
    const band = must(bandOf(still, { samples: REPORT, sigmas: { ...CERTAIN, film: 0.1 } }))
    const z = 1.2815515655446
    expect(must(band.p10) / band.nominal).toBeCloseTo(Math.exp(-0.1 * z), 2)
    expect(must(band.p90) / band.nominal).toBeCloseTo(Math.exp(0.1 * z), 2)
    expect(must(band.p50) / band.nominal).toBeCloseTo(1, 3)
    expect(band.meets).toBeCloseTo(0.5, 2)
    expect(band.groups[0].elasticity).toBeCloseTo(-1, 5)
  })

  it('judges a longer tube as more certain', () => {
    const { length } = must(bandOf(ammonia, { samples: 50 }))
    const longer = must(bandOf(ammonia, { length: 1.2 * must(length) }))
    const shorter = must(bandOf(ammonia, { length: 0.8 * must(length) }))
    expect(longer.meets).toBeGreaterThan(0.7)
    expect(shorter.meets).toBeLessThan(0.2)
    // As many as the quantiles of the area say.
    const { quantiles, nominal } = longer
    const share = quantiles.filter(({ value }) => must(value) <= 1.2 * nominal).map(({ p }) => p)
    expect(longer.meets).toBeGreaterThanOrEqual(share[share.length - 1] - 0.01)
  })

  it('counts samples that no length is enough for against the area', () => {
    const { duty: _, ...open } = ammonia
    const most = must(evaluate({ ...open, bundle: { ...ammonia.bundle, length: 60 } }).duty)
    const band = must(bandOf({ ...ammonia, duty: 0.995 * most }, { sigmas: { vapourDrop: 3 } }))
    expect(band.p10).not.toBe(null)
    for (const { count, code } of band.failures) {
      expect(count).toBeGreaterThan(0)
      expect(code).not.toBe('evaluated')
    }
  })

  it('is of the duty where the length is given, and its chance to meet a target', () => {
    const { duty, ...open } = ammonia
    const length = must(evaluate(ammonia).tubeLength)
    const band = must(bandOf({ ...open, bundle: { ...ammonia.bundle, length } }, { target: duty }))
    const sized = must(bandOf(ammonia))
    expect(band.quantity).toBe('duty')
    expect(band.nominal / must(duty ?? null)).toBeCloseTo(1, 7)
    // The same question asked the other way round.
    expect(band.meets).toBe(sized.meets)
    expect(bandOf({ ...open, bundle: { ...ammonia.bundle, length } })?.meets).toBe(null)
  })

  it('does not exist where the point itself has no result', () => {
    expect(bandOf({ ...ammonia, duty: 1e9 })).toBe(null)
  })

  it('has its quantiles in order', () => {
    const { quantiles } = must(bandOf(steam))
    const values = quantiles.map(({ value }) => must(value))
    expect([...values].sort((a, b) => a - b)).toEqual(values)
    expect(quantile(values, 0.5)).toBe(values[4])
  })
})
