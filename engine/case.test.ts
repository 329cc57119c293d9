import { describe, expect, it } from 'vitest'
import { OUTCOMES } from './bundle/key-results.ts'
import { PointSolver } from './bundle/point-solver.ts'
import { type Case, faultLine, parseCase } from './case.ts'
import { evaluate } from './evaluate.ts'

const GOOD = {
  fluid: 'r134a',
  saturationTemperature: '40 degC',
  duty: '300 kW',
  drive: { kind: 'coolant', coolant: 'water', inletTemperature: '30 degC', velocity: 1.5 },
  tube: { outsideDiameter: '3/4 in', wallThickness: '1.65 mm', material: 'copper' },
  bundle: { pitchRatio: 1.25, rows: 12, tubesPerRow: 12, passes: 4 },
}
type Input = Record<string, unknown>
/** `GOOD` with the value at a dotted path changed; undefined takes it out. */
function changed(changes: Input): unknown {
  const copy = structuredClone(GOOD) as Input
  for (const [path, value] of Object.entries(changes)) {
    const names = path.split('.')
    const last = names.pop() as string
    let at = copy
    for (const name of names) {
      at[name] ??= {}
      at = at[name] as Input
    }
    if (value === undefined) delete at[last]
    else at[last] = value
  }
  return copy
}
const lines = (changes: Input): string[] => {
  const parsed = parseCase(changed(changes))
  return parsed.ok ? [] : parsed.faults.map(faultLine)
}
const good = (changes: Input = {}): Case => {
  const parsed = parseCase(changed(changes))
  if (!parsed.ok) throw new Error(parsed.faults.map(faultLine).join('\n'))
  return parsed.case
}

it('reads units, fills in defaults, and parses what it gave to itself', () => {
  const kase = good()
  expect(kase.saturationTemperature).toBeCloseTo(313.15, 12)
  expect(kase.tube.outsideDiameter).toBeCloseTo(0.01905, 12)
  expect(kase.bundle).toMatchObject({ shape: 'rectangular', layout: 'triangular30', coolantEntry: 'bottom' })
  expect(kase.tube.roughness).toBe(1.5e-6)
  expect(kase.methods.vapourShear).toBe('butterworth')
  expect(parseCase(kase)).toEqual({ ok: true, case: kase })
})

it('reads a temperature difference in degrees Fahrenheit as five ninths', () => {
  const kase = good({ drive: { kind: 'wallSubcooling', wallSubcooling: '9 degF' } })
  expect(kase.drive).toMatchObject({ wallSubcooling: 5 })
})

