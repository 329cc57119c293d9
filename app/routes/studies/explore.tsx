// Explore: the finding, its figures, the points against their limits, and one point drawn in the margin.
import { type ReactNode, useCallback, useMemo } from 'react'
import {
  Link,
  type ShouldRevalidateFunctionArgs,
  useLocation,
  useNavigate,
  useNavigation,
  useRevalidator,
} from 'react-router'
import { type SavedViewEntry, SavedViews } from '#app/components/explore/saved-views.tsx'
import { Said } from '#app/components/sheet/said.tsx'
import { ColumnChoice } from '#app/components/table/column-choice.tsx'
import { PointsTable, type TableColumn, type TableRow } from '#app/components/table/points-table.tsx'
import { Button, LinkButton } from '#app/components/ui/button.tsx'
import { MarginNote } from '#app/components/ui/margin-note.tsx'
import { Menu } from '#app/components/ui/menu.tsx'
import { Digits, Quantity, useUnits } from '#app/components/ui/number.tsx'
import { groupedText } from '#app/components/ui/number-format.ts'
import { EmptyState, PageHead, PlainPage, Sheet } from '#app/components/ui/page.tsx'
import { ProgressBar } from '#app/components/ui/progress.tsx'
import { viewerContext } from '#app/http/context.ts'
import { listViews } from '#app/modules/comparisons/saved.server.ts'
import { describeCase } from '#app/modules/explore/case-words.ts'
import { type PointColumn, pointColumns, shown, unitOf, usualColumns } from '#app/modules/explore/columns.ts'
import { type ExploreRun, explorePage } from '#app/modules/explore/explore.server.ts'
import { finding } from '#app/modules/explore/finding.ts'
import { useRunProgress } from '#app/modules/explore/use-run-progress.ts'
import { changed, PAGE_SIZE, parseView, valueText } from '#app/modules/explore/view.ts'
import { isFinal } from '#app/modules/runs/progress.ts'
import { KEY_RESULT_INDEX, OUTCOMES } from '#engine/bundle/key-results.ts'
import { LIMITS, type Limits } from '#engine/sweep/limits.ts'
import { OBJECTIVE_LABELS } from '#engine/sweep/objective.ts'
import type { UnitSystem } from '#engine/units.ts'
import type { Route } from './+types/explore'
import { PointFigures } from './explore/figures.tsx'
import { PictureSheet } from './explore/picture.tsx'
import { PinnedPoints } from './explore/pinned-points.tsx'
import { PointMargin, pointName } from './explore/point-margin.tsx'
import { useSteady } from './explore/use-steady.ts'
import '#app/components/explore/explore.css'

export async function loader({ params, request, context }: Route.LoaderArgs) {
  const { personId } = context.get(viewerContext)
  const [page, views] = await Promise.all([
    explorePage(params.studyId, new URL(request.url).searchParams),
    listViews(params.studyId, personId),
  ])
  return {
    ...page,
    views: views.map(({ createdBy, ...view }) => ({ ...view, own: createdBy === personId })),
  }
}

/** A jump within the page changes nothing that is shown. */
export function shouldRevalidate({
  currentUrl,
  nextUrl,
  defaultShouldRevalidate,
}: ShouldRevalidateFunctionArgs) {
  const same = currentUrl.pathname === nextUrl.pathname && currentUrl.search === nextUrl.search
  return same && currentUrl.hash !== nextUrl.hash ? false : defaultShouldRevalidate
}

export function meta() {
  return [{ title: 'Explore · Rowfall' }]
}

export default function Explore({ loaderData, params }: Route.ComponentProps) {
  if (loaderData.kind === 'empty')
    return (
      <PlainPage>
        <PageHead title="Nothing to explore yet" />
        <EmptyState
          title="The finding stands here once a run has begun"
          acts={
            <LinkButton to={`/studies/${params.studyId}/run`} look="main">
              Go to Run
            </LinkButton>
          }
        >
          A run evaluates every point of the study; its first points can be explored while the rest are
          computed.
        </EmptyState>
      </PlainPage>
    )
  return <ExploreRunPage page={loaderData} views={loaderData.views} studyId={params.studyId} />
}

