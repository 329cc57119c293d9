import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  acceptedUnits,
  type Dimension,
  type DisplayHint,
  displayUnit,
  formatNumber,
  formatQuantity,
  fromDisplay,
  groupDigits,
  parseQuantity,
  toDisplay,
} from './units.ts'

const read = (text: string | number, dimension: Dimension): number => {
  const parsed = parseQuantity(text, dimension)
  if (!parsed.ok) throw new Error(`${parsed.problem}; ${parsed.remedy}`)
  return parsed.value
}
const refusal = (text: string | number, dimension: Dimension): string => {
  const parsed = parseQuantity(text, dimension)
  if (parsed.ok) throw new Error(`${text} was read as ${parsed.value}`)
  expect(parsed.remedy.length).toBeGreaterThan(0)
  return parsed.problem
}

describe('a quantity as typed', () => {
  it.each<[string | number, Dimension, number]>([
    ['3/4 in', 'length', 0.01905],
    ['3/4"', 'length', 0.01905],
    ['1 1/4 in', 'length', 0.03175],
    ['1-1/4 in', 'length', 0.03175],
    ['¾ in', 'length', 0.01905],
    ['1½ in', 'length', 0.0381],
    ['19.05 mm', 'length', 0.01905],
    ['19,05 mm', 'length', 0.01905],
    ['19.05mm', 'length', 0.01905],
    ['1.5 µm', 'length', 1.5e-6],
    ['1.5e-6', 'length', 1.5e-6],
    ['12 ft', 'length', 3.6576],
    [0.019, 'length', 0.019],
    ['40 degC', 'temperature', 313.15],
    ['40 °C', 'temperature', 313.15],
    ['40°C', 'temperature', 313.15],
    ['40 C', 'temperature', 313.15],
    ['104 degF', 'temperature', 313.15],
    ['-40 °F', 'temperature', 233.15],
    ['−40 °C', 'temperature', 233.15],
    ['313.15', 'temperature', 313.15],
    ['9 degF', 'temperatureDifference', 5],
    ['9 °F', 'temperatureDifference', 5],
    ['5 degC', 'temperatureDifference', 5],
    ['5 K', 'temperatureDifference', 5],
    ['60 kPa', 'pressure', 60e3],
    ['0,6 bar', 'pressure', 60e3],
    ['1 atm', 'pressure', 101325],
    ['0.95 psi', 'pressure', 6550.02],
    ['760 mmHg', 'pressure', 101325],
    ['1 MPa', 'pressure', 1e6],
    ['40 MW', 'power', 40e6],
    ['1 200 kW', 'power', 1.2e6],
    ['1,200,000 W', 'power', 1.2e6],
    ['1 TR', 'power', 3516.85],
    ['0.0005 h ft2 F/Btu', 'foulingResistance', 8.80551e-5],
    ['0.0005 h·ft²·°F/Btu', 'foulingResistance', 8.80551e-5],
    ['1.76e-4 m2K/W', 'foulingResistance', 1.76e-4],
    ['0.176 m²·K/kW', 'foulingResistance', 1.76e-4],
    ['400 Btu/h ft2 F', 'heatTransferCoefficient', 2271.31],
    ['400 Btu/(h ft2 F)', 'heatTransferCoefficient', 2271.31],
    ['2 kW/m2K', 'heatTransferCoefficient', 2000],
    ['51 W/mK', 'conductivity', 51],
    ['1 Btu/lb/degF', 'specificHeat', 4186.8],
    ['0.8 cP', 'viscosity', 8e-4],
    ['0.8 mPa s', 'viscosity', 8e-4],
    ['72 dyn/cm', 'surfaceTension', 0.072],
    ['26 fpi', 'perLength', 26 / 0.0254],
    ['1000 1/m', 'perLength', 1000],
    ['8 %', 'fraction', 0.08],
    ['35 gpm', 'volumeFlow', 2.20816e-3],
    ['60000 lb/h', 'massFlow', 7.55987],
    ['1.5 m/s', 'velocity', 1.5],
    ['7 ft/s', 'velocity', 2.1336],
  ])('%s as %s is %d', (text, dimension, value) => {
    expect(Math.abs(read(text, dimension) / value - 1)).toBeLessThan(5e-6)
  })

  it('leaves no binary remainder: 19.05 mm is the number 0.01905', () => {
    expect(read('19.05 mm', 'length')).toBe(0.01905)
    expect(read('3/4 in', 'length')).toBe(0.01905)
    expect(read('40 degC', 'temperature')).toBe(313.15)
  })

  it('tells a temperature from a difference', () => {
    expect(read('9 degF', 'temperature')).toBeCloseTo(260.372, 3)
    expect(read('9 degF', 'temperatureDifference')).toBe(5)
  })

  it.each<[string | number, Dimension]>([
    ['', 'length'],
    ['   ', 'length'],
    ['abc', 'length'],
    ['mm', 'length'],
    ['19 mm mm', 'length'],
    ['19 kg', 'length'],
    ['19 toString', 'length'],
    ['19 __proto__', 'length'],
    ['1/0 in', 'length'],
    ['1.2.3 mm', 'length'],
    ['1,2,3 mm', 'length'],
    ['--5 K', 'temperatureDifference'],
    ['1e999 m', 'length'],
    ['NaN', 'length'],
    ['Infinity', 'length'],
    [Number.NaN, 'length'],
    [Number.POSITIVE_INFINITY, 'length'],
    ['40 mw', 'power'],
    ['1,500 mm', 'length'],
  ])('refuses %s as %s and says what to write', (text, dimension) => {
    expect(refusal(text, dimension)).not.toBe('')
  })

  it('names the two readings of a comma before three digits', () => {
    const parsed = parseQuantity('1,500 mm', 'length')
    expect(parsed).toMatchObject({ ok: false, remedy: 'write 1500 or 1.500' })
  })

  it('never throws, whatever is typed', () => {
    fc.assert(
      fc.property(fc.string({ maxLength: 60, unit: 'binary' }), (text) => {
        const parsed = parseQuantity(text, 'pressure')
        return parsed.ok ? Number.isFinite(parsed.value) : parsed.problem.length < 200
      }),
      { seed: 20_260_101, numRuns: 2000 },
    )
  })
})