describe('says field, problem and remedy', () => {
  it.each<[Input, RegExp]>([
    [{ fluid: 'r134' }, /^fluid: there is no fluid "r134" in the library; near matches: r134a/],
    [{ fluid: undefined }, /^fluid: it is missing; give a library id/],
    [
      { saturationTemperature: 600 },
      /^saturationTemperature: 600 K is outside the table of r134a; allowed is/,
    ],
    [
      { saturationTemperature: undefined },
      /^saturationTemperature: it is missing; give saturationTemperature or/,
    ],
    [
      { saturationPressure: 1e6 },
      /^saturationPressure: saturationTemperature and saturationPressure are both given; /,
    ],
    [
      { saturationTemperature: undefined, saturationPressure: '1 MPa', fluid: { properties: {} } },
      /^fluid\.properties\.liquidDensity: it is missing; /,
    ],
    [{ 'bundle.length': 3 }, /^duty: duty and bundle\.length are both given; .*limits\.duty\.min/],
    [{ duty: undefined }, /^duty: neither duty nor bundle\.length is given; /],
    [{ duty: -5 }, /^duty: -5 is out of bounds; allowed is above 0 W/],
    [{ duty: 'much' }, /^duty: /],
    [{ 'drive.massFlow': 3 }, /^drive\.massFlow: velocity and massFlow are given together; /],
    [{ 'drive.velocity': undefined }, /^drive\.velocity: no coolant flow is given; give exactly one of/],
    [
      { 'drive.velocity': undefined, 'drive.outletTemperature': 300 },
      /^drive\.outletTemperature: 300 K is not above the inlet temperature; /,
    ],
    [
      { 'drive.velocity': undefined, 'drive.outletTemperature': 308, duty: undefined, 'bundle.length': 2 },
      /^drive\.outletTemperature: an outlet temperature needs a duty; /,
    ],
    [
      { 'drive.inletTemperature': 320 },
      /^drive\.inletTemperature: 320 K is not below the saturation temperature/,
    ],
    [{ 'drive.inletTemperature': 260 }, /^drive\.inletTemperature: 260 K is beyond freezing/],
    [{ 'drive.coolant': 'watre' }, /^drive\.coolant: there is no coolant "watre"; near matches: water/],
    [{ 'tube.outsideDiameter': 0 }, /^tube\.outsideDiameter: 0 is out of bounds; /],
    [{ 'tube.wallThickness': 0.01 }, /^tube\.wallThickness: 0\.01 m leaves no bore/],
    [{ 'tube.wallThickness': undefined }, /^tube\.wallThickness: it is missing and a coolant is named; /],
    [{ 'tube.material': undefined }, /^tube\.material: neither material nor conductivity is given/],
    [{ 'tube.conductivity': 300 }, /^tube\.conductivity: material and conductivity are both given; /],
    [{ 'tube.material': 'coper' }, /^tube\.material: there is no material "coper"; near matches: copper/],
    [
      { 'tube.surface': { kind: 'dropwise', promoter: 'PTFE', contactAngle: 1.6 } },
      /^tube\.surface\.kind: "dropwise" is not evaluated/,
    ],
    [{ 'vapour.superheat': 5 }, /^vapour\.superheat: superheat is not evaluated by this version; /],
    [{ 'vapour.gas': { kind: 'air', moleFraction: 0.01 } }, /^vapour\.gas: /],
    [
      { 'methods.vapourShear': 'honda' },
      /^methods\.vapourShear: "honda" is not evaluated by this version; choose/,
    ],
    [{ 'methods.vapourShear': 'rosé' }, /^methods\.vapourShear: "rosé" is not known; did you mean "rose"\?/],
    [{ 'bundle.rows': 2.5 }, /^bundle\.rows: 2\.5 is not a whole number; /],
    [{ 'bundle.rows': 501 }, /^bundle\.rows: 501 is out of bounds; /],
    [
      { 'bundle.passes': 13 },
      /^bundle\.passes: 13 passes do not fit 12 rows; give at most one pass a row, 12/,
    ],
    [
      { 'bundle.tubesPerRow': 'auto' },
      /^bundle\.tubesPerRow: "auto" needs the coolant velocity together with/,
    ],
    [
      { 'bundle.tubesPerRow': 2001 },
      /^bundle\.tubesPerRow: 2001 is out of bounds; allowed is a whole number/,
    ],
    [{ 'bundle.tubesPerRow': undefined }, /^bundle\.tubesPerRow: it is missing; /],
    [{ 'bundle.shape': 'circular' }, /^bundle\.tubesPerRow: a circular bundle has as many tubes/],
    [
      { 'bundle.tubesPerRows': 3 },
      /^bundle\.tubesPerRows: there is no field "tubesPerRows" here; did you mean "tubesPerRow"\?/,
    ],
  ])('%j', (changes, expected) => {
    const said = lines(changes)
    expect(
      said.some((line) => expected.test(line)),
      said.join('\n'),
    ).toBe(true)
    for (const line of said) expect(line).toMatch(/^[\w.]+: .+; .+/)
  })

  it('names every property a fluid given by hand lacks, with the method that needs it', () => {
    const said = lines({
      fluid: {
        properties: { liquidDensity: 1000, latentHeat: 2e6, liquidViscosity: 5e-4, liquidConductivity: 0.6 },
      },
    })
    expect(said).toEqual([
      expect.stringMatching(
        /^fluid\.properties\.liquidSpecificHeat: .*latentHeat "rohsenow" needs it; .*"plain"/,
      ),
      expect.stringMatching(
        /^fluid\.properties\.vapourDensity: .*vapourShear "butterworth" needs it; .*"none"/,
      ),
      expect.stringMatching(
        /^fluid\.properties\.vapourViscosity: .*vapourPressureDrop "gaddisGnielinski" needs it/,
      ),
      expect.stringMatching(/^fluid\.properties\.pressure: /),
    ])
  })
})