function ExploreRunPage({
  page,
  views,
  studyId,
}: {
  page: ExploreRun
  views: readonly SavedViewEntry[]
  studyId: string
}) {
  const units = useUnits()
  const { search: searchText } = useLocation()
  const search = useMemo(() => new URLSearchParams(searchText), [searchText])
  const navigate = useNavigate()
  const navigation = useNavigation()
  const revalidator = useRevalidator()
  const progress = useRunProgress(page.progress, revalidator.revalidate)
  const variables = useSteady(page.variables, page.run.id)
  const columns = useMemo(() => pointColumns(variables), [variables])
  const view = useMemo(() => parseView(search, columns), [search, columns])
  const swept = page.variables.map(({ path }) => path)
  const { best, selected, run } = page
  const busy = navigation.state === 'loading' && navigation.location.pathname.endsWith('/explore')

  const { headline, reason } = finding(
    {
      ...progress,
      evaluated: page.aggregates.evaluated,
      limitsNotMet: page.aggregates.limitsNotMet,
      objective: page.objective,
      limits: page.limits,
      limitEffects: page.limitEffects,
      best: progress.best
        ? {
            objective: progress.best.objective,
            described:
              best && best.point === progress.best.point
                ? describeCase(best.case, best.names, swept, units)
                : '',
          }
        : null,
    },
    units,
  )
  const to = useCallback(
    (change: Parameters<typeof changed>[1]) =>
      // Back undoes a filter or another view of the points; looking at one point after another leaves no trail.
      navigate(changed(search, change), { replace: 'point' in change, preventScrollReset: true }),
    [navigate, search],
  )
  const filtered =
    Object.keys(view.ranges).length > 0 || Object.keys(view.inputs).length > 0 || view.outcome !== null
  const table = tableOf(page, view.columns, columns, units)
  const fresh = progress.done - page.progress.done
  const point = selected?.point ?? null
  // A choice shows at the row before its sheet has come.
  const asked = busy
    ? Number(new URLSearchParams(navigation.location?.search).get('point') ?? Number.NaN)
    : Number.NaN
  const marked = Number.isInteger(asked) ? asked : typeof point === 'number' ? point : null
  const pin = (id: number) => {
    const now = view.pinned
    return changed(search, {
      pin: now.includes(id) ? now.filter((one) => one !== id) : [...now, id].slice(-4),
    })
  }

  return (
    <ExploreLayout
      busy={busy}
      margin={
        selected ? (
          <PointMargin
            key={selected.point}
            shown={selected}
            limits={page.limits}
            sheetHref={`/studies/${studyId}/points/${selected.point}?run=${run.id}`}
            pinHref={typeof point === 'number' ? pin(point) : null}
            pinned={typeof point === 'number' && view.pinned.includes(point)}
          />
        ) : (
          <p className="text-soft">
            {isFinal(run.state)
              ? 'No point has a value, so there is none to draw.'
              : 'The best point so far is drawn here as soon as there is one.'}
          </p>
        )
      }
      lead={
        <>
          <PageHead
            title={<Said>{headline}</Said>}
            reason={<Said>{reason.join(' ')}</Said>}
            acts={<RunActs page={page} views={views} search={search} studyId={studyId} />}
          />
          {isFinal(progress.state) ? null : (
            <div className="grid gap-2">
              <ProgressBar done={progress.done} total={progress.points} label="Points done" />
              {fresh > 0 ? (
                <p className="text-note text-soft" role="status">
                  <Digits>{fresh}</Digits> more {fresh === 1 ? 'point is' : 'points are'} done than are shown.{' '}
                  <Button look="quiet" small onClick={() => revalidator.revalidate()}>
                    Show them
                  </Button>
                </p>
              ) : null}
            </div>
          )}
          {best ? (
            <PointFigures
              results={best.keyResults}
              objective={page.objective}
              label="Figures of the least point"
            />
          ) : selected ? (
            <PointFigures
              results={selected.keyResults}
              objective={page.objective}
              label={`Figures of ${pointName(selected.point)}, which misses a limit`}
            />
          ) : null}
          <Refined page={page} search={search} />
          <PinnedPoints
            points={page.pinned}
            limits={page.limits}
            href={(id) => changed(search, { point: id })}
            unpinHref={pin}
          />
          <PictureSheet
            page={page}
            columns={columns}
            view={view}
            search={search}
            selected={typeof point === 'number' ? point : null}
            to={to}
          />
        </>
      }
      rest={
        <>
          <Sheet
            flush
            title={
              <>
                {page.tableAll ? 'All points' : 'Points that meet every limit'}, by{' '}
                {(page.sort.id === 'point'
                  ? 'number'
                  : (columns.find(({ id }) => id === page.sort.id)?.label ?? page.sort.id)
                ).toLowerCase()}
              </>
            }
            acts={
              <>
                {page.aggregates.meetingLimits > 0 ? (
                  <LinkButton
                    to={changed(search, { all: view.all ? null : 1 })}
                    replace
                    preventScrollReset
                    small
                  >
                    {view.all ? 'Only those that meet every limit' : 'All points'}
                  </LinkButton>
                ) : null}
                <ColumnChoice
                  shown={table.shown}
                  hidden={table.hidden}
                  href={(ids) => changed(search, { column: ids })}
                />
              </>
            }
          >
            {page.page.rows.length === 0 ? (
              <p className="px-5 pb-6 text-soft">
                {filtered
                  ? 'No point passes the filter. Lift it, or widen its bounds.'
                  : 'No point is stored yet.'}
              </p>
            ) : (
              <PointsTable
                caption={`${page.page.matching} points`}
                columns={table.columns}
                rows={table.rows}
                sort={{ id: page.sort.id, descending: page.sort.descending }}
                sortHref={(id) =>
                  changed(search, {
                    sort: id,
                    dir: page.sort.id === id && !page.sort.descending ? 'down' : null,
                  })
                }
                pointHref={(id) => changed(search, { point: id })}
                selected={marked}
                matching={page.page.matching}
                offset={page.page.offset}
                pageSize={PAGE_SIZE}
                pageHref={(number) => changed(search, { page: number === 0 ? null : number })}
                busy={busy}
              />
            )}
          </Sheet>
          <Unevaluated page={page} search={search} />
        </>
      }
    />
  )
}

