// The facts that hold for this calculation, and only those.
import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { type CaseInput, parseCase } from '#engine/case.ts'
import { butterworth } from '#engine/correlations/shear.ts'
import { evaluate } from '#engine/evaluate.ts'
import { fluidModel } from '#engine/fluids/index.ts'
import type { Result } from '#engine/result.ts'
import { cases } from './case-space.ts'

const RUNS = Math.ceil(Number(process.env.PROPERTY_RUNS ?? 5000) / 10)
const MINUTES = RUNS > 500 ? 120 : 2
const options = { numRuns: RUNS, seed: 20261202, endOnFailure: true }

function result(input: CaseInput): Result {
  const parsed = parseCase(input)
  if (!parsed.ok) throw new Error(parsed.faults.map((f) => `${f.path}: ${f.problem}; ${f.remedy}`).join('\n'))
  return evaluate(parsed.case)
}
const real = (min: number, max: number) => fc.double({ min, max, noNaN: true })

/** Cases of the coolant drive by velocity that rate a length, with default methods. */
const rated = cases
  .filter((c) => c.drive.kind === 'coolant' && 'velocity' in c.drive && c.bundle.length !== undefined)
  .map((c) => ({ ...c, methods: {} }))
/** The same for given subcooling. */
const subcooled = cases
  .filter((c) => c.drive.kind === 'wallSubcooling' && c.bundle.length !== undefined)
  .map((c) => ({ ...c, drive: { ...c.drive, coolant: undefined } as CaseInput['drive'] }))

describe('given subcooling', () => {
  it(
    'has a duty proportional to length',
    () => {
      fc.assert(
        fc.property(subcooled, real(0.3, 30), (input, length) => {
          const one = result({ ...input, bundle: { ...input.bundle, length: 1 } })
          fc.pre(one.duty !== null)
          const other = result({ ...input, bundle: { ...input.bundle, length } })
          expect((other.duty as number) / (one.duty as number) / length).toBeCloseTo(1, 9)
        }),
        options,
      )
    },
    MINUTES * 60_000,
  )

  it(
    'has a duty proportional to the tubes per row of an in-line bundle',
    () => {
      fc.assert(
        fc.property(subcooled, fc.integer({ min: 1, max: 100 }), (input, tubesPerRow) => {
          const bundle = { ...input.bundle, shape: 'rectangular' as const, layout: 'square90' as const }
          const one = result({ ...input, bundle: { ...bundle, tubesPerRow: 1 } })
          fc.pre(one.duty !== null)
          const other = result({ ...input, bundle: { ...bundle, tubesPerRow } })
          expect((other.duty as number) / (one.duty as number) / tubesPerRow).toBeCloseTo(1, 8)
        }),
        options,
      )
    },
    MINUTES * 60_000,
  )

  const fixed = fc.record({
    liquidDensity: real(500, 1500),
    latentHeat: real(1e5, 2.5e6),
    liquidViscosity: real(1e-4, 1e-3),
    liquidConductivity: real(0.05, 0.7),
    vapourDensity: real(0.01, 100),
    liquidSpecificHeat: real(900, 5000),
  })
  const still = (
    properties: CaseInput['fluid'],
    wallSubcooling: number,
    layout: string,
    outsideDiameter: number,
  ) =>
    result({
      fluid: properties,
      saturationTemperature: 320,
      drive: { kind: 'wallSubcooling', wallSubcooling },
      tube: { outsideDiameter },
      bundle: { layout: layout as 'square90', pitchRatio: 1.5, rows: 12, tubesPerRow: 3, length: 1 },
      methods: { latentHeat: 'plain', vapourShear: 'none', vapourPressureDrop: 'none' },
    })

  it.each([
    ['triangular30', 0.16],
    ['square90', 0.22],
  ])('in still vapour at constant properties the row factors solve H^(1−s) = S^(−s): %s', (layout, s) => {
    fc.assert(
      fc.property(fixed, real(0.1, 50), real(0.006, 0.06), (properties, x, diameter) => {
        const { rows } = still({ properties }, x, layout, diameter)
        let sum = 0
        for (const row of rows) {
          const H = row.heatFlux / rows[0].heatFlux
          sum += H
          expect(H ** (1 - s) * sum ** s).toBeCloseTo(1, 9)
          expect(row.factors.inundation).toBeCloseTo(H, 9)
        }
      }),
      options,
    )
  })

  it('with plain latent heat the duty goes as subcooling^(3/4) in still vapour', () => {
    fc.assert(
      fc.property(fixed, real(0.1, 25), (properties, x) => {
        const one = still({ properties }, x, 'triangular30', 0.019)
        const two = still({ properties }, 2 * x, 'triangular30', 0.019)
        expect((two.duty as number) / (one.duty as number)).toBeCloseTo(2 ** 0.75, 9)
      }),
      options,
    )
  })
})

