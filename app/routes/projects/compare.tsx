// Up to six studies side by side: their candidates, the inputs in which they differ, limits and fronts.
import type { ReactNode } from 'react'
import { data, Form, Link, redirect } from 'react-router'
import { BundleThumbnail } from '#app/components/bundle-drawing/bundle-drawing.tsx'
import { bundleGeometry } from '#app/components/bundle-drawing/layout.ts'
import { LineChart } from '#app/components/charts/line-chart.tsx'
import { BandLine } from '#app/components/sheet/band.tsx'
import { Given } from '#app/components/sheet/entries.tsx'
import { LimitBounds } from '#app/components/sheet/limit-notes.tsx'
import { Said } from '#app/components/sheet/said.tsx'
import { Comments } from '#app/components/study/comments.tsx'
import { PointsDone, RunStateTag } from '#app/components/study/run-state.tsx'
import { Button, DownloadLink } from '#app/components/ui/button.tsx'
import { TextField } from '#app/components/ui/field.tsx'
import { MarginNote } from '#app/components/ui/margin-note.tsx'
import { Digits, Quantity, useUnits } from '#app/components/ui/number.tsx'
import { EmptyState, PageHead, PlainPage, Scroll, Sheet } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import { useFaultFocus } from '#app/components/ui/use-fault-focus.ts'
import { When } from '#app/components/ui/when.tsx'
import { readForm } from '#app/http/body.ts'
import { projectContext, viewerContext } from '#app/http/context.ts'
import { AppError, failureOf } from '#app/http/errors.ts'
import { addComment, listComments, withdrawComment } from '#app/modules/comments/comments.server.ts'
import { chosenOf } from '#app/modules/comparisons/chosen.ts'
import {
  comparedStudies,
  MOST_COMPARED,
  type RunCandidate,
} from '#app/modules/comparisons/comparison.server.ts'
import { type ComparedRow, comparedRows, drivesAsOne } from '#app/modules/comparisons/differences.ts'
import {
  deleteComparison,
  getComparison,
  listComparisons,
  saveComparison,
} from '#app/modules/comparisons/saved.server.ts'
import { keyResultOf, limitStandings } from '#app/modules/explore/limits.ts'
import { type Entry, sheetInputs, sheetResults } from '#app/modules/explore/sheet.ts'
import { listMembers } from '#app/modules/projects/projects.server.ts'
import { listStudies } from '#app/modules/studies/studies.server.ts'
import { LIMITS } from '#engine/sweep/limits.ts'
import { OBJECTIVE_LABELS } from '#engine/sweep/objective.ts'
import { displayUnit, formatQuantity, toDisplay, type UnitSystem } from '#engine/units.ts'
import { actingOf } from '../acting.ts'
import type { Route } from './+types/compare'

export const meta: Route.MetaFunction = () => [{ title: 'Compare studies · Rowfall' }]

export const handle = {
  crumbs: ({ project }: Route.ComponentProps['loaderData']) => [
    { label: project.name, to: `/projects/${project.id}` },
    { label: 'Compare', to: `/projects/${project.id}/compare` },
  ],
}

export async function loader({ request, context }: Route.LoaderArgs) {
  const search = new URL(request.url).searchParams
  const { projectId, projectName } = context.get(projectContext)
  const { personId } = context.get(viewerContext)
  const savedId = search.get('saved')
  const saved = savedId === null ? null : await getComparison(projectId, savedId)
  const asked = search.has('study') || saved === null ? search : new URLSearchParams(saved.query)
  const chosen = asked.getAll('study')
  const [compared, listed, comparisons, members, comments] = await Promise.all([
    comparedStudies(projectId, chosen),
    listStudies(projectId),
    listComparisons(projectId),
    listMembers(projectId),
    saved ? listComments({ comparisonId: saved.id }, projectId) : [],
  ])
  return {
    project: { id: projectId, name: projectName },
    most: MOST_COMPARED,
    listed: listed
      .filter(({ run }) => run)
      .map(({ id, name }) => ({ id, name, chosen: chosen.includes(id) })),
    compared,
    comparisons,
    saved: saved && { id: saved.id, name: saved.name, own: saved.createdBy === personId },
    query: new URLSearchParams(chosen.map((id) => ['study', id])).toString(),
    comments,
    members: members.map(({ id, name }) => ({ id, name })),
    viewerId: personId,
  }
}