/** Finding and plot, the point beside them, the table under them; on a phone the point comes before the table. */
function ExploreLayout({
  lead,
  margin,
  rest,
  busy,
}: {
  lead: ReactNode
  margin: ReactNode
  rest: ReactNode
  busy: boolean
}) {
  const column = 'grid min-w-0 content-start gap-5 px-4 sm:px-7 print:p-0 print:block print:*:mb-4'
  return (
    <div className="grid grow lg:grid-cols-[minmax(0,1fr)_24.5rem] lg:grid-rows-[auto_1fr] print:block">
      <div className={`${column} py-6 sm:pt-8`}>{lead}</div>
      <aside
        aria-label="Selected point"
        className="min-w-0 border-line bg-sheet px-4 py-6 max-lg:border-y sm:px-7 lg:col-start-2 lg:row-span-2 lg:row-start-1 lg:border-s lg:px-6 lg:py-8 print:border-0 print:p-0"
      >
        <div
          className={`grid content-start gap-6 transition-opacity lg:sticky lg:top-6 ${busy ? 'opacity-60' : ''}`}
          aria-busy={busy}
        >
          {margin}
        </div>
      </aside>
      <div className={`${column} pb-8 max-lg:pt-6`}>{rest}</div>
    </div>
  )
}

function RunActs({
  page,
  views,
  search,
  studyId,
}: {
  page: ExploreRun
  views: readonly SavedViewEntry[]
  search: URLSearchParams
  studyId: string
}) {
  const { run, runs } = page
  const only = new URLSearchParams(
    [...search].filter(
      ([key]) =>
        /^(min|max)\./.test(key) || key === 'outcome' || page.variables.some(({ path }) => path === key),
    ),
  )
  // The table leaves out what misses a limit unless asked for all, and so does its file.
  if (search.get('all') !== '1' && page.aggregates.meetingLimits > 0) only.set('meets', '1')
  const filtered = only.toString()
  const query = filtered === '' ? '' : `?${filtered}`
  return (
    <>
      <LinkButton to={`/studies/${studyId}/optimum`}>Optimum</LinkButton>
      <SavedViews studyId={studyId} views={views} />
      {runs.length > 1 ? (
        <Menu
          label={`Run of revision ${run.revision}`}
          name="Choose the run to explore"
          entries={runs.map((one) => ({
            label: `Revision ${one.revision}`,
            detail: `${one.state}, ${groupedText(one.done)} of ${groupedText(one.points)}, ${one.plannedAt.slice(0, 10)}`,
            to: changed(new URLSearchParams(), { run: one.id }),
          }))}
        />
      ) : null}
      <Menu
        label="Export"
        entries={[
          {
            label: 'Workbook',
            href: `/runs/${run.id}/workbook.xlsx`,
            detail: 'inputs, points, best, sources',
          },
          { label: 'Points as CSV', href: `/runs/${run.id}/points.csv`, detail: 'all points, SI units' },
          ...(query === ''
            ? []
            : [
                {
                  label: 'Filtered points as CSV',
                  href: `/runs/${run.id}/points.csv${query}`,
                  detail: 'as filtered here',
                },
              ]),
          { label: 'Study file', href: `/studies/${studyId}/study.json`, detail: 'to run elsewhere' },
        ]}
      />
    </>
  )
}

