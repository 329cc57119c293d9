// The queue in PostgreSQL: what is waiting, and how a process puts work there or hears of it.
import { type SQL, sql } from 'drizzle-orm'
import PgBoss from 'pg-boss'
import { db, pool, type Queryable } from '#app/db.server.ts'
import { ENGINE_VERSION } from '#engine/version.ts'

export type ChunkJob = { runId: string; chunk: number }
export type FinishJob = { runId: string }
export type AnalysisJob = { analysisId: string }

/** A worker fetches only from the queues of its own engine: a run of another engine version is never taken. */
export const chunkQueue = (engineVersion: string) => `run-chunk-${engineVersion}`
export const finishQueue = (engineVersion: string) => `run-finish-${engineVersion}`
export const analysisQueue = (engineVersion: string) => `analysis-${engineVersion}`

/** PostgreSQL tells listeners on this channel that something was queued. */
export const WAKE_CHANNEL = 'rowfall_work'

/**
 * A job whose lease is not renewed for so long goes back to the queue. Workers renew every second.
 * Being taken over costs a run nothing but the time: a chunk is stored once whoever computes it.
 */
export const LEASE_SECONDS = 4
/** Times that a job may lose its worker before its run is given up as one that kills workers. */
const LOST_WORKERS_MAX = 30

const kept = globalThis as typeof globalThis & { rowfallQueue?: Promise<PgBoss> }

/** This process's way to the queue, started on first use. */
export function queue(): Promise<PgBoss> {
  kept.rowfallQueue ??= open().catch((error) => {
    kept.rowfallQueue = undefined
    throw error
  })
  return kept.rowfallQueue
}

async function open(): Promise<PgBoss> {
  const boss = new PgBoss({
    db: { executeSql: (text, values) => pool.query(text, values) },
    // Workers look after expired leases themselves; nothing runs on a clock.
    supervise: false,
    schedule: false,
    archiveCompletedAfterSeconds: 3600,
    deleteAfterDays: 1,
  })
  boss.on('error', (error) => console.warn(`Queue: ${error.message}`))
  await boss.start()
  const options = { retryLimit: LOST_WORKERS_MAX, retryDelay: 0, expireInSeconds: LEASE_SECONDS }
  for (const name of [chunkQueue(ENGINE_VERSION), finishQueue(ENGINE_VERSION), analysisQueue(ENGINE_VERSION)])
    await boss.createQueue(name, { name, ...options })
  return boss
}

/** Lets pg-boss write as part of a transaction of ours. */
export function within(tx: Pick<Queryable, 'execute'>): PgBoss.Db {
  return {
    executeSql: async (text, values) => {
      const parts: SQL[] = text
        .split(/\$(\d+)/)
        .map((part, i) => (i % 2 === 0 ? sql.raw(part) : sql`${sql.param(values[Number(part) - 1])}`))
      return (await tx.execute(sql.join(parts))) as unknown as { rows: unknown[] }
    },
  }
}

/**
 * Queues chunks of a run. A run's n-th chunk yields to the first n of any other: whoever has had least goes next, and
 * a small study is not kept waiting by a large one.
 */
export async function enqueueChunks(
  tx: Pick<Queryable, 'execute'>,
  run: { id: string; engineVersion: string },
  chunks: Iterable<number>,
): Promise<void> {
  const name = chunkQueue(run.engineVersion)
  const jobs = Array.from(chunks, (chunk) => ({
    name,
    priority: -chunk,
    data: { runId: run.id, chunk } satisfies ChunkJob,
  }))
  if (jobs.length > 0) await (await queue()).insert(jobs, { db: within(tx) })
  await wake(tx)
}

export async function enqueueFinish(
  tx: Pick<Queryable, 'execute'>,
  run: { id: string; engineVersion: string },
): Promise<void> {
  const data: FinishJob = { runId: run.id }
  await (await queue()).insert([{ name: finishQueue(run.engineVersion), data }], { db: within(tx) })
  await wake(tx)
}

export async function enqueueAnalysis(
  tx: Pick<Queryable, 'execute'>,
  analysis: { id: string; engineVersion: string },
): Promise<void> {
  const data: AnalysisJob = { analysisId: analysis.id }
  await (await queue()).insert([{ name: analysisQueue(analysis.engineVersion), data }], { db: within(tx) })
  await wake(tx)
}

