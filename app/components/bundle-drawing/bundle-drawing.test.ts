import { createElement } from 'react'
import { renderToString } from 'react-dom/server'
import { expect, test } from 'vitest'
import { UnitsProvider } from '#app/components/ui/number.tsx'
import { LAYOUTS } from '#engine/correlations/geometry.ts'
import type { DrainageMode, RowResult } from '#engine/result.ts'
import { BundleDrawing, BundleThumbnail } from './bundle-drawing.tsx'
import {
  type BundleGeometry,
  passBands,
  passOfRow,
  roundLength,
  rowTubes,
  section,
  toneOf,
} from './layout.ts'
import { drainageSentence, geometrySentence, idleSentence, rowSentence, shadeSentence } from './words.ts'

const bundle = (given: Partial<BundleGeometry> = {}): BundleGeometry => ({
  shape: 'rectangular',
  layout: 'triangular30',
  outsideDiameter: 0.01905,
  pitchRatio: 1.25,
  rows: 14,
  tubesPerRow: 17,
  passes: 2,
  coolantEntry: 'bottom',
  ...given,
})

const row = (n: number, given: Partial<RowResult> = {}): RowResult => ({
  row: n,
  tubes: 17,
  saturationTemperature: 313.15,
  wallTemperature: 307.15,
  coolantTemperature: 303.15,
  coefficient: 2000 - 50 * n,
  wallSubcooling: 6,
  heatFlux: 12000 - 300 * n,
  condensateIn: 0.001 * (n - 1),
  vapourVelocity: 0.4,
  gasMoleFraction: 0,
  filmReynolds: 15 * n,
  galileo: 1e10,
  drainageMode: 'droplet',
  factors: { inundation: 1, shear: 1, gas: 1, surface: 1 },
  ...given,
})
const rowsOf = (count: number, mode: (n: number) => DrainageMode = () => 'droplet') =>
  Array.from({ length: count }, (_, i) => row(i + 1, { drainageMode: mode(i + 1) }))

const geometries = LAYOUTS.flatMap((layout) => [
  bundle({ layout }),
  bundle({ layout, rows: 1, tubesPerRow: 1, passes: 1 }),
  ...[3, 4, 17, 30].map((rows) => bundle({ layout, shape: 'circular', rows, tubesPerRow: undefined })),
])

const centres = (geometry: BundleGeometry) => {
  const tubes = rowTubes(geometry) as number[]
  const shape = section(geometry, tubes)
  return shape.rows.flatMap((place) =>
    Array.from({ length: place.drawn }, (_, i) => ({
      x: place.x + i * shape.transversePitch,
      y: place.y,
    })),
  )
}

test('every tube of every layout stands a pitch from its nearest neighbour and inside the picture', () => {
  for (const geometry of geometries) {
    const points = centres(geometry)
    const shape = section(geometry, rowTubes(geometry) as number[])
    const pitch = geometry.outsideDiameter * geometry.pitchRatio
    let nearest = Number.POSITIVE_INFINITY
    for (let i = 0; i < points.length; i++)
      for (let j = 0; j < i; j++)
        nearest = Math.min(nearest, Math.hypot(points[i].x - points[j].x, points[i].y - points[j].y))
    if (points.length > 1 && geometry.shape === 'rectangular') expect(nearest / pitch).toBeCloseTo(1, 9)
    if (points.length > 1) expect(nearest / pitch).toBeGreaterThan(1 - 1e-9)
    const radius = geometry.outsideDiameter / 2
    for (const { x, y } of points) {
      expect(x).toBeGreaterThanOrEqual(radius - 1e-12)
      expect(x).toBeLessThanOrEqual(shape.width - radius + 1e-12)
      expect(y).toBeLessThanOrEqual(shape.height - radius + 1e-12)
    }
  }
})

test('a wide rectangular bundle is cut and says how many tubes are not drawn', () => {
  const wide = bundle({ tubesPerRow: 100, rows: 20, passes: 1 })
  const shape = section(wide, rowTubes(wide) as number[])
  expect(shape.cut).toBe(true)
  expect(shape.rows[0]).toMatchObject({ tubes: 100, drawn: 40 })
  const page = renderToString(createElement(BundleDrawing, { geometry: wide }))
  expect(page.replaceAll('<!-- -->', '')).toContain(
    'The first 40 tubes of each row are drawn; 60 more stand to the right.',
  )
})

test('passes are bands cut at floor(j rows / passes) from the coolant inlet', () => {
  const passes = (entry: 'bottom' | 'top') =>
    Array.from({ length: 7 }, (_, i) => passOfRow(i + 1, 7, 3, entry))
  expect(passes('bottom')).toEqual([3, 3, 3, 2, 2, 1, 1])
  expect(passes('top')).toEqual([1, 1, 2, 2, 3, 3, 3])
  const shape = section(bundle({ rows: 7, passes: 3 }), new Array(7).fill(4))
  expect(passBands(shape.rows)).toEqual([
    { pass: 3, firstRow: 1, lastRow: 3 },
    { pass: 2, firstRow: 4, lastRow: 5 },
    { pass: 1, firstRow: 6, lastRow: 7 },
  ])
})

