import { describe, expect, it } from 'vitest'
import { type Case, type CaseInput, type Correction, METHOD_CHOICES, parseCase } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import { NOTE_BIT } from '#engine/notes.ts'
import type { Result } from '#engine/result.ts'
import { KEY_RESULT_INDEX, KEY_RESULTS } from './key-results.ts'
import {
  inTransition,
  MULTIPLIER_IDS,
  type MultiplierGroup,
  type Multipliers,
  scatterOf,
  unitMultipliers,
} from './multipliers.ts'
import { PointSolver } from './point-solver.ts'

const CHILLER: CaseInput = {
  fluid: 'r134a',
  saturationTemperature: 313.15,
  duty: 300e3,
  drive: {
    kind: 'coolant',
    coolant: 'water',
    inletTemperature: 303.15,
    velocity: 1.5,
    foulingResistance: 1.76e-4,
  },
  tube: {
    outsideDiameter: 0.01905,
    wallThickness: 0.001245,
    material: 'copper',
    outsideFoulingResistance: 2e-5,
  },
  bundle: { layout: 'triangular30', pitchRatio: 1.25, rows: 12, tubesPerRow: 12, passes: 4 },
}
const STEAM: CaseInput = {
  ...CHILLER,
  fluid: 'water',
  saturationTemperature: undefined,
  saturationPressure: 7000,
  duty: 40e6,
  drive: {
    kind: 'coolant',
    coolant: 'water',
    inletTemperature: 293.15,
    velocity: 2.2,
    foulingResistance: 4.4e-5,
  },
  bundle: { layout: 'triangular30', pitchRatio: 1.3, rows: 20, tubesPerRow: 100, passes: 1 },
}

function checked(input: CaseInput): Case {
  const parsed = parseCase(input)
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
  return parsed.case
}
function under(input: CaseInput, factors: Partial<Multipliers>): Result {
  const solver = new PointSolver()
  solver.load(checked(input))
  solver.setMultipliers({ ...unitMultipliers(), ...factors })
  expect(solver.solve()).toBe(0)
  return solver.result()
}
const correction = (group: MultiplierGroup, factor: number, name = 'Rig run 4'): Correction => ({
  name,
  group,
  factor,
  source: 'test stand, March',
})

