import { describe, expect, it } from 'vitest'
import { parseCase } from './case.ts'
import { evaluate } from './evaluate.ts'
import type { Result } from './result.ts'

type Input = Record<string, unknown>
const result = (input: Input): Result => {
  const parsed = parseCase(input)
  if (!parsed.ok) throw new Error(parsed.faults.map((f) => `${f.path}: ${f.problem}; ${f.remedy}`).join('\n'))
  return evaluate(parsed.case)
}

// Fixed property sets of the numeric checks: steam near 50 °C, R-134a near 40 °C, water near 30 °C.
const STEAM = {
  properties: {
    liquidDensity: 990.2,
    latentHeat: 2.382e6,
    liquidViscosity: 5.96e-4,
    liquidConductivity: 0.6375,
    vapourDensity: 0.0831,
    liquidSpecificHeat: 4180,
  },
}
const WATER = { properties: { density: 995.6, viscosity: 7.97e-4, conductivity: 0.6155, specificHeat: 4179 } }
const STILL = { vapourShear: 'none', vapourPressureDrop: 'none' }
const bank = (over: Input = {}) => ({
  fluid: STEAM,
  saturationTemperature: 323.15,
  drive: { kind: 'coolant', coolant: WATER, inletTemperature: 298.15, velocity: 1, foulingResistance: 1e-4 },
  tube: { outsideDiameter: 0.01905, wallThickness: 0.001651, conductivity: 110 },
  bundle: { layout: 'triangular30', pitchRatio: 1.25, rows: 10, tubesPerRow: 10, length: 4 },
  methods: { ...STILL, latentHeat: 'plain' },
  ...over,
})

// Printed and marched reference figures stand in validation/records.ts, with source and evidence.

// Common practice, no published source: an independent march gave the expected figures.
const PLAUSIBLE = {
  r134a: {
    case: {
      fluid: 'r134a',
      saturationTemperature: '40 degC',
      duty: '300 kW',
      drive: {
        kind: 'coolant',
        coolant: 'water',
        inletTemperature: '30 degC',
        velocity: 1.5,
        foulingResistance: 1.76e-4,
      },
      tube: { outsideDiameter: '19.05 mm', wallThickness: '1.245 mm', conductivity: 385 },
      bundle: { layout: 'triangular30', pitchRatio: 1.25, rows: 12, tubesPerRow: 12, passes: 4 },
    },
    length: 5.19,
    area: 44.8,
    U: 1046,
    lmtd: 6.41,
    mean: 1689,
    first: 2420,
    last: 1335,
    out: 36.2,
    drop: 40.9e3,
    condensate: 1.81,
  },
  steam: {
    case: {
      fluid: 'water',
      saturationPressure: '7 kPa',
      duty: '40 MW',
      drive: {
        kind: 'coolant',
        coolant: 'water',
        inletTemperature: '20 degC',
        velocity: 2.2,
        foulingResistance: 4.4e-5,
      },
      tube: { outsideDiameter: '25.4 mm', wallThickness: '0.711 mm', conductivity: 20.5 },
      bundle: { layout: 'triangular30', pitchRatio: 1.3, rows: 20, tubesPerRow: 100, passes: 1 },
    },
    length: 4.95,
    area: 789,
    U: 3077,
    lmtd: 16.5,
    mean: 11040,
    first: 20020,
    last: 6480,
    out: 24.8,
    drop: 13.9e3,
    condensate: 16.5,
  },
  ammonia: {
    case: {
      fluid: 'r717',
      saturationTemperature: '35 degC',
      duty: '250 kW',
      drive: {
        kind: 'coolant',
        coolant: 'water',
        inletTemperature: '27 degC',
        velocity: 1.8,
        foulingResistance: 1.76e-4,
      },
      tube: {
        outsideDiameter: '31.75 mm',
        wallThickness: '2.77 mm',
        conductivity: 51,
        outsideFoulingResistance: 1.76e-4,
        roughness: 4.5e-5,
      },
      bundle: { layout: 'triangular30', pitchRatio: 1.25, rows: 8, tubesPerRow: 8, passes: 4 },
    },
    length: 4.59,
    area: 29.3,
    U: 1455,
    lmtd: 5.86,
    mean: 11560,
    first: 15790,
    last: 9210,
    out: 30.9,
    drop: 41.2e3,
    condensate: 0.222,
  },
} as const

