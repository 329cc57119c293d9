// What runs where: for the administrator's page.
import { desc, eq, inArray, sql } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { AppError } from '#app/http/errors.ts'
import { queue } from '#app/jobs/queue.server.ts'
import { type Acting, recordAct } from '#app/modules/audit/audit.server.ts'
import { project, run, runTally, study, type WorkerHolding, worker } from '#drizzle/schema/index.ts'
import { WORKER_SILENT_SECONDS } from './progress.server.ts'

export type WorkerStatus = {
  id: string
  host: string
  processId: number
  threads: number
  engineVersion: string
  startedAt: Date
  seenAt: Date
  /** Heard of in the last seconds. */
  alive: boolean
  draining: boolean
  /** Chunks whose lease it holds, and since when; chunk null is the end of a run. */
  holding: WorkerHolding[]
}

export async function listWorkers(): Promise<WorkerStatus[]> {
  const rows = await db
    .select({
      worker,
      alive: sql<boolean>`${worker.seenAt} > now() - make_interval(secs => ${WORKER_SILENT_SECONDS})`,
    })
    .from(worker)
    .orderBy(worker.host, worker.startedAt)
  return rows.map(({ worker: { drainRequestedAt, ...each }, alive }) => ({
    ...each,
    alive,
    draining: drainRequestedAt !== null,
    holding: alive ? each.holding : [],
  }))
}

export type OpenRun = {
  id: string
  studyId: string
  studyName: string
  projectName: string
  state: 'queued' | 'running' | 'failed'
  paused: boolean
  plannedAt: Date
  startedAt: Date | null
  points: number
  done: number
  /** Chunks that wait in the queue, and that a worker holds. */
  waiting: number
  held: number
  engineVersion: string
  fault: string | null
}

/** Runs that are under way, and the latest that failed. */
export async function listOpenRuns(limit = 200): Promise<OpenRun[]> {
  // The queue's tables are made at its first use.
  await queue()
  const jobs = (states: string[]) => sql<number>`(
    select count(*)::int from pgboss.job j
    where j.data->>'runId' = ${run.id}::text and j.state::text = any(${sql.param(states)}::text[]))`
  const rows = await db
    .select({
      id: run.id,
      studyId: run.studyId,
      studyName: study.name,
      projectName: project.name,
      state: sql<OpenRun['state']>`${run.state}`,
      paused: sql<boolean>`${run.pausedAt} is not null`,
      plannedAt: run.plannedAt,
      startedAt: run.startedAt,
      points: run.points,
      done: sql<number>`coalesce(${runTally.points}, 0)`,
      waiting: jobs(['created', 'retry']),
      held: jobs(['active']),
      engineVersion: run.engineVersion,
      fault: run.fault,
    })
    .from(run)
    .innerJoin(study, eq(study.id, run.studyId))
    .innerJoin(project, eq(project.id, study.projectId))
    .leftJoin(runTally, eq(runTally.runId, run.id))
    .where(inArray(run.state, ['queued', 'running', 'failed']))
    .orderBy(sql`${run.state} = 'failed'`, desc(run.plannedAt))
    .limit(limit)
  return rows
}

/** Asks a worker to finish what it holds, take nothing more, and end. */
export async function drainWorker(workerId: string, acting: Acting): Promise<void> {
  await db.transaction(async (tx) => {
    const [asked] = await tx
      .update(worker)
      .set({ drainRequestedAt: sql`coalesce(${worker.drainRequestedAt}, now())` })
      .where(eq(worker.id, workerId))
      .returning()
    if (!asked) throw new AppError('not-found', 'There is no such worker; it has ended.')
    await recordAct(tx, acting, {
      act: 'worker.drain',
      subject: 'worker',
      subjectId: workerId,
      projectId: null,
      after: { host: asked.host, processId: asked.processId },
    })
  })
}
