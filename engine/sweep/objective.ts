// What a study makes least.
import { keyResultColumn } from './limits.ts'

export const OBJECTIVES = ['outsideArea', 'tubeMass', 'pumpingPower', 'yearlyCost'] as const
export type Objective = (typeof OBJECTIVES)[number]

export const objectiveColumn = (objective: Objective): number => keyResultColumn(objective)

export const OBJECTIVE_LABELS: Record<Objective, string> = {
  outsideArea: 'Outside area',
  tubeMass: 'Tube mass',
  pumpingPower: 'Pumping power',
  yearlyCost: 'Yearly cost',
}