describe('multipliers', () => {
  it.each([
    ['default methods', {}],
    ['the other laws', { vapourShear: 'rose', inundation: 'drainageMode', film: 'chen' }],
    ['laws by vertical line', { vapourShear: 'fujiiUeharaKurata', inundation: 'kern' }],
  ] as const)('of 1 change no byte: %s', (_, methods) => {
    for (const input of [CHILLER, STEAM])
      expect(JSON.stringify(under({ ...input, methods }, {}))).toBe(
        JSON.stringify(evaluate(checked({ ...input, methods }))),
      )
  })

  it('are taken away by null and by the next load', () => {
    const solver = new PointSolver()
    const kase = checked(CHILLER)
    const plain = JSON.stringify(evaluate(kase))
    solver.load(kase)
    for (const away of [() => solver.setMultipliers(null), () => solver.load(kase)]) {
      solver.setMultipliers({ ...unitMultipliers(), film: 0.8, tubeSide: 1.3 })
      solver.solve()
      expect(JSON.stringify(solver.result())).not.toBe(plain)
      away()
      solver.solve()
      expect(JSON.stringify(solver.result())).toBe(plain)
    }
  })

  // More of it: the area falls, rises or stays.
  it.each([
    ['film', -1],
    ['shear', -1],
    ['inundation', -1],
    ['tubeSide', -1],
    ['wall', -1],
    ['foulingInside', 1],
    ['foulingOutside', 1],
    ['vapourDrop', 1],
    ['twoPhase', 1],
    ['coolantFriction', 0],
    ['coolantLosses', 0],
  ] as const)('%s moves the area one way', (group, way) => {
    for (const methods of [{}, { vapourShear: 'rose', inundation: 'eissenberg' }] as const) {
      const areas = [0.5, 0.8, 1, 1.25, 2].map(
        (factor) => under({ ...STEAM, methods }, { [group]: factor }).outsideArea as number,
      )
      for (let k = 1; k < areas.length; k++)
        if (way === 0) expect(areas[k]).toBe(areas[0])
        else expect(way * (areas[k] - areas[k - 1])).toBeGreaterThan(1e-6 * areas[0])
    }
  })

  it('of friction and of losses raise their own share of the coolant’s pressure drop', () => {
    const drop = (factors: Partial<Multipliers>) => under(CHILLER, factors).coolant?.pressureDrop as number
    const whole = drop({})
    const friction = drop({ coolantFriction: 2 }) - whole
    const losses = drop({ coolantLosses: 2 }) - whole
    expect(friction / whole).toBeGreaterThan(0.5)
    expect((friction + losses) / whole).toBeCloseTo(1, 12)
  })

  it('of vapour losses raise the vapour’s pressure drop in proportion where it costs no temperature', () => {
    const ammonia = {
      ...CHILLER,
      fluid: 'r717',
      methods: { vapourShear: 'none' },
    } as const satisfies CaseInput
    const drop = (factors: Partial<Multipliers>) => under(ammonia, factors).vapour.pressureDrop as number
    expect(drop({ vapourDrop: 2 }) / drop({})).toBeCloseTo(2, 4)
    expect(drop({ twoPhase: 1.5 }) / drop({})).toBeCloseTo(1.5, 4)
  })

  it.each(METHOD_CHOICES.vapourShear.filter((id) => id !== 'mcnaught' && id !== 'honda'))(
    'of shear scale what %s adds to still vapour, and continuously',
    (vapourShear) => {
      const steam = (factors: Partial<Multipliers>, speed = 1) =>
        under(
          {
            ...STEAM,
            duty: undefined,
            methods: { vapourShear, vapourPressureDrop: 'none', inundation: 'none' },
            drive: { kind: 'wallSubcooling', wallSubcooling: 3 },
            bundle: { ...STEAM.bundle, rows: 4, tubesPerRow: 20 * speed, length: 4 },
          },
          factors,
        ).rows[0]
      const plain = steam({})
      expect(steam({ shear: 1 + 1e-9 }).coefficient / plain.coefficient).toBeCloseTo(1, 8)
      const half = steam({ shear: 0.5 }).coefficient
      const double = steam({ shear: 2 }).coefficient
      if (vapourShear === 'none') {
        expect(half).toBe(plain.coefficient)
        expect(double).toBe(plain.coefficient)
      } else {
        expect(half).toBeLessThan(plain.coefficient)
        expect(double).toBeGreaterThan(plain.coefficient)
        const still = steam({ shear: 1e-12 }).coefficient
        expect(steam({ shear: 1e-12 }).factors.shear).toBeCloseTo(1, 2)
        expect(half).toBeGreaterThan(still)
      }
    },
  )

  it('of inundation leave the first row alone and multiply the factor of the others', () => {
    const rows = (factors: Partial<Multipliers>, inundation: 'kern' | 'condensateFlow') =>
      under(
        {
          ...CHILLER,
          duty: undefined,
          methods: { vapourShear: 'none', vapourPressureDrop: 'none', inundation },
          drive: { kind: 'wallSubcooling', wallSubcooling: 3 },
          bundle: { ...CHILLER.bundle, length: 3 },
        },
        factors,
      ).rows
    const kern = rows({}, 'kern')
    for (const [r, row] of rows({ inundation: 0.8 }, 'kern').entries()) {
      expect(row.coefficient / kern[r].coefficient).toBeCloseTo(r === 0 ? 1 : 0.8, 10)
      expect(row.factors.inundation / kern[r].factors.inundation).toBeCloseTo(r === 0 ? 1 : 0.8, 10)
    }
    const flow = rows({}, 'condensateFlow')
    const less = rows({ inundation: 0.8 }, 'condensateFlow')
    expect(less[0].coefficient).toBe(flow[0].coefficient)
    for (const row of less) expect(row.factors.shear).toBeCloseTo(1, 9)
    expect(less[5].coefficient).toBeLessThan(flow[5].coefficient)
  })

  // One tube that nothing falls on, isothermal coolant: dln q/dln C = w/(w + 0.75 (1 − w)) with w = x/T.
  it('answer with the elasticities of the wall balance', () => {
    const bare: CaseInput = {
      fluid: {
        properties: {
          liquidDensity: 990.2,
          latentHeat: 2.382e6,
          liquidViscosity: 5.96e-4,
          liquidConductivity: 0.6375,
          vapourDensity: 0.0831,
        },
      },
      saturationTemperature: 323.15,
      drive: {
        kind: 'coolant',
        coolant: {
          properties: { density: 995.6, viscosity: 7.97e-4, conductivity: 0.6155, specificHeat: 1e6 },
        },
        inletTemperature: 298.15,
        velocity: 5,
        foulingResistance: 3e-5,
      },
      tube: { outsideDiameter: 0.01905, wallThickness: 0.001651, conductivity: 110 },
      bundle: { layout: 'square90', pitchRatio: 1.5, rows: 1, tubesPerRow: 1, length: 0.05 },
      methods: {
        latentHeat: 'plain',
        vapourShear: 'none',
        vapourPressureDrop: 'none',
        inundation: 'none',
        propertyTemperature: 'saturation',
      },
    }
    const ratio = 0.01905 / 0.015748
    const wall = (0.01905 * Math.log(ratio)) / (2 * 110)
    const coefficient = under(bare, {}).coolant?.coefficient as number
    const inside = ratio * (1 / coefficient + 3e-5)
    const outside = 1 / 4000 - wall - inside
    expect(outside).toBeGreaterThan(0)
    const kase: CaseInput = { ...bare, tube: { ...bare.tube, outsideFoulingResistance: outside } }
    const w = under(kase, {}).rows[0].wallSubcooling / 25
    expect(w).toBeCloseTo(0.24288, 4)
    const elasticity = (group: MultiplierGroup) => {
      const at = (ln: number) => Math.log(under(kase, { [group]: Math.exp(ln) }).duty as number)
      return (at(1e-3) - at(-1e-3)) / 2e-3
    }
    expect(elasticity('film')).toBeCloseTo(0.29958, 4)
    const share = (resistance: number) => 0.70042 * 4000 * resistance
    expect(elasticity('foulingOutside')).toBeCloseTo(-share(outside), 4)
    expect(elasticity('foulingInside')).toBeCloseTo(-share(ratio * 3e-5), 4)
    expect(elasticity('wall')).toBeCloseTo(share(wall), 4)
    expect(elasticity('tubeSide')).toBeCloseTo(share(ratio / coefficient), 4)
  })
})

