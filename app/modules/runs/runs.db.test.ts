import { eq, sql } from 'drizzle-orm'
import { afterAll, expect, test } from 'vitest'
import { db, pool } from '#app/db.server.ts'
import { type ChunkJob, chunkQueue, type Lease, queue } from '#app/jobs/queue.server.ts'
import { JobWorker } from '#app/jobs/worker.server.ts'
import { runChanges } from '#app/modules/points/changes.server.ts'
import {
  aggregates,
  pageOfPoints,
  plotColumns,
  pointSheet,
  refinedBest,
} from '#app/modules/points/points.server.ts'
import { appSetting, auditEntry, pointColumn, run, runChunk } from '#drizzle/schema/index.ts'
import { KEY_RESULT_INDEX, KEY_RESULTS, OUTCOME_INDEX } from '#engine/bundle/key-results.ts'
import { COLUMNS, evaluateRange } from '#engine/sweep/evaluate-range.ts'
import { ENGINE_VERSION } from '#engine/version.ts'
import { acting, definition, ended, plantRun, storedOnce, until } from '#tests/crash/fixtures.ts'
import { chunkRange } from './chunks.ts'
import { drainWorker, listOpenRuns, listWorkers } from './operations.server.ts'
import { runProgress } from './progress.server.ts'
import { dropOldPoints, RETENTION_SETTING } from './retention.server.ts'
import { planOfRevision } from './run-plan.server.ts'
import {
  cancelRun,
  failRun,
  getRun,
  listRuns,
  pauseRun,
  resumeRun,
  retryRun,
  runAgain,
} from './runs.server.ts'
import { storeChunk } from './store.server.ts'

const SMALL = definition({ velocities: 15, inlets: 17 })
const POINTS = 4 * 15 * 17

let worker: JobWorker | undefined
let work: Promise<void> | undefined

/** From the first test that asks for it on, a worker takes whatever is queued; tests that take jobs by hand come first. */
function employ(): JobWorker {
  if (worker) return worker
  worker = new JobWorker({ threads: 2, log: (line) => console.warn(line) })
  work = worker.work()
  return worker
}

/** For runs that must be changed before a worker sees them. */
async function retire(): Promise<void> {
  worker?.drain()
  await work
  worker = undefined
}

afterAll(async () => {
  await retire()
  await (await queue()).stop({ close: false, graceful: false })
  await pool.end()
})

test('a cancelled run keeps what is stored and stores nothing more', async () => {
  const planned = await plantRun(SMALL, 50)
  const lease = await takeChunk(planned.id)
  expect(await storeChunk(lease.lease, await computed(planned.id, lease.chunk))).toBe(true)
  const late = await takeChunk(planned.id)
  const cancelled = await cancelRun(planned.id, acting)
  expect(cancelled.state).toBe('cancelled')
  expect(await storeChunk(late.lease, await computed(planned.id, late.chunk))).toBe(false)
  expect(await runProgress(planned.id)).toMatchObject({ state: 'cancelled', done: 50 })
  const page = await pageOfPoints(planned.id, { limit: 1000 })
  expect(page).toMatchObject({ stored: 50, matching: 50 })
  await expect(cancelRun(planned.id, acting)).rejects.toThrow(/ended already/)
  expect(await waiting(planned.id)).toBe(0)
  const acts = await db
    .select({ act: auditEntry.act })
    .from(auditEntry)
    .where(eq(auditEntry.subjectId, planned.id))
  expect(acts.map(({ act }) => act)).toEqual(['run.start', 'run.cancel'])
})

