// A worker: takes jobs from the queue, keeps their leases, and survives what happens to the database meanwhile.
import { hostname } from 'node:os'
import { and, eq, inArray, isNull, lt, ne, sql } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { dropOldPoints } from '#app/modules/runs/retention.server.ts'
import { failRun } from '#app/modules/runs/runs.server.ts'
import { run, worker } from '#drizzle/schema/index.ts'
import { ENGINE_VERSION } from '#engine/version.ts'
import { type AnalysisUnit, failAnalysis, failOrphans, handleAnalysis } from './analysis.server.ts'
import { handleChunk, handleFinish, type WorkUnit } from './handlers.server.ts'
import { EnginePool, stopFlag } from './pool.server.ts'
import {
  type AnalysisJob,
  analysisQueue,
  type ChunkJob,
  chunkQueue,
  dropJob,
  type FinishJob,
  finishQueue,
  hopelessAnalyses,
  hopelessRuns,
  queue,
  releaseJob,
  renewJobs,
} from './queue.server.ts'
import { isTransient } from './transient.ts'
import { WakeUp } from './wake-up.server.ts'

const RENEW_MS = 1000
/** How often the queue is asked when nobody says that something was put there. */
const POLL_MS = 1000
const HOUSEKEEPING_MS = 15_000
const FORGET_WORKER_HOURS = 24
/** Runs of an engine that no worker had for so long are given up. */
const OLD_ENGINE_SECONDS = 60
/** Times a job's own error is met before the run is given up. */
const ATTEMPTS = 3

type Held = (WorkUnit | AnalysisUnit) & { since: string }

/** What a job is about, for the log, the list of workers and the fault that people read. */
function about(held: Held): { id: string; chunk: number | null; what: string } {
  if ('analysisId' in held) return { id: held.analysisId, chunk: null, what: 'the analysis' }
  const { runId, chunk } = held
  return { id: runId, chunk, what: chunk === null ? 'the end of the run' : `chunk ${chunk}` }
}

export type WorkerOptions = { threads?: number; log?: (line: string) => void }

export class JobWorker {
  readonly id = crypto.randomUUID()
  readonly pool: EnginePool
  readonly #log: (line: string) => void
  readonly #held = new Map<string, Held>()
  readonly #wakeUp = new WakeUp()
  #draining = false

  constructor(options: WorkerOptions = {}) {
    this.pool = new EnginePool(options.threads)
    this.#log = options.log ?? (() => {})
  }

