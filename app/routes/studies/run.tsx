// Run: the points as they are evaluated, the best so far, why points fail, and every earlier run.
import { useEffect, useRef } from 'react'
import { data, Form, Link, redirect, useNavigation, useRevalidator } from 'react-router'
import { BundleDrawing } from '#app/components/bundle-drawing/bundle-drawing.tsx'
import { bundleGeometry } from '#app/components/bundle-drawing/layout.ts'
import { Said } from '#app/components/sheet/said.tsx'
import { ObjectiveValue } from '#app/components/study/objective-value.tsx'
import { PointsDone, RunStateTag } from '#app/components/study/run-state.tsx'
import { Button, LinkButton, StatusButton } from '#app/components/ui/button.tsx'
import { Disclosure } from '#app/components/ui/disclosure.tsx'
import { type Figure, FigureStrip } from '#app/components/ui/figure-strip.tsx'
import { MarginNote } from '#app/components/ui/margin-note.tsx'
import { Digits, useUnits } from '#app/components/ui/number.tsx'
import { duration, plural, significant } from '#app/components/ui/number-format.ts'
import { EmptyState, MarginPage, PageHead, PlainPage, Scroll, Sheet } from '#app/components/ui/page.tsx'
import { ProgressBar } from '#app/components/ui/progress.tsx'
import { When } from '#app/components/ui/when.tsx'
import { readForm } from '#app/http/body.ts'
import { viewerContext } from '#app/http/context.ts'
import { AppError, failureOf } from '#app/http/errors.ts'
import { isId } from '#app/http/ids.ts'
import { can } from '#app/http/permissions.ts'
import { pointColumns } from '#app/modules/explore/columns.ts'
import { finding } from '#app/modules/explore/finding.ts'
import { useRunProgress } from '#app/modules/explore/use-run-progress.ts'
import { valueText } from '#app/modules/explore/view.ts'
import { isFinal, type RunProgress } from '#app/modules/runs/progress.ts'
import { type RunPage, runPage } from '#app/modules/runs/run-page.server.ts'
import { cancelRun, getRun, pauseRun, resumeRun, startRun } from '#app/modules/runs/runs.server.ts'
import { latestRevision } from '#app/modules/studies/studies.server.ts'
import { actingOf } from '../acting.ts'
import type { Route } from './+types/run'

export const meta: Route.MetaFunction = () => [{ title: 'Run · Rowfall' }]

export async function loader({ params, request, context }: Route.LoaderArgs) {
  const { role, units } = context.get(viewerContext)
  const page = await runPage(params.studyId, new URL(request.url).searchParams.get('run'), units)
  return { page, mayRun: can(role, 'study.run') }
}

const CHANGES = new Map<unknown, typeof cancelRun>([
  ['cancel', cancelRun],
  ['pause', pauseRun],
  ['resume', resumeRun],
])