test('a worker that comes back late is refused, and the chunk is stored once', async () => {
  const planned = await plantRun(SMALL, 100)
  const frozen = await takeChunk(planned.id)
  // As when a frozen worker does not renew its lease.
  await db.execute(
    sql`update pgboss.job set started_on = now() - interval '1 hour' where id = ${frozen.lease.id}`,
  )
  await (await queue()).expire()
  // Between the two holders, the lease is nobody's.
  expect(await storeChunk(frozen.lease, await computed(planned.id, frozen.chunk))).toBe(false)
  const next = await takeChunk(planned.id)
  expect(next).toMatchObject({ chunk: frozen.chunk, lease: { id: frozen.lease.id, retryCount: 1 } })
  expect(await storeChunk(frozen.lease, await computed(planned.id, frozen.chunk))).toBe(false)
  expect(await storeChunk(next.lease, await computed(planned.id, next.chunk))).toBe(true)
  expect(await storeChunk(frozen.lease, await computed(planned.id, frozen.chunk))).toBe(false)
  expect(await db.select().from(runChunk).where(eq(runChunk.runId, planned.id))).toHaveLength(1)
  expect(await db.select().from(pointColumn).where(eq(pointColumn.runId, planned.id))).toHaveLength(
    KEY_RESULTS.length,
  )
  await cancelRun(planned.id, acting)
})

test('a small study is not kept waiting by a large one', async () => {
  const large = await plantRun(definition({ velocities: 400, inlets: 400 }), 1000)
  for (let k = 0; k < 5; k++) await takeChunk(large.id)
  const small = await plantRun(SMALL, 500)
  const next = [await takeChunk(), await takeChunk(), await takeChunk()]
  expect(next.map((job) => job.runId)).toEqual([small.id, small.id, small.id])
  await cancelRun(large.id, acting)
  await cancelRun(small.id, acting)
})

test('a paused run waits, and resumes where it was', async () => {
  const planned = await plantRun(SMALL, 100)
  const { lease, chunk } = await takeChunk(planned.id)
  await pauseRun(planned.id, acting)
  expect(await waiting(planned.id)).toBe(0)
  // Work under way when the run was paused still counts.
  expect(await storeChunk(lease, await computed(planned.id, chunk))).toBe(true)
  expect(await runProgress(planned.id)).toMatchObject({ paused: true, done: 100 })
  await resumeRun(planned.id, acting)
  expect(await waiting(planned.id)).toBe(Math.ceil(POINTS / 100) - 1)
  employ()
  const done = await ended(planned.id)
  expect(done.state).toBe('done')
  expect(await storedOnce(done)).toBe(true)
})

