import { describe, expect, it } from 'vitest'
import { fitGroup, parityOf } from '#engine/uncertainty/measured.ts'
import { baseCase, checkRows, columnFaults, guessColumns, IN_CELL, measuredPoints } from './columns.ts'
import { readCsv } from './read.ts'

const definition = {
  case: {
    fluid: 'r134a',
    saturationTemperature: '40 degC',
    duty: '20 kW',
    drive: { kind: 'coolant', coolant: 'water', inletTemperature: '27 degC', velocity: '1.5 m/s' },
    tube: { outsideDiameter: '19.05 mm', wallThickness: '1.245 mm', material: 'copper' },
    bundle: { pitchRatio: 1.25, rows: 5, tubesPerRow: 5 },
  },
}
const HEAD = 'Test,Water inlet temperature [degC],Mass flow (kg/s),Duty [kW]'

describe('columns', () => {
  it('are guessed from the words of the head and its units', () => {
    expect(guessColumns([...HEAD.split(','), 'Vapour pressure drop, Pa', 'dp [kPa]', 'Operator'])).toEqual([
      { target: 'name', unit: '' },
      { target: 'drive.inletTemperature', unit: '°C' },
      { target: 'drive.massFlow', unit: 'kg/s' },
      { target: 'measured.duty', unit: 'kW' },
      { target: 'measured.vapourPressureDrop', unit: 'Pa' },
      { target: 'measured.coolantPressureDrop', unit: 'kPa' },
      { target: '', unit: '' },
    ])
  })

  it('need a unit, one use, one of a pair that excludes itself, and something measured', () => {
    const faults = columnFaults(
      ['T', 'U', 'm', 'v'],
      [
        { target: 'drive.inletTemperature', unit: '' },
        { target: 'drive.inletTemperature', unit: 'kPa' },
        { target: 'drive.massFlow', unit: 'kg/s' },
        { target: 'drive.velocity', unit: 'm/s' },
      ],
    )
    expect(faults.join('\n')).toMatch(
      /“T”: its unit is missing; choose one of K, .*\n.*“U”: Coolant inlet temperature is chosen twice.*\n.*kPa is no unit of it.*\n.*only one of them.*\nNo column is a measured/,
    )
  })
})

describe('rows', () => {
  const sheet = readCsv(
    `${HEAD}\nA,27,12,24\nB,28,12,-3\nC,,12,24\nD,=1+1,12,24\nE,27 ft,12,24\nF,45,12,24\nG,29 degC,12,22.5\n`,
  )
  const columns = guessColumns(sheet.head)
  const base = baseCase(definition, 2)

  it('are points with their fields in place of the base case’s, or faults by column', () => {
    const { points, faults } = checkRows(sheet, columns, base)
    expect(points.map(({ name }) => name).slice(0, 1)).toEqual(['A'])
    expect(points[0]).toEqual({
      line: 2,
      name: 'A',
      given: { 'drive.inletTemperature': 300.15, 'drive.massFlow': 12 },
      measured: { duty: 24_000 },
    })
    expect(faults.map(({ line }) => line)).toEqual(expect.arrayContaining([3, 4, 5, 6, 7]))
    expect(faults.find(({ line }) => line === 3)).toMatchObject({
      column: 'Duty [kW]',
      problem: '-3 is not above 0',
    })
    expect(faults.find(({ line }) => line === 5)?.problem).toMatch(/formula/)
    expect(faults.every(({ problem, remedy }) => problem && remedy)).toBe(true)
  })

  it('say that the length is missing where neither study nor column gives it', () => {
    const { points, faults } = checkRows(sheet, columns, baseCase(definition, null))
    expect(points).toEqual([])
    expect(faults[0].problem).toBe('the length of the tubes is not known')
  })

  it('give the factor they were made with', () => {
    const made = readCsv(
      `Test,Velocity [m/s],Duty\n${[1, 1.2, 1.4, 1.6].map((v) => `v${v},${v},1 kW`).join('\n')}`,
    )
    const chosen = [
      { target: 'name', unit: '' },
      { target: 'drive.velocity', unit: 'm/s' },
      { target: 'measured.duty', unit: IN_CELL },
    ]
    const { points } = checkRows(made, chosen, base)
    const predicted = parityOf(measuredPoints(points, base, 'duty'), 'duty').points
    const scaled = points.map((point, i) => ({
      ...point,
      measured: { duty: predicted[i].predicted as number },
    }))
    expect(fitGroup(measuredPoints(scaled, base, 'duty'), 'duty', 'film')?.factor).toBeCloseTo(1, 6)
    const measured = measuredPoints(
      scaled,
      { ...base, corrections: [{ name: 'x', group: 'film', factor: 0.8, source: 'x' }] },
      'duty',
    )
    expect(fitGroup(measured, 'duty', 'film')?.factor).toBeCloseTo(1 / 0.8, 4)
  })
})
