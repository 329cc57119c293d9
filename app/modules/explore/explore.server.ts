// What the Explore page and the point sheet show, put together from run, points and plan.
import { AppError } from '#app/http/errors.ts'
import type { Aggregates, PointFilters } from '#app/modules/points/point-types.ts'
import { aggregates, pageOfPoints, pointSheet, refinedBest } from '#app/modules/points/points.server.ts'
import { runProgress } from '#app/modules/runs/progress.server.ts'
import { isFinal } from '#app/modules/runs/progress.ts'
import { planOfRevision } from '#app/modules/runs/run-plan.server.ts'
import { listRuns, type RunListing } from '#app/modules/runs/runs.server.ts'
import { KEY_RESULT_INDEX, KEY_RESULTS } from '#engine/bundle/key-results.ts'
import type { Result } from '#engine/result.ts'
import { LIMITS } from '#engine/sweep/limits.ts'
import { type PlanVariable, pointCase, pointInputs, type SweepPlan } from '#engine/sweep/plan.ts'
import { getPath, type SweptValue } from '#engine/sweep/study.ts'
import { pointColumns } from './columns.ts'
import type { LimitEffect } from './finding.ts'
import { keyResultOf } from './limits.ts'
import { sheetCards } from './method-cards.server.ts'
import { caseNames, choiceNames } from './names.server.ts'
import { pictureOf } from './picture.server.ts'
import { type ExploreView, PAGE_SIZE, parseView } from './view.ts'

/** Ended runs whose summaries are kept in memory. */
const KEPT = 64

/** A variable as the page needs it: with its values where they are few enough to choose from. */
function pageVariable({ path, label, symbol, dimension, kind, tubeSized, values, between }: PlanVariable) {
  return {
    path,
    label,
    symbol,
    dimension,
    kind,
    tubeSized,
    values: between || values.length > 40 ? [] : [...values],
  }
}

function runSummary({ id, revision, state, plannedAt, endedAt, engineVersion, points, done }: RunListing) {
  return {
    id,
    revision,
    state,
    plannedAt: plannedAt.toISOString(),
    endedAt: endedAt?.toISOString() ?? null,
    engineVersion,
    points,
    done,
  }
}

async function runOfStudy(
  studyId: string,
  asked: string | null,
): Promise<{ runs: RunListing[]; run: RunListing | null }> {
  const runs = await listRuns(studyId)
  if (asked === null) return { runs, run: runs[0] ?? null }
  const run = runs.find(({ id }) => id === asked)
  if (!run) throw new AppError('not-found', 'This study has no such run.')
  return { runs, run }
}

export async function explorePage(studyId: string, search: URLSearchParams) {
  const { runs, run } = await runOfStudy(studyId, search.get('run'))
  if (!run) return { kind: 'empty' as const }
  const plan = await planOfRevision(run.revisionId)
  const variables = plan.variables.map(pageVariable)
  const columns = pointColumns(variables)
  const view = parseView(search, columns)
  const [progress, all, refined] = await Promise.all([
    runProgress(run.id),
    countsOf(run),
    refinedBest(run.id),
  ])
  const filters: PointFilters = {
    ranges: view.ranges,
    inputs: view.inputs,
    ...(view.outcome ? { outcome: view.outcome } : {}),
  }
  const tableAll = view.all || all.meetingLimits === 0
  const final = isFinal(run.state)
  const effects = final ? await limitEffects(run.id, plan, all.meetingLimits > 0) : null
  const sort = usualSort(plan, view, nearestEffect(effects))
  const has = (result: string) => all.ranges[result] !== undefined
  const [page, picture] = await Promise.all([
    pageOfPoints(run.id, {
      sort: sort.id,
      descending: sort.descending,
      filters: tableAll ? filters : { ...filters, meetingLimits: true },
      limit: PAGE_SIZE,
      offset: view.page * PAGE_SIZE,
    }),
    pictureOf(run.id, plan, view, has, filters, tableAll),
  ])
  const best = progress.best
  const selected = await selectedPoint(
    run.id,
    plan,
    view,
    best?.point ?? nearestEffect(effects)?.nearestPoint ?? null,
    refined,
  )
  return {
    kind: 'run' as const,
    runs: runs.map(runSummary),
    run: runSummary(run),
    progress,
    objective: plan.study.objective,
    limits: plan.study.limits,
    variables,
    names: choiceNames(plan.variables),
    tableAll,
    sort,
    aggregates: all,
    page,
    picture,
    limitEffects: effects,
    best: best ? bestOf(plan, best.point, best.results) : null,
    refined: refined ? { ...refinedSheet(run.id, plan, refined), ...refinedWords(refined) } : null,
    selected,
    pinned: await Promise.all(
      view.pinned.filter((point) => point < plan.points).map((point) => sheetOf(run.id, plan, point)),
    ),
  }
}

