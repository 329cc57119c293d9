// How far a run is, from what is stored; true after any restart because nothing else is asked.
import { eq, sql } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { AppError } from '#app/http/errors.ts'
import { run, runChunk, worker } from '#drizzle/schema/index.ts'
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
  const since = sql`now() - make_interval(secs => ${RATE_WINDOW_SECONDS})`
  // One statement, one snapshot: state and sums belong together.
  const [row] = await db
    .select({
      run,
      done: sql<number>`coalesce(sums.points, 0)::int`,
      meetingLimits: sql<number>`coalesce(sums.meeting_limits, 0)::int`,
      recent: sql<number>`coalesce(sums.recent, 0)::int`,
      recentSeconds: sql<number>`sums.recent_seconds::float8`,
      seconds: sql<
        number | null
      >`extract(epoch from coalesce(${run.endedAt}, now()) - ${run.startedAt})::float8`,
      outcomes: sql<number[] | null>`tally.outcomes`,
      bestPoint: sql<number | null>`best.best_point`,
      bestObjective: sql<number | null>`best.best_objective`,
      bestResults: sql<number[] | null>`best.best_results`,
      served: sql<boolean>`exists (
        select from ${worker} w where w.engine_version = ${run.engineVersion}
          and w.drain_requested_at is null
          and w.seen_at > now() - make_interval(secs => ${WORKER_SILENT_SECONDS}))`,
    })
    .from(run)
    .leftJoin(
      sql`lateral (
        select sum(points) as points, sum(meeting_limits) as meeting_limits,
          sum(points) filter (where stored_at > ${since}) as recent,
          extract(epoch from now() - greatest(${since}, ${run.startedAt})) as recent_seconds
        from ${runChunk} where run_id = ${run.id}) sums`,
      sql`true`,
    )
    .leftJoin(
      sql`lateral (
        select array_agg(n order by outcome)::int[] as outcomes from (
          select outcome, sum(count) as n
          from ${runChunk}, unnest(outcomes) with ordinality as o(count, outcome)
          where run_id = ${run.id} group by outcome) t) tally`,
      sql`true`,
    )
    .leftJoin(
      sql`lateral (
        select best_point, best_objective, best_results from ${runChunk}
        where run_id = ${run.id} and best_point is not null
        order by best_objective, best_point limit 1) best`,
      sql`true`,
    )
    .where(eq(run.id, runId))
  if (!row) throw new AppError('not-found', 'There is no such run.')

  const { state, points, fault } = row.run
  const paused = row.run.pausedAt !== null
  const moving = state === 'running' && !paused && row.recent > 0 && row.recentSeconds > 0
  const pointsPerSecond = moving ? row.recent / row.recentSeconds : null
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

function bestSoFar(plan: SweepPlan, point: number, objective: number, results: number[]): BestSoFar {
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