export async function action({ request, params, context }: Route.ActionArgs) {
  const { projectId } = params
  const acting = actingOf(context)
  const form = await readForm(request)
  const text = (name: string) => String(form.get(name) ?? '')
  const saved = new URL(request.url).searchParams.get('saved')
  const intent = text('intent')
  try {
    switch (intent) {
      case 'save': {
        const made = await saveComparison(projectId, text('name'), text('query'), acting)
        return redirect(`/projects/${projectId}/compare?saved=${made.id}`)
      }
      case 'delete': {
        const found = await getComparison(projectId, text('comparison'))
        if (found.createdBy !== acting.personId)
          throw new AppError('forbidden', 'Only who saved a comparison can delete it.')
        await deleteComparison(projectId, found.id, acting)
        return redirect(`/projects/${projectId}/compare`)
      }
      case 'comment':
      case 'withdrawComment': {
        const { id } = await getComparison(projectId, saved ?? '')
        if (intent === 'comment') await addComment({ comparisonId: id }, projectId, text('body'), acting)
        else await withdrawComment(text('comment'), projectId, acting)
        return null
      }
      default:
        throw new AppError('bad-request', 'This page does not know that act; reload it and try again.')
    }
  } catch (error) {
    const failure = failureOf(error)
    if (failure?.code !== 'invalid' && failure?.code !== 'conflict') throw error
    return data({ intent, fault: failure.message, typed: text('name').slice(0, 200) }, 400)
  }
}

type Compared = Extract<Route.ComponentProps['loaderData']['compared'][number], { objective: unknown }>

export default function Compare({ loaderData, actionData }: Route.ComponentProps) {
  const { compared, listed, most, saved, comparisons, project, query } = loaderData
  const refused = actionData && 'fault' in actionData ? actionData : null
  const units = useUnits()
  const studies = compared.filter((study): study is Compared => study.run !== null)
  const without = compared.filter((study) => study.run === null)
  if (studies.length < 2)
    return (
      <PlainPage>
        <PageHead
          title="Choose the studies to set side by side"
          reason={`Two to ${most}, each with a run.`}
        />
        {listed.length < 2 ? (
          <EmptyState title="There are not yet two studies with a run">
            Run another study of this project, or a copy of one with something changed.
          </EmptyState>
        ) : (
          <Sheet>
            <Choice listed={listed} />
          </Sheet>
        )}
        <SavedComparisons comparisons={comparisons} projectId={project.id} />
      </PlainPage>
    )
  return (
    <PlainPage>
      <PageHead
        over={saved?.name}
        title={<Said>{headline(studies, units)}</Said>}
        reason={reasonOf(studies)}
        acts={
          <DownloadLink href={`/projects/${project.id}/compare.csv?${query}`} download>
            As CSV
          </DownloadLink>
        }
      />
      {without.map(({ id, name }) => (
        <MarginNote key={id} tone="attention" title={`${name} has no points yet.`}>
          Run it to set it beside the others.
        </MarginNote>
      ))}
      <SideBySide studies={studies} />
      <Fronts studies={studies} />
      {saved ? (
        <Comments
          comments={loaderData.comments}
          members={loaderData.members}
          viewerId={loaderData.viewerId}
        />
      ) : null}
      <Keeping saved={saved} query={query} refused={refused} />
      <SavedComparisons comparisons={comparisons} projectId={project.id} />
      <details className="screen-only">
        <summary className="list-inside font-semibold text-verdigris-ink">Choose other studies</summary>
        <Sheet className="mt-3">
          <Choice listed={listed} />
        </Sheet>
      </details>
    </PlainPage>
  )
}

type Data = Route.ComponentProps['loaderData']

