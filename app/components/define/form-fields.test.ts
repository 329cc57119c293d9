import { describe, expect, it } from 'vitest'
import { METHOD_CHOICES } from '#engine/correlations/registry.ts'
import { displayUnit, parseQuantity } from '#engine/units.ts'
import {
  type Definition,
  definitionFromFields,
  type Fields,
  fieldOfFault,
  fieldsFromDefinition,
  listItems,
  METHOD_NAMES,
  QUANTITIES,
  SWEPT_FIELDS,
} from './form-fields.ts'

type Written = {
  case: { saturationTemperature: string; drive: Record<string, unknown> }
  sweep: { variables: { path?: string }[] }
}

const definition: Definition = {
  name: 'Chiller condenser',
  case: {
    fluid: 'r134a',
    saturationTemperature: '40 °C',
    duty: '300 kW',
    drive: {
      kind: 'coolant',
      coolant: 'water',
      inletTemperature: '30 °C',
      velocity: '1.5 m/s',
      foulingResistance: 1.76e-4,
    },
    corrections: [{ name: 'Stand B', group: 'film', factor: 0.92, source: '8 measured points' }],
    tube: {
      outsideDiameter: '3/4 in',
      wallThickness: '1.245 mm',
      material: 'copper',
      surface: { kind: 'plain' },
    },
    bundle: {
      shape: 'rectangular',
      layout: 'triangular30',
      pitchRatio: 1.25,
      rows: 12,
      tubesPerRow: 12,
      passes: 4,
      coolantEntry: 'bottom',
    },
    methods: { inundation: 'drainageMode' },
  },
  sweep: {
    variables: [
      { path: 'bundle.rows', values: [8, 12, 16] },
      { catalogue: ['19.05x1.245', '15.875x1.245'] },
      { path: 'drive.velocity', from: '1 m/s', to: '2.5 m/s', count: 16 },
      { path: 'fluid', values: ['r134a', 'r717'] },
    ],
    design: 'factorial',
  },
  objective: 'outsideArea',
  limits: { coolantPressureDrop: { max: '60 kPa' }, coolantVelocity: { min: '1 m/s', max: '2.2 m/s' } },
  optimise: { variables: [] },
}

describe('the definition and the form', () => {
  it('come back to the same definition, order of variables and unknown parts included', () => {
    const back = definitionFromFields(fieldsFromDefinition(definition, 'si'), 'si')
    expect(back).toEqual({
      ...definition,
      case: {
        ...(definition.case as object),
        drive: { ...(definition.case as Written['case']).drive, foulingResistance: '0.176 m²·K/kW' },
      },
    })
  })

  it('keeps a unit typed by hand and shows a number in the reader’s units', () => {
    const si = fieldsFromDefinition(definition, 'si')
    expect(si['tube.outsideDiameter']).toBe('3/4 in')
    expect(si['tube.wallThickness']).toBe('1.245')
    expect(si['coolant.foulingResistance']).toBe('0.176')
    const us = fieldsFromDefinition(
      { ...definition, case: { ...(definition.case as object), duty: 300_000 } },
      'us',
    )
    expect(Number(us.duty)).toBeCloseTo(300_000 / 0.29307107, 0)
    expect(us.saturationTemperature).toBe('40 °C')
  })

  it('writes what is typed in US customary units so that the engine reads the same', () => {
    const fields = { ...fieldsFromDefinition(definition, 'us'), saturationTemperature: '104' }
    const back = definitionFromFields(fields, 'us') as unknown as Written
    const read = parseQuantity(back.case.saturationTemperature, 'temperature')
    expect(read.ok && read.value).toBeCloseTo(313.15, 10)
  })

  it('every unit shown beside a field is one the engine reads', () => {
    for (const { dimension, hint } of Object.values(QUANTITIES))
      for (const system of ['si', 'us'] as const) {
        const unit = displayUnit(dimension, system, hint)
        expect(parseQuantity(`1 ${unit}`, dimension), `${dimension} ${unit}`).toMatchObject({ ok: true })
      }
  })

  it('knows the method choices of the registry', () => {
    expect([...METHOD_NAMES]).toEqual([...METHOD_CHOICES])
  })

  it('names every swept field once', () => {
    expect(new Set(SWEPT_FIELDS).size).toBe(SWEPT_FIELDS.length)
  })

  it('leaves out what has no say and keeps its text', () => {
    const fields: Fields = {
      ...fieldsFromDefinition(definition, 'si'),
      'drive.kind': 'wallSubcooling',
      'drive.wallSubcooling': '5',
      'coolant.named': '',
    }
    const back = definitionFromFields(fields, 'si') as unknown as Written
    expect(back.case.drive).toEqual({ kind: 'wallSubcooling', wallSubcooling: '5 K' })
    expect(back.sweep.variables.map((v) => v.path ?? 'catalogue')).toEqual([
      'bundle.rows',
      'catalogue',
      'fluid',
    ])
    expect(fields['drive.velocity']).toBe('1.5')
  })

  it('puts the coolant under the subcooling when it is named there', () => {
    const fields = {
      ...fieldsFromDefinition(definition, 'si'),
      'drive.kind': 'wallSubcooling',
      'drive.wallSubcooling': '5',
      'coolant.named': 'yes',
    }
    const back = definitionFromFields(fields, 'si') as unknown as Written
    expect(back.case.drive.coolant).toEqual({
      coolant: 'water',
      inletTemperature: '30 °C',
      foulingResistance: '0.176 m²·K/kW',
    })
    expect(fieldsFromDefinition(back as unknown as Definition, 'si')['coolant.inletTemperature']).toBe('30')
  })

  it('finds the field a fault speaks about', () => {
    const fields = fieldsFromDefinition(definition, 'si')
    expect(fieldOfFault('case.tube.outsideDiameter', fields)).toBe('tube.outsideDiameter')
    expect(fieldOfFault('case.drive.inletTemperature', fields)).toBe('coolant.inletTemperature')
    expect(fieldOfFault('sweep.variables.2.to', fields)).toBe('vary.drive.velocity.to')
    expect(fieldOfFault('sweep.variables.0.values.1', fields)).toBe('vary.bundle.rows.values')
    expect(fieldOfFault('limits.coolantPressureDrop', fields)).toBe('limits.coolantPressureDrop.max')
  })
})

describe('a list as typed', () => {
  it.each([
    ['12.7; 15.9; 19.05', ['12.7', '15.9', '19.05']],
    ['12.7 15.9 19.05', ['12.7', '15.9', '19.05']],
    ['12,7; 15,9', ['12,7', '15,9']],
    ['0.5; 0.75; 1 in', ['0.5 in', '0.75 in', '1 in']],
    ['4, 6, 8', ['4', '6', '8']],
    ['3/4 in; 1 in', ['3/4 in', '1 in']],
    ['5 K', ['5 K']],
    ['1 1/2 in', ['1 1/2 in']],
    ['', []],
  ])('%s', (text, items) => expect(listItems(text)).toEqual(items))
})