it('Butterworth lies between the larger of its two limits and their root sum square', () => {
  fc.assert(
    fc.property(real(0, 30), real(0, 20), (lnG4, lnRe) => {
      const gravity = 0.416 * 9.47 ** 0.25 * Math.exp(lnG4) ** 0.25
      const shear = 0.416 * Math.SQRT2 * Math.exp(lnRe) ** 0.5
      const nusselt = butterworth(Math.exp(lnRe), Math.exp(lnG4))
      expect(nusselt).toBeGreaterThanOrEqual(Math.max(gravity, shear) * (1 - 1e-12))
      expect(nusselt).toBeLessThanOrEqual(Math.hypot(gravity, shear) * (1 + 1e-12))
    }),
    options,
  )
})

describe('coolant drive', () => {
  const velocityOf = (input: CaseInput) => (input.drive as { velocity: number }).velocity
  const cp = (r: Result) =>
    (r.duty as number) / ((r.coolant?.outletTemperature as number) - (r.coolant?.inletTemperature as number))

  it(
    'has a duty that rises with velocity and stays under what the coolant can take up',
    () => {
      fc.assert(
        fc.property(rated, real(1.01, 3), (input, more) => {
          const one = result(input)
          const two = result({
            ...input,
            drive: { ...input.drive, velocity: velocityOf(input) * more } as CaseInput['drive'],
          })
          fc.pre(one.duty !== null && two.duty !== null)
          expect(two.duty as number).toBeGreaterThan((one.duty as number) * (1 - 1e-9))
          const Ts = one.rows[0].saturationTemperature
          const reach = Ts - (one.coolant?.inletTemperature as number)
          expect(one.duty as number).toBeLessThanOrEqual(cp(one) * reach * (1 + 1e-9))
        }),
        options,
      )
    },
    MINUTES * 60_000,
  )

  it(
    'is continuous through the coolant transition',
    () => {
      fc.assert(
        fc.property(rated, fc.constantFrom(2300, 4000), (input, re) => {
          const first = result(input)
          fc.pre(first.duty !== null && first.passes.length === 1)
          const velocity = (velocityOf(input) * re) / (first.coolant?.reynolds as number)
          fc.pre(velocity < 100)
          const at = (factor: number) =>
            result({ ...input, drive: { ...input.drive, velocity: velocity * factor } as CaseInput['drive'] })
              .duty
          const below = at(0.9999)
          const above = at(1.0001)
          fc.pre(below !== null && above !== null)
          expect(Math.abs((above as number) / (below as number) - 1)).toBeLessThan(5e-3)
        }),
        options,
      )
    },
    MINUTES * 60_000,
  )

  it(
    'falls with passes at a fixed velocity and tubes',
    () => {
      fc.assert(
        fc.property(rated, fc.integer({ min: 1, max: 3 }), (input, times) => {
          // Equal passes, because an uneven cut changes velocities as well; constant coolant properties, because a
          // viscous coolant that gets warmer also gets thinner.
          const rows = 12
          const coolant = {
            properties: { density: 997, specificHeat: 4180, viscosity: 8.9e-4, conductivity: 0.607 },
          }
          const of = (passes: number) =>
            result({
              ...input,
              drive: { ...input.drive, coolant } as CaseInput['drive'],
              bundle: { ...input.bundle, shape: 'rectangular', tubesPerRow: 5, rows, passes },
            })
          const few = of(times)
          const more = of(2 * times)
          fc.pre(few.duty !== null && more.duty !== null)
          expect(more.duty as number).toBeLessThanOrEqual((few.duty as number) * (1 + 1e-9))
        }),
        options,
      )
    },
    MINUTES * 60_000,
  )

  it(
    'needs more area with fouling, and with a lower saturation temperature',
    () => {
      const sized = cases
        .filter(
          (c) =>
            c.drive.kind === 'coolant' &&
            'velocity' in c.drive &&
            c.duty !== undefined &&
            c.bundle.tubesPerRow !== 'auto',
        )
        .map((c) => ({ ...c, methods: {} }))
      fc.assert(
        fc.property(sized, real(1e-6, 5e-4), real(0.05, 2), (input, more, lower) => {
          const one = result(input)
          fc.pre(one.outsideArea !== null)
          const drive = input.drive as { foulingResistance: number }
          const fouled = result({
            ...input,
            drive: {
              ...drive,
              foulingResistance: drive.foulingResistance + more,
            } as unknown as CaseInput['drive'],
          })
          if (fouled.outsideArea !== null)
            expect(fouled.outsideArea).toBeGreaterThan(one.outsideArea as number)
          // Close to the critical point less temperature brings so much latent heat that the film gains more than is lost.
          const critical = fluidModel(input.fluid as string).criticalTemperature
          fc.pre((input.saturationTemperature as number) < 0.9 * critical)
          const Ts = (input.saturationTemperature as number) - lower
          const colder = parseCase({ ...input, saturationTemperature: Ts })
          fc.pre(colder.ok)
          const cold = evaluate((colder as Extract<typeof colder, { ok: true }>).case)
          if (cold.outsideArea !== null) expect(cold.outsideArea).toBeGreaterThan(one.outsideArea as number)
        }),
        options,
      )
    },
    MINUTES * 60_000,
  )
})
