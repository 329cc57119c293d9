// Runs of studies: planned here, computed by workers (app/jobs), immutable once they have ended.
import { and, desc, eq, getTableColumns, inArray, sql } from 'drizzle-orm'
import { db, type Queryable } from '#app/db.server.ts'
import { AppError } from '#app/http/errors.ts'
import { enqueueChunks, enqueueFinish, queue, queuedChunks, withdrawChunks } from '#app/jobs/queue.server.ts'
import { type Acting, recordAct } from '#app/modules/audit/audit.server.ts'
import { tellRunEnded } from '#app/modules/notices/run-ended.server.ts'
import { person, type Run, run, runChunk, runTally, study, studyRevision } from '#drizzle/schema/index.ts'
import { ENGINE_VERSION } from '#engine/version.ts'
import { chunkCount, chunkPointsFor } from './chunks.ts'
import { measurePointCost, planOfRevision } from './run-plan.server.ts'

const OPEN: Run['state'][] = ['queued', 'running']

/**
 * Plans a run of a kept revision and queues all its chunks, in one transaction. Chunks are cut by the measured cost of
 * a point unless their size is given.
 */
export async function startRun(
  studyId: string,
  revisionId: string,
  acting: Acting,
  options: { chunkPoints?: number } = {},
): Promise<Run> {
  const [revision] = await db
    .select({ id: studyRevision.id, number: studyRevision.number })
    .from(studyRevision)
    .where(and(eq(studyRevision.id, revisionId), eq(studyRevision.studyId, studyId)))
  if (!revision) throw new AppError('not-found', 'There is no such revision of this study.')
  const plan = await planOfRevision(revisionId)
  const chunkPoints = options.chunkPoints ?? chunkPointsFor(measurePointCost(plan), plan.points)
  await queue()
  return db.transaction(async (tx) => {
    const [owner] = await tx
      .select({ projectId: study.projectId, archivedAt: study.archivedAt })
      .from(study)
      .where(eq(study.id, studyId))
      .for('share')
    if (owner.archivedAt)
      throw new AppError('conflict', 'The study is archived; restore it before running it.')
    const [planned] = await tx
      .insert(run)
      .values({
        studyId,
        revisionId,
        engineVersion: ENGINE_VERSION,
        points: plan.points,
        chunkPoints,
        requestedBy: acting.personId,
      })
      .returning()
    await tx.insert(runTally).values({ runId: planned.id })
    await tx.execute(sql`select ensure_point_column_partition(${planned.plannedOn}::date)`)
    await enqueueChunks(tx, planned, Array(chunkCount(planned)).keys())
    await recordAct(tx, acting, {
      act: 'run.start',
      subject: 'run',
      subjectId: planned.id,
      projectId: owner.projectId,
      after: { studyId, revision: revision.number, points: plan.points, engineVersion: ENGINE_VERSION },
    })
    return planned
  })
}

/** Runs the same revision again, as a new run with the present engine. */
export async function runAgain(runId: string, acting: Acting): Promise<Run> {
  const earlier = await getRun(runId)
  return startRun(earlier.studyId, earlier.revisionId, acting)
}

/** Ends a run for good; what is stored stays and can be explored. */
export async function cancelRun(runId: string, acting: Acting): Promise<Run> {
  return change(runId, acting, 'run.cancel', async (tx, open) => {
    await withdrawChunks(tx, open)
    const best = await bestStored(tx, runId)
    return { state: 'cancelled', endedAt: new Date(), pausedAt: null, bestPoint: best }
  })
}

/** Holds a run: chunks under way are stored, no further ones are taken until it is resumed. */
export async function pauseRun(runId: string, acting: Acting): Promise<Run> {
  return change(runId, acting, 'run.pause', async (tx, open) => {
    if (open.pausedAt) throw new AppError('conflict', 'The run is paused already.')
    await withdrawChunks(tx, open)
    return { pausedAt: new Date() }
  })
}

export async function resumeRun(runId: string, acting: Acting): Promise<Run> {
  return change(runId, acting, 'run.resume', async (tx, open) => {
    if (!open.pausedAt) throw new AppError('conflict', 'The run is not paused.')
    await enqueueChunks(tx, open, await missingChunks(tx, open))
    return { pausedAt: null }
  })
}

