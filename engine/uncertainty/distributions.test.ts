import { describe, expect, it } from 'vitest'
import { normalQuantile, quantile, studentQuantile } from './distributions.ts'
import { deviate, lognormal, sigmaOfMeanError, sigmaOfNineTenths } from './sampling.ts'

describe('distributions', () => {
  it('give the normal deviates of printed tables', () => {
    for (const [p, z] of [
      [0.5, 0],
      [0.9, 1.2815515655446004],
      [0.975, 1.959963984540054],
      [0.001, -3.090232306167813],
      [1e-10, -6.361340902404056],
      [1e-20, -9.262340089798409],
    ])
      expect(normalQuantile(p)).toBeCloseTo(z, 12)
    expect(() => normalQuantile(1)).toThrow(/above 0 and under 1/)
  })

  it("give Student's t of printed tables", () => {
    for (const [p, freedom, t] of [
      [0.975, 1, 12.7062047364],
      [0.975, 2, 4.3026527297],
      [0.95, 5, 2.0150483733],
      [0.975, 10, 2.228138852],
      [0.995, 30, 2.7499956536],
      [0.025, 10, -2.228138852],
      [0.975, 1000, 1.9623390808],
    ])
      expect(studentQuantile(p, freedom)).toBeCloseTo(t, 8)
    expect(studentQuantile(0.5, 4)).toBeCloseTo(0, 10)
  })

  it('read quantiles straight between neighbours', () => {
    expect(quantile([1, 2, 3, 4], 0.5)).toBe(2.5)
    expect(quantile([1, 2, 3, 4], 0)).toBe(1)
    expect(quantile([1, 2, 3, 4], 1)).toBe(4)
    expect(quantile([7], 0.9)).toBe(7)
    expect(quantile([1, Number.POSITIVE_INFINITY, Number.POSITIVE_INFINITY], 0.9)).toBe(
      Number.POSITIVE_INFINITY,
    )
  })

  it('turn published scatter into sigmas', () => {
    expect(sigmaOfNineTenths(0.25)).toBeCloseTo(0.1356, 4)
    expect(sigmaOfMeanError(0.1)).toBeCloseTo(0.1253, 4)
  })
})

// Resistance shares and sigmas, and what a calculation independent of this one gave for them: the project's method notes,
// check 14.1, with the standard deviation over seeds.
describe('a Latin hypercube of lognormal factors', () => {
  const shares = [0.45, 0.15, 0.1, 0.3]
  const sigmas = [0.18, 0.25, 0.4, 0.08]
  const band = (samples: number, seed: number) => {
    const sums = Float64Array.from({ length: samples }, (_, i) =>
      shares.reduce((sum, share, j) => sum + share * lognormal(sigmas[j], deviate(seed, j, i, samples)), 0),
    )
    const mean = sums.reduce((a, b) => a + b, 0) / samples
    sums.sort()
    return { p10: quantile(sums, 0.1), p50: quantile(sums, 0.5), p90: quantile(sums, 0.9), mean }
  }

  it.each([
    [200, 0.8955, 1.0128, 1.1611, [0.009, 0.005, 0.01]],
    [2000, 0.8927, 1.0137, 1.1593, [0.0025, 0.0025, 0.0025]],
  ])('of %i samples has the quantiles of the check', (samples, p10, p50, p90, [s10, s50, s90]) => {
    for (const seed of [1, 2, 3, 77]) {
      const found = band(samples, seed)
      expect(Math.abs(found.p10 - p10)).toBeLessThan(3.5 * s10)
      expect(Math.abs(found.p50 - p50)).toBeLessThan(3.5 * s50)
      expect(Math.abs(found.p90 - p90)).toBeLessThan(3.5 * s90)
      expect(found.mean).toBeCloseTo(1.0214, samples === 200 ? 2 : 3)
    }
  })

  it('is skewed more than the first order has it', () => {
    const first = Math.hypot(...shares.map((share, j) => share * sigmas[j]))
    expect(first).toBeCloseTo(0.1007, 4)
    expect(Math.exp(-1.2815515655 * first)).toBeCloseTo(0.879, 3)
    expect(Math.exp(1.2815515655 * first)).toBeCloseTo(1.138, 3)
    expect(band(2000, 1).p90).toBeGreaterThan(1.138 * 1.015)
  })

  it('puts one sample into each stratum of each column, the same bits every time', () => {
    for (const j of [0, 1, 2]) {
      const strata = Array.from({ length: 200 }, (_, i) => deviate(5, j, i, 200)).sort((a, b) => a - b)
      strata.forEach((z, k) => {
        if (k > 0) expect(z).toBeGreaterThan(normalQuantile(k / 200))
        if (k < 199) expect(z).toBeLessThan(normalQuantile((k + 1) / 200))
      })
    }
    expect(deviate(5, 1, 17, 200)).toBe(deviate(5, 1, 17, 200))
    expect(deviate(6, 1, 17, 200)).not.toBe(deviate(5, 1, 17, 200))
  })
})
