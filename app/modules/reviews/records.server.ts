// Accepted records and a project's baseline. Both are append-only by the database's own means.
import { and, desc, eq, max, sql } from 'drizzle-orm'
import { db, type Queryable } from '#app/db.server.ts'
import { AppError } from '#app/http/errors.ts'
import { isId } from '#app/http/ids.ts'
import { type Acting, recordAct } from '#app/modules/audit/audit.server.ts'
import { keyResultOf, limitStandings } from '#app/modules/explore/limits.ts'
import { sheetCards } from '#app/modules/explore/method-cards.server.ts'
import { caseNames } from '#app/modules/explore/names.server.ts'
import { planOfRevision } from '#app/modules/runs/run-plan.server.ts'
import {
  acceptedRecord,
  baseline,
  person,
  project,
  type Review,
  run,
  study,
  studyRevision,
} from '#drizzle/schema/index.ts'
import { chosenPoint } from './chosen-point.server.ts'
import { hashOfContent, type RecordContent } from './record.server.ts'

/** Keeps what an accepted review was about, whole, and makes it the project's baseline. */
export async function keepRecord(
  tx: Queryable,
  accepted: Review,
  acting: Acting & { personId: string },
): Promise<{ id: string; number: number }> {
  // Numbers of a project are given one after the other.
  const [of] = await tx
    .select({ id: project.id, name: project.name, invented: project.invented })
    .from(project)
    .where(eq(project.id, accepted.projectId))
    .for('update')
  const [from] = await tx
    .select({ run, revision: studyRevision, studyName: study.name, startedBy: person.name })
    .from(run)
    .innerJoin(studyRevision, eq(studyRevision.id, run.revisionId))
    .innerJoin(study, eq(study.id, run.studyId))
    .leftJoin(person, eq(person.id, run.requestedBy))
    .where(eq(run.id, accepted.runId))
  const signedBy = async (personId: string, at: Date) => {
    const [{ name, email }] = await tx
      .select({ name: person.name, email: person.email })
      .from(person)
      .where(eq(person.id, personId))
    return { personId, name, email, at: at.toISOString() }
  }
  const [{ last }] = await tx
    .select({ last: max(acceptedRecord.number) })
    .from(acceptedRecord)
    .where(eq(acceptedRecord.projectId, accepted.projectId))
  const number = (last ?? 0) + 1
  const [plan, chosen] = await Promise.all([
    planOfRevision(from.revision.id),
    chosenPoint(accepted.runId, accepted.point),
  ])
  const content: RecordContent = {
    number,
    project: of,
    study: {
      id: accepted.studyId,
      name: from.studyName,
      revision: from.revision.number,
      definition: from.revision.definition,
    },
    run: {
      id: from.run.id,
      points: from.run.points,
      plannedAt: from.run.plannedAt.toISOString(),
      endedAt: from.run.endedAt?.toISOString() ?? null,
      engineVersion: from.run.engineVersion,
      contentHash: from.run.contentHash,
      startedBy: from.startedBy,
    },
    point: accepted.point,
    isBest: accepted.point === from.run.bestPoint,
    objective: plan.study.objective,
    case: chosen.case,
    names: caseNames(chosen.case),
    result: chosen.result,
    band: chosen.band,
    standings: limitStandings(plan.study.limits, (id) => keyResultOf(chosen.result, id)),
    methods: sheetCards(chosen.case, chosen.result),
    asked: { ...(await signedBy(accepted.askedBy, accepted.askedAt)), note: accepted.note },
    accepted: {
      ...(await signedBy(acting.personId, accepted.answeredAt as Date)),
      reason: accepted.reason,
    },
  }
  const plain = JSON.parse(JSON.stringify(content)) as Record<string, unknown>
  const [made] = await tx
    .insert(acceptedRecord)
    .values({
      number,
      projectId: accepted.projectId,
      studyId: accepted.studyId,
      revisionId: from.revision.id,
      runId: accepted.runId,
      reviewId: accepted.id,
      content: plain,
      contentHash: hashOfContent(plain),
      acceptedBy: acting.personId,
    })
    .returning({ id: acceptedRecord.id, number: acceptedRecord.number })
  await recordAct(tx, acting, {
    act: 'record.keep',
    subject: 'record',
    subjectId: made.id,
    projectId: accepted.projectId,
    after: { number, study: from.studyName, contentHash: hashOfContent(plain) },
  })
  await appendBaseline(tx, accepted.projectId, made, acting)
  return made
}