async function change(
  runId: string,
  acting: Acting,
  act: string,
  work: (tx: Queryable, open: Run) => Promise<Partial<Run>>,
): Promise<Run> {
  await queue()
  return db.transaction(async (tx) => {
    const [open] = await tx.select().from(run).where(eq(run.id, runId)).for('no key update')
    if (!open) throw new AppError('not-found', 'There is no such run.')
    if (!OPEN.includes(open.state))
      throw new AppError('conflict', `The run has ended already: it is ${open.state}.`)
    const changes = await work(tx, open)
    const [changed] = await tx.update(run).set(changes).where(eq(run.id, runId)).returning()
    const [owner] = await tx
      .select({ projectId: study.projectId })
      .from(study)
      .where(eq(study.id, open.studyId))
    await recordAct(tx, acting, {
      act,
      subject: 'run',
      subjectId: runId,
      projectId: owner.projectId,
      before: { state: open.state, paused: open.pausedAt !== null },
      after: { state: changed.state, paused: changed.pausedAt !== null },
    })
    return changed
  })
}

/** Chunks that are neither stored nor queued nor held. */
async function missingChunks(tx: Queryable, open: Run): Promise<number[]> {
  const stored = await tx.select({ chunk: runChunk.chunk }).from(runChunk).where(eq(runChunk.runId, open.id))
  const taken = await queuedChunks(tx, open)
  for (const { chunk } of stored) taken.add(chunk)
  return [...Array(chunkCount(open)).keys()].filter((chunk) => !taken.has(chunk))
}

/** The least objective among stored points that meet every limit; of equals, the lowest point. */
export async function bestStored(tx: Queryable, runId: string): Promise<number | null> {
  const [stored] = await tx
    .select({ point: runTally.bestPoint })
    .from(runTally)
    .where(eq(runTally.runId, runId))
  return stored?.point ?? null
}

/** Gives a run up; for people, `fault` says why. */
export async function failRun(runId: string, fault: string): Promise<void> {
  await db.transaction(async (tx) => {
    const [failed] = await tx
      .update(run)
      .set({ state: 'failed', fault, endedAt: new Date(), pausedAt: null })
      .where(and(eq(run.id, runId), inArray(run.state, OPEN)))
      .returning()
    if (!failed) return
    await withdrawChunks(tx, failed)
    await tellRunEnded(tx, runId)
  })
}

/** Puts an administrator's retry on a run that failed: what is stored stays, what is missing is queued again. */
export async function retryRun(runId: string, acting: Acting): Promise<Run> {
  await queue()
  return db.transaction(async (tx) => {
    const [failed] = await tx.select().from(run).where(eq(run.id, runId)).for('no key update')
    if (!failed) throw new AppError('not-found', 'There is no such run.')
    if (failed.state !== 'failed') throw new AppError('conflict', `The run is ${failed.state}, not failed.`)
    if (failed.engineVersion !== ENGINE_VERSION)
      throw new AppError(
        'conflict',
        `The run was planned with engine ${failed.engineVersion} and this is ${ENGINE_VERSION}; run it again as a new run.`,
      )
    const missing = await missingChunks(tx, failed)
    if (missing.length > 0) await enqueueChunks(tx, failed, missing)
    else await enqueueFinish(tx, failed)
    const [reopened] = await tx
      .update(run)
      .set({ state: 'running', fault: null, endedAt: null })
      .where(eq(run.id, runId))
      .returning()
    await recordAct(tx, acting, {
      act: 'run.retry',
      subject: 'run',
      subjectId: runId,
      projectId: null,
      before: { state: 'failed', fault: failed.fault },
      after: { state: 'running' },
    })
    return reopened
  })
}

export async function getRun(runId: string): Promise<Run> {
  const [found] = await db.select().from(run).where(eq(run.id, runId))
  if (!found) throw new AppError('not-found', 'There is no such run.')
  return found
}

export type RunListing = Run & { revision: number; requestedByName: string | null; done: number }

/** A study's runs, latest first. */
export async function listRuns(studyId: string, limit = 50): Promise<RunListing[]> {
  return db
    .select({
      ...getTableColumns(run),
      revision: studyRevision.number,
      requestedByName: person.name,
      done: sql<number>`coalesce(${runTally.points}, 0)`,
    })
    .from(run)
    .innerJoin(studyRevision, eq(studyRevision.id, run.revisionId))
    .leftJoin(person, eq(person.id, run.requestedBy))
    .leftJoin(runTally, eq(runTally.runId, run.id))
    .where(eq(run.studyId, studyId))
    .orderBy(desc(run.plannedAt), desc(run.id))
    .limit(limit)
}

/** The run to open a study with: the latest, whatever its state. */
export async function latestRun(studyId: string): Promise<Run | null> {
  const [latest] = await db
    .select()
    .from(run)
    .where(eq(run.studyId, studyId))
    .orderBy(desc(run.plannedAt), desc(run.id))
    .limit(1)
  return latest ?? null
}