  /** While one chunk is computed another is stored and a third fetched; many threads share a chunk too briefly for that. */
  get #capacity(): number {
    return 3 + Math.floor(this.pool.threads / 4)
  }

  /** Works until drained. */
  async work(): Promise<void> {
    await this.#patiently('reach the queue', () => queue())
    await this.#patiently('sign on', () => this.#signOn())
    const timers = [
      this.#every(RENEW_MS, 'renew leases', () => this.#renew()),
      this.#every(HOUSEKEEPING_MS, 'look after the queue', () => this.#lookAfterQueue()),
    ]
    while (!this.#draining) {
      void this.#wakeUp.listen()
      await this.#take().catch((error) => this.#say('fetch jobs', error))
      if (!this.#draining) await this.#wakeUp.sleep(POLL_MS)
    }
    while (this.#held.size > 0) await this.#wakeUp.sleep(POLL_MS)
    for (const timer of timers) clearInterval(timer)
    await this.#wakeUp.close()
    await this.pool.close()
    await db
      .delete(worker)
      .where(eq(worker.id, this.id))
      .catch(() => {})
  }

  /** Lets `work` finish what is held, take nothing more, and return. */
  drain(): void {
    this.#draining = true
    this.#wakeUp.wake()
  }

  async #take(): Promise<void> {
    const boss = await queue()
    const queues = [finishQueue, analysisQueue, chunkQueue].map((of) => of(ENGINE_VERSION))
    for (const name of queues) {
      // An analysis spreads over all threads by itself; a second one beside it would only delay both.
      const room = this.#capacity - this.#held.size
      const batchSize =
        name === analysisQueue(ENGINE_VERSION) ? Math.min(room, this.#analyses > 0 ? 0 : 1) : room
      if (batchSize <= 0) continue
      const jobs = await boss.fetch<ChunkJob | FinishJob | AnalysisJob>(name, {
        batchSize,
        includeMetadata: true,
      })
      for (const { id, retryCount, data } of jobs) {
        const common = {
          lease: { queue: name, id, retryCount },
          stop: stopFlag(),
          pool: this.pool,
          since: new Date().toISOString(),
        }
        const held: Held =
          'analysisId' in data
            ? { ...common, analysisId: data.analysisId }
            : {
                ...common,
                runId: data.runId,
                chunk: 'chunk' in data ? data.chunk : null,
                workerId: this.id,
              }
        this.#held.set(id, held)
        void this.#process(held).finally(() => {
          this.#held.delete(id)
          this.#wakeUp.wake()
        })
      }
    }
  }

  get #analyses(): number {
    return [...this.#held.values()].filter((held) => 'analysisId' in held).length
  }

  async #process(held: Held): Promise<void> {
    const { id, what } = about(held)
    try {
      const stored = await this.#untilAnswered(held)
      // Refused because the run has ended: its job must not come back. Refused because the lease was lost: not ours.
      if (!stored) await dropJob(held.lease)
    } catch (error) {
      this.#log(`${id}, ${what}: ${(error as Error).stack}`)
      await this.#giveBack(held, what, error as Error).catch((again) => this.#say('give a job back', again))
    }
  }

  /** Waits, with the work done kept, for a database that is away; whether it still counts is for the lease to say. */
  async #untilAnswered(held: Held): Promise<boolean> {
    for (let wait = 100; ; wait = Math.min(2 * wait, 2000)) {
      try {
        if ('analysisId' in held) return await handleAnalysis(held)
        return await (held.chunk === null
          ? handleFinish(held)
          : handleChunk(held as WorkUnit & { chunk: number }))
      } catch (error) {
        if (!isTransient(error) || Atomics.load(held.stop, 0) !== 0) throw error
        this.#say('use the database', error)
        await delay(wait)
      }
    }
  }

  async #giveBack(held: Held, what: string, error: Error): Promise<void> {
    if (isTransient(error)) return
    if (held.lease.retryCount + 1 < ATTEMPTS) return releaseJob(held.lease)
    const fault = `The engine failed at ${what}: ${error.message}`
    await ('analysisId' in held ? failAnalysis(held.analysisId, fault) : failRun(held.runId, fault))
    await dropJob(held.lease)
  }

  /** Says that this worker lives and keeps its jobs, learns which are no longer its own, and frees those of the dead. */
  async #renew(): Promise<void> {
    const held = [...this.#held.values()]
    const [self] = await db
      .update(worker)
      .set({
        seenAt: sql`now()`,
        holding: held.map((each) => {
          const { id, chunk } = about(each)
          return { job: each.lease.queue, runId: id, chunk, since: each.since }
        }),
      })
      .where(eq(worker.id, this.id))
      .returning({ drainRequestedAt: worker.drainRequestedAt })
    if (!self) await this.#signOn()
    else if (self.drainRequestedAt) this.drain()
    if (held.length > 0) {
      const own = await renewJobs(held.map(({ lease }) => lease))
      const ended = await endedAmong(held.flatMap((each) => ('runId' in each ? each.runId : [])))
      for (const each of held)
        if (!own.has(each.lease.id) || ('runId' in each && ended.has(each.runId)))
          Atomics.store(each.stop, 0, 1)
    }
    await (await queue()).expire()
  }

  async #signOn(): Promise<void> {
    const { id, pool } = this
    await db
      .insert(worker)
      .values({
        id,
        host: hostname(),
        processId: process.pid,
        threads: pool.threads,
        engineVersion: ENGINE_VERSION,
      })
      .onConflictDoNothing()
  }

  /** What any worker does for all. */
  async #lookAfterQueue(): Promise<void> {
    await (await queue()).maintain()
    await db
      .delete(worker)
      .where(lt(worker.seenAt, sql`now() - make_interval(hours => ${FORGET_WORKER_HOURS})`))
    await dropOldPoints()
    for (const runId of await hopelessRuns())
      await failRun(
        runId,
        'A part of this run ended every worker that took it; the log of a worker may say why.',
      )
    await failOrphans()
    for (const id of await hopelessAnalyses())
      await failAnalysis(id, 'It ended every worker that took it; the log of a worker may say why.')
    for (const { id, engineVersion } of await orphansOfOldEngines())
      await failRun(
        id,
        `Planned with engine ${engineVersion}; the workers now have ${ENGINE_VERSION}. Run the study again.`,
      )
  }

  #every(ms: number, what: string, work: () => Promise<void>): NodeJS.Timeout {
    let busy = false
    return setInterval(async () => {
      if (busy) return
      busy = true
      await work().catch((error) => this.#say(what, error))
      busy = false
    }, ms)
  }

  async #patiently(what: string, work: () => Promise<unknown>): Promise<void> {
    for (let wait = 100; !this.#draining; wait = Math.min(2 * wait, 2000)) {
      try {
        await work()
        return
      } catch (error) {
        if (!isTransient(error)) throw error
        this.#say(what, error)
        await delay(wait)
      }
    }
  }

  #say(what: string, error: unknown): void {
    const { message, cause } = error as Error
    this.#log(`Could not ${what}: ${cause instanceof Error ? cause.message : message}`)
  }
}

const delay = (ms: number) => new Promise((resolve) => setTimeout(resolve, ms))

async function endedAmong(runIds: string[]): Promise<Set<string>> {
  const ended = await db
    .select({ id: run.id })
    .from(run)
    .where(and(inArray(run.id, runIds), inArray(run.state, ['cancelled', 'failed'])))
  return new Set(ended.map(({ id }) => id))
}

/** Open runs of an engine version that no worker has any more: nobody would ever take them. */
async function orphansOfOldEngines(): Promise<{ id: string; engineVersion: string }[]> {
  const longAgo = sql`now() - make_interval(secs => ${OLD_ENGINE_SECONDS})`
  return db
    .select({ id: run.id, engineVersion: run.engineVersion })
    .from(run)
    .leftJoin(worker, and(eq(worker.engineVersion, run.engineVersion), sql`${worker.seenAt} > ${longAgo}`))
    .where(
      and(
        inArray(run.state, ['queued', 'running']),
        ne(run.engineVersion, ENGINE_VERSION),
        isNull(worker.id),
        sql`${run.plannedAt} < ${longAgo}`,
      ),
    )
}