/** What searching between the swept values found beyond the best of them. */
function Refined({ page, search }: { page: ExploreRun; search: URLSearchParams }) {
  const { refined, objective, best } = page
  if (!refined || !best) return null
  if (!refined.improved)
    return (
      <p className="text-note text-soft">
        Searched between the swept values too: <Said>{refined.statement}</Said>
      </p>
    )
  const value = refined.keyResults[objective]
  const column = pointColumns([]).find(({ id }) => id === objective) as PointColumn
  const least = best.keyResults[objective]
  const gain = value === null || least === null ? null : (1 - value / least) * 100
  return (
    <MarginNote
      tone="sound"
      title={
        <>
          Refined between the swept values: {OBJECTIVE_LABELS[objective].toLowerCase()}{' '}
          <Quantity value={value} dimension={column.dimension} hint={column.hint} />
          {gain !== null ? `, ${Number(gain.toPrecision(2))} % less` : ''}.{' '}
          <Link
            to={changed(search, { point: 'refined' })}
            replace
            preventScrollReset
            className="link screen-only font-semibold"
          >
            Show it
          </Link>
        </>
      }
    >
      <Said>{refined.statement}</Said>
    </MarginNote>
  )
}

/** Points without values, by reason: each can be listed. */
function Unevaluated({ page, search }: { page: ExploreRun; search: URLSearchParams }) {
  const reasons = page.aggregates.outcomes.filter(({ code }) => code !== 'evaluated')
  if (reasons.length === 0) return null
  return (
    <Sheet title="Points without values">
      <ul className="grid gap-1.5">
        {reasons.map(({ code, text, count }) => (
          <li key={code} className="flex flex-wrap items-baseline gap-x-3">
            <span className="font-semibold">
              <Digits>{count}</Digits>
            </span>
            <span className="grow basis-64 text-soft">{text}</span>
            <LinkButton
              look="quiet"
              small
              to={changed(search, { outcome: code, all: 1, sort: 'point' })}
              replace
              preventScrollReset
            >
              List them
            </LinkButton>
          </li>
        ))}
      </ul>
    </Sheet>
  )
}

function tableOf(
  page: ExploreRun,
  chosen: readonly string[],
  columns: readonly PointColumn[],
  units: UnitSystem,
) {
  const has = (column: PointColumn) =>
    column.kind === 'input' || page.aggregates.ranges[column.id] !== undefined
  const usual = usualColumns(
    page.variables.map(({ path }) => path),
    page.objective,
    (result) => page.aggregates.ranges[result] !== undefined,
  )
  const ids = chosen.length > 0 ? chosen : usual
  const own = ids.flatMap((id) => columns.filter((column) => column.id === id))
  const option = ({ id, label }: PointColumn) => ({ id, label })
  return {
    shown: own.map(option),
    hidden: columns.filter((column) => !own.includes(column) && has(column)).map(option),
    columns: own.map(
      (column): TableColumn => ({
        id: column.id,
        label: column.label,
        unit: unitOf(column, units),
        numeric: !column.choice,
        given: column.kind === 'input' || column.whole,
      }),
    ),
    rows: page.page.rows.map(
      (row): TableRow => ({
        point: row.point,
        cells: own.map((column) => {
          const value = column.kind === 'input' ? row.inputs[column.index] : row.results[column.index]
          if (value === null) return null
          return typeof value === 'string'
            ? valueText(value, column, units, page.names)
            : shown(value, column, units)
        }),
        state: stateOf(row.results, page.limits),
      }),
    ),
  }
}

/** Whether a row may be chosen: every limit met, or the first that is not, or why it has no values. */
function stateOf(results: readonly (number | null)[], limits: Limits): TableRow['state'] {
  const outcome = results[KEY_RESULT_INDEX.outcome] ?? 0
  if (outcome !== 0) return { tone: 'failed', label: OUTCOME_SHORT[OUTCOMES[outcome]?.code] ?? 'no value' }
  const mask = results[KEY_RESULT_INDEX.limitsNotMet] ?? 0
  const missed = LIMITS.filter(({ id }, bit) => limits[id] && (mask & (1 << bit)) !== 0)
  if (missed.length === 0)
    return { tone: 'sound', label: Object.keys(limits).length > 0 ? 'meets all' : 'no limit' }
  return {
    tone: 'attention',
    label: missed.length === 1 ? missed[0].label.toLowerCase() : `${missed.length} limits`,
  }
}

const OUTCOME_SHORT: Record<string, string> = {
  inputInvalid: 'no such bundle',
  propertyMissing: 'property missing',
  saturationOutsideTable: 'state outside table',
  coolantOutsideRange: 'coolant out of range',
  coolantOutletOutsideRange: 'coolant out of range',
  coolantTooWarm: 'coolant too warm',
  wallBelowRange: 'wall too cold',
  vapourPressureExhausted: 'vapour drop too high',
  vapourTooFast: 'vapour too fast',
  dutyNotReached: 'duty not reached',
  noVelocityHoldsWall: 'no velocity holds wall',
  outletNotReachable: 'outlet not reachable',
  notSolved: 'not solved',
}
