// A project: its studies with where each stands, ways to begin another, and its members.
import { useEffect } from 'react'
import { Form, Link, useFetcher, useNavigation, useSubmit } from 'react-router'
import { ObjectiveValue } from '#app/components/study/objective-value.tsx'
import { PointsDone, RunStateTag } from '#app/components/study/run-state.tsx'
import { Button, LinkButton, StatusButton } from '#app/components/ui/button.tsx'
import { Disclosure } from '#app/components/ui/disclosure.tsx'
import { TextField } from '#app/components/ui/field.tsx'
import { Quantity } from '#app/components/ui/number.tsx'
import { plural } from '#app/components/ui/number-format.ts'
import { EmptyState, PageHead, PlainPage, Sheet } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import { tell } from '#app/components/ui/toast.tsx'
import { useFaultFocus } from '#app/components/ui/use-fault-focus.ts'
import { When } from '#app/components/ui/when.tsx'
import { readForm } from '#app/http/body.ts'
import { viewerContext } from '#app/http/context.ts'
import { can } from '#app/http/permissions.ts'
import { getProject, listMembers } from '#app/modules/projects/projects.server.ts'
import { baselineOf, listRecords } from '#app/modules/reviews/records.server.ts'
import { openReviews } from '#app/modules/reviews/reviews.server.ts'
import { runStandings } from '#app/modules/runs/standing.server.ts'
import { listStudies } from '#app/modules/studies/studies.server.ts'
import { actingOf } from '../acting.ts'
import type { Route } from './+types/project'
import { examples } from './examples.server.ts'
import { actOnProject, type Refused } from './project-actions.server.ts'

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData?.project.name ?? 'Project'} · Rowfall` },
]

export const handle = {
  crumbs: ({ project }: Route.ComponentProps['loaderData']) => [
    { label: project.name, to: `/projects/${project.id}` },
  ],
}

export async function loader({ params, request, context }: Route.LoaderArgs) {
  const viewer = context.get(viewerContext)
  const { searchParams } = new URL(request.url)
  const search = searchParams.get('q')?.trim() ?? ''
  const archived = searchParams.has('archived')
  const [project, members, studies] = await Promise.all([
    getProject(params.projectId),
    listMembers(params.projectId),
    listStudies(params.projectId, { search, archived }),
  ])
  const [records, baseline, reviews] = await Promise.all([
    listRecords(params.projectId),
    baselineOf(params.projectId),
    openReviews(params.projectId),
  ])
  const standings = await runStandings(studies.flatMap(({ run }) => run?.id ?? []))
  return {
    project: {
      id: project.id,
      name: project.name,
      description: project.description,
      invented: project.invented,
    },
    members: members.map(({ id, name, email, role, signedInAt }) => ({
      id,
      name,
      email,
      role,
      invited: signedInAt === null,
    })),
    studies: studies.map(({ changedAt, archivedAt: _, run, ...study }) => ({
      ...study,
      changedAt: changedAt.toISOString(),
      run: run && { state: run.state, points: run.points, ...standings.get(run.id) },
    })),
    records: records.map(({ acceptedAt, ...record }) => ({
      ...record,
      acceptedAt: acceptedAt.toISOString(),
      isBaseline: record.id === baseline?.id,
    })),
    reviews,
    search,
    archived,
    examples,
    mayEdit: can(viewer.role, 'study.edit'),
    mayManage: can(viewer.role, 'project.manage'),
    viewerId: viewer.personId,
  }
}

export async function action({ params, request, context }: Route.ActionArgs) {
  return actOnProject(
    params.projectId,
    await readForm(request),
    context.get(viewerContext),
    actingOf(context),
  )
}

type Data = Route.ComponentProps['loaderData']
type StudyRow = Data['studies'][number]

const COMPARE_FORM = 'compare'

export default function Project({ loaderData, actionData }: Route.ComponentProps) {
  const { project, studies, members, examples, search, archived, mayEdit, mayManage } = loaderData
  const refused = actionData && !actionData.ok ? actionData : null
  useToldAndUndo(actionData)
  const finished = studies.filter(({ run }) => run?.state === 'done').length
  const listed = `${studies.length} ${archived ? 'archived ' : ''}${plural(studies.length, 'study', 'studies')}`
  const nothing = studies.length === 0 && search === '' && !archived
  return (
    <PlainPage>
      <PageHead
        over={project.invented ? 'Invented demo data' : undefined}
        title={
          nothing
            ? `${project.name} has no study yet`
            : `${project.name}: ${listed}${archived ? '' : finishedText(finished, studies.length)}`
        }
        reason={project.description || null}
        acts={
          <>
            {studies.filter(({ run }) => run).length > 1 ? (
              <Button type="submit" form={COMPARE_FORM}>
                Compare the chosen
              </Button>
            ) : null}
            <LinkButton to={`/projects/${project.id}/bench-data`} look="quiet">
              Bench data
            </LinkButton>
            <LinkButton to={`/projects/${project.id}/history`} look="quiet">
              History
            </LinkButton>
          </>
        }
      />
      <OpenReviews reviews={loaderData.reviews} />
      {nothing ? (
        <EmptyState title={mayEdit ? 'Begin with an example' : 'Studies will stand here'}>
          {mayEdit
            ? 'Each example is a whole study that runs as it is; change it as you like. Or begin blank, or with a study file.'
            : 'An engineer of the project defines and runs them; you can then read, compare and export.'}
        </EmptyState>
      ) : (
        <StudyList {...{ studies, search, archived, mayEdit, refused }} projectId={project.id} />
      )}
      {mayEdit && !archived ? <NewStudy examples={examples} refused={refused} open={nothing} /> : null}
      <Records records={loaderData.records} projectId={project.id} />
      <Members {...{ members, mayManage, refused }} viewerId={loaderData.viewerId} />
    </PlainPage>
  )
}

function finishedText(finished: number, all: number): string {
  if (finished === 0) return ', none finished yet'
  if (finished === all) return all === 1 ? ', finished' : ', all finished'
  return `, ${finished} finished`
}

function OpenReviews({ reviews }: Pick<Data, 'reviews'>) {
  if (reviews.length === 0) return null
  return (
    <ul className="grid gap-2" aria-label="Open reviews">
      {reviews.map((review) => (
        <li key={review.id} className="flex flex-wrap items-baseline gap-2">
          <Tag tone="attention">review asked</Tag>
          <span>
            {review.askedByName} puts{' '}
            <Link to={`/studies/${review.studyId}/decide`} className="link font-semibold">
              {review.studyName}
            </Link>{' '}
            forward, <When at={review.askedAt} />.
          </span>
        </li>
      ))}
    </ul>
  )
}

/** What was accepted, and which of it later studies are measured against. */
function Records({ records, projectId }: Pick<Data, 'records'> & { projectId: string }) {
  if (records.length === 0) return null
  return (
    <Sheet title={`${records.length} accepted ${plural(records.length, 'record')}`}>
      <ul className="divide-y divide-line">
        {records.map((record) => (
          <li key={record.id} className="flex flex-wrap items-baseline gap-x-3 gap-y-1 py-2">
            <Link to={`/projects/${projectId}/records/${record.id}`} className="link font-semibold">
              Record {record.number}: {record.studyName}
            </Link>
            {record.area === null ? null : (
              <span className="font-semibold">
                <Quantity value={record.area} dimension="area" digits={4} />
              </span>
            )}
            {record.isBaseline ? <Tag tone="sound">baseline</Tag> : null}
            <span className="text-note text-soft">
              accepted by {record.acceptedBy}, <When at={record.acceptedAt} />
            </span>
          </li>
        ))}
      </ul>
    </Sheet>
  )
}

function useToldAndUndo(answer: Route.ComponentProps['actionData']) {
  const submit = useSubmit()
  useEffect(() => {
    if (!answer?.ok) return
    const { undo } = answer
    tell(answer.told, undo && (() => submit(undo, { method: 'post' })))
  }, [answer, submit])
}

function StudyList({
  studies,
  search,
  archived,
  mayEdit,
  refused,
  projectId,
}: Pick<Data, 'studies' | 'search' | 'archived' | 'mayEdit'> & {
  refused: Refused | null
  projectId: string
}) {
  const comparable = studies.filter(({ run }) => run).length > 1
  return (
    <section aria-label="Studies" className="grid gap-3">
      <div className="screen-only flex flex-wrap items-end justify-between gap-3">
        <Form method="get" role="search" className="flex items-end gap-2">
          {archived ? <input type="hidden" name="archived" value="1" /> : null}
          <TextField label="Search the names" name="q" type="search" defaultValue={search} key={search} />
          <Button type="submit">Search</Button>
        </Form>
        <Link to={archived ? '.' : '?archived=1'} className="link">
          {archived ? 'Back to the studies in use' : 'Archived studies'}
        </Link>
      </div>
      <Form method="get" id={COMPARE_FORM} action={`/projects/${projectId}/compare`} />
      {studies.length === 0 ? (
        <EmptyState title={archived ? 'Nothing is archived' : `No study is called "${search}"`}>
          {archived ? (
            'An archived study keeps its runs and can be restored from here.'
          ) : (
            <Link to="." className="link">
              Show all studies
            </Link>
          )}
        </EmptyState>
      ) : (
        <ul className="sheet divide-y divide-line">
          {studies.map((study) => (
            <StudyItem key={study.id} {...{ study, archived, mayEdit, comparable, refused }} />
          ))}
        </ul>
      )}
    </section>
  )
}

function StudyItem({
  study,
  archived,
  mayEdit,
  comparable,
  refused,
}: {
  study: StudyRow
  archived: boolean
  mayEdit: boolean
  comparable: boolean
  refused: Refused | null
}) {
  const { run } = study
  return (
    <li
      className={`grid items-center gap-x-3 px-4 py-3 sm:px-5 ${comparable ? 'grid-cols-[1rem_minmax(0,1fr)_auto]' : 'grid-cols-[minmax(0,1fr)_auto]'}`}
    >
      {comparable && run ? (
        <input
          type="checkbox"
          name="study"
          value={study.id}
          form={COMPARE_FORM}
          aria-label={`Compare ${study.name}`}
          className="size-4"
        />
      ) : comparable ? (
        <span />
      ) : null}
      <div className="grid min-w-0 gap-x-6 gap-y-0.5 md:grid-cols-[minmax(0,1fr)_18rem] md:items-center">
        <div className="min-w-0">
          <Link to={`/studies/${study.id}`} className="link font-semibold">
            {study.name}
          </Link>
          <p className="text-note text-soft">
            {study.revision === null ? 'draft' : `revision ${study.revision}`}
            {study.origin ? ` · ${study.origin}` : ''}
            {study.createdByName ? ` · ${study.createdByName}` : ''} · <When at={study.changedAt} />
          </p>
        </div>
        <p className="flex flex-wrap items-center gap-x-2 gap-y-1">
          {run ? (
            <>
              <RunStateTag state={run.state as 'done'} />
              {run.best != null && run.objective ? (
                <span className="font-semibold">
                  <ObjectiveValue objective={run.objective} value={run.best} />
                </span>
              ) : run.state === 'done' ? (
                <span className="text-copper-ink">nothing meets the limits</span>
              ) : null}
              <span className="text-note text-soft">
                <PointsDone done={run.done ?? 0} points={run.points} />
              </span>
            </>
          ) : (
            <Tag>not run</Tag>
          )}
        </p>
      </div>
      {mayEdit ? <StudyMenu {...{ study, archived, refused }} /> : <span />}
    </li>
  )
}

function StudyMenu({
  study,
  archived,
  refused,
}: {
  study: StudyRow
  archived: boolean
  refused: Refused | null
}) {
  const mine = refused?.studyId === study.id ? refused : null
  const form = useFaultFocus(mine)
  const id = <input type="hidden" name="studyId" value={study.id} />
  return (
    <Disclosure label="More" name={`More on ${study.name}`} small className="w-72 p-2">
      {archived ? null : (
        <>
          <Form
            method="post"
            ref={form}
            className="grid gap-2 border-b border-line p-1 pb-3"
            key={study.name}
          >
            {id}
            <TextField
              label="Name"
              name="name"
              required
              maxLength={200}
              defaultValue={mine?.typed ?? study.name}
              fault={mine?.intent === 'rename' ? mine.fault : null}
            />
            <Button
              type="submit"
              name="intent"
              value="rename"
              small
              className="justify-self-start"
              data-closes
            >
              Rename
            </Button>
          </Form>
          <Form method="post" className="pt-1">
            {id}
            <button type="submit" name="intent" value="copy" className="menu-item" data-closes>
              Copy
            </button>
          </Form>
          <a href={`/studies/${study.id}/study.json`} download className="menu-item" data-closes>
            Download the study file
          </a>
        </>
      )}
      <Form method="post">
        {id}
        <button
          type="submit"
          name="intent"
          value={archived ? 'restore' : 'archive'}
          className="menu-item"
          data-closes
        >
          {archived ? 'Restore' : 'Archive'}
        </button>
      </Form>
    </Disclosure>
  )
}

function NewStudy({
  examples,
  refused,
  open,
}: {
  examples: Data['examples']
  refused: Refused | null
  open: boolean
}) {
  const sent = useNavigation().formData
  const faultOf = (intent: string) => (refused?.intent === intent ? refused.fault : null)
  const form = useFaultFocus(refused?.intent === 'blank' ? refused : null)
  const isSent = (intent: string, example = '') =>
    sent?.get('intent') === intent && (example === '' || sent.get('example') === example)
  return (
    <details open={open || ['blank', 'upload'].includes(refused?.intent ?? '')} className="group">
      <summary className="list-inside text-lead font-bold text-verdigris-ink">New study</summary>
      <div className="mt-4 grid gap-4 md:grid-cols-2 xl:grid-cols-3">
        {examples.map((example) => (
          <Form key={example.id} method="post" className="sheet grid content-between gap-3 p-5">
            <div>
              <h3 className="font-bold">{example.name}</h3>
              <p className="mt-1 text-soft">{example.description}</p>
            </div>
            <input type="hidden" name="example" value={example.id} />
            <StatusButton
              name="intent"
              value="example"
              busy={isSent('example', example.id)}
              working="Opening…"
              className="justify-self-start"
              aria-label={`Start from the example ${example.name}`}
            >
              Start from this example
            </StatusButton>
          </Form>
        ))}
        <Form method="post" ref={form} className="sheet grid content-between gap-3 p-5">
          <TextField
            label="A blank study"
            name="name"
            required
            maxLength={200}
            placeholder="What it is to settle"
            defaultValue={refused?.intent === 'blank' ? refused.typed : undefined}
            fault={faultOf('blank')}
          />
          <StatusButton
            name="intent"
            value="blank"
            busy={isSent('blank')}
            working="Opening…"
            className="justify-self-start"
          >
            Start blank
          </StatusButton>
        </Form>
        <Form method="post" encType="multipart/form-data" className="sheet grid content-between gap-3 p-5">
          <TextField
            label="A study file"
            name="file"
            type="file"
            accept=".json,application/json"
            required
            fault={faultOf('upload')}
            hint="A .json file downloaded from a study, or written by hand; faults are shown in Define."
          />
          <StatusButton
            name="intent"
            value="upload"
            busy={isSent('upload')}
            working="Reading…"
            className="justify-self-start"
          >
            Start from the file
          </StatusButton>
        </Form>
      </div>
    </details>
  )
}

function Members({
  members,
  mayManage,
  refused,
  viewerId,
}: Pick<Data, 'members' | 'mayManage' | 'viewerId'> & { refused: Refused | null }) {
  const mine = refused?.intent === 'addMember' ? refused : null
  const form = useFaultFocus(mine)
  return (
    <details open={mine !== null}>
      <summary className="list-inside text-lead font-bold text-verdigris-ink">
        {members.length} {plural(members.length, 'member')}
      </summary>
      <Sheet className="mt-4 max-w-3xl">
        <ul className="divide-y divide-line">
          {members.map((member) => (
            <li key={member.id} className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1 py-2">
              <span>
                <span className="font-semibold">{member.name}</span>{' '}
                {member.name === member.email ? null : <span className="text-soft">{member.email}</span>}
              </span>
              <span className="flex items-center gap-2">
                <Tag>{member.invited ? 'not signed in yet' : (member.role ?? 'no role')}</Tag>
                {mayManage && member.id !== viewerId ? <RemoveMember member={member} /> : null}
              </span>
            </li>
          ))}
        </ul>
        {mayManage ? (
          <Form
            method="post"
            ref={form}
            className="mt-3 flex flex-wrap items-start gap-2"
            key={members.length}
          >
            <TextField
              label="Add by e-mail address"
              name="email"
              type="email"
              required
              className="grow basis-60"
              defaultValue={mine?.typed}
              fault={mine?.fault}
              hint="Someone not seen yet becomes a member when they first sign in."
            />
            <Button type="submit" name="intent" value="addMember" className="mt-6">
              Add
            </Button>
          </Form>
        ) : null}
      </Sheet>
    </details>
  )
}

/** Asks once, naming the person; without scripts the name in the panel is the question. */
function RemoveMember({ member }: { member: Data['members'][number] }) {
  const fetcher = useFetcher()
  return (
    <Disclosure label="Remove" name={`Remove ${member.name}`} small className="w-64 p-3">
      <fetcher.Form method="post" className="grid gap-2">
        <input type="hidden" name="personId" value={member.id} />
        <p>{member.name} will no longer see this project. They can be added again.</p>
        <Button
          type="submit"
          name="intent"
          value="removeMember"
          look="danger"
          small
          className="justify-self-start"
        >
          Remove {member.name}
        </Button>
      </fetcher.Form>
    </Disclosure>
  )
}
