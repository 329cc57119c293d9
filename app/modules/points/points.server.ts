// Questions about the points of a run, answered from stored columns; one point's sheet by the engine.
import { and, eq, inArray } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { AppError } from '#app/http/errors.ts'
import type { LimitEffect } from '#app/modules/explore/finding.ts'
import { keyResultValues, planOfRevision } from '#app/modules/runs/run-plan.server.ts'
import { bestStored, getRun } from '#app/modules/runs/runs.server.ts'
import { pointResult, type Run, runChunk } from '#drizzle/schema/index.ts'
import { KEY_RESULT_INDEX, KEY_RESULTS, OUTCOME_INDEX, OUTCOMES } from '#engine/bundle/key-results.ts'
import type { Case } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import type { Result } from '#engine/result.ts'
import { COLUMNS, evaluateRange } from '#engine/sweep/evaluate-range.ts'
import { LIMITS } from '#engine/sweep/limits.ts'
import { pointCase, pointInputs, pointValue, type SweepPlan } from '#engine/sweep/plan.ts'
import type { Band } from '#engine/uncertainty/bands.ts'
import { ENGINE_VERSION } from '#engine/version.ts'
import { columnOf, computedColumn, type StoredPoints, storedPoints, valuesAt } from './column-cache.server.ts'
import { paretoFront as frontOf } from './front.ts'
import type {
  Aggregates,
  KeyResultDifference,
  PageQuery,
  PlotColumns,
  PlotQuery,
  PointFilters,
  PointSheet,
  PointsPage,
} from './point-types.ts'
import { type Condition, matchingPoints, sortedSlice } from './select.ts'
import { thin } from './thin.ts'

const PAGE_POINTS = 100
const PAGE_POINTS_MAX = 1000
const PLOT_POINTS = 20_000

/** A run with what is needed to answer about its points; columns are read as they are asked for. */
class Points {
  readonly run: Run
  readonly plan: SweepPlan
  readonly stored: StoredPoints

  private constructor(run: Run, plan: SweepPlan, stored: StoredPoints) {
    this.run = run
    this.plan = plan
    this.stored = stored
  }

  static async of(runId: string): Promise<Points> {
    const run = await getRun(runId)
    if (run.pointsDroppedAt)
      throw new AppError(
        'not-found',
        'The points of this run have left by the retention policy. Its counts and the full results of its best point are kept; run the study again for its points.',
      )
    const [plan, stored] = await Promise.all([planOfRevision(run.revisionId), storedPoints(run)])
    return new Points(run, plan, stored)
  }

  /** A key result's column by id, or a swept variable's by path. */
  async column(id: string): Promise<Float64Array> {
    const index = KEY_RESULT_INDEX[id]
    if (index !== undefined) return columnOf(this.run, KEY_RESULTS[index].column, this.stored.chunks)
    const variable = this.plan.variables.findIndex(({ path }) => path === id)
    if (variable < 0)
      throw new AppError(
        'bad-request',
        `"${id}" is neither a result nor swept here; results: ${Object.keys(KEY_RESULT_INDEX).join(', ')}; swept: ${this.plan.variables.map(({ path }) => path).join(', ')}.`,
      )
    return variableColumn(this.run, this.plan, variable)
  }

  async matching(filters: PointFilters = {}): Promise<Int32Array> {
    const conditions: Condition[] = []
    if (filters.outcome !== undefined) {
      const to = OUTCOME_INDEX[filters.outcome]
      if (to === undefined)
        throw new AppError(
          'bad-request',
          `"${filters.outcome}" is no outcome; outcomes: ${OUTCOMES.map(({ code }) => code).join(', ')}.`,
        )
      conditions.push({ kind: 'equals', values: await this.column('outcome'), to })
    }
    if (filters.meetingLimits) {
      conditions.push({ kind: 'equals', values: await this.column('outcome'), to: 0 })
      conditions.push({ kind: 'equals', values: await this.column('limitsNotMet'), to: 0 })
    }
    for (const [id, { min, max }] of Object.entries(filters.ranges ?? {}))
      conditions.push({
        kind: 'range',
        values: await this.column(id),
        min: min ?? Number.NEGATIVE_INFINITY,
        max: max ?? Number.POSITIVE_INFINITY,
      })
    for (const [path, value] of Object.entries(filters.inputs ?? {})) {
      const variable = this.plan.variables.findIndex((each) => each.path === path)
      if (variable < 0) throw new AppError('bad-request', `"${path}" is not swept in this study.`)
      conditions.push({
        kind: 'equals',
        values: variableColumn(this.run, this.plan, variable),
        to: asNumber(this.plan, variable, value),
      })
    }
    return matchingPoints(this.run.points, this.stored.mask, conditions)
  }
}