test('a run goes to its end: every point once, with the numbers of the engine, and says so', async () => {
  employ()
  const planned = await plantRun(SMALL)
  expect(planned).toMatchObject({ state: 'queued', points: POINTS, engineVersion: ENGINE_VERSION })
  const done = await ended(planned.id)
  expect(done.fault).toBeNull()
  expect(done.state).toBe('done')
  expect(done.contentHash).toMatch(/^[0-9a-f]{64}$/)
  expect(await storedOnce(done)).toBe(true)

  const plan = await planOfRevision(done.revisionId)
  const all = new Float64Array(POINTS * COLUMNS)
  evaluateRange(plan, 0, POINTS, all)
  const column = (id: string) =>
    all.subarray(KEY_RESULT_INDEX[id] * POINTS, (KEY_RESULT_INDEX[id] + 1) * POINTS)
  const { rows } = await db.execute<Record<string, number | null>>(
    sql`select * from run_point where run_id = ${done.id} order by point`,
  )
  expect(rows).toHaveLength(POINTS)
  for (const { id, column: name } of KEY_RESULTS) {
    const computed = Array.from(column(id), (value) => (Number.isNaN(value) ? null : value))
    expect(rows.map((row) => (row[name] === null ? null : Number(row[name])))).toEqual(computed)
  }

  let best = -1
  for (let i = 0; i < POINTS; i++)
    if (column('outcome')[i] === 0 && column('limitsNotMet')[i] === 0)
      if (best < 0 || column('outsideArea')[i] < column('outsideArea')[best]) best = i
  expect(done.bestPoint).toBe(best)

  const progress = await runProgress(done.id)
  const notReached = Array.from(column('outcome')).filter((o) => o === OUTCOME_INDEX.dutyNotReached).length
  expect(notReached).toBeGreaterThan(0)
  expect(progress).toMatchObject({ state: 'done', done: POINTS, points: POINTS, secondsLeft: null })
  expect(progress.failures).toContainEqual(
    expect.objectContaining({ code: 'dutyNotReached', count: notReached }),
  )
  expect(progress.best).toMatchObject({ point: best, objective: column('outsideArea')[best] })
  expect(progress.best?.results.coolantPressureDrop).toBe(column('coolantPressureDrop')[best])

  // What chunks say of themselves is what their points come to.
  const sums = await aggregates(done.id)
  expect(sums).toEqual(await aggregates(done.id, {}))
  expect(sums).toMatchObject({ stored: POINTS, meetingLimits: progress.meetingLimits })
  expect(sums.limitsNotMet.coolantPressureDrop).toBeGreaterThan(0)

  // A page before and after its columns are in memory.
  const query = { sort: 'outsideArea', filters: { meetingLimits: true }, limit: 7, offset: 5 }
  const page = await pageOfPoints(done.id, query)
  for (const { id } of KEY_RESULTS) await pageOfPoints(done.id, { sort: id, limit: 1 })
  expect(await pageOfPoints(done.id, query)).toEqual(page)
  for (const row of page.rows)
    expect(row.results).toEqual(
      KEY_RESULTS.map(({ id }) => (Number.isNaN(column(id)[row.point]) ? null : column(id)[row.point])),
    )
  const plot = await plotColumns(done.id, { x: 'coolantPressureDrop', y: 'outsideArea', max: 100 })
  expect(plot.point.length).toBeLessThanOrEqual(100)
  expect(plot.point).toContain(best)
  expect(plot.y).toEqual(plot.point.map((point) => column('outsideArea')[point]))

  const sheet = await pointSheet(done.id, best)
  expect(sheet).toMatchObject({ recorded: true, differences: [], storedEngineVersion: ENGINE_VERSION })
  expect(sheet.result.outsideArea).toBe(column('outsideArea')[best])
  const other = await pointSheet(done.id, best === 0 ? 1 : best - 1)
  expect(other.recorded).toBe(false)

  const refined = await refinedBest(done.id)
  expect(refined?.result.outsideArea).toBeLessThanOrEqual(column('outsideArea')[best])
  const [listed] = await listRuns(done.studyId)
  expect(listed).toMatchObject({ id: done.id, done: POINTS, revision: 1 })
})

test('the content hash does not depend on how a run was cut', async () => {
  employ()
  const hashes = new Set<string | null>()
  for (const chunkPoints of [50, 333, POINTS]) {
    const done = await ended((await plantRun(SMALL, chunkPoints)).id)
    expect(done.state).toBe('done')
    hashes.add(done.contentHash)
  }
  expect(hashes.size).toBe(1)
})

test('a run again is a new run of the same revision with the same content', async () => {
  employ()
  const first = await ended((await plantRun(SMALL, 200)).id)
  const again = await runAgain(first.id, acting)
  expect(again.id).not.toBe(first.id)
  const second = await ended(again.id)
  expect(second.contentHash).toBe(first.contentHash)
  expect(await runChanges(first.id, second.id)).toMatchObject({ outcomes: [], columns: [] })

  // As if an earlier engine had found another duty at one point and none at another.
  await db.execute(sql`
    update point_column set vals[3] = vals[3] * 2, vals[5] = 'NaN'
    where run_id = ${first.id} and "column" = 'tube_mass_kg' and chunk = 1`)
  await db.update(run).set({ contentHash: 'of an earlier engine' }).where(eq(run.id, first.id))
  const changed = await runChanges(first.id, second.id)
  expect(changed.outcomes).toEqual([])
  expect(changed.columns).toEqual([
    { id: 'tubeMass', points: 2, largest: expect.objectContaining({ point: 202, share: 0.5 }) },
  ])
})

test('a run of another engine version is not taken, and its page says that it waits', async () => {
  await retire()
  const planned = await plantRun(SMALL)
  await db.update(run).set({ engineVersion: '0.0.1' }).where(eq(run.id, planned.id))
  await db.execute(sql`delete from pgboss.job where data->>'runId' = ${planned.id}`)
  const { id } = employ()
  await until(
    'the worker signs on',
    async () => (await db.execute(sql`select from worker where id = ${id}`)).rows.length > 0,
  )
  expect(await runProgress(planned.id)).toMatchObject({ state: 'queued', waitingForWorker: true })
  const own = await plantRun(SMALL)
  expect(await runProgress(own.id)).toMatchObject({ waitingForWorker: false })
  expect((await ended(own.id)).state).toBe('done')
})

