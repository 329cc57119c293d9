// How results enter the database: a chunk once, and the end of a run once.
import { createHash } from 'node:crypto'
import { and, eq, inArray, sql } from 'drizzle-orm'
import { db, type Queryable } from '#app/db.server.ts'
import { enqueueFinish, holdJob, type Lease, queue, within } from '#app/jobs/queue.server.ts'
import { tellRunEnded } from '#app/modules/notices/run-ended.server.ts'
import { readColumn } from '#app/modules/points/column-copy.server.ts'
import { pointColumn, pointResult, type Run, run, runChunk, runTally } from '#drizzle/schema/index.ts'
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import type { Case } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import { refineBest } from '#engine/optimise/refine.ts'
import type { Result } from '#engine/result.ts'
import { objectiveColumn } from '#engine/sweep/objective.ts'
import { pointCase } from '#engine/sweep/plan.ts'
import { bandOf } from '#engine/uncertainty/bands.ts'
import { ENGINE_VERSION } from '#engine/version.ts'
import { type ChunkSummary, chunkRange, summarise } from './chunks.ts'
import { planOfRevision } from './run-plan.server.ts'
import { bestStored } from './runs.server.ts'

export type ComputedChunk = {
  run: Run
  chunk: number
  /** Key results column by column, as `evaluateRange` writes them. */
  table: Float64Array
  computeSeconds: number
  workerId: string
}

/** Thrown inside a transaction to undo it. */
class Refused extends Error {}

/**
 * Stores a chunk and completes its job in one transaction. Refused (false) when the job was taken over, when the run
 * has ended, or when the chunk is stored already: a worker that comes back late changes nothing.
 */
export async function storeChunk(
  lease: Lease,
  { run: of, chunk, table, ...by }: ComputedChunk,
): Promise<boolean> {
  const { first, count } = chunkRange(of, chunk)
  const plan = await planOfRevision(of.revisionId)
  const summary = summarise(table, first, count, objectiveColumn(plan.study.objective))
  const boss = await queue()
  return unlessRefused(
    db.transaction(async (tx) => {
      if (!(await holdJob(tx, lease))) throw new Refused()
      const [stored] = await tx
        .insert(runChunk)
        .values({ runId: of.id, chunk, firstPoint: first, points: count, ...summary, ...by })
        .onConflictDoNothing()
        .returning({ chunk: runChunk.chunk })
      if (stored)
        await tx.insert(pointColumn).values(
          KEY_RESULTS.map(({ column }, c) => ({
            plannedOn: of.plannedOn,
            runId: of.id,
            column,
            chunk,
            vals: table.subarray(c * count, (c + 1) * count),
          })),
        )
      await boss.complete(lease.queue, lease.id, {}, { db: within(tx) })
      const [open] = await tx
        .select({ id: run.id })
        .from(run)
        .where(and(eq(run.id, of.id), inArray(run.state, ['queued', 'running'])))
        .for('share')
      if (!open) throw new Refused()
      // Last, because everyone who stores for this run waits here: whoever stores the last chunk sees all others.
      if (stored && (await tally(tx, of.id, count, summary)) === of.points) await enqueueFinish(tx, of)
      return stored !== undefined
    }),
  )
}

async function unlessRefused<T>(work: Promise<T>): Promise<T | false> {
  try {
    return await work
  } catch (error) {
    if (error instanceof Refused) return false
    throw error
  }
}