test('a row is one line of round dashes, one pitch apart, as thick as a tube', () => {
  const geometry = bundle({ rows: 6, tubesPerRow: 9 })
  const page = renderToString(
    createElement(BundleDrawing, { geometry, rows: rowsOf(6).map((one) => ({ ...one, tubes: 9 })) }),
  )
  const outlines = [...page.matchAll(/<line [^>]*stroke="var\(--verdigris\)"[^>]*>/g)].map(([line]) => {
    const number = (name: string) => Number(new RegExp(` ${name}="([\\d.-]+)"`).exec(line)?.[1])
    const pitch = Number(/stroke-dasharray="0 ([\d.]+)"/.exec(line)?.[1])
    return { x1: number('x1'), x2: number('x2'), y: number('y1'), width: number('stroke-width'), pitch }
  })
  expect(outlines).toHaveLength(6)
  for (const { x1, x2, width, pitch } of outlines) {
    expect(Math.floor((x2 - x1) / pitch) + 1).toBe(9)
    expect(pitch / width).toBeCloseTo(1.25, 2)
  }
  expect((outlines[1].y - outlines[0].y) / outlines[0].pitch).toBeCloseTo(Math.sqrt(3) / 2, 2)
  expect((outlines[1].x1 - outlines[0].x1) / outlines[0].pitch).toBeCloseTo(0.5, 2)
})

test('sixty rows of a hundred tubes stay under a thousand elements', () => {
  const geometry = bundle({ rows: 60, tubesPerRow: 100, passes: 6 })
  const page = renderToString(
    createElement(BundleDrawing, {
      geometry,
      rows: rowsOf(60, () => 'columnSheet').map((one) => ({ ...one, tubes: 100 })),
      table: false,
    }),
  )
  expect(page.match(/<(line|g|rect|text|path)\b/g)?.length).toBeLessThan(1000)
  expect(page.length).toBeLessThan(150_000)
})

test('every row can be reached and says its numbers; one of them is the tab stop', () => {
  const page = renderToString(createElement(BundleDrawing, { geometry: bundle(), rows: rowsOf(14) }))
  const options = page.match(/role="option"[^>]*>/g) ?? []
  expect(options).toHaveLength(14)
  expect(options.filter((option) => option.includes('tabindex="0"'))).toHaveLength(1)
  expect(page).toContain('Row 3, pass 2: 17 tubes, coefficient 1850\u00a0W/(m²·K)')
})

test('the text equivalent is a table with a line for each row', () => {
  const page = renderToString(createElement(BundleDrawing, { geometry: bundle(), rows: rowsOf(14) }))
  const body = /<tbody>(.*)<\/tbody>/.exec(page)?.[1] ?? ''
  expect(body.match(/<tr>/g)).toHaveLength(14)
  expect(body).toContain('droplets')
})

test('the picture draws without results, and says so when the tubes follow from the coolant', () => {
  const page = renderToString(createElement(BundleDrawing, { geometry: bundle() }))
  expect(page).not.toContain('var(--copper)')
  expect(page).toContain('Rectangular bundle of 14 rows of 17 tubes')
  const open = renderToString(createElement(BundleDrawing, { geometry: bundle({ tubesPerRow: 'auto' }) }))
  expect(open).toContain('follow from the coolant')
  const known = renderToString(
    createElement(BundleDrawing, { geometry: bundle({ tubesPerRow: 'auto' }), rows: rowsOf(14) }),
  )
  expect(known).toContain('14 rows of 17 tubes')
})

test('the thumbnail has one name and no stops', () => {
  const page = renderToString(
    createElement(BundleThumbnail, { geometry: bundle(), rows: rowsOf(14), name: 'Study A' }),
  )
  expect(page).toMatch(/role="img" aria-label="Study A: Rectangular bundle of 14 rows/)
  expect(page).not.toContain('tabindex')
})

test('figures follow the reader’s units', () => {
  const page = renderToString(
    createElement(UnitsProvider, {
      units: 'us',
      // biome-ignore lint/correctness/noChildrenProp: createElement's third argument does not type a required child
      children: createElement(BundleDrawing, { geometry: bundle(), rows: rowsOf(14) }),
    }),
  )
  expect(page).toContain('0.75\u00a0in outside diameter')
  expect(page).toContain('Btu/(h·ft²·°F)')
})

test('words: drainage by runs of rows, idle rows, first and last coefficient', () => {
  const rows = rowsOf(14, (n) => (n < 9 ? 'droplet' : 'column'))
  expect(drainageSentence(rows)).toBe('Rows 1 to 8 drain in droplets, rows 9 to 14 in columns.')
  expect(drainageSentence(rowsOf(2))).toBe('All 2 rows drain in droplets.')
  expect(drainageSentence([row(1, { drainageMode: null })])).toBe('')
  expect(shadeSentence(rows, 'coefficient', 'si')).toBe(
    'Row coefficient 1950\u00a0W/(m²·K) at the top, 1300 at the bottom.',
  )
  expect(idleSentence([row(1), row(2, { heatFlux: 0 })])).toBe('Row 2 is idle.')
  const place = { row: 2, tubes: 17, drawn: 17, x: 0, y: 0, pass: 1 }
  expect(rowSentence(place, row(2, { heatFlux: 0 }), 1, 'si')).toBe('Row 2: 17 tubes, idle')
  expect(
    geometrySentence(bundle({ shape: 'circular', rows: 3, tubesPerRow: undefined }), [1, 2, 1], 'si'),
  ).toBe(
    'Round bundle of 3 rows with 4 tubes, 1 to 2 in a row, 19.05\u00a0mm outside diameter, 30° triangular layout at pitch ratio 1.25, 2 passes, the first at the bottom.',
  )
})

test('scale: tones run from 0 to 23, lengths are round', () => {
  expect([toneOf(1, 1, 3), toneOf(3, 1, 3), toneOf(2, 2, 2)]).toEqual([0, 23, 17])
  expect([187, 60, 0.34, 2].map(roundLength)).toEqual([100, 50, 0.2, 2])
})