export async function action({ params, request, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const acting = actingOf(context)
  const here = `/studies/${params.studyId}/run`
  try {
    if (form.get('intent') === 'start') {
      const revision = await latestRevision(params.studyId)
      if (!revision) throw new AppError('conflict', 'Nothing is defined yet; define the study first.')
      await startRun(params.studyId, revision.id, acting)
      return redirect(here)
    }
    const change = CHANGES.get(form.get('intent'))
    const runId = form.get('run')
    if (!change || !isId(runId)) throw new AppError('bad-request', 'This page does not know that act.')
    const run = await getRun(runId)
    if (run.studyId !== params.studyId) throw new AppError('not-found', 'This study has no such run.')
    await change(runId, acting)
    return redirect(here)
  } catch (error) {
    const failure = failureOf(error)
    if (failure?.code !== 'conflict' && failure?.code !== 'invalid') throw error
    return data({ fault: failure.message }, 409)
  }
}

export default function Run({ loaderData, actionData, params }: Route.ComponentProps) {
  const { page, mayRun } = loaderData
  const fault = actionData?.fault ?? null
  if (page.run !== null) {
    const running = page as RunPage
    return (
      <RunOfStudy
        key={running.run.id}
        page={running}
        studyId={params.studyId}
        mayRun={mayRun}
        fault={fault}
      />
    )
  }
  const { revision } = page
  return (
    <PlainPage>
      <PageHead
        title={
          revision ? (
            <>
              Revision {revision.number} is ready to run on <Digits>{revision.points}</Digits>{' '}
              {plural(revision.points, 'point')}
            </>
          ) : (
            'Nothing to run yet'
          )
        }
      />
      {fault ? (
        <MarginNote tone="failed" title="The run was not started.">
          {fault}
        </MarginNote>
      ) : null}
      <EmptyState
        title={revision ? 'Start it, and leave when you like' : 'A study is run once it is defined'}
        acts={
          !revision ? (
            <LinkButton to={`/studies/${params.studyId}/define`} look="main">
              Go to Define
            </LinkButton>
          ) : mayRun ? (
            <StartForm look="main">Start the run</StartForm>
          ) : null
        }
      >
        {revision
          ? 'The points are evaluated by the workers; progress, the best point so far and partial results stand here and in Explore meanwhile.'
          : 'The definition says what is varied, within which limits, and what is to be least.'}
      </EmptyState>
    </PlainPage>
  )
}

function StartForm({ children, look }: { children: React.ReactNode; look?: 'main' }) {
  const busy = useNavigation().formData?.get('intent') === 'start'
  return (
    <Form method="post" action="?">
      <StatusButton name="intent" value="start" look={look} busy={busy} working="Starting…">
        {children}
      </StatusButton>
    </Form>
  )
}

/** The drawing of the best point follows the run, but not more often than this. */
const REDRAW_MS = 5000

function RunOfStudy({
  page,
  studyId,
  mayRun,
  fault,
}: {
  page: RunPage
  studyId: string
  mayRun: boolean
  fault: string | null
}) {
  const units = useUnits()
  const revalidator = useRevalidator()
  const progress = useRunProgress(page.progress, revalidator.revalidate)
  const ended = isFinal(progress.state)
  const { run, runs, revision } = page
  const failed = progress.failures.reduce((sum, { count }) => sum + count, 0)
  const drawn = page.best?.point === progress.best?.point ? page.best : null
  useRedraw(!ended && progress.best !== null && drawn === null, revalidator)

  const { headline, reason } = finding(
    {
      ...progress,
      evaluated: progress.done - failed,
      objective: page.objective,
      limits: page.limits,
      limitEffects: ended ? page.effects : null,
      limitsNotMet: {},
      best: progress.best && {
        objective: progress.best.objective,
        described: drawn?.described ?? '',
      },
    },
    units,
  )
  const explore = `/studies/${studyId}/explore?run=${run.id}`
  const newer = revision !== null && revision.number > run.revision
  return (
    <MarginPage
      marginLabel="The best point so far"
      margin={<BestSoFar page={page} progress={progress} drawn={drawn} explore={explore} />}
    >
      <PageHead
        over={`Revision ${run.revision}`}
        title={<Said>{headline}</Said>}
        reason={<Said>{reason.join(' ')}</Said>}
        acts={
          <>
            {progress.done > 0 ? (
              <LinkButton to={explore} look={ended ? 'main' : 'plain'}>
                {ended ? 'Explore the points' : 'Explore what is done'}
              </LinkButton>
            ) : null}
            {mayRun && !ended ? <OpenRunActs runId={run.id} paused={progress.paused} /> : null}
            {mayRun && ended && newer ? (
              <StartForm look="main">Run revision {revision.number}</StartForm>
            ) : null}
            {mayRun && ended && !newer ? <StartForm>Run again</StartForm> : null}
          </>
        }
      />
      {fault ? (
        <MarginNote tone="failed" title="That could not be done.">
          {fault}
        </MarginNote>
      ) : null}
      <ProgressBar done={progress.done} total={progress.points} label="Points done" />
      <Figures page={page} progress={progress} />
      {ended ? null : (
        <noscript>
          <p className="text-soft">Reload this page to see how far the run is.</p>
        </noscript>
      )}
      {progress.failures.length > 0 ? (
        <Failures failures={progress.failures} done={progress.done} explore={explore} />
      ) : null}
      {run.contentHash ? (
        <p className="text-note text-soft">
          Complete and closed: the content hash of its results is{' '}
          <code className="break-all">{run.contentHash}</code>.
        </p>
      ) : null}
      {runs.length > 1 ? <EarlierRuns runs={runs} shown={run.id} studyId={studyId} /> : null}
    </MarginPage>
  )
}

/** Asks the page again while it draws an earlier best point than the one known. */
function useRedraw(stale: boolean, revalidator: ReturnType<typeof useRevalidator>) {
  const asked = useRef(0)
  useEffect(() => {
    if (!stale) return
    const wait = Math.max(0, asked.current + REDRAW_MS - performance.now())
    const timer = setTimeout(() => {
      asked.current = performance.now()
      void revalidator.revalidate()
    }, wait)
    return () => clearTimeout(timer)
  }, [stale, revalidator])
}

function OpenRunActs({ runId, paused }: { runId: string; paused: boolean }) {
  const sent = useNavigation().formData?.get('intent')
  const act = paused ? 'resume' : 'pause'
  return (
    <>
      <Form method="post" action="?">
        <input type="hidden" name="run" value={runId} />
        <StatusButton
          name="intent"
          value={act}
          busy={sent === act}
          working={paused ? 'Resuming…' : 'Pausing…'}
        >
          {paused ? 'Resume' : 'Pause'}
        </StatusButton>
      </Form>
      <Disclosure label="Cancel the run" look="danger" className="w-72 p-3">
        <Form method="post" action="?" className="grid gap-2">
          <input type="hidden" name="run" value={runId} />
          <p>The run ends for good. What is done is kept and can be explored.</p>
          <Button
            type="submit"
            name="intent"
            value="cancel"
            look="danger"
            small
            className="justify-self-start"
            data-closes
          >
            Cancel it for good
          </Button>
        </Form>
      </Disclosure>
    </>
  )
}

function Figures({ page, progress }: { page: RunPage; progress: RunProgress }) {
  const { best, pointsPerSecond, secondsLeft, seconds, state } = progress
  const ended = isFinal(state)
  const figures: Figure[] = [
    {
      label: 'Points done',
      value: <Digits>{progress.done}</Digits>,
      detail: (
        <>
          of <Digits>{progress.points}</Digits>
        </>
      ),
    },
    {
      label: 'Meet every limit',
      value: <Digits>{progress.meetingLimits}</Digits>,
      detail:
        progress.done > 0 ? `${significant((100 * progress.meetingLimits) / progress.done, 3)} %` : null,
    },
    {
      label: ended ? 'Best' : 'Best so far',
      value: best ? <ObjectiveValue objective={page.objective} value={best.objective} /> : '–',
    },
    ended
      ? { label: 'Took', value: seconds === null ? '–' : duration(seconds) }
      : {
          label: 'Time left',
          value: secondsLeft === null ? '–' : duration(secondsLeft),
          detail: progress.waitingForWorker
            ? 'waiting for a worker'
            : progress.paused
              ? 'paused'
              : pointsPerSecond === null
                ? null
                : `${significant(pointsPerSecond, 2)} points a second`,
        },
  ]
  return <FigureStrip figures={figures} label="How far the run is" />
}

function BestSoFar({
  page,
  progress,
  drawn,
  explore,
}: {
  page: RunPage
  progress: RunProgress
  drawn: RunPage['best']
  explore: string
}) {
  const units = useUnits()
  const { best } = progress
  if (!best)
    return (
      <MarginNote
        tone={progress.done > 0 && isFinal(progress.state) ? 'attention' : 'sound'}
        title={
          progress.done > 0 ? 'No point meets every limit so far.' : 'The best point will be drawn here.'
        }
      >
        {progress.done > 0 ? 'Explore shows which limits stop them, and the closest.' : null}
      </MarginNote>
    )
  const columns = pointColumns(page.variables)
  return (
    <>
      <div className="flex items-baseline justify-between gap-3">
        <h2 className="font-bold">
          Point <Digits>{best.point}</Digits>
        </h2>
        <Link to={`${explore}&point=${best.point}`} className="link text-note">
          Open in Explore
        </Link>
      </div>
      {drawn ? (
        <BundleDrawing
          geometry={bundleGeometry(drawn.case)}
          rows={drawn.rows}
          name={`point ${best.point}`}
          table={false}
          fixed
        />
      ) : null}
      <dl className="facts">
        {best.inputs.map(({ path, label, value }) => {
          const column = columns.find(({ id }) => id === path)
          return (
            <div key={path} className="contents">
              <dt>{label}</dt>
              <dd>{column ? valueText(value, column, units, page.names) : String(value)}</dd>
            </div>
          )
        })}
      </dl>
    </>
  )
}

function Failures({
  failures,
  done,
  explore,
}: {
  failures: RunProgress['failures']
  done: number
  explore: string
}) {
  return (
    <Sheet title="Points without a result, by reason">
      <ul className="divide-y divide-line">
        {failures.map(({ code, text, count }) => (
          <li key={code} className="flex flex-wrap items-baseline justify-between gap-x-6 py-1.5">
            <Link to={`${explore}&outcome=${code}&all=1`} className="link">
              {text.charAt(0).toUpperCase() + text.slice(1)}
            </Link>
            <span className="font-semibold">
              <Digits>{count}</Digits>
              <span className="unit font-normal text-soft">{significant((100 * count) / done, 2)} %</span>
            </span>
          </li>
        ))}
      </ul>
    </Sheet>
  )
}

function EarlierRuns({ runs, shown, studyId }: { runs: RunPage['runs']; shown: string; studyId: string }) {
  return (
    <Sheet
      title="All runs of this study"
      flush
      acts={
        runs.filter(({ state }) => state === 'done').length > 1 ? (
          <LinkButton to={`/studies/${studyId}/changes`} small>
            What changed between two
          </LinkButton>
        ) : null
      }
    >
      <Scroll label="Runs of this study">
        <table className="data-table">
          <caption className="visually-hidden">Runs of this study, the latest first</caption>
          <thead>
            <tr>
              <th scope="col">Started</th>
              <th scope="col">State</th>
              <th scope="col" className="numeric">
                Revision
              </th>
              <th scope="col" className="numeric">
                Points
              </th>
              <th scope="col" className="numeric">
                Took
              </th>
              <th scope="col">By</th>
              <th scope="col">Engine</th>
              <th scope="col">
                <span className="visually-hidden">Points</span>
              </th>
            </tr>
          </thead>
          <tbody>
            {runs.map((run) => (
              <tr key={run.id} data-selected={run.id === shown}>
                <th scope="row">
                  <Link
                    to={`?run=${run.id}`}
                    className="link"
                    aria-current={run.id === shown ? 'true' : undefined}
                  >
                    <When at={run.plannedAt} />
                  </Link>
                </th>
                <td>
                  <RunStateTag state={run.state} />
                </td>
                <td className="numeric">{run.revision}</td>
                <td className="numeric">
                  <PointsDone done={run.done} points={run.points} />
                </td>
                <td className="numeric">{run.seconds === null ? '–' : duration(run.seconds)}</td>
                <td>{run.requestedByName ?? 'Rowfall'}</td>
                <td>{run.engineVersion}</td>
                <td>
                  {run.done > 0 ? (
                    <Link to={`/studies/${studyId}/explore?run=${run.id}`} className="link">
                      Explore
                    </Link>
                  ) : null}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </Scroll>
    </Sheet>
  )
}
