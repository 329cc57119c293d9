// The queue in PostgreSQL: what is waiting, and how a process puts work there or hears of it.
import { type SQL, sql } from 'drizzle-orm'
import PgBoss from 'pg-boss'
import { pool, type Queryable } from '#app/db.server.ts'
import { ENGINE_VERSION } from '#engine/version.ts'

export type ChunkJob = { runId: string; chunk: number }
export type FinishJob = { runId: string }

/** A worker fetches only from the queues of its own engine: a run of another engine version is never taken. */
export const chunkQueue = (engineVersion: string) => `run-chunk-${engineVersion}`
export const finishQueue = (engineVersion: string) => `run-finish-${engineVersion}`

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
  for (const name of [chunkQueue(ENGINE_VERSION), finishQueue(ENGINE_VERSION)])
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

async function wake(tx: Pick<Queryable, 'execute'>): Promise<void> {
  await tx.execute(sql`select pg_notify(${WAKE_CHANNEL}, '')`)
}