async function appendBaseline(
  tx: Queryable,
  projectId: string,
  record: { id: string; number: number },
  acting: Acting & { personId: string },
): Promise<void> {
  const [before] = await tx
    .select({ number: baseline.number, recordId: baseline.recordId })
    .from(baseline)
    .where(eq(baseline.projectId, projectId))
    .orderBy(desc(baseline.number))
    .limit(1)
  await tx.insert(baseline).values({
    projectId,
    number: (before?.number ?? 0) + 1,
    recordId: record.id,
    setBy: acting.personId,
  })
  await recordAct(tx, acting, {
    act: 'project.setBaseline',
    subject: 'record',
    subjectId: record.id,
    projectId,
    before: before ? { record: before.recordId } : undefined,
    after: { record: record.id, number: record.number },
  })
}

/** Makes an earlier record of the project its baseline again. */
export async function setBaseline(
  projectId: string,
  recordId: string,
  acting: Acting & { personId: string },
): Promise<void> {
  if (!isId(recordId)) throw missing()
  await db.transaction(async (tx) => {
    await tx.select({ id: project.id }).from(project).where(eq(project.id, projectId)).for('update')
    const [record] = await tx
      .select({ id: acceptedRecord.id, number: acceptedRecord.number })
      .from(acceptedRecord)
      .where(and(eq(acceptedRecord.id, recordId), eq(acceptedRecord.projectId, projectId)))
    if (!record) throw missing()
    if ((await baselineOf(projectId, tx))?.id === recordId)
      throw new AppError('conflict', `Record ${record.number} is the baseline already.`)
    await appendBaseline(tx, projectId, record, acting)
  })
}

const missing = () => new AppError('not-found', 'There is no such record in this project.')

const summary = {
  id: acceptedRecord.id,
  number: acceptedRecord.number,
  studyId: acceptedRecord.studyId,
  studyName: sql<string>`${acceptedRecord.content}->'study'->>'name'`,
  objective: sql<string>`${acceptedRecord.content}->>'objective'`,
  acceptedBy: sql<string>`${acceptedRecord.content}->'accepted'->>'name'`,
  acceptedAt: acceptedRecord.acceptedAt,
  area: sql<number | null>`(${acceptedRecord.content}->'result'->>'outsideArea')::float8`,
}

/** The record that later studies of the project are measured against. */
export async function baselineOf(projectId: string, tx: Queryable = db) {
  const [found] = await tx
    .select({ ...summary, content: acceptedRecord.content })
    .from(baseline)
    .innerJoin(acceptedRecord, eq(acceptedRecord.id, baseline.recordId))
    .where(eq(baseline.projectId, projectId))
    .orderBy(desc(baseline.number))
    .limit(1)
  return found ? { ...found, content: found.content as unknown as RecordContent } : null
}

/** A project's records, the latest first. */
export async function listRecords(projectId: string) {
  return db
    .select(summary)
    .from(acceptedRecord)
    .where(eq(acceptedRecord.projectId, projectId))
    .orderBy(desc(acceptedRecord.number))
}

export async function getRecord(projectId: string, recordId: string) {
  if (!isId(recordId)) throw missing()
  const [found] = await db
    .select({
      id: acceptedRecord.id,
      content: acceptedRecord.content,
      contentHash: acceptedRecord.contentHash,
    })
    .from(acceptedRecord)
    .where(and(eq(acceptedRecord.id, recordId), eq(acceptedRecord.projectId, projectId)))
  if (!found) throw missing()
  return {
    id: found.id,
    contentHash: found.contentHash,
    /** False: the stored content is not what was accepted. */
    intact: hashOfContent(found.content) === found.contentHash,
    content: found.content as unknown as RecordContent,
  }
}