describe('points that cannot be evaluated give the reason', () => {
  it.each<[string, Input]>([
    ['dutyNotReached', { duty: '5 MW' }],
    ['outletNotReachable', { 'drive.velocity': undefined, 'drive.outletTemperature': '41 degC' }],
    [
      'wallBelowRange',
      {
        saturationTemperature: 205,
        drive: { kind: 'wallSubcooling', wallSubcooling: 40 },
        'methods.vapourPressureDrop': 'none',
      },
    ],
    [
      'noVelocityHoldsWall',
      {
        drive: {
          kind: 'wallSubcooling',
          wallSubcooling: 9.9,
          coolant: { coolant: 'water', inletTemperature: '30 degC' },
        },
      },
    ],
    [
      'coolantOutletOutsideRange',
      {
        'drive.coolant': 'eg-30',
        fluid: 'toluene',
        saturationTemperature: 400,
        'drive.inletTemperature': 372,
        duty: 5e5,
      },
    ],
    [
      'vapourPressureExhausted',
      {
        fluid: 'water',
        saturationTemperature: 290,
        duty: 5e6,
        drive: { kind: 'wallSubcooling', wallSubcooling: 10 },
      },
    ],
  ])('%s', (code, changes) => {
    const result = evaluate(good(changes))
    expect(result.notes.find((note) => note.severity === 'notMet')?.code).toBe(code)
    expect(result.overallCoefficient).toBeNull()
  })
})

describe('one solver, many points', () => {
  const kase = good()
  it('leaves nothing of one point in the next', () => {
    const fresh = (c: Case) => {
      const solver = new PointSolver()
      solver.load(c)
      solver.solve()
      return JSON.stringify(solver.result())
    }
    const others = [
      good({ 'bundle.rows': 40, 'bundle.passes': 7, fluid: 'water' }),
      good({ drive: { kind: 'wallSubcooling', wallSubcooling: 4 }, 'bundle.layout': 'square90' }),
      good({ duty: '5 MW' }),
      good({ 'methods.inundation': 'drainageMode', 'methods.vapourPressureDrop': 'zukauskas' }),
    ]
    const solver = new PointSolver()
    for (const other of others) {
      solver.load(other)
      solver.solve()
      expect(JSON.stringify(solver.result())).toBe(fresh(other))
      solver.load(kase)
      solver.solve()
      expect(JSON.stringify(solver.result())).toBe(fresh(kase))
    }
  })

  it('sets one input after another to the same bytes as a case that has them', () => {
    const solver = new PointSolver()
    solver.load(kase)
    const steps: [string, number | string, Input][] = [
      ['tube.outsideDiameter', 0.0254, { 'tube.outsideDiameter': 0.0254 }],
      ['bundle.rows', 20, { 'bundle.rows': 20 }],
      ['drive.velocity', 2.5, { 'drive.velocity': 2.5 }],
      ['fluid', 'r717', { fluid: 'r717' }],
      ['methods.vapourShear', 'rose', { 'methods.vapourShear': 'rose' }],
      ['bundle.length', 2, { duty: undefined, 'bundle.length': 2 }],
      ['saturationPressure', 1.4e6, { saturationTemperature: undefined, saturationPressure: 1.4e6 }],
      ['tube.material', 'titanium', { 'tube.material': 'titanium' }],
    ]
    let all: Input = {}
    for (const [path, value, changes] of steps) {
      all = { ...all, ...changes }
      solver.set(path, value)
      expect(OUTCOMES[solver.solve()].code).toBe('evaluated')
      expect(JSON.stringify(solver.result())).toBe(JSON.stringify(evaluate(good(all))))
    }
  })

  it('knows no path that a case has not', () => {
    const solver = new PointSolver()
    solver.load(kase)
    expect(() => solver.set('tube.colour', 1)).toThrow(RangeError)
  })
})