export type ExploreRun = Extract<Awaited<ReturnType<typeof explorePage>>, { kind: 'run' }>

type Refined = NonNullable<Awaited<ReturnType<typeof refinedBest>>>
type PointId = number | 'refined'

/** A point's sheet with what plots and headlines need of it: swept values, key results by id, names. */
async function sheetOf(runId: string, plan: SweepPlan, point: number) {
  const sheet = await pointSheet(runId, point)
  return {
    ...sheet,
    point: sheet.point as PointId,
    inputs: pointInputs(plan, point) as (SweptValue | null)[],
    keyResults: resultsById(sheet.result),
    names: caseNames(sheet.case),
  }
}

export type PointView = Awaited<ReturnType<typeof sheetOf>>

function refinedSheet(runId: string, plan: SweepPlan, refined: Refined): PointView {
  return {
    runId,
    point: 'refined',
    case: refined.case,
    result: refined.result,
    stored: {},
    storedEngineVersion: refined.engineVersion,
    engineVersion: refined.engineVersion,
    recorded: true,
    band: refined.band,
    differences: [],
    inputs: plan.variables.map(({ path }) => {
      const value = getPath(refined.case, path)
      return typeof value === 'number' || typeof value === 'string' ? value : null
    }),
    keyResults: resultsById(refined.result),
    names: caseNames(refined.case),
  }
}

const refinedWords = ({ improved, statement }: Refined) => ({
  improved: improved === true,
  statement: typeof statement === 'string' ? statement : '',
})

function bestOf(plan: SweepPlan, point: number, keyResults: Record<string, number | null>) {
  const bundle = pointCase(plan, point)
  return {
    point: point as PointId,
    case: bundle,
    inputs: pointInputs(plan, point) as (SweptValue | null)[],
    keyResults,
    names: caseNames(bundle),
  }
}

const resultsById = (result: Result): Record<string, number | null> =>
  Object.fromEntries(KEY_RESULTS.map(({ id }) => [id, keyResultOf(result, id)]))

async function selectedPoint(
  runId: string,
  plan: SweepPlan,
  view: ExploreView,
  fallback: number | null,
  refined: Refined | null,
): Promise<PointView | null> {
  if (view.point === 'refined' && refined) return refinedSheet(runId, plan, refined)
  const asked = typeof view.point === 'number' && view.point < plan.points ? view.point : fallback
  return asked === null ? null : sheetOf(runId, plan, asked)
}

const countsKept = new Map<string, Promise<Aggregates>>()

/** Counts and ranges over all points. Of an ended run, whose points no longer change: kept. */
function countsOf(run: RunListing): Promise<Aggregates> {
  return isFinal(run.state) ? kept(countsKept, run.id, () => aggregates(run.id)) : aggregates(run.id)
}

/** What was made for a key once, as long as it is among the latest made; failures are not kept. */
function kept<Value>(
  store: Map<string, Promise<Value>>,
  key: string,
  make: () => Promise<Value>,
): Promise<Value> {
  const known = store.get(key)
  if (known) return known
  const made = make()
  store.set(key, made)
  made.catch(() => store.delete(key))
  if (store.size > KEPT) store.delete(store.keys().next().value as string)
  return made
}

