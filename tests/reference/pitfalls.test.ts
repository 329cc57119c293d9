// Known ways to be wrong: each computes the naive value beside the engine's and fails if the engine fell into it.
import { describe, expect, it } from 'vitest'
import { parseCase } from '#engine/case.ts'
import { griffith, roseDropwiseFlux } from '#engine/correlations/dropwise.ts'
import { nusseltTube, nusseltTubeFlux } from '#engine/correlations/film.ts'
import {
  beattyKatz,
  beattyKatzLength,
  retentionAngle,
  retentionGroup,
  roseFinRatio,
} from '#engine/correlations/fins.ts'
import { ackermann, condensationMassFlux } from '#engine/correlations/gas.ts'
import { minimumAreaFraction } from '#engine/correlations/geometry.ts'
import { chenRowMean, eissenbergRowMean, inundatedFlux } from '#engine/correlations/inundation.ts'
import { fujiiUeharaKurata } from '#engine/correlations/shear.ts'
import { gnielinskiTurbulent } from '#engine/correlations/tube-side.ts'
import { gaddisGnielinski, zukauskas } from '#engine/correlations/vapour-drop.ts'
import { kutateladze, shearedPlate } from '#engine/correlations/vertical-film.ts'
import { evaluate } from '#engine/evaluate.ts'

type Input = Record<string, unknown>
function solve(input: Input) {
  const parsed = parseCase(input)
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
  return evaluate(parsed.case)
}

const bundle = { layout: 'triangular30', pitchRatio: 1.25, rows: 10, tubesPerRow: 10, passes: 2, length: 4 }
const chiller = (over: Input = {}, shape: Input = {}, drive: Input = {}) =>
  solve({
    fluid: 'r134a',
    saturationTemperature: 313.15,
    drive: {
      kind: 'coolant',
      coolant: 'water',
      inletTemperature: 303.15,
      velocity: 2,
      foulingResistance: 1e-4,
      ...drive,
    },
    tube: { outsideDiameter: 0.01905, wallThickness: 0.001651, conductivity: 110 },
    bundle: { ...bundle, ...shape },
    ...over,
  })
const vacuum = (over: Input = {}, shape: Input = {}) =>
  chiller(
    { fluid: 'water', saturationTemperature: 313.15, ...over },
    { pitchRatio: 1.5, passes: 1, rows: 12, ...shape },
    { inletTemperature: 293.15 },
  )
const STILL = { vapourShear: 'none', vapourPressureDrop: 'none' }

describe('the film', () => {
  it('is driven by its own temperature difference, not by the coolant’s', () => {
    const [row] = chiller({ methods: { ...STILL, inundation: 'none' } }).rows
    const whole = row.saturationTemperature - (row.coolantTemperature as number)
    expect(row.wallSubcooling).toBeLessThan(0.8 * whole)
    const naive = row.coefficient * (row.wallSubcooling / whole) ** 0.25
    expect(row.coefficient).toBeGreaterThan(1.05 * naive)
    expect(row.heatFlux).toBeCloseTo(row.coefficient * row.wallSubcooling, 3)
  })

  it('carries a flux that ends at zero with the subcooling, where the coefficient has none', () => {
    const printed = (x: number) => nusseltTube(0.01905, x, 990.2, 0.0831, 5.96e-4, 0.6375, 2.382e6)
    expect(printed(0)).toBe(printed(1e-6))
    expect(Number.isFinite(printed(0))).toBe(true)
    expect(nusseltTubeFlux(33, 1e10, 0)).toBe(0)
    expect(nusseltTubeFlux(33, 1e10, -1)).toBe(0)
    const cold = chiller({}, { rows: 2 }, { inletTemperature: 313.149 })
    expect(cold.duty as number).toBeGreaterThan(0)
    expect(
      cold.rows.every(
        ({ wallSubcooling, coefficient }) => wallSubcooling > 0 && Number.isFinite(coefficient),
      ),
    ).toBe(true)
  })

  it('does not vanish where rain from above is taken as its ratio', () => {
    // The naive ratio has a second solution at no flux; the engine's grows steadily from the first row down.
    for (const arriving of [1, 1e3, 1e6]) {
      const q = inundatedFlux(4e4, arriving, 0.16)
      expect(q).toBeGreaterThan(0)
      expect(Math.abs(q * ((q + arriving) / q) ** 0.16 - 4e4)).toBeLessThan(1e-6 * 4e4)
    }
  })

  it('counts the film’s subcooling once in the balance and once in the coefficient', () => {
    const { duty, condensateRate, rows } = solve({
      fluid: {
        properties: {
          liquidDensity: 1146.7,
          latentHeat: 1.63e5,
          liquidViscosity: 1.614e-4,
          liquidConductivity: 0.0747,
          vapourDensity: 50.09,
          liquidSpecificHeat: 1498,
        },
      },
      saturationTemperature: 313.15,
      drive: { kind: 'wallSubcooling', wallSubcooling: 6 },
      tube: { outsideDiameter: 0.01905 },
      bundle: { ...bundle, length: 1 },
      methods: STILL,
    })
    const perKilogram = (duty as number) / (condensateRate as number)
    expect(perKilogram / (1.63e5 + 0.375 * 1498 * 6)).toBeCloseTo(1, 8)
    expect(Math.abs(perKilogram / (1.63e5 + 0.68 * 1498 * 6) - 1)).toBeGreaterThan(0.01)
    expect(rows[0].wallSubcooling).toBe(6)
  })
})