/** A variable's values as numbers: SI, or the place of a choice among the variable's values. */
function variableColumn(run: Run, plan: SweepPlan, variable: number): Float64Array {
  return computedColumn(`${run.revisionId} ${plan.variables[variable].path}`, () =>
    Float64Array.from({ length: plan.points }, (_, i) =>
      asNumber(plan, variable, pointValue(plan, i, variable)),
    ),
  )
}

function asNumber(plan: SweepPlan, variable: number, value: number | string): number {
  return typeof value === 'number' ? value : plan.variables[variable].values.indexOf(value)
}

/** One page of the table of points. */
export async function pageOfPoints(runId: string, query: PageQuery = {}): Promise<PointsPage> {
  const points = await Points.of(runId)
  const { sort = 'point', descending = false, filters } = query
  const offset = Math.max(0, Math.floor(query.offset ?? 0))
  const limit = Math.min(PAGE_POINTS_MAX, Math.max(1, Math.floor(query.limit ?? PAGE_POINTS)))
  const found = await points.matching(filters)
  const keys = sort === 'point' ? null : await points.column(sort)
  const page = sortedSlice(found, keys, descending, offset, limit)
  const results = await valuesAt(points.run, page)
  return {
    stored: points.stored.count,
    matching: found.length,
    offset,
    rows: Array.from(page, (point, k) => ({
      point,
      inputs: pointInputs(points.plan, point),
      results: Array.from(results[k] ?? [], (value) => (Number.isFinite(value) ? value : null)),
    })),
  }
}

/** Where a point stands in the table as it is sorted and filtered; null when the filters leave it out. */
export async function placeOfPoint(runId: string, point: number, query: PageQuery): Promise<number | null> {
  const points = await Points.of(runId)
  const found = await points.matching(query.filters)
  if (found.indexOf(point) < 0) return null
  const { sort = 'point', descending = false } = query
  const keys = sort === 'point' ? null : await points.column(sort)
  return sortedSlice(found, keys, descending, 0, found.length).indexOf(point)
}

/** Two columns for a plot, and a third for colour, thinned on the server. Best and front are always among them. */
export async function plotColumns(runId: string, query: PlotQuery): Promise<PlotColumns> {
  const points = await Points.of(runId)
  const max = Math.min(PLOT_POINTS, Math.max(1, Math.floor(query.max ?? PLOT_POINTS)))
  const [found, x, y, colour, limitsNotMet, best] = await Promise.all([
    points.matching({ outcome: 'evaluated', ...query.filters }),
    points.column(query.x),
    points.column(query.y),
    query.colour === undefined ? null : points.column(query.colour),
    points.column('limitsNotMet'),
    points.run.bestPoint ?? bestStored(db, runId),
  ])
  const front = frontOf(found, x, y)
  const always = best !== null && found.includes(best) ? [best, ...front] : front
  const shown = thin(found, x, y, max, always)
  const pick = (values: Float64Array) => Array.from(shown, (point) => values[point])
  return {
    matching: found.length,
    point: Array.from(shown),
    x: pick(x),
    y: pick(y),
    colour: colour && pick(colour).map((value) => (Number.isFinite(value) ? value : null)),
    meetsLimits: Array.from(shown, (point) => (limitsNotMet[point] === 0 ? 1 : 0)),
    best,
    front: Array.from(front),
  }
}

