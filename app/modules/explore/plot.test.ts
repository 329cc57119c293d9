import { expect, test } from 'vitest'
import { type PointColumn, pointColumns } from './columns.ts'
import { boundsOf, type PlotInput, plotSpec } from './plot.ts'

const columns = pointColumns([
  { path: 'fluid', label: 'Fluid', symbol: '', dimension: 'none', kind: 'choice', tubeSized: false },
  { path: 'bundle.rows', label: 'Rows', symbol: 'N_r', dimension: 'count', kind: 'whole', tubeSized: false },
])
const column = (id: string) => columns.find((one) => one.id === id) as PointColumn

const input: PlotInput = {
  columns: {
    matching: 3,
    point: [4, 7, 9],
    x: [20000, 55000, 80000],
    y: [60, 45, 40],
    colour: [0, 1, 1],
    meetsLimits: [1, 1, 0],
    best: 7,
    front: [4, 7, 9],
  },
  x: column('coolantPressureDrop'),
  y: column('outsideArea'),
  colour: column('fluid'),
  colourValues: ['r134a', 'r717'],
  limits: { coolantPressureDrop: { max: 60000 }, length: { max: 6 } },
  ranges: {},
  names: { fluid: { r134a: 'R134a', r717: 'Ammonia' } },
  marks: [{ kind: 'best', label: 'Point 7', id: 7, x: 55000, y: 45 }],
}

test('values, limit and marks stand in the reader’s unit', () => {
  const spec = plotSpec(input, 'si')
  expect(spec.x).toMatchObject({ label: 'coolant pressure drop', unit: 'kPa', max: 60 })
  expect(spec.y.max).toBeUndefined()
  expect(spec.groups.map(({ label, ids, x }) => ({ label, ids, x }))).toEqual([
    { label: 'R134a', ids: [4], x: [20] },
    { label: 'Ammonia', ids: [7, 9], x: [55, 80] },
  ])
  expect(spec.marks[0]).toMatchObject({ x: 55, y: 45, id: 7 })
  expect(spec.front).toEqual({ x: [20, 55, 80], y: [60, 45, 40] })
  expect(plotSpec(input, 'us').x.max).toBe(8.702)
})

test('a front is drawn only where less of both is better', () => {
  expect(plotSpec({ ...input, y: column('overallCoefficient') }, 'si').front).toBeUndefined()
})

test('limits of the study bound the result they are on, whatever it is called', () => {
  expect(boundsOf(column('tubeLength'), input.limits, 'si')).toEqual({ min: undefined, max: 6 })
  expect(boundsOf(column('bundle.rows'), input.limits, 'si')).toEqual({ min: undefined, max: undefined })
})

test('a result colours on the continuous scale, with its ends said', () => {
  const spec = plotSpec(
    {
      ...input,
      columns: { ...input.columns, colour: [900, null, 1200] },
      colour: column('overallCoefficient'),
      colourValues: [],
    },
    'si',
  )
  expect(spec.groups).toHaveLength(1)
  expect(spec.groups[0].ids).toEqual([4, 9])
  expect(spec.scale).toEqual({ low: 900, high: 1200, lowText: '900', highText: '1200\u00a0W/(m²·K)' })
})

test('a mark without a value on an axis is left out', () => {
  const marks = [{ kind: 'selected', label: 'Point 1', id: 1, x: null, y: 3 }] as const
  expect(plotSpec({ ...input, marks }, 'si').marks).toEqual([])
})

test('a filter leaves out limits and marks beyond it, so that they do not stretch the axes', () => {
  const spec = plotSpec({ ...input, ranges: { coolantPressureDrop: { max: 40000 } } }, 'si')
  expect(spec.x.max).toBeUndefined()
  expect(spec.marks).toEqual([])
  expect(plotSpec({ ...input, ranges: { coolantPressureDrop: { min: 50000 } } }, 'si').x.max).toBe(60)
})