type PointEffect = LimitEffect & { nearestPoint: number | null }

const effectsKept = new Map<string, Promise<PointEffect[]>>()

/** What each limit does, the others held. Of an ended run, whose points no longer change: kept. */
function limitEffects(runId: string, plan: SweepPlan, someMeet: boolean) {
  return kept(effectsKept, runId, () => findLimitEffects(runId, plan, someMeet))
}

async function findLimitEffects(runId: string, plan: SweepPlan, someMeet: boolean) {
  const { limits, objective } = plan.study
  const effects: PointEffect[] = []
  for (const { id, result } of LIMITS)
    for (const side of ['max', 'min'] as const) {
      const bound = limits[id]?.[side]
      if (bound === undefined) continue
      const ranges: NonNullable<PointFilters['ranges']> = {}
      for (const other of LIMITS) {
        const given = limits[other.id]
        if (!given) continue
        const kept = other.id === id ? { ...given, [side]: undefined } : given
        if (kept.min !== undefined || kept.max !== undefined) ranges[other.result] = kept
      }
      const filters = { outcome: 'evaluated', ranges }
      const value = async (sort: string, descending: boolean) => {
        const { rows } = await pageOfPoints(runId, { filters, sort, descending, limit: 1 })
        return rows[0] ? { point: rows[0].point, value: rows[0].results[KEY_RESULT_INDEX[sort]] } : null
      }
      const least = await value(objective, false)
      const nearest = someMeet ? null : await value(result, side === 'min')
      effects.push({
        limit: id,
        side,
        bound,
        without: least?.value ?? null,
        nearest: nearest?.value ?? null,
        nearestPoint: nearest?.value == null ? null : nearest.point,
      })
    }
  return effects
}

/** Where nothing meets every limit: the limit that comes nearest to being met, the others held. */
function nearestEffect(effects: readonly PointEffect[] | null): PointEffect | null {
  const away = ({ nearest, bound }: PointEffect) =>
    Math.abs((nearest as number) - bound) / Math.abs(bound || 1)
  const near = (effects ?? []).filter(({ nearest }) => nearest !== null)
  return near.sort((a, b) => away(a) - away(b))[0] ?? null
}

/** The order asked for, or by the objective; where nothing meets the limits, by what comes nearest to meeting one. */
function usualSort(plan: SweepPlan, view: ExploreView, nearest: PointEffect | null) {
  if (view.sort !== null) return { id: view.sort, descending: view.descending }
  if (nearest === null) return { id: plan.study.objective as string, descending: view.descending }
  const { result } = LIMITS.find(({ id }) => id === nearest.limit) as (typeof LIMITS)[number]
  return { id: result, descending: view.descending !== (nearest.side === 'min') }
}

/** One point's sheet, of the run asked for or the study's latest, with the cards of its methods. */
export async function sheetPage(studyId: string, point: string, asked: string | null) {
  const { run } = await runOfStudy(studyId, asked)
  if (!run) throw new AppError('not-found', 'This study has no run yet, and so no points.')
  const plan = await planOfRevision(run.revisionId)
  const sheet = await sheetAsked(run, plan, point)
  return {
    run: runSummary(run),
    studyName: plan.study.name,
    limits: plan.study.limits,
    sheet,
    isBest: sheet.point === run.bestPoint,
    swept: plan.variables.map(({ path }) => path),
    cards: sheetCards(sheet.case, sheet.result),
  }
}

async function sheetAsked(run: RunListing, plan: SweepPlan, point: string): Promise<PointView> {
  if (point === 'refined') {
    const refined = await refinedBest(run.id)
    if (!refined) throw new AppError('not-found', 'This run has no refined point.')
    return refinedSheet(run.id, plan, refined)
  }
  if (!/^\d{1,7}$/.test(point)) throw new AppError('not-found', `The run has points 0 to ${run.points - 1}.`)
  return sheetOf(run.id, plan, Number(point))
}

export type SheetPage = Awaited<ReturnType<typeof sheetPage>>