/** Gives the comparison a name, under which every member finds it and can comment; or takes it away again. */
function Keeping({
  saved,
  query,
  refused,
}: Pick<Data, 'saved' | 'query'> & { refused: { fault: string; typed: string } | null }) {
  const form = useFaultFocus(refused)
  if (saved)
    return saved.own ? (
      <Form method="post" className="screen-only">
        <input type="hidden" name="comparison" value={saved.id} />
        <Button type="submit" name="intent" value="delete" small>
          Delete “{saved.name}” and its comments
        </Button>
      </Form>
    ) : null
  return (
    <Sheet title="Save this comparison" className="screen-only max-w-3xl">
      <Form method="post" ref={form} className="flex flex-wrap items-start gap-3">
        <input type="hidden" name="query" value={query} />
        <TextField
          label="Name"
          name="name"
          required
          maxLength={120}
          className="grow basis-60"
          defaultValue={refused?.typed}
          fault={refused?.fault}
          hint="Members of the project find it by this name, and can comment on it."
        />
        <Button type="submit" name="intent" value="save" className="mt-6">
          Save
        </Button>
      </Form>
    </Sheet>
  )
}

function SavedComparisons({
  comparisons,
  projectId,
}: {
  comparisons: Data['comparisons']
  projectId: string
}) {
  if (comparisons.length === 0) return null
  return (
    <Sheet title="Saved comparisons" className="screen-only max-w-3xl">
      <ul className="grid gap-1">
        {comparisons.map(({ id, name, createdBy, createdAt }) => (
          <li key={id}>
            <Link to={`/projects/${projectId}/compare?saved=${id}`} className="link font-semibold">
              {name}
            </Link>{' '}
            <span className="text-note text-soft">
              {createdBy}, <When at={createdAt} />
            </span>
          </li>
        ))}
      </ul>
    </Sheet>
  )
}

function Choice({ listed }: { listed: { id: string; name: string; chosen: boolean }[] }) {
  return (
    <Form method="get" className="grid gap-3">
      <ul className="grid gap-1">
        {listed.map(({ id, name, chosen }) => (
          <li key={`${id}${chosen}`}>
            <label className="inline-flex items-baseline gap-2">
              <input
                type="checkbox"
                name="study"
                value={id}
                defaultChecked={chosen}
                className="size-4 translate-y-0.5"
              />
              {name}
            </label>
          </li>
        ))}
      </ul>
      <Button type="submit" look="main" className="justify-self-start">
        Set side by side
      </Button>
    </Form>
  )
}

const areaOf = (study: RunCandidate) => chosenOf(study)?.result.outsideArea ?? null

const dutyOf = (study: RunCandidate) => chosenOf(study)?.result.duty ?? null

/** Areas are only held against one another where they serve the same duty. */
function sameDuty(studies: Compared[]): boolean {
  const duties = studies.map(dutyOf).filter((duty) => duty !== null)
  return duties.every((duty) => Math.abs(duty / duties[0] - 1) < 0.001)
}

function headline(studies: Compared[], units: UnitSystem): string {
  const found = studies
    .map((study) => ({ name: study.name, area: areaOf(study), duty: dutyOf(study) }))
    .filter((study): study is { name: string; area: number; duty: number } => study.area !== null)
    .sort((a, b) => a.area - b.area)
  const area = (value: number) => formatQuantity(value, 'area', units, { digits: 3 })
  if (found.length === 0) return `None of ${studies.length} studies has a point that meets its limits`
  if (!sameDuty(studies))
    return `${studies.length} studies of different duties: ${found
      .map((study) => `${area(study.area)} for ${formatQuantity(study.duty, 'power', units, { digits: 3 })}`)
      .join(', ')}`
  const [least, next] = found
  if (!next) return `Only ${least.name} has a point that meets its limits: ${area(least.area)}`
  const share = 1 - least.area / next.area
  return share < 0.0005
    ? `${least.name} and ${next.name} need the same: ${area(least.area)}`
    : `${least.name} needs least: ${area(least.area)}, ${Number((share * 100).toPrecision(2))} % under ${next.name}`
}

function reasonOf(studies: Compared[]): string {
  if (!sameDuty(studies)) return 'Their areas answer different questions; the rows below still compare.'
  const sameLimits = studies.every(
    ({ limits }) => JSON.stringify(limits) === JSON.stringify(studies[0].limits),
  )
  return sameLimits
    ? 'All have the same duty and the same limits.'
    : 'All have the same duty; their limits differ.'
}

