import { createElement, type FunctionComponent } from 'react'
import { renderToString } from 'react-dom/server'
import { createMemoryRouter, RouterProvider } from 'react-router'
import { expect, test } from 'vitest'
import { cellText, HeatMap } from './heat-map.tsx'
import { Histogram } from './histogram.tsx'
import { Parallel } from './parallel.tsx'

const render = <Props extends object>(component: FunctionComponent<Props>, props: Props) =>
  renderToString(
    createElement(RouterProvider, {
      router: createMemoryRouter([{ path: '/', element: createElement(component, props) }]),
    }),
  ).replaceAll('<!-- -->', '')

test('a histogram stacks what misses a limit on what meets all, and lists its counts with a filter each', () => {
  const page = render(Histogram, {
    name: 'How outside area is distributed',
    x: { label: 'outside area', unit: 'm²' },
    edges: [30, 40, 50],
    met: [4, 0],
    missed: [1, 10],
    href: (bin: number) => `?bin=${bin}`,
  })
  const bars = [...page.matchAll(/<rect x="[\d.]+" y="([\d.]+)" width="[\d.]+" height="([\d.]+)"/g)].map(
    (match) => Number(match[2]),
  )
  expect(bars).toHaveLength(4)
  // 10 points are ten times as high as 1, whatever the scale.
  expect(bars[3] / bars[1]).toBeCloseTo(10, 1)
  expect(bars[2]).toBe(0)
  expect(page).toMatch(/href="\?bin=1"[^>]*>40\.00 to 50\.00/)
})

const map = {
  name: 'Least area over rows and velocity',
  value: 'outside area',
  x: { label: 'rows', unit: '', names: ['10', '12'] },
  y: { label: 'coolant velocity', unit: 'm/s', names: ['1', '1.5'] },
  cells: [
    { column: 0, row: 0, tone: 0, text: '41.8 m²', point: 7, meets: true },
    { column: 1, row: 1, tone: 23, text: '39.0 m²', point: 9, meets: false },
  ],
  selected: 9,
  href: (point: number) => `?point=${point}`,
  lowText: '39.0 m²',
  highText: '60.0 m²',
}

test('every cell of a map is a link that says what it holds; one is the tab stop', () => {
  const page = render(HeatMap, map)
  expect(cellText(map.cells[1], map.x, map.y, map.value)).toBe(
    'rows 12, coolant velocity 1.5: least outside area 39.0 m², point 9, misses a limit',
  )
  expect(page.match(/data-cell=/g)).toHaveLength(2)
  expect(page.match(/tabindex="0"/g)).toHaveLength(1)
  expect(page).toMatch(
    /class="heat-cell heat-cell-missed"[^>]*aria-current="true"|aria-current="true"[^>]*heat-cell-missed/,
  )
})

test('parallel axes draw a line for each point, broken where it has no value', () => {
  const axis = (id: string) => ({ id, label: id, unit: '', low: 0, high: 10, lowText: '0', highText: '10' })
  const page = render(Parallel, {
    name: 'Parallel axes',
    axes: [axis('a'), axis('b'), { ...axis('c'), names: ['R134a', 'Ammonia'], high: 1 }],
    lines: [
      { point: 1, values: [0, 5, 1], meets: true, tone: 23 },
      { point: 2, values: [10, null, 0], meets: false, tone: 0 },
    ],
    selected: null,
    onBrush: () => {},
  })
  expect(page).toContain('d="M0 1000L500 500L1000 0"')
  expect(page).toContain('d="M0 0M1000 1000"')
  expect(page).toContain('Ammonia')
})
