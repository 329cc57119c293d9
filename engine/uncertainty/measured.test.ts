import { describe, expect, it } from 'vitest'
import { unitMultipliers } from '#engine/bundle/multipliers.ts'
import { PointSolver } from '#engine/bundle/point-solver.ts'
import { type Case, parseCase } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import { normalQuantile } from './distributions.ts'
import { correctionFrom, fitGroup, type MeasuredPoint, parityOf } from './measured.ts'

function stand(velocity: number, inlet: number): Case {
  const parsed = parseCase({
    fluid: 'r134a',
    saturationTemperature: 313.15,
    drive: { kind: 'coolant', coolant: 'water', inletTemperature: inlet, velocity, foulingResistance: 0 },
    tube: { outsideDiameter: 0.01905, wallThickness: 0.001245, material: 'copper' },
    bundle: { layout: 'triangular30', pitchRatio: 1.25, rows: 5, tubesPerRow: 5, passes: 1, length: 2 },
  })
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
  return parsed.case
}

/** Points of a stand whose film coefficient is `factor` times the engine's, and scattered by sigma. */
function measure(factor: number, sigma: number, count: number): MeasuredPoint[] {
  return Array.from({ length: count }, (_, k) => {
    const kase = stand(1 + 0.1 * k, 300.15 + 0.5 * (k % 4))
    const solver = new PointSolver()
    solver.load(kase)
    const z = normalQuantile((((k * 7) % count) + 0.5) / count)
    solver.setMultipliers({ ...unitMultipliers(), film: factor * Math.exp(sigma * z) })
    solver.solve()
    return { name: `Point ${k + 1}`, case: kase, measured: solver.result().duty as number }
  })
}

const must = <T>(value: T | null | undefined): T => {
  if (value === null || value === undefined) throw new Error('null')
  return value
}

describe('measured points', () => {
  it('of the engine itself lie on the line of parity, with a factor of 1', () => {
    const points = measure(1, 0, 6)
    const parity = parityOf(points, 'duty')
    for (const { off, outlier } of parity.points) {
      expect(Math.abs(must(off))).toBeLessThan(1e-9)
      expect(outlier).toBe(false)
    }
    expect(parity.within.map(({ of }) => of)).toEqual([1, 1, 1])
    expect(parity.bias).toBeCloseTo(1, 9)
    const fit = must(fitGroup(points, 'duty', 'film'))
    expect(fit.factor).toBeCloseTo(1, 6)
    expect(fit.outliers).toEqual([])
  })

  it('of a stand with a known factor give that factor, whatever the result measured', () => {
    const fit = must(fitGroup(measure(1.17, 0, 6), 'duty', 'film'))
    expect(fit.factor).toBeCloseTo(1.17, 5)
    expect(must(fit.interval).high - must(fit.interval).low).toBeLessThan(1e-4)
    expect(fit.statement).toMatch(
      /^Film, quiescent vapour: factor 1\.17 \(95 % between 1\.17 and 1\.17\) from 6 of 6 points/,
    )
  })

  it('have the interval that Student gives for their scatter', () => {
    const fit = must(fitGroup(measure(0.9, 0.08, 10), 'duty', 'film'))
    const logs = fit.points.map(({ factor }) => Math.log(must(factor)))
    const mean = logs.reduce((a, b) => a + b, 0) / 10
    const sd = Math.sqrt(logs.reduce((sum, log) => sum + (log - mean) ** 2, 0) / 9)
    expect(fit.factor).toBeCloseTo(Math.exp(mean), 9)
    expect(must(fit.interval).low).toBeCloseTo(Math.exp(mean - (2.2621571628 * sd) / Math.sqrt(10)), 7)
    expect(must(fit.interval).high).toBeCloseTo(Math.exp(mean + (2.2621571628 * sd) / Math.sqrt(10)), 7)
    expect(must(fit.interval).low).toBeLessThan(0.9)
    expect(must(fit.interval).high).toBeGreaterThan(0.9)
    expect(fit.scatter).toBeCloseTo(sd, 9)
  })

  it('far off the others are named and left out', () => {
    const points = measure(1.1, 0.03, 9)
    points[4] = { ...points[4], name: 'Vent closed', measured: 0.75 * points[4].measured }
    const fit = must(fitGroup(points, 'duty', 'film'))
    expect(fit.outliers).toEqual(['Vent closed'])
    expect(fit.used).toBe(8)
    expect(fit.factor).toBeCloseTo(1.1, 1)
    expect(fit.withOutliers.factor).toBeLessThan(fit.factor)
    expect(fit.statement).toContain('left out as outliers: Vent closed')
    const parity = parityOf(points, 'duty')
    expect(parity.points.filter(({ outlier }) => outlier).map(({ name }) => name)).toEqual(['Vent closed'])
  })

  it('corrected by their fit lie on the line', () => {
    const points = measure(1.17, 0, 4)
    const correction = correctionFrom(must(fitGroup(points, 'duty', 'film')), 'Stand B', 'run of March')
    const corrected = points.map((point) => ({
      ...point,
      case: { ...point.case, corrections: [correction] },
    }))
    for (const { off } of parityOf(corrected, 'duty').points) expect(Math.abs(must(off))).toBeLessThan(1e-5)
    expect(evaluate(corrected[0].case).duty).not.toBe(evaluate(points[0].case).duty)
  })

  it('without a prediction, out of reach or of a result that the factor does not move carry the reason', () => {
    const [first, second, third] = measure(1, 0, 3)
    const impossible = { ...first, case: { ...first.case, saturationTemperature: 290 } }
    const beyond = { ...second, measured: 50 * second.measured }
    const parity = parityOf([impossible, second], 'duty')
    expect(parity.points[0]).toMatchObject({ predicted: null, off: null, outlier: false })
    expect(parity.points[0].reason).toMatch(/nothing condenses/)
    const fit = must(fitGroup([impossible, beyond, third], 'duty', 'film'))
    expect(fit.used).toBe(1)
    expect(fit.interval).toBe(null)
    expect(fit.points.map(({ reason }) => reason !== null)).toEqual([true, true, false])
    expect(fitGroup([third], 'duty', 'foulingInside')).toBe(null)
    expect(parityOf([], 'duty')).toMatchObject({ bias: null, meanError: null, points: [] })
  })
})