/** Takes an analysis out of the queue, whether it waits or is held: who holds it finds its lease gone. */
export async function withdrawAnalysis(
  tx: Pick<Queryable, 'execute'>,
  analysis: { id: string; engineVersion: string },
): Promise<void> {
  await tx.execute(sql`
    delete from pgboss.job
    where name = ${analysisQueue(analysis.engineVersion)} and state in ('created', 'retry', 'active')
      and data->>'analysisId' = ${analysis.id}`)
}

/** Takes what is waiting of a run out of the queue; what a worker holds stays with it. */
export async function withdrawChunks(
  tx: Pick<Queryable, 'execute'>,
  run: { id: string; engineVersion: string },
): Promise<void> {
  await tx.execute(sql`
    delete from pgboss.job
    where name = ${chunkQueue(run.engineVersion)} and state in ('created', 'retry') and data->>'runId' = ${run.id}`)
}

/** Chunks of a run that wait or are held. */
export async function queuedChunks(
  tx: Pick<Queryable, 'execute'>,
  run: { id: string; engineVersion: string },
): Promise<Set<number>> {
  const { rows } = await tx.execute<{ chunk: number }>(sql`
    select (data->>'chunk')::int as chunk from pgboss.job
    where name = ${chunkQueue(run.engineVersion)} and state in ('created', 'retry', 'active')
      and data->>'runId' = ${run.id}`)
  return new Set(rows.map((row) => row.chunk))
}

/** A job as one worker holds it; whoever takes it over raises `retryCount`. */
export type Lease = { queue: string; id: string; retryCount: number }

const heldAs = (lease: Lease) => sql`
  name = ${lease.queue} and id = ${lease.id} and state = 'active' and retry_count = ${lease.retryCount}`

/** Locks a job as the lease left it, so that nobody takes it over before the transaction ends; false when it is lost. */
export async function holdJob(tx: Pick<Queryable, 'execute'>, lease: Lease): Promise<boolean> {
  const { rows } = await tx.execute(sql`select from pgboss.job where ${heldAs(lease)} for update`)
  return rows.length > 0
}

/** Removes a job that has become pointless, if it is still held. */
export async function dropJob(lease: Lease): Promise<void> {
  await db.execute(sql`delete from pgboss.job where ${heldAs(lease)}`)
}

/** Gives a job back before its time, if it is still held. */
export async function releaseJob(lease: Lease): Promise<void> {
  await db.execute(sql`update pgboss.job set state = 'retry', start_after = now() where ${heldAs(lease)}`)
}

/** Renews leases; answers the ids of those that still hold. */
export async function renewJobs(leases: readonly Lease[]): Promise<Set<string>> {
  const { rows } = await db.execute<{ id: string }>(sql`
    update pgboss.job set started_on = now()
    where name = any(${sql.param([...new Set(leases.map((lease) => lease.queue))])}::text[])
      and state = 'active'
      and (id, retry_count) in (
        select * from unnest(
          ${sql.param(leases.map((lease) => lease.id))}::uuid[],
          ${sql.param(leases.map((lease) => lease.retryCount))}::int[]))
    returning id`)
  return new Set(rows.map((row) => row.id))
}

/** Runs with a job that has lost more workers than chance explains. */
export async function hopelessRuns(): Promise<string[]> {
  const { rows } = await db.execute<{ run_id: string }>(sql`
    select distinct data->>'runId' as run_id from pgboss.job
    where name in (${chunkQueue(ENGINE_VERSION)}, ${finishQueue(ENGINE_VERSION)}) and state = 'failed'`)
  return rows.map((row) => row.run_id)
}

/** The same for analyses. */
export async function hopelessAnalyses(): Promise<string[]> {
  const { rows } = await db.execute<{ id: string }>(sql`
    select distinct data->>'analysisId' as id from pgboss.job
    where name = ${analysisQueue(ENGINE_VERSION)} and state = 'failed'`)
  return rows.map((row) => row.id)
}

async function wake(tx: Pick<Queryable, 'execute'>): Promise<void> {
  await tx.execute(sql`select pg_notify(${WAKE_CHANNEL}, '')`)
}
