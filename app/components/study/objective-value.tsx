// What a study makes least, with its unit, as lists and figures show it.
import type { Dimension } from '#engine/units.ts'
import { Quantity } from '../ui/number.tsx'

export type ObjectiveId = 'outsideArea' | 'tubeMass' | 'pumpingPower' | 'yearlyCost'

export const OBJECTIVE_DIMENSIONS: Record<ObjectiveId, Dimension> = {
  outsideArea: 'area',
  tubeMass: 'mass',
  pumpingPower: 'power',
  yearlyCost: 'money',
}

export function ObjectiveValue({ objective, value }: { objective: ObjectiveId; value: number }) {
  return (
    <>
      <Quantity value={value} dimension={OBJECTIVE_DIMENSIONS[objective]} />
      {objective === 'yearlyCost' ? ' a year' : objective === 'pumpingPower' ? ' pumping' : ''}
    </>
  )
}