describe('inundation', () => {
  it('takes the local factor of a row, not the bank’s mean, in the lower rows', () => {
    const { rows } = solve({ ...still('nusselt'), bundle: { ...bundle, layout: 'square90', length: 1 } })
    expect(rows[9].coefficient / rows[0].coefficient).toBeCloseTo(0.427261, 4)
    expect(rows[9].coefficient / rows[0].coefficient).toBeLessThan(0.9 * 10 ** -0.25)
  })

  it('is weaker in condensate flow than the bank’s mean of the same exponent', () => {
    let arriving = 0
    for (let n = 0; n < 2000; n++) arriving += inundatedFlux(1, arriving, 0.25)
    expect((arriving / 2000) * 2000 ** 0.25).toBeGreaterThan(1.23)
  })

  it('counts tubes in a vertical line: every second row where they are staggered', () => {
    const staggered = solve({ ...still('nusselt'), bundle: { ...bundle, length: 1 } }).rows
    const inline = solve({ ...still('nusselt'), bundle: { ...bundle, layout: 'square90', length: 1 } }).rows
    expect(staggered[1].coefficient).toBeCloseTo(staggered[0].coefficient, 6)
    expect(inline[1].coefficient).toBeLessThan(0.85 * inline[0].coefficient)
  })

  it('leaves the first tube alone, and does not grow without limit', () => {
    expect(eissenbergRowMean(1)).toBe(1)
    expect(chenRowMean(1001, 1) * 1001 ** 0.25).toBeCloseTo(1.4, 10)
  })

  it('counts the condensate of both sides, twice it over viscosity', () => {
    const { rows } = solve(still('condensateFlow'))
    const [first] = rows
    const made = (first.heatFlux * Math.PI * 0.01905) / (1.63e5 + 0.375 * 1498 * 5)
    expect(first.filmReynolds / ((2 * made) / 1.614e-4)).toBeCloseTo(1, 6)
  })
})

function still(law: string): Input {
  return {
    fluid: {
      properties: {
        liquidDensity: 1146.7,
        latentHeat: 1.63e5,
        liquidViscosity: 1.614e-4,
        liquidConductivity: 0.0747,
        vapourDensity: 50.09,
        liquidSpecificHeat: 1498,
      },
    },
    saturationTemperature: 313.15,
    drive: { kind: 'wallSubcooling', wallSubcooling: 5 },
    tube: { outsideDiameter: 0.01905 },
    bundle: { ...bundle, length: 1 },
    methods: { ...STILL, inundation: law },
  }
}

describe('vapour', () => {
  it('slows from row to row, and shears and loses pressure with its own velocity', () => {
    const { rows } = vacuum()
    for (let r = 1; r < rows.length; r++)
      expect(rows[r].vapourVelocity as number).toBeLessThan(rows[r - 1].vapourVelocity as number)
    expect(rows[rows.length - 1].factors.shear).toBeLessThan(rows[0].factors.shear)
  })

  it('costs saturation temperature where it costs pressure', () => {
    const { rows, vapour } = vacuum()
    expect(vapour.saturationTemperatureDrop as number).toBeGreaterThan(0)
    expect(rows[rows.length - 1].saturationTemperature).toBeLessThan(rows[0].saturationTemperature)
    const free = vacuum({ methods: { vapourPressureDrop: 'none' } })
    expect(free.duty as number).toBeGreaterThan(vacuum().duty as number)
  })

  it('returns still vapour at no velocity, in line as well', () => {
    // The 0.8 of banks in line on the whole law would leave 0.58 G^(1/4).
    expect(fujiiUeharaKurata(0, 1e8, 1, false) / 1e8 ** 0.25).toBeCloseTo(0.7248, 3)
  })

  it('has a loss that stays finite and positive as flow dies, and across the joints of its fit', () => {
    for (const law of [
      zukauskas,
      (re: number, a: number, b: number, s: boolean) => gaddisGnielinski(re, a, b, s, 12),
    ])
      for (let e = -3; e < 5.8; e += 0.02) {
        const re = 10 ** e
        const xi = law(re, 1.5, 1.3, true)
        expect(xi).toBeGreaterThan(0)
        expect(xi * re * re).toBeLessThan(law(re * 1.05, 1.5, 1.3, true) * (re * 1.05) ** 2)
      }
  })
})