function SideBySide({ studies }: { studies: Compared[] }) {
  const units = useUnits()
  const points = studies.map(chosenOf)
  const inputs = comparedRows(
    points.map((point) => (point ? drivesAsOne(sheetInputs(point.case, point.names, units)) : [])),
  )
  const results = comparedRows(points.map((point) => (point ? sheetResults(point.case, point.result) : [])))
  const differing = inputs.filter(({ same }) => !same)
  const areas = studies.map(areaOf)
  const least = sameDuty(studies) ? Math.min(...areas.filter((area) => area !== null)) : null
  return (
    <Scroll label="Studies side by side" className="sheet">
      <table className="data-table compare-table">
        <caption className="visually-hidden">Studies side by side</caption>
        <thead>
          <tr>
            <th scope="col" className="align-top">
              <span className="visually-hidden">Of each study</span>
            </th>
            {studies.map((study, i) => {
              const point = points[i]
              return (
                <th key={study.id} scope="col" className="min-w-48 align-top text-ink!">
                  <Link
                    to={`/studies/${study.id}/explore?run=${study.run?.id}`}
                    className="link text-body font-bold"
                  >
                    {study.name}
                  </Link>
                  {point ? (
                    <div className="mt-3">
                      <BundleThumbnail
                        geometry={bundleGeometry(point.case)}
                        rows={point.result.rows}
                        name={study.name}
                        width={160}
                        height={110}
                      />
                    </div>
                  ) : null}
                </th>
              )
            })}
          </tr>
        </thead>
        <Group title="Finding">
          <Row label="Run" cells={studies.map(({ run }) => run && <RunCell key={run.id} run={run} />)} />
          <Row
            label="Least is asked of"
            cells={studies.map(({ objective }) => OBJECTIVE_LABELS[objective])}
          />
          <Row
            label="Varied"
            cells={studies.map(({ swept }) =>
              swept.map(({ label, values }) => (values === null ? label : `${label} (${values})`)).join(', '),
            )}
          />
          <Row
            label="Points that meet every limit"
            cells={studies.map(({ id, meetingLimits, run }) => (
              <span key={id}>
                <Digits>{meetingLimits}</Digits> of <Digits>{run?.done ?? 0}</Digits>
              </span>
            ))}
          />
          <Row
            label="Outside area"
            cells={studies.map((study, i) => {
              const area = areas[i]
              return area === null ? (
                <Tag key={study.id} tone="attention">
                  nothing meets the limits
                </Tag>
              ) : (
                <span key={study.id} className="inline-flex flex-wrap items-center gap-2 text-lead font-bold">
                  <Quantity value={area} dimension="area" digits={4} />
                  {area === least ? <Tag tone="sound">least</Tag> : null}
                </span>
              )
            })}
          />
          <Row
            label="In eight of ten cases"
            cells={points.map((point, i) =>
              point?.band ? <BandLine key={studies[i].id} band={point.band} /> : null,
            )}
          />
          <Row
            label="Candidate"
            cells={studies.map((study, i) => {
              const point = points[i]
              return point ? (
                <Link
                  key={study.id}
                  to={`/studies/${study.id}/points/${point.point}?run=${study.run?.id}`}
                  className="link"
                >
                  {point.point === 'refined' ? 'refined point' : `point ${point.point}`}
                </Link>
              ) : null
            })}
          />
        </Group>
        <Group title={differing.length > 0 ? 'Inputs that differ' : 'No input differs'}>
          {differing.map((row) => (
            <EntryRow key={`${row.group} ${row.label}`} row={row} given />
          ))}
        </Group>
        <Limits studies={studies} />
        {[...new Set(results.map(({ group }) => group))].map((group) => (
          <Group key={group} title={group}>
            {results
              .filter((row) => row.group === group && row.label !== 'Outside area')
              .map((row) => (
                <EntryRow key={row.label} row={row} />
              ))}
          </Group>
        ))}
        <Group title="Inputs that are the same">
          {inputs
            .filter(({ same }) => same)
            .map((row) => (
              <EntryRow key={`${row.group} ${row.label}`} row={row} given />
            ))}
        </Group>
      </table>
    </Scroll>
  )
}

