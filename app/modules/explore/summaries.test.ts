import { expect, test } from 'vitest'
import { gridAxis, histogram, leastOverGrid } from './summaries.ts'

const all = (n: number) => Array.from({ length: n }, (_, i) => i)

test('a histogram counts every point with a value once, the greatest in the last bin', () => {
  const values = [0, 1, 2, 3, 4, 5, 6, 7, 8, 10, Number.NaN]
  const { edges, met, missed } = histogram(values, all(11), (point) => point % 2 === 0, 5)
  expect(edges).toEqual([0, 2, 4, 6, 8, 10])
  expect(met.map((count, i) => count + missed[i])).toEqual([2, 2, 2, 2, 2])
  expect(met.reduce((a, b) => a + b)).toBe(5)
  expect(histogram([3, 3], all(2), () => true, 5)).toEqual({ edges: [3, 3], met: [2], missed: [0] })
  expect(histogram([Number.NaN], [0], () => true, 5)).toEqual({ edges: [], met: [], missed: [] })
})

test('a grid takes a variable’s own values where they are few, otherwise equal intervals', () => {
  expect(gridAxis([1, 2, 5], all(3), [1, 2, 5], 10)).toEqual({ kind: 'values', values: [1, 2, 5] })
  expect(gridAxis([0, 5, 10], all(3), null, 2)).toEqual({ kind: 'edges', edges: [0, 5, 10] })
  expect(gridAxis([Number.NaN], [0], null, 2)).toBeNull()
})

test('a cell holds the least that meets the limits; only without one, the least that misses them', () => {
  const x = [1, 1, 1, 2, 2]
  const y = [0, 4, 4, 9, 9]
  const z = [7, 3, 5, 8, 6]
  const met = [true, false, true, false, false]
  const cells = leastOverGrid(
    all(5),
    x,
    y,
    z,
    (point) => met[point],
    { kind: 'values', values: [1, 2] },
    { kind: 'edges', edges: [0, 5, 10] },
  )
  expect(cells).toEqual([
    { column: 0, row: 0, least: 5, point: 2, meets: true },
    { column: 1, row: 1, least: 6, point: 4, meets: false },
  ])
})