describe('published scatter', () => {
  const { methods } = checked(CHILLER)
  it('is that of the methods chosen', () => {
    expect(MULTIPLIER_IDS.map((id) => scatterOf(id, methods).sigmaLn)).toEqual([
      0.08, 0.15, 0.14, 0.07, 0.05, 0.25, 0.11, 0.2, 0.5, 0.5, 0.03,
    ])
    const other = {
      ...methods,
      vapourShear: 'none',
      tubeSide: 'siederTate',
      vapourPressureDrop: 'jakob',
    } as const
    expect(scatterOf('shear', other).sigmaLn).toBeNull()
    expect(scatterOf('tubeSide', other).sigmaLn).toBe(0.12)
    expect(scatterOf('vapourDrop', other).sigmaLn).toBe(0.2)
    for (const id of MULTIPLIER_IDS) {
      expect(scatterOf(id, methods).published).not.toBe('')
      expect(scatterOf(id, methods).source).not.toBe('')
    }
  })
  it('is wider for a coolant between laminar and turbulent', () => {
    expect([2300, 2301, 3999, 4000].map(inTransition)).toEqual([false, true, true, false])
    expect(scatterOf('tubeSide', methods, true).sigmaLn).toBe(0.15)
    expect(scatterOf('film', methods, true).sigmaLn).toBe(0.08)
  })
})