describe.each(Object.entries(PLAUSIBLE))('plausibility, common practice: %s', (_, expected) => {
  const r = result(expected.case)
  const near = (value: number | null | undefined, wanted: number) =>
    expect(Math.abs((value as number) / wanted - 1)).toBeLessThan(0.02)

  it('agrees with an independent march within 2 %', () => {
    near(r.tubeLength, expected.length)
    near(r.outsideArea, expected.area)
    near(r.overallCoefficient, expected.U)
    near(r.meanTemperatureDifference, expected.lmtd)
    // The independent march averaged its rows' coefficients; `meanCoefficient` is duty over Σ area × subcooling.
    near(r.rows.reduce((sum, row) => sum + row.coefficient, 0) / r.rows.length, expected.mean)
    near(r.rows[0].coefficient, expected.first)
    near(r.rows.at(-1)?.coefficient, expected.last)
    near((r.coolant?.outletTemperature as number) - 273.15, expected.out)
    near(r.coolant?.pressureDrop, expected.drop)
    near(r.condensateRate, expected.condensate)
  })

  it('closes its balances to 1e-9', () => {
    const areaOfRow = (tubes: number) =>
      tubes * Math.PI * ((r.outsideArea as number) / ((r.tubeCount as number) * Math.PI))
    const sum = r.rows.reduce((total, row) => total + row.heatFlux * areaOfRow(row.tubes), 0)
    expect(sum / (r.duty as number)).toBeCloseTo(1, 9)
    expect(
      ((r.overallCoefficient as number) *
        (r.outsideArea as number) *
        (r.meanTemperatureDifference as number)) /
        (r.duty as number),
    ).toBeCloseTo(1, 12)
  })

  it('rates the length it found to the duty it was asked for', () => {
    const { duty, ...rest } = expected.case
    const back = result({ ...rest, bundle: { ...rest.bundle, length: r.tubeLength } })
    expect((back.duty as number) / (r.duty as number)).toBeCloseTo(1, 8)
    expect(duty).toBeDefined()
  })

  it('gives the same bytes again, whatever was solved in between', () => {
    const first = JSON.stringify(r)
    result(bank())
    expect(JSON.stringify(result(expected.case))).toBe(first)
  })
})

describe('tubes so long that the coolant comes to saturation within a pass', () => {
  it('never warm it beyond', () => {
    for (const passes of [1, 2, 6])
      for (const length of [2, 6, 20, 60]) {
        const r = result({
          ...bank(),
          fluid: 'r227ea',
          saturationTemperature: 357.26,
          drive: { kind: 'coolant', coolant: 'pg-20', inletTemperature: 297.26, velocity: 1 },
          tube: { outsideDiameter: 0.0074, wallThickness: 0.0011, material: 'copper' },
          bundle: { layout: 'square90', pitchRatio: 1.7, rows: 22, tubesPerRow: 118, passes, length },
          methods: {},
        })
        for (const pass of r.passes)
          expect(pass.outletTemperature, `${passes} passes of ${length} m`).toBeLessThan(357.26 + 1e-7)
        const gained = r.passes.reduce((sum, { inletTemperature, outletTemperature }) => {
          expect(outletTemperature).toBeGreaterThan(inletTemperature - 1e-7)
          return sum + outletTemperature - inletTemperature
        }, 0)
        expect(gained).toBeLessThan(60 + 1e-7)
      }
  })
})

describe('a given subcooling with the coolant that would hold it', () => {
  it('comes back to its duty in the coolant drive at the flow found', () => {
    const base = { ...PLAUSIBLE.r134a.case, duty: undefined }
    const coolant = { coolant: 'water', inletTemperature: '30 degC', foulingResistance: 1.76e-4 }
    const held = result({
      ...base,
      drive: { kind: 'wallSubcooling', wallSubcooling: 3, coolant },
      bundle: { ...base.bundle, length: 5 },
    })
    const back = result({
      ...base,
      drive: { kind: 'coolant', ...coolant, massFlow: held.coolant?.massFlow },
      bundle: { ...base.bundle, length: 5 },
    })
    expect((back.duty as number) / (held.duty as number)).toBeCloseTo(1, 6)
  })

  it('says when no velocity holds the wall', () => {
    const base = PLAUSIBLE.r134a.case
    const held = result({
      ...base,
      drive: {
        kind: 'wallSubcooling',
        wallSubcooling: 9.5,
        coolant: { coolant: 'water', inletTemperature: '30 degC', foulingResistance: 1.76e-4 },
      },
    })
    expect(held.notes[0].code).toBe('noVelocityHoldsWall')
    expect(held.coolant?.velocity).toBeNull()
    expect(held.outsideArea).toBeGreaterThan(0)
  })
})

describe('points that cannot be evaluated say why', () => {
  it('a duty beyond what the coolant can take up', () => {
    const base = PLAUSIBLE.r134a.case
    const r = result({ ...base, duty: '5 MW' })
    expect(r.notes[0].code).toBe('dutyNotReached')
    expect(r.outsideArea).toBeNull()
    expect(r.tubeCount).toBe(144)
  })

  it('vapour that runs out of pressure', () => {
    const base = PLAUSIBLE.steam.case
    const r = result({
      ...base,
      duty: undefined,
      bundle: { ...base.bundle, rows: 60, pitchRatio: 1.2, length: 20 },
    })
    expect(['vapourPressureExhausted', 'vapourTooFast']).toContain(r.notes[0].code)
  })
})
