// What runs where: workers with what they hold, runs under way, runs that failed, and how long points are kept.
import { useEffect } from 'react'
import { data, Form, Link, useRevalidator } from 'react-router'
import { PointsDone, RunStateTag } from '#app/components/study/run-state.tsx'
import { Button } from '#app/components/ui/button.tsx'
import { TextField } from '#app/components/ui/field.tsx'
import { plural } from '#app/components/ui/number-format.ts'
import { EmptyState, PageHead, PlainPage, Scroll, Sheet } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import { useFaultFocus } from '#app/components/ui/use-fault-focus.ts'
import { When } from '#app/components/ui/when.tsx'
import { readForm } from '#app/http/body.ts'
import { AppError, failureOf } from '#app/http/errors.ts'
import { isId } from '#app/http/ids.ts'
import { drainWorker, listOpenRuns, listWorkers } from '#app/modules/runs/operations.server.ts'
import { keepMonths, keptMonths } from '#app/modules/runs/retention.server.ts'
import { cancelRun, pauseRun, resumeRun, retryRun } from '#app/modules/runs/runs.server.ts'
import { actingOf } from '../acting.ts'
import type { Route } from './+types/operations'

export const meta: Route.MetaFunction = () => [{ title: 'Operations · Rowfall' }]

export async function loader() {
  const [workers, runs, months] = await Promise.all([listWorkers(), listOpenRuns(), keptMonths()])
  return {
    workers: workers.map(({ startedAt, seenAt, ...worker }) => ({
      ...worker,
      startedAt: startedAt.toISOString(),
      seenAt: seenAt.toISOString(),
    })),
    runs: runs.map(({ plannedAt, startedAt, ...run }) => ({
      ...run,
      plannedAt: plannedAt.toISOString(),
      startedAt: startedAt?.toISOString() ?? null,
    })),
    months,
  }
}

const OF_RUN = { retry: retryRun, pause: pauseRun, resume: resumeRun, cancel: cancelRun } as const

