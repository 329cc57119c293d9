// What a run's points can be plotted, sorted, filtered and tabled by: the study's variables, then the key results.
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { type Dimension, type DisplayHint, displayUnit, toDisplay, type UnitSystem } from '#engine/units.ts'

export type PointColumn = {
  id: string
  kind: 'input' | 'result'
  /** Place among a point's inputs or results. */
  index: number
  label: string
  symbol: string
  dimension: Dimension
  hint?: DisplayHint
  /** Values are ids, shown by name. */
  choice: boolean
  whole: boolean
}

type Variable = {
  path: string
  label: string
  symbol: string
  dimension: Dimension
  kind: 'number' | 'whole' | 'choice'
  tubeSized: boolean
}

/** Results that are small beside their dimension's usual unit. */
const HINTS: Record<string, DisplayHint> = { vapourPressureDrop: 'small', pumpingPower: 'small' }
/** Codes and masks, shown in words instead. */
const WORDS = new Set(['outcome', 'limitsNotMet', 'notes'])

export function resultColumns(): PointColumn[] {
  return KEY_RESULTS.flatMap(({ id, label, symbol, dimension }, index) =>
    WORDS.has(id)
      ? []
      : [
          {
            id,
            kind: 'result' as const,
            index,
            label,
            symbol,
            dimension,
            hint: HINTS[id],
            choice: false,
            whole: dimension === 'count',
          },
        ],
  )
}

/** A swept duty is both an input and a result of the same name and value: it stands once, as the input. */
export function pointColumns(variables: readonly Variable[]): PointColumn[] {
  const inputs = variables.map(
    ({ path, label, symbol, dimension, kind, tubeSized }, index): PointColumn => ({
      id: path,
      kind: 'input',
      index,
      label,
      symbol,
      dimension,
      hint: tubeSized ? 'tube' : undefined,
      choice: kind === 'choice',
      whole: kind === 'whole',
    }),
  )
  const taken = new Set(inputs.map(({ id }) => id))
  return [...inputs, ...resultColumns().filter(({ id }) => !taken.has(id))]
}

export const unitOf = (column: PointColumn, units: UnitSystem): string =>
  displayUnit(column.dimension, units, column.hint)

export const shown = (value: number, column: PointColumn, units: UnitSystem): number =>
  toDisplay(value, column.dimension, units, column.hint).value

const USUAL_RESULTS = [
  'coolantPressureDrop',
  'vapourPressureDrop',
  'overallCoefficient',
  'tubeLength',
  'coolantVelocity',
]

/** The columns nobody has chosen otherwise: what was swept, the objective, and what a bundle is usually asked. */
export function usualColumns(
  variables: readonly string[],
  objective: string,
  has: (result: string) => boolean,
): string[] {
  const results = [objective, ...USUAL_RESULTS.filter((id) => id !== objective)]
  return [...variables, ...results.filter((id) => !variables.includes(id) && has(id))].slice(
    0,
    Math.max(8, variables.length + 3),
  )
}
