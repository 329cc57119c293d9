import { createElement } from 'react'
import { renderToString } from 'react-dom/server'
import { expect, test } from 'vitest'
import { axisRange, axisTitle, place, ticks } from './axes.ts'
import { LineChart } from './line-chart.tsx'
import {
  beyond,
  type ChartTheme,
  drawnBox,
  lowerFront,
  pointerShapes,
  type Scatter,
  scatterFigure,
  scatterRanges,
} from './scatter.ts'
import { ScatterPlot } from './scatter-plot.tsx'

const theme: ChartTheme = {
  sheet: '#fff',
  ink: '#111',
  soft: '#555',
  line: '#ccc',
  copper: '#b0561f',
  copperInk: '#8f4415',
  copperWash: '#f3e0d3',
  verdigris: '#0f6b66',
  categories: ['#1', '#2', '#3', '#4', '#5', '#6'],
  tones: ['#a', '#b'],
  font: 'Manrope',
}
const spec: Scatter = {
  x: { label: 'coolant pressure drop', unit: 'kPa', max: 60 },
  y: { label: 'outside area', unit: 'm²' },
  groups: [
    { label: '15.88 mm', x: [20, 55, 80], y: [60, 45, 40], ids: [4, 7, 9], met: [true, true, false] },
    { label: '19.05 mm', x: [30], y: [52], ids: [12], met: [false] },
  ],
  marks: [{ kind: 'best', label: 'Point 7, least', x: 55, y: 45, id: 7 }],
}

test('a range shows every value and the limit, with room around', () => {
  const { x, y } = scatterRanges(spec)
  expect(x.low).toBeLessThanOrEqual(20)
  expect(x.high).toBeGreaterThan(80)
  expect(y.low).toBeLessThan(40)
  expect(y.high).toBeGreaterThan(60)
  expect(axisRange([5, 6], { label: '', unit: '', max: 20 }).high).toBeGreaterThan(20)
  expect(axisRange([8, 14], { label: 'rows', unit: '', whole: true })).toEqual({
    low: 7.5,
    high: 14.5,
    log: false,
  })
  expect(axisRange([Number.NaN])).toEqual({ low: 0, high: 1, log: false })
  const flat = axisRange([5, 5, 5])
  expect(flat.low).toBeLessThan(5)
  expect(flat.high).toBeGreaterThan(5)
})

test('values over several powers of ten are set on a logarithmic scale', () => {
  const range = axisRange([1, 3, 10, 100, 1000])
  expect(range.log).toBe(true)
  expect(place(Math.sqrt(range.low * range.high), range)).toBeCloseTo(0.5, 12)
  expect(ticks(range)).toEqual([1, 3, 10, 30, 100, 300, 1000])
})

test('ticks are round and inside the range', () => {
  expect(ticks({ low: 0, high: 100, log: false }, 5)).toEqual([0, 20, 40, 60, 80, 100])
  expect(ticks({ low: 0.12, high: 0.33, log: false }, 4)).toEqual([0.2, 0.3])
  expect(axisTitle({ label: 'rows', unit: '' })).toBe('rows')
})

test('points that miss a limit are drawn apart and faded; every point is drawn once', () => {
  const { data } = scatterFigure(spec, theme)
  const traces = data as { customdata?: number[]; opacity?: number; marker?: { symbol: string } }[]
  const faded = traces.filter((trace) => trace.opacity !== undefined && trace.opacity < 0.5)
  const plain = traces.filter((trace) => trace.opacity !== undefined && trace.opacity > 0.5)
  expect(faded.flatMap((trace) => trace.customdata)).toEqual([9, 12])
  expect(plain.flatMap((trace) => trace.customdata)).toEqual([4, 7])
  expect(new Set(plain.map((trace) => trace.marker?.symbol)).size).toBe(2)
})

test('a limit is a line and a tinted region that reaches past the data', () => {
  const { layout } = scatterFigure(spec, theme)
  const [region, line] = layout.shapes ?? []
  expect(region).toMatchObject({ type: 'rect', x0: 60, fillcolor: theme.copperWash })
  expect(Number(region?.x1)).toBeGreaterThan(scatterRanges(spec).x.high)
  expect(line).toMatchObject({ type: 'line', x0: 60, x1: 60 })
  expect(layout.annotations?.[0].text).toBe('<b>at most 60 kPa</b>')
  expect(beyond({ label: '', unit: '', min: 1, max: 2 }, { low: 0, high: 3, log: false })).toHaveLength(2)
  expect(beyond(spec.y, scatterRanges(spec).y)).toEqual([])
})