export async function action({ request, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const acting = actingOf(context)
  const intent = String(form.get('intent') ?? '')
  const id = (name: string) => {
    const value = form.get(name)
    if (!isId(value))
      throw new AppError('invalid', 'What that is about is not there any more; reload the page.')
    return value
  }
  try {
    if (intent === 'drain') await drainWorker(id('worker'), acting)
    else if (intent === 'keep') await keepMonths(String(form.get('months') ?? ''), acting)
    else if (Object.hasOwn(OF_RUN, intent)) await OF_RUN[intent as keyof typeof OF_RUN](id('run'), acting)
    else throw new AppError('bad-request', 'This page does not know that act; reload it and try again.')
    return null
  } catch (error) {
    const failure = failureOf(error)
    if (!failure) throw error
    return data({ intent, fault: failure.message }, 400)
  }
}

const LOOK_MS = 3000

/** Looks again while it is open, and seldom while it is hidden. */
function useLookedAt() {
  const { revalidate, state } = useRevalidator()
  useEffect(() => {
    if (state !== 'idle') return
    const timer = setTimeout(() => void revalidate(), document.hidden ? 10 * LOOK_MS : LOOK_MS)
    return () => clearTimeout(timer)
  }, [state, revalidate])
}

export default function Operations({ loaderData, actionData }: Route.ComponentProps) {
  useLookedAt()
  const { workers, runs, months } = loaderData
  const alive = workers.filter((worker) => worker.alive)
  const threads = alive.reduce((sum, worker) => sum + worker.threads, 0)
  const open = runs.filter(({ state }) => state !== 'failed')
  const failed = runs.filter(({ state }) => state === 'failed')
  const refused = actionData?.intent === 'keep' ? actionData : null
  const form = useFaultFocus(refused)
  return (
    <PlainPage>
      <PageHead
        title={
          alive.length === 0
            ? 'No worker is alive'
            : `${alive.length} ${plural(alive.length, 'worker')} with ${threads} ${plural(threads, 'thread')}, ${open.length === 0 ? 'no run' : `${open.length} ${plural(open.length, 'run')}`} under way`
        }
        reason={
          alive.length === 0
            ? 'Runs wait until one is started: npm run worker with DATABASE_URL, on any host.'
            : 'More workers may join at any time, on any host: npm run worker with DATABASE_URL.'
        }
      />
      {actionData && !refused ? (
        <p role="alert" className="font-semibold text-red-ink">
          {actionData.fault}
        </p>
      ) : null}
      <Workers workers={workers} />
      <Sheet flush title={open.length === 0 ? 'No run is under way' : 'Under way'}>
        {open.length === 0 ? null : (
          <Scroll label="Runs under way">
            <table className="data-table">
              <thead>
                <tr>
                  <th scope="col">Study</th>
                  <th scope="col">State</th>
                  <th scope="col">Points</th>
                  <th scope="col" className="numeric">
                    Chunks waiting
                  </th>
                  <th scope="col" className="numeric">
                    Held
                  </th>
                  <th scope="col">Since</th>
                  <th scope="col">Engine</th>
                  <th scope="col">
                    <span className="visually-hidden">Acts</span>
                  </th>
                </tr>
              </thead>
              <tbody>
                {open.map((run) => (
                  <tr key={run.id}>
                    <th scope="row">
                      {run.studyName}
                      <span className="block text-note font-normal text-soft">{run.projectName}</span>
                    </th>
                    <td>
                      {run.paused ? <Tag tone="attention">paused</Tag> : <RunStateTag state={run.state} />}
                    </td>
                    <td>
                      <PointsDone done={run.done} points={run.points} />
                    </td>
                    <td className="numeric">{run.waiting}</td>
                    <td className="numeric">{run.held}</td>
                    <td>
                      <When at={run.startedAt ?? run.plannedAt} />
                    </td>
                    <td>{run.engineVersion}</td>
                    <td>
                      <Form method="post" className="flex gap-1">
                        <input type="hidden" name="run" value={run.id} />
                        <Button type="submit" name="intent" value={run.paused ? 'resume' : 'pause'} small>
                          {run.paused ? 'Resume' : 'Pause'}
                        </Button>
                        <Button type="submit" name="intent" value="cancel" look="quiet" small>
                          Cancel
                        </Button>
                      </Form>
                    </td>
                  </tr>
                ))}
              </tbody>
            </table>
          </Scroll>
        )}
      </Sheet>
      {failed.length > 0 ? <Failed runs={failed} /> : null}
      <Sheet title="How long points are kept" className="max-w-3xl">
        <Form method="post" ref={form} className="flex flex-wrap items-start gap-3" key={String(months)}>
          <TextField
            label="Months"
            name="months"
            inputMode="numeric"
            className="w-40"
            defaultValue={months ?? ''}
            fault={refused?.fault}
            hint="Empty: for ever."
          />
          <Button type="submit" name="intent" value="keep" className="mt-6">
            Keep this
          </Button>
        </Form>
        <p className="mt-2 max-w-[65ch] text-note text-soft">
          Points leave by the month in which their run was planned. Counts, best and refined points, and
          accepted records stay for good.
        </p>
      </Sheet>
    </PlainPage>
  )
}

type Data = Route.ComponentProps['loaderData']

function Workers({ workers }: Pick<Data, 'workers'>) {
  if (workers.length === 0) return <EmptyState title="No worker has signed on in the last day" />
  return (
    <Sheet flush title="Workers">
      <Scroll label="Workers">
        <table className="data-table">
          <thead>
            <tr>
              <th scope="col">Host, process</th>
              <th scope="col">State</th>
              <th scope="col" className="numeric">
                Threads
              </th>
              <th scope="col">Engine</th>
              <th scope="col">Since</th>
              <th scope="col">Heard of</th>
              <th scope="col">Holds</th>
              <th scope="col">
                <span className="visually-hidden">Acts</span>
              </th>
            </tr>
          </thead>
          <tbody>
            {workers.map((worker) => (
              <tr key={worker.id}>
                <th scope="row">
                  {worker.host}, {worker.processId}
                </th>
                <td>
                  {worker.alive ? (
                    <Tag tone={worker.draining ? 'attention' : 'sound'}>
                      {worker.draining ? 'ending' : 'alive'}
                    </Tag>
                  ) : (
                    <Tag tone="failed">silent</Tag>
                  )}
                </td>
                <td className="numeric">{worker.threads}</td>
                <td>{worker.engineVersion}</td>
                <td>
                  <When at={worker.startedAt} />
                </td>
                <td>
                  <When at={worker.seenAt} />
                </td>
                <td className="text-note">
                  {worker.holding.length === 0
                    ? 'nothing'
                    : worker.holding.map(({ job, runId, chunk, since }) => (
                        <span key={`${runId}${chunk}`} className="block whitespace-nowrap">
                          {job.startsWith('analysis') ? 'analysis' : 'run'} {runId.slice(0, 8)}
                          {job.startsWith('analysis')
                            ? ''
                            : chunk === null
                              ? ', its end'
                              : `, chunk ${chunk}`}
                          , <When at={since} />
                        </span>
                      ))}
                </td>
                <td>{worker.alive && !worker.draining ? <Drain worker={worker} /> : null}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </Scroll>
    </Sheet>
  )
}

/** Asks once: the worker's host may have nobody to start it again. */
function Drain({ worker }: { worker: { id: string; host: string; processId: number } }) {
  return (
    <details>
      <summary
        className="button button-quiet button-small list-none"
        aria-label={`Let the worker ${worker.host}, ${worker.processId} end`}
      >
        Let it end
      </summary>
      <Form method="post" className="mt-2 grid w-64 gap-2">
        <input type="hidden" name="worker" value={worker.id} />
        <p className="text-note">
          It finishes what it holds, takes nothing more and ends. Whoever started it must start another.
        </p>
        <Button type="submit" name="intent" value="drain" small className="justify-self-start">
          Let {worker.host}, {worker.processId} end
        </Button>
      </Form>
    </details>
  )
}

function Failed({ runs }: Pick<Data, 'runs'>) {
  return (
    <Sheet title={`${runs.length} failed ${plural(runs.length, 'run')}`}>
      <ul className="divide-y divide-line">
        {runs.map((run) => (
          <li key={run.id} className="flex flex-wrap items-baseline justify-between gap-x-4 gap-y-1 py-2">
            <div className="min-w-0 max-w-[75ch]">
              <p>
                <Link to={`/studies/${run.studyId}/run?run=${run.id}`} className="link font-semibold">
                  {run.studyName}
                </Link>{' '}
                <span className="text-note text-soft">
                  {run.projectName}, <When at={run.plannedAt} />,{' '}
                  <PointsDone done={run.done} points={run.points} />
                </span>
              </p>
              <p className="text-note [overflow-wrap:anywhere]">{run.fault}</p>
            </div>
            <Form method="post">
              <input type="hidden" name="run" value={run.id} />
              <Button type="submit" name="intent" value="retry" small aria-label={`Retry ${run.studyName}`}>
                Retry
              </Button>
            </Form>
          </li>
        ))}
      </ul>
    </Sheet>
  )
}
