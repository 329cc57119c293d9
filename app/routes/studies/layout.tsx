// What the pages of a study share: its name in the breadcrumbs and its four stages.
import { Form, Outlet, type ShouldRevalidateFunctionArgs } from 'react-router'
import { PointsDone } from '#app/components/study/run-state.tsx'
import { type Stage, Stages } from '#app/components/study/stages.tsx'
import { Button } from '#app/components/ui/button.tsx'
import { projectContext, viewerContext } from '#app/http/context.ts'
import { can } from '#app/http/permissions.ts'
import { reviewStates } from '#app/modules/reviews/reviews.server.ts'
import { latestRun } from '#app/modules/runs/runs.server.ts'
import { runStandings } from '#app/modules/runs/standing.server.ts'
import { getDraft, getStudy, latestRevision } from '#app/modules/studies/studies.server.ts'
import type { Route } from './+types/layout'

export const handle = {
  crumbs: ({ project, study }: Route.ComponentProps['loaderData']) => [
    { label: project.name, to: `/projects/${project.id}` },
    { label: study.name, to: `/studies/${study.id}` },
  ],
}

export async function loader({ params, context }: Route.LoaderArgs) {
  const viewer = context.get(viewerContext)
  const { projectId, projectName } = context.get(projectContext)
  const [study, revision, draft, run] = await Promise.all([
    getStudy(params.studyId),
    latestRevision(params.studyId),
    getDraft(params.studyId, viewer.personId),
    latestRun(params.studyId),
  ])
  const review = (await reviewStates([params.studyId])).get(params.studyId) ?? null
  const standing = run && (await runStandings([run.id])).get(run.id)
  return {
    project: { id: projectId, name: projectName },
    study: { id: study.id, name: study.name, invented: study.invented, archived: study.archivedAt !== null },
    revision: revision?.number ?? null,
    hasDraft: draft !== null,
    run: run && { state: run.state, points: run.points, done: standing?.done ?? 0 },
    review,
    mayEdit: can(viewer.role, 'study.edit'),
  }
}

/** Another view of the same page asks nothing new of the study. */
export function shouldRevalidate({
  currentUrl,
  nextUrl,
  formMethod,
  defaultShouldRevalidate,
}: ShouldRevalidateFunctionArgs) {
  const samePage = currentUrl.pathname === nextUrl.pathname && currentUrl.search !== nextUrl.search
  return samePage && !formMethod ? false : defaultShouldRevalidate
}

export default function StudyLayout({ loaderData }: Route.ComponentProps) {
  const { study, project, mayEdit } = loaderData
  return (
    <>
      <Stages base={`/studies/${study.id}`} stages={stagesOf(loaderData)} />
      {study.archived ? (
        <div className="screen-only flex flex-wrap items-center gap-x-4 gap-y-2 border-b border-line bg-copper-wash px-4 py-2 text-copper-ink sm:px-7">
          <p className="font-semibold">This study is archived; its runs and records stay readable.</p>
          {mayEdit ? (
            <Form method="post" action={`/projects/${project.id}`}>
              <input type="hidden" name="studyId" value={study.id} />
              <Button type="submit" name="intent" value="restore" small>
                Restore it
              </Button>
            </Form>
          ) : null}
        </div>
      ) : null}
      <Outlet />
    </>
  )
}

const REVIEW_WORDS = { asked: 'review asked', accepted: 'accepted', returned: 'returned' }

function stagesOf({ revision, hasDraft, run, review }: Route.ComponentProps['loaderData']): Stage[] {
  const open = run?.state === 'queued' || run?.state === 'running'
  return [
    {
      id: 'define',
      state: revision === null ? (hasDraft ? 'underway' : 'none') : 'done',
      detail: hasDraft && revision !== null ? 'draft' : undefined,
    },
    {
      id: 'run',
      state: !run ? 'none' : open ? 'underway' : run.state === 'failed' ? 'failed' : 'done',
      detail: !run ? undefined : open ? 'under way' : <PointsDone done={run.done} points={run.points} />,
    },
    { id: 'explore', state: !run || run.done === 0 ? 'none' : open ? 'underway' : 'done' },
    {
      id: 'decide',
      state: review === 'accepted' ? 'done' : review === 'asked' ? 'underway' : 'none',
      detail: review === null || review === 'withdrawn' ? undefined : REVIEW_WORDS[review],
    },
  ]
}