test('on a logarithmic axis the limit’s line stands at the value and its words at the logarithm', () => {
  const wide: Scatter = {
    ...spec,
    groups: [
      { label: '', x: [1, 10, 100, 1000], y: [1, 2, 3, 4], ids: [0, 1, 2, 3], met: [true, true, true, true] },
    ],
    marks: [],
  }
  const { layout } = scatterFigure(wide, theme)
  expect(layout.xaxis?.type).toBe('log')
  expect(layout.shapes?.[1]).toMatchObject({ x0: 60 })
  expect(layout.annotations?.[0].x).toBeCloseTo(Math.log10(60), 12)
})

test('a point looked at is a shape of fixed size, so that the points need not be drawn anew', () => {
  const shapes = pointerShapes([{ kind: 'selected', label: 'Point 4', x: 20, y: 60, id: 4 }], theme)
  expect(shapes).toHaveLength(2)
  expect(shapes[1]).toMatchObject({
    type: 'circle',
    xsizemode: 'pixel',
    xanchor: 20,
    yanchor: 60,
    line: { color: theme.copper },
  })
})

test('a box drawn by hand is read from the axes, logarithms and all', () => {
  const ranges = { x: { low: 1, high: 1000, log: true }, y: { low: 30, high: 90, log: false } }
  const change = { 'xaxis.range[0]': 1, 'xaxis.range[1]': 2, 'yaxis.range[0]': 60, 'yaxis.range[1]': 40 }
  expect(drawnBox(change, ranges)).toEqual({ x: [10, 100], y: [40, 60] })
  expect(drawnBox({ 'xaxis.range[0]': 1, 'xaxis.range[1]': 2 }, ranges)?.y).toEqual([30, 90])
  expect(drawnBox({ 'xaxis.autorange': true }, ranges)).toBeNull()
})

test('no trace needs evaluated code: all are SVG scatter', () => {
  const { data } = scatterFigure({ ...spec, front: { x: [1, 2], y: [2, 1] } }, theme)
  expect(new Set(data.map((trace) => trace.type))).toEqual(new Set(['scatter']))
})

test('the lower front is what no point beats on both axes', () => {
  const front = lowerFront([
    {
      label: '',
      x: [1, 2, 3, 2.5, Number.NaN],
      y: [9, 5, 6, 4, 1],
      ids: [0, 1, 2, 3, 4],
      met: [true, true, true, true, true],
    },
  ])
  expect(front).toEqual({ x: [1, 2, 2.5], y: [9, 5, 4] })
})

test('the server draws the points, the limit and a name before any script runs', () => {
  const page = renderToString(createElement(ScatterPlot, { name: 'Area against drop', spec }))
  expect(page).toContain('aria-label="Area against drop"')
  expect(page.replaceAll('<!-- -->', '')).toContain('at most 60 kPa')
  expect(page.match(/h0/g)?.length).toBe(4 + 3)
  expect(page).toContain('15.88 mm')
})

test('a line chart is named, breaks where there is no value, and has its values as a table', () => {
  const page = renderToString(
    createElement(LineChart, {
      name: 'Row coefficient',
      x: { label: 'row', unit: '', whole: true },
      y: { label: 'coefficient', unit: 'W/(m²·K)' },
      lines: [
        { label: 'now', x: [1, 2, 3, 4], y: [1750, 1600, null, 1500] },
        { label: 'before', x: [1, 2, 3, 4], y: [1700, 1550, 1500, 1450] },
      ],
    }),
  )
  expect(page).toContain('aria-label="Row coefficient"')
  expect(/d="(M[^"]*L[^"]*M[^"]*)" fill="none" stroke="var\(--category-0\)"/.test(page)).toBe(true)
  expect(page).toContain('stroke-dasharray="7 4"')
  const body = /<tbody>(.*)<\/tbody>/.exec(page)?.[1] ?? ''
  expect(body.match(/<tr>/g)).toHaveLength(4)
  expect(body).toContain('–')
})
