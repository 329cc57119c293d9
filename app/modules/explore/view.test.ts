import { expect, test } from 'vitest'
import { type PointColumn, pointColumns, shown, unitOf } from './columns.ts'
import { boundToSi, changed, filterWords, parseView, unfiltered, valueText } from './view.ts'

const columns = pointColumns([
  {
    path: 'tube.outsideDiameter',
    label: 'Tube outside diameter',
    symbol: 'D_o',
    dimension: 'length',
    kind: 'number',
    tubeSized: true,
  },
  { path: 'bundle.rows', label: 'Rows', symbol: 'N_r', dimension: 'count', kind: 'whole', tubeSized: false },
  { path: 'fluid', label: 'Fluid', symbol: '', dimension: 'none', kind: 'choice', tubeSized: false },
  { path: 'duty', label: 'Duty', symbol: 'Q', dimension: 'power', kind: 'number', tubeSized: false },
])
const column = (id: string) => columns.find((one) => one.id === id) as PointColumn
const search =
  'x=coolantPressureDrop&y=outsideArea&sort=outsideArea&dir=down&page=2&point=17&min.outsideArea=30&max.outsideArea=50&max.coolantPressureDrop=60000&all=1&fluid=r134a&tube.outsideDiameter=0.01905'

test('the URL’s view is read; what names nothing is left out', () => {
  const view = parseView(
    new URLSearchParams(`${search}&colour=nonsense&max.nonsense=3&max.fluid=2&pin=3&pin=x`),
    columns,
  )
  expect(view).toMatchObject({
    x: 'coolantPressureDrop',
    y: 'outsideArea',
    colour: null,
    sort: 'outsideArea',
    descending: true,
    page: 2,
    point: 17,
    pinned: [3],
    all: true,
    ranges: { outsideArea: { min: 30, max: 50 }, coolantPressureDrop: { max: 60000 } },
    inputs: { fluid: 'r134a', 'tube.outsideDiameter': 0.01905 },
  })
  const empty = parseView(new URLSearchParams('page=-1&point=1.5&min.outsideArea='), columns)
  expect(empty).toMatchObject({ page: 0, point: null, ranges: {}, all: false })
  expect(parseView(new URLSearchParams('point=refined'), columns).point).toBe('refined')
})

test('a swept duty stands once, as the input', () => {
  expect(columns.filter(({ id }) => id === 'duty').map(({ kind }) => kind)).toEqual(['input'])
  expect(columns.some(({ id }) => id === 'outcome' || id === 'notes')).toBe(false)
})

test('changing the order or a filter goes back to the first page; choosing a point does not', () => {
  const now = new URLSearchParams(search)
  expect(changed(now, { sort: 'tubeLength' })).not.toContain('page=')
  expect(changed(now, { point: 18 })).toContain('page=2')
  expect(changed(now, { column: ['bundle.rows', 'outsideArea'] })).toContain(
    'column=bundle.rows&column=outsideArea',
  )
  expect(changed(new URLSearchParams('x=a'), { x: null })).toBe('?')
})

test('filters are said in words, each with what lifts it', () => {
  const view = parseView(new URLSearchParams(search), columns)
  const names = { fluid: { r134a: 'R134a' } }
  const words = filterWords(view, columns, 'si', names)
  expect(words.map(({ text }) => text.replaceAll('\u00a0', ' '))).toEqual([
    'outside area 30 to 50 m²',
    'coolant pressure drop at most 60 kPa',
    'fluid R134a',
    'tube outside diameter 19.05 mm',
  ])
  expect(words[0].without).toEqual({ 'min.outsideArea': null, 'max.outsideArea': null })
  expect(filterWords(view, columns, 'us', names)[1].text).toBe('coolant pressure drop at most 8.702 psi')
  const left = new URLSearchParams(unfiltered(new URLSearchParams(search), columns))
  expect([...left.keys()]).toEqual(['x', 'y', 'sort', 'dir', 'point', 'all'])
})

test('bounds are typed in the reader’s unit and carried in SI', () => {
  expect(boundToSi('60', column('coolantPressureDrop'), 'si')).toBe(60000)
  expect(boundToSi('0,75', column('tube.outsideDiameter'), 'us')).toBeCloseTo(0.01905, 12)
  expect(boundToSi('x', column('outsideArea'), 'si')).toBeNull()
  expect(unitOf(column('vapourPressureDrop'), 'si')).toBe('Pa')
  expect(shown(0.01905, column('tube.outsideDiameter'), 'si')).toBe(19.05)
  expect(valueText(14, column('bundle.rows'), 'si')).toBe('14')
})
