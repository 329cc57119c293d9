// How far a run is, from what is stored; true after any restart because nothing else is asked.
import { eq, sql } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { AppError } from '#app/http/errors.ts'
import { run, runTally, worker } from '#drizzle/schema/index.ts'
import { OUTCOMES } from '#engine/bundle/key-results.ts'
import { pointInputs, type SweepPlan } from '#engine/sweep/plan.ts'
import { type BestSoFar, isFinal, type PointInput, type RunProgress } from './progress.ts'
import { keyResultValues, planOfRevision } from './run-plan.server.ts'

/** Fifty pages that poll ten runs ask the database at most ten times in so long. */
const SHARED_MS = 200
const RATE_WINDOW_SECONDS = 30
/** A worker is taken for dead when it has not been heard of for so long. */
export const WORKER_SILENT_SECONDS = 10

type Shared = { at: number; progress: Promise<RunProgress> }
const shared = new Map<string, Shared>()

export function runProgress(runId: string): Promise<RunProgress> {
  const now = performance.now()
  const known = shared.get(runId)
  if (known && now - known.at < SHARED_MS) return known.progress
  const progress = readProgress(runId)
  shared.set(runId, { at: now, progress })
  progress.catch(() => shared.delete(runId))
  if (shared.size > 500) for (const [key, entry] of shared) if (now - entry.at > SHARED_MS) shared.delete(key)
  return progress
}

async function readProgress(runId: string): Promise<RunProgress> {
  // One statement, one snapshot: state and sums belong together.
  const [row] = await db
    .select({
      run,
      done: sql<number>`coalesce(${runTally.points}, 0)`,
      meetingLimits: sql<number>`coalesce(${runTally.meetingLimits}, 0)`,
      seconds: sql<
        number | null
      >`extract(epoch from coalesce(${run.endedAt}, now()) - ${run.startedAt})::float8`,
      outcomes: runTally.outcomes,
      bestPoint: runTally.bestPoint,
      bestObjective: runTally.bestObjective,
      bestResults: runTally.bestResults,
      served: sql<boolean>`exists (
        select from ${worker} w where w.engine_version = ${run.engineVersion}
          and w.drain_requested_at is null
          and w.seen_at > now() - make_interval(secs => ${WORKER_SILENT_SECONDS}))`,
    })
    .from(run)
    .leftJoin(runTally, eq(runTally.runId, run.id))
    .where(eq(run.id, runId))
  if (!row) throw new AppError('not-found', 'There is no such run.')

  const { state, points, fault } = row.run
  const paused = row.run.pausedAt !== null
  const pointsPerSecond =
    state === 'running' && !paused ? rateOf(runId, row.done, row.seconds ?? 0) : forgetRate(runId)
  return {
    runId,
    state,
    paused,
    done: row.done,
    points,
    meetingLimits: row.meetingLimits,
    pointsPerSecond,
    secondsLeft: pointsPerSecond ? (points - row.done) / pointsPerSecond : null,
    seconds: row.seconds,
    best:
      row.bestPoint === null || row.bestObjective === null || row.bestResults === null
        ? null
        : bestSoFar(
            await planOfRevision(row.run.revisionId),
            row.bestPoint,
            row.bestObjective,
            row.bestResults,
          ),
    failures: failures(row.outcomes ?? []),
    fault,
    waitingForWorker: !isFinal(state) && !paused && !row.served,
  }
}

/** How far each run was when it was looked at, over the last half minute. */
const looks = new Map<string, { done: number; seconds: number }[]>()
/** Looks closer together than this are one: a rate over less says little. */
const LOOK_SECONDS = 1

/** Points a second over the window, or from the start where this process has not looked before. */
function rateOf(runId: string, done: number, seconds: number): number | null {
  const known = (looks.get(runId) ?? []).filter((look) => seconds - look.seconds <= RATE_WINDOW_SECONDS)
  const first = known[0] ?? { done: 0, seconds: 0 }
  if (seconds - (known[known.length - 1]?.seconds ?? Number.NEGATIVE_INFINITY) >= LOOK_SECONDS)
    known.push({ done, seconds })
  looks.set(runId, known)
  if (looks.size > 500) looks.delete(looks.keys().next().value as string)
  const [since, rate] =
    seconds - first.seconds >= LOOK_SECONDS
      ? [first, (done - first.done) / (seconds - first.seconds)]
      : [null, done / seconds]
  return done > (since?.done ?? 0) && Number.isFinite(rate) ? rate : null
}

function forgetRate(runId: string): null {
  looks.delete(runId)
  return null
}

function bestSoFar(plan: SweepPlan, point: number, objective: number, results: ArrayLike<number>): BestSoFar {
  return { point, objective, inputs: labelledInputs(plan, point), results: keyResultValues(results) }
}

export function labelledInputs(plan: SweepPlan, point: number): PointInput[] {
  const values = pointInputs(plan, point)
  return plan.variables.map(({ path, label }, j) => ({ path, label, value: values[j] }))
}

/** From points by outcome number; outcome 0 is no failure. */
export function failures(outcomes: readonly number[]): RunProgress['failures'] {
  return outcomes
    .map((count, outcome) => ({ code: OUTCOMES[outcome].code, text: OUTCOMES[outcome].text, count }))
    .slice(1)
    .filter(({ count }) => count > 0)
    .sort((a, b) => b.count - a.count)
}
