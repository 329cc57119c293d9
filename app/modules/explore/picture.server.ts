// The picture of a run's points that the page asks for: scatter, map, distribution or parallel coordinates.

import type { PointFilters } from '#app/modules/points/point-types.ts'
import { columnsOfPoints, pageOfPoints, plotColumns } from '#app/modules/points/points.server.ts'
import { LIMITS } from '#engine/sweep/limits.ts'
import type { PlanVariable, SweepPlan } from '#engine/sweep/plan.ts'
import { usualColumns } from './columns.ts'
import { gridAxis, histogram, leastOverGrid } from './summaries.ts'
import type { ExploreView } from './view.ts'

/** As many marks as an SVG plot draws without keeping a reader waiting. */
const PLOT_MARKS = 4000
const PARALLEL_LINES = 300
const PARALLEL_AXES = 8
const BINS = 40
const CELLS = 24

export async function pictureOf(
  runId: string,
  plan: SweepPlan,
  view: ExploreView,
  has: (result: string) => boolean,
  filters: PointFilters,
  tableAll: boolean,
) {
  const { objective } = plan.study
  const evaluated = { outcome: 'evaluated', ...filters }
  if (view.show === 'distribution') {
    const x = view.x ?? objective
    const { points, columns } = await columnsOfPoints(runId, [x, 'limitsNotMet'], evaluated)
    const [values, limitsNotMet] = columns
    return {
      kind: 'distribution' as const,
      x,
      matching: points.length,
      ...histogram(values, points, (point) => limitsNotMet[point] === 0, BINS),
    }
  }
  if (view.show === 'map') {
    const [first, second] = mapVariables(plan)
    const x = view.x ?? first ?? limitedResult(plan, has)
    const y = view.y ?? second ?? objective
    const z = view.colour !== null && view.colour !== 'none' ? view.colour : objective
    const { points, columns } = await columnsOfPoints(runId, [x, y, z, 'limitsNotMet'], evaluated)
    const [xs, ys, zs, limitsNotMet] = columns
    const across = gridAxis(xs, points, ownValues(plan, x), CELLS)
    const up = gridAxis(ys, points, ownValues(plan, y), CELLS)
    const meets = (point: number) => limitsNotMet[point] === 0
    return {
      kind: 'map' as const,
      x,
      y,
      z,
      across,
      up,
      cells: across && up ? leastOverGrid(points, xs, ys, zs, meets, across, up) : [],
    }
  }
  if (view.show === 'parallel') {
    const variables = plan.variables.map(({ path }) => path)
    const ids = (view.columns.length > 0 ? view.columns : usualColumns(variables, objective, has)).slice(
      0,
      PARALLEL_AXES,
    )
    const { rows, matching } = await pageOfPoints(runId, {
      sort: objective,
      filters: tableAll ? evaluated : { ...evaluated, meetingLimits: true },
      limit: PARALLEL_LINES,
    })
    return { kind: 'parallel' as const, ids, rows, matching }
  }
  const usual = usualScatter(plan, has)
  const x = view.x ?? usual.x
  const y = view.y ?? objective
  const colour = view.colour === 'none' ? null : (view.colour ?? usual.colour)
  const plot = await plotColumns(runId, { x, y, colour: colour ?? undefined, max: PLOT_MARKS, filters })
  return { kind: 'scatter' as const, x, y, colour, plot }
}

export type Picture = Awaited<ReturnType<typeof pictureOf>>

/** The result across the scatter plot when nobody has chosen one: what is limited, or else what drops pressure. */
function limitedResult(plan: SweepPlan, has: (result: string) => boolean): string {
  const { limits, objective } = plan.study
  const limited = LIMITS.filter(({ id }) => limits[id]?.max !== undefined).map(({ result }) => result)
  return (
    [...limited, 'coolantPressureDrop', 'vapourPressureDrop'].find((id) => id !== objective && has(id)) ??
    'tubeLength'
  )
}

function usualScatter(plan: SweepPlan, has: (result: string) => boolean) {
  const few = ({ values, between }: PlanVariable) => !between && values.length >= 2 && values.length <= 6
  const telling = ['tube.outsideDiameter', 'tube', 'fluid'].flatMap((path) =>
    plan.variables.filter((variable) => variable.path === path && few(variable)),
  )
  const colour = telling[0] ?? plan.variables.find(few)
  return { x: limitedResult(plan, has), colour: colour?.path ?? null }
}

/** The two variables with the most values: what a map has most to say about. */
function mapVariables(plan: SweepPlan): string[] {
  const size = ({ values, between }: PlanVariable) => (between ? Number.POSITIVE_INFINITY : values.length)
  return plan.variables
    .map((variable, place) => ({ variable, place }))
    .filter(({ variable }) => size(variable) > 1)
    .sort((a, b) => size(b.variable) - size(a.variable) || a.place - b.place)
    .slice(0, 2)
    .map(({ variable }) => variable.path)
}

/** A variable's values as its column holds them: numbers, or the places of a choice. */
function ownValues(plan: SweepPlan, id: string): number[] | null {
  const variable = plan.variables.find(({ path }) => path === id)
  if (!variable || variable.between) return null
  const values = variable.values.map((value, place) => (typeof value === 'number' ? value : place))
  return values.sort((a, b) => a - b)
}
