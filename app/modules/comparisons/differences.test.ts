import { expect, it } from 'vitest'
import { comparedRows } from './differences.ts'

const point = (rows: number, diameter: number, fluid: string, extra = false) => [
  { title: 'Fluid', entries: [{ label: 'Fluid', text: fluid }] },
  {
    title: 'Bundle',
    entries: [
      { label: 'Rows', value: rows, dimension: 'count' as const },
      { label: 'Diameter', value: diameter, dimension: 'length' as const },
      ...(extra ? [{ label: 'Superheat', value: 5, dimension: 'temperatureDifference' as const }] : []),
    ],
  },
]

it('tells rows that differ from rows that are the same', () => {
  const rows = comparedRows([point(12, 0.01905, 'R134a'), point(14, 0.01905, 'R134a')])
  expect(rows.map(({ label, same }) => [label, same])).toEqual([
    ['Fluid', true],
    ['Rows', false],
    ['Diameter', true],
  ])
})

it('takes a last-bit remainder of a unit for the same value', () => {
  const rows = comparedRows([point(12, 0.01905, 'R134a'), point(12, 0.75 * 0.0254, 'R134a')])
  expect(rows.every(({ same }) => same)).toBe(true)
})

it('keeps a place for what only one point has', () => {
  const rows = comparedRows([point(12, 0.01905, 'R134a', true), point(12, 0.01905, 'Water')])
  expect(rows.find(({ label }) => label === 'Superheat')).toMatchObject({
    same: false,
    cells: [{ value: 5 }, null],
  })
  expect(rows.find(({ label }) => label === 'Fluid')?.same).toBe(false)
})