/** Whole columns, by key result id or variable path, and the points of them that pass the filters. Not to be written to. */
export async function columnsOfPoints(
  runId: string,
  ids: readonly string[],
  filters?: PointFilters,
): Promise<{ points: Int32Array; columns: Float64Array[] }> {
  const points = await Points.of(runId)
  const [found, ...columns] = await Promise.all([
    points.matching(filters),
    ...ids.map((id) => points.column(id)),
  ])
  return { points: found, columns }
}

/** Points that no other beats in both results, by rising x; of those that meet every limit unless told otherwise. */
export async function paretoFront(
  runId: string,
  query: { x: string; y: string; filters?: PointFilters },
): Promise<{ point: number; x: number; y: number }[]> {
  const points = await Points.of(runId)
  const found = await points.matching(query.filters ?? { meetingLimits: true })
  const [x, y] = await Promise.all([points.column(query.x), points.column(query.y)])
  return Array.from(frontOf(found, x, y), (point) => ({ point, x: x[point], y: y[point] }))
}

/** What each limit does, the others held. */
export async function limitEffects(runId: string): Promise<LimitEffect[]> {
  const points = await Points.of(runId)
  const { limits, objective } = points.plan.study
  const [evaluated, mask, least] = await Promise.all([
    points.matching({ outcome: 'evaluated' }),
    points.column('limitsNotMet'),
    points.column(objective),
  ])
  const effects: LimitEffect[] = []
  for (const [bit, { id, result }] of LIMITS.entries()) {
    if (!limits[id]) continue
    const values = await points.column(result)
    for (const side of ['min', 'max'] as const) {
      const bound = limits[id]?.[side]
      if (bound === undefined) continue
      let without = Number.POSITIVE_INFINITY
      let nearest = Number.NaN
      for (const point of evaluated) {
        const stopped =
          mask[point] === 1 << bit && (side === 'min' ? values[point] < bound : values[point] > bound)
        if (!stopped && mask[point] !== 0) continue
        if (least[point] < without) without = least[point]
        if (stopped && !(Math.abs(values[point] - bound) >= Math.abs(nearest - bound)))
          nearest = values[point]
      }
      effects.push({
        limit: id,
        side,
        bound,
        without: Number.isFinite(without) ? without : null,
        nearest: Number.isFinite(nearest) ? nearest : null,
      })
    }
  }
  return effects
}

/** Counts and ranges over all stored points, or over those that pass the filters. */
export async function aggregates(runId: string, filters?: PointFilters): Promise<Aggregates> {
  return filters === undefined
    ? aggregatesOfChunks(runId)
    : aggregatesOfPoints(await Points.of(runId), filters)
}

/** From what each chunk says of itself: no column is read. */
async function aggregatesOfChunks(runId: string): Promise<Aggregates> {
  const chunks = await db.select().from(runChunk).where(eq(runChunk.runId, runId))
  const stored = chunks.reduce((sum, { points }) => sum + points, 0)
  const byOutcome = new Array<number>(OUTCOMES.length).fill(0)
  const byLimit = new Array<number>(LIMITS.length).fill(0)
  let meetingLimits = 0
  const ranges: Aggregates['ranges'] = {}
  for (const chunk of chunks) {
    chunk.outcomes.forEach((count, outcome) => {
      byOutcome[outcome] += count
    })
    chunk.limitsNotMet.forEach((count, bit) => {
      byLimit[bit] += count
    })
    meetingLimits += chunk.meetingLimits
    KEY_RESULTS.forEach(({ id }, column) => {
      const min = chunk.leastResults[column]
      const max = chunk.greatestResults[column]
      if (!(min <= max)) return
      const known = ranges[id]
      ranges[id] = known ? { min: Math.min(known.min, min), max: Math.max(known.max, max) } : { min, max }
    })
  }
  return { stored, matching: stored, meetingLimits, ...tallies(byOutcome, byLimit), ranges }
}