test('a failed run says why, and an administrator’s retry finishes it', async () => {
  await retire()
  const planned = await plantRun(SMALL, 200)
  await failRun(planned.id, 'The engine failed at chunk 3: out of luck')
  expect(await runProgress(planned.id)).toMatchObject({
    state: 'failed',
    fault: expect.stringContaining('luck'),
  })
  await retryRun(planned.id, acting)
  employ()
  expect((await ended(planned.id)).state).toBe('done')
})

test('points leave by the month when the policy says so; counts and the best point stay', async () => {
  employ()
  const old = await ended((await plantRun(SMALL)).id)
  const kept = await ended((await plantRun(SMALL)).id)
  await db.execute(sql`select ensure_point_column_partition('2020-02-01')`)
  await db.update(pointColumn).set({ plannedOn: '2020-02-10' }).where(eq(pointColumn.runId, old.id))
  await db.update(run).set({ plannedOn: '2020-02-10' }).where(eq(run.id, old.id))
  expect(await dropOldPoints()).toBe(0)
  await db.insert(appSetting).values({ key: RETENTION_SETTING, value: 12 })
  expect(await dropOldPoints()).toBe(1)
  expect(await dropOldPoints()).toBe(0)
  await expect(pageOfPoints(old.id)).rejects.toThrow(/retention policy/)
  expect(await runProgress(old.id)).toMatchObject({ state: 'done', done: POINTS })
  expect(await pointSheet(old.id, old.bestPoint as number)).toMatchObject({ recorded: true })
  expect((await pageOfPoints(kept.id)).matching).toBe(POINTS)
})

test('an administrator sees what runs where, and lets a worker end', async () => {
  const self = employ()
  const waiting = await plantRun(definition({ velocities: 200, inlets: 200 }), 100)
  await pauseRun(waiting.id, acting)
  const mine = await until('the worker is listed', async () =>
    (await listWorkers()).find(({ id, alive }) => id === self.id && alive),
  )
  expect(mine).toMatchObject({
    threads: 2,
    engineVersion: ENGINE_VERSION,
    draining: false,
    processId: process.pid,
  })
  expect((await listOpenRuns()).find(({ id }) => id === waiting.id)).toMatchObject({
    paused: true,
    waiting: 0,
  })
  await drainWorker(self.id, acting)
  await work
  expect((await listWorkers()).some(({ id }) => id === self.id)).toBe(false)
  await resumeRun(waiting.id, acting)
  expect(await runProgress(waiting.id)).toMatchObject({ paused: false, waitingForWorker: true })
  await expect(drainWorker(self.id, acting)).rejects.toThrow(/no such worker/)
})

type Taken = { lease: Lease; runId: string; chunk: number }

/** Takes the next chunk as a worker would; of one run, when given, leaving others' chunks where they are. */
async function takeChunk(runId?: string): Promise<Taken> {
  const name = chunkQueue(ENGINE_VERSION)
  const [job] = await (await queue()).fetch<ChunkJob>(name, { includeMetadata: true })
  if (runId !== undefined) expect(job.data.runId).toBe(runId)
  return { lease: { queue: name, id: job.id, retryCount: job.retryCount }, ...job.data }
}

async function computed(runId: string, chunk: number) {
  const of = await getRun(runId)
  const { first, count } = chunkRange(of, chunk)
  const table = new Float64Array(count * COLUMNS)
  evaluateRange(await planOfRevision(of.revisionId), first, count, table)
  return { run: of, chunk, table, computeSeconds: 0.01, workerId: crypto.randomUUID() }
}

async function waiting(runId: string): Promise<number> {
  const { rows } = await db.execute<{ n: number }>(
    sql`select count(*)::int as n from pgboss.job where data->>'runId' = ${runId} and state in ('created', 'retry')`,
  )
  return rows[0].n
}
