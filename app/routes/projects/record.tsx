// An accepted record: what was accepted, by whom and why, as it was. Printable, and unchanged by anything later.
import { data, Form, Link } from 'react-router'
import { BandTable } from '#app/components/sheet/band.tsx'
import { PrintButton } from '#app/components/sheet/print-button.tsx'
import { Said } from '#app/components/sheet/said.tsx'
import { Button } from '#app/components/ui/button.tsx'
import { MarginNote } from '#app/components/ui/margin-note.tsx'
import { useUnits } from '#app/components/ui/number.tsx'
import { PageHead, Sheet } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import { readForm } from '#app/http/body.ts'
import { projectContext, viewerContext } from '#app/http/context.ts'
import { AppError, failureOf } from '#app/http/errors.ts'
import { can } from '#app/http/permissions.ts'
import { describeCase } from '#app/modules/explore/case-words.ts'
import { baselineOf, getRecord, setBaseline } from '#app/modules/reviews/records.server.ts'
import { OBJECTIVE_LABELS } from '#engine/sweep/objective.ts'
import { formatQuantity } from '#engine/units.ts'
import { actingOf } from '../acting.ts'
import { pointName } from '../studies/explore/point-margin.tsx'
import { SheetBody } from '../studies/sheet-body.tsx'
import type { Route } from './+types/record'

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Record ${loaderData?.record.content.number ?? ''} · Rowfall` },
]

export const handle = {
  crumbs: ({ project, record }: Route.ComponentProps['loaderData']) => [
    { label: project.name, to: `/projects/${project.id}` },
    { label: `Record ${record.content.number}`, to: `/projects/${project.id}/records/${record.id}` },
  ],
}

export async function loader({ params, context }: Route.LoaderArgs) {
  const { projectId, projectName } = context.get(projectContext)
  const [record, baseline] = await Promise.all([getRecord(projectId, params.recordId), baselineOf(projectId)])
  return {
    project: { id: projectId, name: projectName },
    record,
    isBaseline: baseline?.id === record.id,
    mayDecide: can(context.get(viewerContext).role, 'study.accept'),
  }
}

export async function action({ request, params, context }: Route.ActionArgs) {
  const form = await readForm(request)
  if (form.get('intent') !== 'baseline')
    throw new AppError('bad-request', 'This page does not know that act; reload it and try again.')
  try {
    await setBaseline(params.projectId, params.recordId, actingOf(context))
    return null
  } catch (error) {
    const failure = failureOf(error)
    if (failure?.code !== 'conflict') throw error
    return data({ fault: failure.message }, 400)
  }
}

const day = (at: string | null) => (at === null ? '–' : `${at.slice(0, 16).replace('T', ' ')} UTC`)

export default function Record({ loaderData, actionData }: Route.ComponentProps) {
  const { record, isBaseline, mayDecide } = loaderData
  const { content } = record
  const units = useUnits()
  const area = content.result.outsideArea
  const name = pointName(content.point ?? 'refined')
  return (
    <div className="mx-auto grid w-full max-w-[84rem] gap-6 px-4 py-6 sm:px-7 sm:py-8 print:block print:p-0 print:*:mb-4">
      <PageHead
        over={
          <>
            Record {content.number} of {content.project.name}
            {content.project.invented ? ' (invented demo data)' : ''}{' '}
            {isBaseline ? <Tag tone="sound">baseline</Tag> : null}
          </>
        }
        title={
          <Said>
            {`Accepted: ${area === null ? '' : `${formatQuantity(area, 'area', units, { digits: 3 })}, `}${describeCase(content.case, content.names, [], units)}`}
          </Said>
        }
        reason={`${name} of “${content.study.name}”, revision ${content.study.revision}; ${OBJECTIVE_LABELS[content.objective].toLowerCase()} was to be least.`}
        acts={
          <>
            {mayDecide && !isBaseline ? (
              <Form method="post">
                <Button type="submit" name="intent" value="baseline">
                  Make it the baseline
                </Button>
              </Form>
            ) : null}
            <PrintButton />
          </>
        }
      />
      {actionData?.fault ? (
        <p role="alert" className="font-semibold text-red-ink">
          {actionData.fault}
        </p>
      ) : null}
      {record.intact ? null : (
        <MarginNote tone="failed" title="This record is not what was accepted.">
          Its content does not give the hash that was kept with it. Tell your administrator.
        </MarginNote>
      )}
      <Sheet title="Decision">
        <dl className="grid gap-x-8 gap-y-3 sm:grid-cols-2">
          <Signature
            what="Asked for"
            by={content.asked.name}
            email={content.asked.email}
            at={content.asked.at}
            words={content.asked.note}
          />
          <Signature
            what="Accepted"
            by={content.accepted.name}
            email={content.accepted.email}
            at={content.accepted.at}
            words={content.accepted.reason}
          />
        </dl>
      </Sheet>
      <SheetBody
        bundle={content.case}
        result={content.result}
        names={content.names}
        standings={content.standings}
        cards={content.methods}
        name={name}
      />
      {content.band ? (
        <Sheet title="How sure the number was">
          <BandTable band={content.band} />
        </Sheet>
      ) : null}
      <Sheet title="Where it comes from">
        <dl className="grid gap-x-6 gap-y-1 sm:grid-cols-[max-content_minmax(0,1fr)] [&_dd]:[overflow-wrap:anywhere] [&_dt]:text-soft">
          <dt>Study</dt>
          <dd>
            <Link to={`/studies/${content.study.id}`} className="link">
              {content.study.name}
            </Link>
            , revision {content.study.revision}
          </dd>
          <dt>Run</dt>
          <dd>
            {content.run.id}, {content.run.points} points, started by {content.run.startedBy ?? 'Rowfall'}{' '}
            {day(content.run.plannedAt)}, ended {day(content.run.endedAt)}
          </dd>
          <dt>Engine</dt>
          <dd>{content.result.engineVersion}</dd>
          <dt>Hash of the run’s results</dt>
          <dd className="text-note">{content.run.contentHash ?? '–'}</dd>
          <dt>Hash of this record</dt>
          <dd className="text-note">
            {record.contentHash}
            {record.intact ? ' (verified)' : ' (does not match)'}
          </dd>
        </dl>
      </Sheet>
      <p className="text-note text-soft">
        Record {content.number} of {content.project.name}, accepted {day(content.accepted.at)} by{' '}
        {content.accepted.name}. Engine {content.result.engineVersion}, revision {content.study.revision}.
      </p>
    </div>
  )
}

function Signature({
  what,
  by,
  email,
  at,
  words,
}: {
  what: string
  by: string
  email: string
  at: string
  words: string
}) {
  return (
    <div>
      <dt className="text-note font-semibold text-soft">{what}</dt>
      <dd>
        <p>
          <span className="font-semibold">{by}</span> <span className="text-soft">{email}</span>, {day(at)}
        </p>
        {words ? (
          <p className="mt-1 max-w-[65ch] whitespace-pre-wrap [overflow-wrap:anywhere]">{words}</p>
        ) : null}
      </dd>
    </div>
  )
}