const DIMENSIONS: readonly [Dimension, DisplayHint?][] = [
  ['temperature'],
  ['temperatureDifference'],
  ['pressure'],
  ['pressure', 'small'],
  ['pressure', 'large'],
  ['length'],
  ['length', 'tube'],
  ['length', 'small'],
  ['length', 'roughness'],
  ['area'],
  ['volumeFlow'],
  ['power'],
  ['power', 'small'],
  ['power', 'large'],
  ['massFlow'],
  ['velocity'],
  ['heatFlux'],
  ['heatTransferCoefficient'],
  ['foulingResistance'],
  ['conductivity'],
  ['density'],
  ['specificHeat'],
  ['viscosity'],
  ['surfaceTension'],
  ['specificEnthalpy'],
  ['mass'],
  ['molarMass'],
  ['perLength'],
  ['angle'],
  ['energyPrice'],
  ['areaPrice'],
  ['time'],
  ['fraction'],
]

describe.each(['si', 'us'] as const)('display in %s', (system) => {
  it.each(DIMENSIONS)('%s %s comes back to twelve digits', (dimension, hint) => {
    for (const value of [1e-6, 0.0321, 1, 313.15, 12345.678, 4e7]) {
      const shown = toDisplay(value, dimension, system, hint)
      expect(shown.unit).toBe(displayUnit(dimension, system, hint))
      const back = fromDisplay(shown.value, dimension, system, hint)
      // A temperature near 0 K is all scale zero: its digits count from there.
      const scale = dimension === 'temperature' ? Math.max(value, 273.15) : value
      expect(Math.abs(back - value)).toBeLessThan(1e-12 * scale)
    }
  })

  it('shows a unit that can be typed back', () => {
    for (const [dimension, hint] of DIMENSIONS) {
      const unit = displayUnit(dimension, system, hint)
      if (unit.startsWith('10')) continue // 10⁶ Btu/h is a heading, typed as MMBtu/h
      expect(read(`2 ${unit}`, dimension), `${dimension} in ${unit}`).toBeCloseTo(
        fromDisplay(2, dimension, system, hint),
        10,
      )
    }
  })
})

it('reads every unit it offers', () => {
  for (const [dimension] of DIMENSIONS)
    for (const unit of acceptedUnits(dimension))
      if (unit !== 'parts of 1')
        expect(parseQuantity(`2 ${unit}`, dimension), unit).toMatchObject({ ok: true })
})

describe('numbers as printed', () => {
  it.each<[number | null | undefined, number, string]>([
    [1046.16, 4, '1046'],
    [0.0123456, 3, '0.0123'],
    [9.9996, 4, '10.00'],
    [99999.6, 4, '100000'],
    [-2.5, 2, '−2.5'],
    [0, 4, '0'],
    [1.76e-7, 3, '1.76e-7'],
    [null, 4, '–'],
    [undefined, 4, '–'],
    [Number.NaN, 4, '–'],
  ])('%s to %d digits reads %s', (value, digits, text) => {
    expect(formatNumber(value, digits)).toBe(text)
  })

  it('sets the unit after a no-break space, signs of degree and percent as usual', () => {
    expect(formatQuantity(40900, 'pressure', 'si', { digits: 3 })).toBe('40.9\u00a0kPa')
    expect(formatQuantity(313.15, 'temperature', 'si', { digits: 3 })).toBe('40.0\u00a0°C')
    expect(formatQuantity(0.08, 'fraction', 'si', { digits: 2 })).toBe('8.0\u00a0%')
    expect(formatQuantity(0.1, 'energyPrice', 'si', { digits: 2 })).toBe('0.10/kWh')
    expect(formatQuantity(null, 'pressure', 'us')).toBe('–')
    expect(formatQuantity(0.01905, 'length', 'us', { hint: 'tube', digits: 3 })).toBe('0.750\u00a0in')
  })

  it('groups digits by three on both sides of the point', () => {
    expect(groupDigits('−1234567.8901')).toEqual({
      sign: '−',
      whole: ['1', '234', '567'],
      decimals: ['890', '1'],
      exponent: '',
    })
  })
})
