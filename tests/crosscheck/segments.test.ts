// The plain march with ever finer axial segments tends to the exact integral of one tube, and the engine stands on it.
import { expect, it } from 'vitest'
import { parseCase } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import { plainMarch } from './plain-march.ts'

const TUBE = {
  fluid: {
    properties: {
      liquidDensity: 990.2,
      latentHeat: 2.382e6,
      liquidViscosity: 5.96e-4,
      liquidConductivity: 0.6375,
      vapourDensity: 0.0831,
      liquidSpecificHeat: 4180,
    },
  },
  saturationTemperature: 323.15,
  drive: {
    kind: 'coolant',
    coolant: { properties: { density: 995.6, viscosity: 7.97e-4, conductivity: 0.6155, specificHeat: 4179 } },
    inletTemperature: 298.15,
    velocity: 1,
    foulingResistance: 1e-4,
  },
  tube: { outsideDiameter: 0.01905, wallThickness: 0.001651, conductivity: 110 },
  bundle: { layout: 'square90', pitchRatio: 1.25, rows: 1, tubesPerRow: 1, length: 4 },
  methods: { vapourShear: 'none', vapourPressureDrop: 'none', latentHeat: 'plain', inundation: 'none' },
}
// A = m cp [(4/C)(x1^(1/4) − x2^(1/4)) + (3/(4 U)) ln(x1/x2)] solved for the outlet by bisection elsewhere.
const EXACT = 9987.7301

it('tends to the closed form as segments are halved', () => {
  const parsed = parseCase(TUBE)
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
  const off = [1, 2, 4, 8].map((segments) =>
    Math.abs(plainMarch(parsed.case, { segments, length: 4 }).duty / EXACT - 1),
  )
  for (let i = 1; i < off.length; i++) expect(off[i]).toBeLessThan(off[i - 1] / 1.8)
  expect(off[3]).toBeLessThan(1e-3)
  expect(Math.abs((evaluate(parsed.case).duty as number) / EXACT - 1)).toBeLessThan(5e-4)
})
