import { expect, it } from 'vitest'
import { definitionChanges } from './definition-changes.ts'

const study = (rows: number[], max: number, more = {}) => ({
  name: 'S',
  case: { bundle: { rows: 8, passes: 2 }, ...more },
  sweep: { variables: [{ path: 'bundle.rows', values: rows }] },
  limits: { coolantPressureDrop: { max } },
})

it('names each place that differs, with both values', () => {
  expect(definitionChanges(study([8, 10], 40_000), study([8, 12], 35_000))).toEqual([
    { path: 'sweep.variables[bundle.rows].values', before: '8, 10', after: '8, 12' },
    { path: 'limits.coolantPressureDrop.max', before: '40000', after: '35000' },
  ])
})

it('shows what only one of them has', () => {
  expect(definitionChanges(study([8], 1, { fluid: 'r134a' }), study([8], 1))).toEqual([
    { path: 'case.fluid', before: 'r134a', after: null },
  ])
})

it('finds nothing between equals', () => {
  expect(definitionChanges(study([8], 1), study([8], 1))).toEqual([])
})
