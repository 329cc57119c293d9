// The engine's quick march against the plain one: axial segments and bisection, nothing shared but correlations and
// property functions.
import { describe, expect, it } from 'vitest'
import { parseCase } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import { plainMarch } from './plain-march.ts'

const water = (velocity: number, inlet: number) => ({
  kind: 'coolant',
  coolant: 'water',
  inletTemperature: inlet,
  velocity,
  foulingResistance: 8.8e-5,
})
const CASES = {
  'R134a, four passes': {
    fluid: 'r134a',
    saturationTemperature: 313.15,
    drive: water(1.5, 303.15),
    tube: { outsideDiameter: 0.01905, wallThickness: 0.001245, conductivity: 385 },
    bundle: { layout: 'triangular30', pitchRatio: 1.25, rows: 8, tubesPerRow: 6, passes: 4, length: 3 },
  },
  'vacuum steam, sheared': {
    fluid: 'water',
    saturationTemperature: 312.15,
    drive: water(2, 293.15),
    tube: { outsideDiameter: 0.0254, wallThickness: 0.000711, conductivity: 20.5 },
    bundle: { layout: 'triangular60', pitchRatio: 1.3, rows: 6, tubesPerRow: 10, passes: 1, length: 3 },
  },
  'ammonia in line, coolant from the top': {
    fluid: 'r717',
    saturationTemperature: 308.15,
    drive: water(1.8, 300.15),
    tube: {
      outsideDiameter: 0.0254,
      wallThickness: 0.002108,
      conductivity: 51,
      outsideFoulingResistance: 1.76e-4,
    },
    bundle: {
      layout: 'square90',
      pitchRatio: 1.25,
      rows: 6,
      tubesPerRow: 5,
      passes: 2,
      coolantEntry: 'top',
      length: 2,
    },
  },
}

describe.each(Object.entries(CASES))('%s', (_, input) => {
  it('agrees in duty, outlet, pressure drops and every row', () => {
    const parsed = parseCase(input)
    if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
    const quick = evaluate(parsed.case)
    const plain = plainMarch(parsed.case, { segments: 2, length: input.bundle.length })
    const near = (a: number | null | undefined, b: number, share: number) =>
      expect(Math.abs((a as number) / b - 1)).toBeLessThan(share)
    // Two segments a tube leave a few thousandths.
    near(quick.duty, plain.duty, 5e-3)
    near(quick.condensateRate, plain.condensate, 5e-3)
    near(quick.coolant?.pressureDrop, plain.coolantDrop, 2e-3)
    near(quick.vapour.pressureDrop, plain.vapourDrop, 1.5e-2)
    near(
      (quick.coolant?.outletTemperature as number) - input.drive.inletTemperature,
      plain.coolantOutlet - input.drive.inletTemperature,
      5e-3,
    )
    for (const [r, row] of quick.rows.entries()) near(row.heatFlux, plain.rowFlux[r], 1.2e-2)
  }, 120_000)
})
