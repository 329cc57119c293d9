// What is done with a job of each kind. Each answers whether its work was kept.
import { and, eq, inArray } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { chunkRange } from '#app/modules/runs/chunks.ts'
import { planOfRevision } from '#app/modules/runs/run-plan.server.ts'
import { beginRun, finishRun, storeChunk } from '#app/modules/runs/store.server.ts'
import { type Run, run } from '#drizzle/schema/index.ts'
import { type Computed, type EnginePool, type SharedStudy, shareStudy } from './pool.server.ts'
import type { Lease } from './queue.server.ts'

export type WorkUnit = {
  lease: Lease
  runId: string
  /** null: the run's end. */
  chunk: number | null
  stop: Int32Array
  workerId: string
  pool: EnginePool
  /** Kept from an attempt whose storing the database did not take. */
  computed?: Computed
}

/** Measured cost of a point by run; what the next slices are cut by. */
const costs = new Map<string, number>()
const shared = new Map<string, SharedStudy>()
const KEPT_RUNS = 16

export async function handleChunk(unit: WorkUnit & { chunk: number }): Promise<boolean> {
  const open = await openRun(unit.runId)
  if (!open) return false
  if (open.state === 'queued') await beginRun(open.id)
  unit.computed ??= (await compute(unit, open)) ?? undefined
  if (!unit.computed) return false
  const { table, seconds } = unit.computed
  return storeChunk(unit.lease, {
    run: open,
    chunk: unit.chunk,
    table,
    computeSeconds: seconds,
    workerId: unit.workerId,
  })
}

export async function handleFinish(unit: WorkUnit): Promise<boolean> {
  const open = await openRun(unit.runId)
  return open ? finishRun(unit.lease, open) : false
}

async function openRun(runId: string): Promise<Run | undefined> {
  const [open] = await db
    .select()
    .from(run)
    .where(and(eq(run.id, runId), inArray(run.state, ['queued', 'running'])))
  return open
}

async function compute(unit: WorkUnit & { chunk: number }, of: Run): Promise<Computed | null> {
  const study =
    shared.get(of.revisionId) ?? shareStudy(of.revisionId, (await planOfRevision(of.revisionId)).study)
  keep(shared, of.revisionId, study)
  const { first, count } = chunkRange(of, unit.chunk)
  const secondsPerPoint = costs.get(of.id) ?? 1e-4
  const computed = await unit.pool.evaluate(study, first, count, secondsPerPoint, unit.stop)
  if (computed) keep(costs, of.id, computed.seconds / count)
  return computed
}

function keep<T>(map: Map<string, T>, key: string, value: T): void {
  map.delete(key)
  map.set(key, value)
  if (map.size > KEPT_RUNS) map.delete(map.keys().next().value as string)
}