describe('the coolant', () => {
  it('does not jump at Re 2300', () => {
    const at = (velocity: number) =>
      chiller({}, {}, { velocity }).coolant as { reynolds: number; coefficient: number }
    const per = at(0.1).reynolds / 0.1
    const [below, above] = [at(2290 / per), at(2320 / per)]
    expect(above.coefficient / below.coefficient).toBeLessThan(1.25)
    expect(gnielinskiTurbulent(2301, 5.41, 0.00394) / 6.17).toBeGreaterThan(2)
  })

  it('loses pressure at entrances, exits and returns too', () => {
    const { coolant, passes } = chiller()
    const head = (995 * 2 * 2) / 2
    expect(passes).toHaveLength(2)
    // 2 × 1.5 + 0.5 heads are a fifth of the whole here.
    const friction = (coolant?.pressureDrop as number) - 3.5 * head
    expect(friction / (coolant?.pressureDrop as number)).toBeGreaterThan(0.7)
    expect(friction / (coolant?.pressureDrop as number)).toBeLessThan(0.8)
  })

  it('has the area of one pass for its velocity', () => {
    const one = chiller({}, { passes: 1 })
    const two = chiller({}, { passes: 2 })
    expect((one.coolant?.massFlow as number) / (two.coolant?.massFlow as number)).toBeCloseTo(2, 6)
  })
})

describe('geometry', () => {
  it('lets diagonal gaps govern where they are the narrower', () => {
    const naive = 1 - 1 / 1.25
    expect(minimumAreaFraction('square45', 1.25) / naive).toBeGreaterThan(1.3)
    expect(minimumAreaFraction('triangular60', 1.25) / naive).toBeGreaterThan(1.1)
    expect(minimumAreaFraction('triangular30', 1.25)).toBeCloseTo(naive, 12)
  })
})

describe('fins, drops and gas', () => {
  const water = { surfaceTension: 0.0589, liquidDensity: 961.9, vapourDensity: 0.598 }
  const fin = { rootDiameter: 0.01905, finHeight: 1e-3, finThickness: 5e-4, finGap: 5e-4, ...water }

  it('flood narrow gaps with water: Beatty and Katz give twice too much', () => {
    expect(retentionAngle(retentionGroup(0.0589, 961.9, 0.598, 5e-4, 0.02105))).toBe(0)
    const group = (961.9 ** 2 * 0.677 ** 3 * 9.80665 * 2.27e6) / (2.97e-4 * 5)
    const [d, out] = [0.01905, 0.02105]
    const fins = (Math.PI * ((out * out - d * d) / 2 + out * 5e-4)) / 1e-3
    const gaps = Math.PI * d * 0.5
    const naive = (beattyKatz(group, fins, gaps, 0.8, d, out) * (0.8 * fins + gaps)) / (Math.PI * d)
    const plain = nusseltTube(d, 5, 961.9, 0.598, 2.97e-4, 0.677, 2.27e6)
    expect(naive / plain / roseFinRatio(fin)).toBeGreaterThan(1.7)
    expect(beattyKatzLength(d, out)).toBeCloseTo((Math.PI * (out * out - d * d)) / (4 * out), 12)
  })

  it('take Celsius in dropwise fits, and hold the flux beyond 10 K', () => {
    expect(roseDropwiseFlux(373.15, 1)).toBeLessThan(0.5 * 1000 * 373.15 ** 0.8 * 5.3)
    expect(roseDropwiseFlux(373.15, 50)).toBe(roseDropwiseFlux(373.15, 10))
    expect(griffith(373.15)).toBeLessThan(0.4 * (51104 + 2044 * 373.15))
  })

  it('refuse interface fractions of one and more, and keep Ackermann finite at no flow', () => {
    expect(condensationMassFlux(0.018, 12350, 323, 0.01, 1, 0.9)).toBeNaN()
    expect(condensationMassFlux(0.018, 12350, 323, 0.01, 0.9, 0.9)).toBe(0)
    expect(ackermann(0)).toBe(1)
    expect(ackermann(1e-5)).toBeCloseTo(1 + 0.5e-5, 10)
  })
})

describe('plates', () => {
  it('have a wavy law that turns negative, and no film under upward stress', () => {
    expect(kutateladze(3)).toBeLessThan(0)
    expect(shearedPlate(1, 10, 990.2, 0.0831, 5.96e-4, 0.6375, 2.382e6, -1)).toBeNaN()
  })
})

describe('one law for all fluids', () => {
  it('does not hold: steam drips at low pressure where R134a falls in sheets', () => {
    const last = (rows: readonly { drainageMode: string | null }[]) => rows[rows.length - 1].drainageMode
    expect(last(vacuum().rows)).toBe('droplet')
    expect(['columnSheet', 'sheet', 'column']).toContain(last(chiller({}, { rows: 16 }).rows))
  })
})
