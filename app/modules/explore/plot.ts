// Plot columns as a scatter plot in the reader's units: categories or a scale, limits, front and marks.
import type { Group, Mark, Scatter } from '#app/components/charts/scatter.ts'
import type { PlotColumns } from '#app/modules/points/point-types.ts'
import { LIMITS, type Limits } from '#engine/sweep/limits.ts'
import type { SweptValue } from '#engine/sweep/study.ts'
import { formatQuantity, type UnitSystem } from '#engine/units.ts'
import { type PointColumn, shown, unitOf } from './columns.ts'
import { valueText } from './view.ts'

/** Of these results less is better, so that a lower left edge is a front. */
const LESS_IS_BETTER = new Set([
  'outsideArea',
  'tubeLength',
  'coolantPressureDrop',
  'vapourPressureDrop',
  'saturationTemperatureDrop',
  'coolantMassFlow',
  'tubeCount',
  'tubeMass',
  'pumpingPower',
  'yearlyCost',
  'bundleWidth',
  'bundleHeight',
])

const MOST_CATEGORIES = 6

export type PlotInput = {
  columns: PlotColumns
  x: PointColumn
  y: PointColumn
  colour: PointColumn | null
  /** The values a variable takes, in the order a choice's places count. */
  colourValues: readonly SweptValue[]
  limits: Limits
  /** The filters, so that a limit or mark they leave out does not stretch the axes. */
  ranges: Readonly<Record<string, { min?: number; max?: number }>>
  names: Record<string, Record<string, string>>
  marks: readonly {
    kind: Mark['kind']
    label: string
    id: number | null
    x: number | null
    y: number | null
  }[]
}

export function plotSpec(input: PlotInput, units: UnitSystem): Scatter {
  const { columns, x, y, limits } = input
  const { groups, scale } = coloured(input, units)
  const place = new Map(columns.point.map((point, i) => [point, i]))
  const front =
    LESS_IS_BETTER.has(x.id) && LESS_IS_BETTER.has(y.id)
      ? columns.front.flatMap((point) => place.get(point) ?? [])
      : []
  return {
    x: { ...axisOf(x, units), ...inView(boundsOf(x, limits, units), x, input, units) },
    y: { ...axisOf(y, units), ...inView(boundsOf(y, limits, units), y, input, units) },
    groups,
    groupTitle: input.colour ? input.colour.label : undefined,
    scale,
    front:
      front.length > 1
        ? {
            x: front.map((i) => shown(columns.x[i], x, units)),
            y: front.map((i) => shown(columns.y[i], y, units)),
          }
        : undefined,
    marks: placedMarks(input.marks, input, units),
  }
}

/** Marks with a place on both axes, inside the filters. */
export function placedMarks(
  marks: PlotInput['marks'],
  { x, y, ranges }: Pick<PlotInput, 'x' | 'y' | 'ranges'>,
  units: UnitSystem,
): Mark[] {
  return marks.flatMap((mark) =>
    mark.x === null || mark.y === null || !inside(mark.x, ranges[x.id]) || !inside(mark.y, ranges[y.id])
      ? []
      : [{ ...mark, x: shown(mark.x, x, units), y: shown(mark.y, y, units) }],
  )
}

const inside = (value: number, range: { min?: number; max?: number } = {}) =>
  value >= (range.min ?? Number.NEGATIVE_INFINITY) && value <= (range.max ?? Number.POSITIVE_INFINITY)

/** Bounds that the axis' own filter leaves in view. */
function inView(
  { min, max }: { min?: number; max?: number },
  column: PointColumn,
  { ranges }: PlotInput,
  units: UnitSystem,
) {
  const { min: low, max: high } = ranges[column.id] ?? {}
  const from = low === undefined ? undefined : shown(low, column, units)
  const to = high === undefined ? undefined : shown(high, column, units)
  const seen = (bound: number | undefined) =>
    bound !== undefined && inside(bound, { min: from, max: to }) ? bound : undefined
  return { min: seen(min), max: seen(max) }
}

const lower = (text: string) => text.charAt(0).toLowerCase() + text.slice(1)

function axisOf(column: PointColumn, units: UnitSystem) {
  return {
    label: lower(column.label),
    unit: unitOf(column, units),
    whole: column.whole && column.kind === 'input',
  }
}

/** The limit on what an axis shows, in the axis' unit. */
export function boundsOf(
  column: PointColumn,
  limits: Limits,
  units: UnitSystem,
): { min?: number; max?: number } {
  const info = LIMITS.find(({ result }) => result === column.id)
  const given = info ? limits[info.id] : undefined
  const bound = (value: number | undefined) =>
    value === undefined ? undefined : Number(shown(value, column, units).toPrecision(units === 'si' ? 6 : 4))
  return { min: bound(given?.min), max: bound(given?.max) }
}

function coloured({ columns, x, y, colour, colourValues, names }: PlotInput, units: UnitSystem) {
  const xs = columns.x.map((value) => shown(value, x, units))
  const ys = columns.y.map((value) => shown(value, y, units))
  const met = columns.meetsLimits.map((flag) => flag === 1)
  const pick = (label: string, kept: readonly number[]): Group => ({
    label,
    x: kept.map((i) => xs[i]),
    y: kept.map((i) => ys[i]),
    ids: kept.map((i) => columns.point[i]),
    met: kept.map((i) => met[i]),
  })
  const everything = columns.point.map((_, i) => i)
  const values = columns.colour
  if (!colour || !values) return { groups: [pick('', everything)] }
  if (colour.kind === 'input' && colourValues.length > 0 && colourValues.length <= MOST_CATEGORIES) {
    const groups = colourValues.map((value, place) => {
      const key = colour.choice ? place : value
      return pick(
        valueText(value, colour, units, names),
        everything.filter((i) => values[i] === key),
      )
    })
    return { groups }
  }
  const known = values.filter((value) => value !== null)
  const low = known.reduce((a, b) => Math.min(a, b), Number.POSITIVE_INFINITY)
  const high = known.reduce((a, b) => Math.max(a, b), Number.NEGATIVE_INFINITY)
  if (colour.choice || !(high > low)) return { groups: [pick('', everything)] }
  const coloured = everything.filter((i) => values[i] !== null)
  const text = (value: number, unit: boolean) =>
    formatQuantity(value, colour.dimension, units, { digits: 3, hint: colour.hint, unit })
  return {
    groups: [{ ...pick('', coloured), value: coloured.map((i) => values[i] as number) }],
    scale: { low, high, lowText: text(low, false), highText: text(high, true) },
  }
}