async function aggregatesOfPoints(points: Points, filters: PointFilters): Promise<Aggregates> {
  const found = await points.matching(filters)
  const [outcome, limitsNotMet] = await Promise.all([points.column('outcome'), points.column('limitsNotMet')])
  const byOutcome = new Array<number>(OUTCOMES.length).fill(0)
  const byLimit = new Array<number>(LIMITS.length).fill(0)
  let meetingLimits = 0
  for (const point of found) {
    byOutcome[outcome[point]]++
    if (outcome[point] !== 0) continue
    if (limitsNotMet[point] === 0) meetingLimits++
    else for (let bit = 0; bit < LIMITS.length; bit++) if (limitsNotMet[point] & (1 << bit)) byLimit[bit]++
  }
  const ranges: Aggregates['ranges'] = {}
  for (const { id } of KEY_RESULTS) {
    const values = await points.column(id)
    let min = Number.POSITIVE_INFINITY
    let max = Number.NEGATIVE_INFINITY
    for (const point of found) {
      if (outcome[point] !== 0) continue
      const value = values[point]
      if (value < min) min = value
      if (value > max) max = value
    }
    if (min <= max) ranges[id] = { min, max }
  }
  return {
    stored: points.stored.count,
    matching: found.length,
    meetingLimits,
    ...tallies(byOutcome, byLimit),
    ranges,
  }
}

function tallies(byOutcome: readonly number[], byLimit: readonly number[]) {
  return {
    evaluated: byOutcome[0],
    outcomes: OUTCOMES.map(({ code, text }, k) => ({ code, text, count: byOutcome[k] })).filter(
      ({ count }) => count > 0,
    ),
    limitsNotMet: Object.fromEntries(
      LIMITS.flatMap(({ id }, bit) => (byLimit[bit] > 0 ? [[id, byLimit[bit]]] : [])),
    ),
  }
}

/**
 * The whole sheet of one point. The best point's is the record made when the run ended; any other is computed now, and
 * where the engine has changed since, what it finds otherwise is listed.
 */
export async function pointSheet(runId: string, point: number): Promise<PointSheet> {
  const run = await getRun(runId)
  if (!Number.isInteger(point) || point < 0 || point >= run.points)
    throw new AppError('not-found', `The run has points 0 to ${run.points - 1}.`)
  const plan = await planOfRevision(run.revisionId)
  const [stored] = await valuesAt(run, [point])
  const [record] = await db
    .select()
    .from(pointResult)
    .where(
      and(
        eq(pointResult.runId, runId),
        eq(pointResult.point, point),
        inArray(pointResult.kind, ['best', 'pinned', 'submitted']),
      ),
    )
    .limit(1)
  const bundle = record ? (record.case as unknown as Case) : pointCase(plan, point)
  const now = new Float64Array(COLUMNS)
  if (run.engineVersion !== ENGINE_VERSION) evaluateRange(plan, point, 1, now)
  return {
    runId,
    point,
    case: bundle,
    result: record ? (record.result as unknown as Result) : evaluate(bundle),
    stored: stored ? keyResultValues(stored) : {},
    storedEngineVersion: run.engineVersion,
    engineVersion: ENGINE_VERSION,
    recorded: record !== undefined,
    band: (record?.band as unknown as Band | null | undefined) ?? null,
    differences: stored && run.engineVersion !== ENGINE_VERSION ? differences(stored, now) : [],
  }
}

function differences(stored: Float64Array, now: Float64Array): KeyResultDifference[] {
  const before = keyResultValues(stored)
  const after = keyResultValues(now)
  return KEY_RESULTS.map(({ id }) => ({ id, stored: before[id], now: after[id] })).filter(
    (each) => each.stored !== each.now,
  )
}

export type RefinedBest = {
  case: Case
  result: Result
  band: Band | null
  engineVersion: string
  [how: string]: unknown
}

/** The best point refined in between the swept values, as recorded when the run ended; null when there is none. */
export async function refinedBest(runId: string): Promise<RefinedBest | null> {
  const run = await getRun(runId)
  const [record] = await db
    .select()
    .from(pointResult)
    .where(and(eq(pointResult.runId, runId), eq(pointResult.kind, 'refined')))
    .limit(1)
  if (!record) return null
  return {
    ...run.refined,
    case: record.case as unknown as Case,
    result: record.result as unknown as Result,
    band: record.band as unknown as Band | null,
    engineVersion: record.engineVersion,
  }
}
