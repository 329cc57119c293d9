import { createElement } from 'react'
import { renderToString } from 'react-dom/server'
import { createMemoryRouter, RouterProvider } from 'react-router'
import { expect, test } from 'vitest'
import { ColumnChoice } from './column-choice.tsx'
import { PointsTable, type PointsTableProps, toTabbed } from './points-table.tsx'

const props: PointsTableProps = {
  caption: 'Points by area',
  columns: [
    { id: 'tube.outsideDiameter', label: 'Tube outside diameter', unit: 'mm', numeric: true, given: true },
    { id: 'fluid', label: 'Fluid', unit: '', numeric: false, given: true },
    { id: 'outsideArea', label: 'Outside area', unit: 'm²', numeric: true, given: false },
  ],
  rows: [
    { point: 17402, cells: [19.05, 'R134a', 41.823456], state: { tone: 'sound', label: 'meets all' } },
    { point: 17455, cells: [25.4, 'R134a', null], state: { tone: 'attention', label: 'coolant drop' } },
  ],
  sort: { id: 'outsideArea', descending: false },
  sortHref: (id) => `?sort=${id}`,
  pointHref: (point) => `?point=${point}`,
  selected: 17402,
  matching: 31204,
  offset: 50,
  pageSize: 50,
  pageHref: (page) => `?page=${page}`,
}
const render = (element: Parameters<typeof createElement>[0], given: object) =>
  renderToString(
    createElement(RouterProvider, {
      router: createMemoryRouter([{ path: '/', element: createElement(element as never, given) }]),
    }),
  ).replaceAll('<!-- -->', '')

test('units stand in the heads, the sorted column says its direction, choices and numbers are told apart', () => {
  const page = render(PointsTable as never, props)
  expect(page).toContain('Tube outside diameter, mm')
  expect(page.match(/aria-sort="ascending"/g)).toHaveLength(1)
  expect(page).toMatch(/<td class="numeric"><span class="number">41\.82<\/span>/)
  expect(page).toMatch(/<td class="numeric"><span class="number">19\.05<\/span>/)
  expect(page).toMatch(/<td>R134a/)
  expect(page).toMatch(/data-faded="true"/)
  expect(page).toContain('aria-current="true"')
  expect(page).toContain('href="/?page=0"')
  expect(page).toContain('href="/?page=2"')
})

test('what is copied are plain numbers with every digit', () => {
  expect(toTabbed(props.columns, props.rows)).toBe(
    'Point\tTube outside diameter, mm\tFluid\tOutside area, m²\tLimits\n17402\t19.05\tR134a\t41.823456\tmeets all\n17455\t25.4\tR134a\t\tcoolant drop',
  )
})

test('columns are moved, hidden and shown by links', () => {
  const page = render(ColumnChoice as never, {
    shown: [
      { id: 'a', label: 'Area' },
      { id: 'b', label: 'Mass' },
    ],
    hidden: [{ id: 'c', label: 'Cost' }],
    href: (ids: string[]) => `?column=${ids.join(',')}`,
  })
  expect(page).toMatch(/href="\/\?column=b,a"[^>]*>later/)
  expect(page).toMatch(/href="\/\?column=b"[^>]*>hide/)
  expect(page).toMatch(/href="\/\?column=a,b,c"[^>]*>show/)
})