/** Adds a chunk to what the run's chunks come to; of equal objectives the lowest point is the best. Points so far. */
async function tally(tx: Queryable, runId: string, count: number, of: ChunkSummary): Promise<number> {
  const { outcomes, meetingLimits, bestPoint, bestObjective, bestResults } = of
  const better = sql`(${bestPoint}::int is not null and (${runTally.bestPoint} is null
    or (${bestObjective}::float8, ${bestPoint}::int) < (${runTally.bestObjective}, ${runTally.bestPoint})))`
  const [row] = await tx
    .update(runTally)
    .set({
      points: sql`${runTally.points} + ${count}`,
      meetingLimits: sql`${runTally.meetingLimits} + ${meetingLimits}`,
      outcomes: sql`(select array_agg(coalesce(had, 0) + coalesce(now, 0) order by n)
        from unnest(${runTally.outcomes}, ${sql.param(outcomes)}::int[]) with ordinality as t(had, now, n))`,
      bestPoint: sql`case when ${better} then ${bestPoint}::int else ${runTally.bestPoint} end`,
      bestObjective: sql`case when ${better} then ${bestObjective}::float8 else ${runTally.bestObjective} end`,
      bestResults: sql`case when ${better} then ${sql.param(bestResults, runTally.bestResults)}::float8[] else ${runTally.bestResults} end`,
    })
    .where(eq(runTally.runId, runId))
    .returning({ points: runTally.points })
  return row.points
}

/** Marks a run as begun, when its first chunk is taken. */
export async function beginRun(runId: string): Promise<void> {
  await db
    .update(run)
    .set({ state: 'running', startedAt: sql`coalesce(${run.startedAt}, now())` })
    .where(and(eq(run.id, runId), eq(run.state, 'queued')))
}

/**
 * Ends a run all of whose points are stored: content hash, best point, its refinement, and the full results of both.
 * Done twice, by two workers, it comes to the same; the second is refused.
 */
export async function finishRun(lease: Lease, of: Run): Promise<boolean> {
  const plan = await planOfRevision(of.revisionId)
  const contentHash = await hashOfRun(of)
  const bestPoint = await bestStored(db, of.id)
  const record = (kind: 'best' | 'refined', point: number, bundle: Case, result: Result) => ({
    runId: of.id,
    kind,
    point,
    engineVersion: ENGINE_VERSION,
    case: bundle as unknown as Record<string, unknown>,
    result: result as unknown as Record<string, unknown>,
    band: bandOf(bundle, plan.study.uncertainty) as unknown as Record<string, unknown> | null,
  })
  const records: ReturnType<typeof record>[] = []
  let refined: Record<string, unknown> | null = null
  if (bestPoint !== null) {
    const best = pointCase(plan, bestPoint)
    records.push(record('best', bestPoint, best, evaluate(best)))
    const { case: found, result, ...how } = refineBest(plan.study, best)
    records.push(record('refined', bestPoint, found, result))
    refined = how
  }
  const boss = await queue()
  return unlessRefused(
    db.transaction(async (tx) => {
      if (!(await holdJob(tx, lease))) throw new Refused()
      const [ended] = await tx
        .update(run)
        .set({ state: 'done', endedAt: sql`now()`, pausedAt: null, contentHash, bestPoint, refined })
        .where(and(eq(run.id, of.id), inArray(run.state, ['queued', 'running'])))
        .returning({ id: run.id })
      if (!ended) throw new Refused()
      if (records.length > 0) await tx.insert(pointResult).values(records).onConflictDoNothing()
      await tellRunEnded(tx, of.id)
      await boss.complete(lease.queue, lease.id, {}, { db: within(tx) })
      return true
    }),
  )
}

/** SHA-256 over the stored key results, column by column in point order: the cut into chunks leaves no trace. */
export const hashOfRun = (of: Run): Promise<string> =>
  hashOfColumns(
    KEY_RESULTS.map(
      ({ column }) =>
        () =>
          readColumn(of, column),
    ),
  )

export async function hashOfColumns(
  columns: readonly (() => Float64Array | Promise<Float64Array>)[],
): Promise<string> {
  const hash = createHash('sha256')
  for (const read of columns) {
    // Every NaN is the same NaN.
    const values = (await read()).map((value) => (Number.isNaN(value) ? Number.NaN : value))
    hash.update(new Uint8Array(values.buffer))
  }
  return hash.digest('hex')
}