function Group({ title, children }: { title: string; children: ReactNode }) {
  return (
    <tbody>
      <tr>
        <th scope="colgroup" colSpan={7} className="pt-5! font-bold text-ink!">
          {title}
        </th>
      </tr>
      {children}
    </tbody>
  )
}

function Row({ label, cells }: { label: ReactNode; cells: ReactNode[] }) {
  return (
    <tr>
      <th scope="row" className="text-soft!">
        {label}
      </th>
      {cells.map((cell, i) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: cells keep their study's place
        <td key={i}>{cell ?? <span className="text-soft">–</span>}</td>
      ))}
    </tr>
  )
}

function EntryRow({ row, given }: { row: ComparedRow; given?: boolean }) {
  return (
    <Row
      label={row.label}
      cells={row.cells.map((cell, i) =>
        cell ? <EntryValue key={studyPlace(i)} entry={cell} given={given} /> : null,
      )}
    />
  )
}

const studyPlace = (i: number) => `study ${i}`

function EntryValue({ entry, given }: { entry: Entry; given?: boolean }) {
  if ('text' in entry) return entry.text
  return given && entry.value !== null ? (
    <Given value={entry.value} dimension={entry.dimension} hint={entry.hint} />
  ) : (
    <Quantity value={entry.value} dimension={entry.dimension} hint={entry.hint} digits={4} />
  )
}

function RunCell({ run }: { run: NonNullable<Compared['run']> }) {
  return (
    <span className="inline-flex flex-wrap items-center gap-2">
      revision {run.revision}
      <RunStateTag state={run.state} />
      <span className="text-note text-soft">
        <PointsDone done={run.done} points={run.points} />
      </span>
    </span>
  )
}

function Limits({ studies }: { studies: Compared[] }) {
  const given = LIMITS.filter(({ id }) => studies.some(({ limits }) => limits[id]))
  if (given.length === 0) return null
  return (
    <Group title="Limits">
      {given.map(({ id, label }) => (
        <Row
          key={id}
          label={label}
          cells={studies.map((study) => {
            const point = chosenOf(study)
            const standing = limitStandings(study.limits, (result) =>
              point ? keyResultOf(point.result, result) : null,
            ).find((one) => one.id === id)
            if (!standing) return <span className="text-soft">no limit</span>
            return (
              <span key={study.id} className="inline-flex flex-wrap items-baseline gap-x-2">
                <span className={standing.met === false ? 'text-red-ink' : ''}>
                  <Quantity
                    value={standing.value}
                    dimension={standing.dimension}
                    hint={standing.hint}
                    digits={4}
                  />
                </span>
                <span className="text-note text-soft">
                  <LimitBounds {...standing} />
                </span>
              </span>
            )
          })}
        />
      ))}
    </Group>
  )
}

/** Least area at each coolant pressure drop, of all points that could be evaluated: the limit itself may be moved. */
function Fronts({ studies }: { studies: Compared[] }) {
  const units = useUnits()
  const lines = studies
    .filter(({ front }) => front.length > 1)
    .map(({ name, front }) => ({
      label: name,
      x: front.map(({ x }) => toDisplay(x, 'pressure', units).value),
      y: front.map(({ y }) => toDisplay(y, 'area', units).value),
    }))
  if (lines.length === 0) return null
  const bounds = studies.map(({ limits }) => limits.coolantPressureDrop?.max)
  const shared = bounds.every((bound) => bound !== undefined && bound === bounds[0]) ? bounds[0] : undefined
  return (
    <Sheet title="Least area at each coolant pressure drop">
      <LineChart
        name="Fronts of outside area against coolant pressure drop"
        height={340}
        x={{
          label: 'coolant pressure drop',
          unit: displayUnit('pressure', units),
          max: shared === undefined ? undefined : toDisplay(shared, 'pressure', units).value,
        }}
        y={{ label: 'outside area', unit: displayUnit('area', units) }}
        lines={lines}
      />
    </Sheet>
  )
}