describe('corrections of a case', () => {
  it('do what the same multipliers do, and are told', () => {
    const corrections = [
      correction('film', 1.12),
      correction('foulingInside', 2),
      correction('film', 1.1, 'Run 5'),
    ]
    const result = evaluate(checked({ ...CHILLER, corrections }))
    const same = under(CHILLER, { film: 1.12 * 1.1, foulingInside: 2 })
    expect(result.outsideArea).toBe(same.outsideArea)
    expect(result.corrections).toEqual(corrections)
    const note = result.notes.find(({ code }) => code === 'corrected')
    expect(note?.text).toBe(
      'Corrected from bench data: Rig run 4 (film, quiescent vapour × 1.12); Rig run 4 (inside fouling × 2); Run 5 (film, quiescent vapour × 1.1).',
    )
    expect(note?.source).toBe('test stand, March')
    expect(same.corrections).toBeUndefined()
    expect(same.notes.some(({ code }) => code === 'corrected')).toBe(false)
  })

  it('multiply with what is sampled, stay through set and leave with the next case', () => {
    const solver = new PointSolver()
    solver.load(checked({ ...CHILLER, corrections: [correction('film', 1.25)] }))
    solver.setMultipliers({ ...unitMultipliers(), film: 0.8 })
    solver.set('bundle.rows', 14)
    solver.solve()
    const { tubesPerRow, ...bundle } = CHILLER.bundle
    const plain = checked({ ...CHILLER, bundle: { ...bundle, rows: 14, tubesPerRow } })
    expect(solver.area).toBe(under(plain as CaseInput, {}).outsideArea)
    const key = new Float64Array(KEY_RESULTS.length)
    solver.keyResults(key, 0, 1)
    expect(Math.floor(key[KEY_RESULT_INDEX.notes] / 2 ** NOTE_BIT.corrected) % 2).toBe(1)
    solver.load(plain)
    solver.solve()
    expect(JSON.stringify(solver.result())).toBe(JSON.stringify(evaluate(plain)))
  })

  it.each([
    [{ group: 'films' }, 'corrections.0.group', 'did you mean "film"'],
    [{ factor: 0.1 }, 'corrections.0.factor', 'from 0.2 to 5'],
    [{ factor: 6 }, 'corrections.0.factor', 'from 0.2 to 5'],
    [{ factor: 'much' }, 'corrections.0.factor', ''],
    [{ name: ' ' }, 'corrections.0.name', 'give the name'],
    [{ source: undefined }, 'corrections.0.source', 'give where'],
    [{ sigma: 1 }, 'corrections.0.sigma', 'allowed are name, group, factor, source'],
  ])('%o is refused by its field', (change, path, remedy) => {
    const parsed = parseCase({ ...CHILLER, corrections: [{ ...correction('film', 1.1), ...change }] })
    expect(parsed.ok).toBe(false)
    if (parsed.ok) return
    expect(parsed.faults.map((fault) => fault.path)).toEqual([path])
    expect(parsed.faults[0].remedy).toContain(remedy)
  })

  it('may not multiply beyond their range together', () => {
    const parsed = parseCase({ ...CHILLER, corrections: [correction('film', 3), correction('film', 2)] })
    expect(parsed).toMatchObject({
      ok: false,
      faults: [{ path: 'corrections', problem: 'those of film multiply to 6' }],
    })
    expect(parseCase({ ...CHILLER, corrections: 1 })).toMatchObject({
      ok: false,
      faults: [{ path: 'corrections' }],
    })
  })
})
