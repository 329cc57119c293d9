// Reviews: a finished run with a chosen point is put before the leads, who accept it or return it with a reason.
import { and, desc, eq, inArray, sql } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import { db, type Queryable } from '#app/db.server.ts'
import { AppError } from '#app/http/errors.ts'
import { isId } from '#app/http/ids.ts'
import { type Acting, recordAct } from '#app/modules/audit/audit.server.ts'
import { leadsOf, tell } from '#app/modules/notices/notices.server.ts'
import { trimmedTo } from '#app/modules/stored-text.ts'
import { person, pointResult, type Review, review, run, study } from '#drizzle/schema/index.ts'
import { formatQuantity } from '#engine/units.ts'
import { chosenPoint } from './chosen-point.server.ts'
import { keepRecord } from './records.server.ts'

type Person = Acting & { personId: string }

const LONGEST = 4000

/** "refined" or a point's number, as pages write it. */
export function readPoint(text: string): number | null {
  if (text === 'refined') return null
  if (/^\d{1,7}$/.test(text)) return Number(text)
  throw new AppError('invalid', 'Point: choose one of the run’s points, or the refined one.')
}

/** Asks for a review; the chosen point's full result is stored with the run at once. */
export async function askReview(
  studyId: string,
  asked: { runId: string; point: number | null; note: string },
  acting: Person,
): Promise<string> {
  if (!isId(asked.runId)) throw new AppError('not-found', 'This study has no such run.')
  const [of] = await db
    .select({ state: run.state, projectId: study.projectId, name: study.name, archivedAt: study.archivedAt })
    .from(run)
    .innerJoin(study, eq(study.id, run.studyId))
    .where(and(eq(run.id, asked.runId), eq(run.studyId, studyId)))
  if (!of) throw new AppError('not-found', 'This study has no such run.')
  if (of.archivedAt) throw new AppError('conflict', 'The study is archived; restore it before asking.')
  if (of.state !== 'done')
    throw new AppError(
      'conflict',
      `The run is ${of.state}; a review rests on a finished run. Let it end first.`,
    )
  const chosen = await chosenPoint(asked.runId, asked.point)
  const area = chosen.result.outsideArea
  if (area === null)
    throw new AppError('invalid', 'Point: it has no result to decide on; choose one that was evaluated.')
  return db.transaction(async (tx) => {
    const [made] = await tx
      .insert(review)
      .values({
        projectId: of.projectId,
        studyId,
        runId: asked.runId,
        point: asked.point,
        note: trimmedTo(asked.note.replace(/\r\n?/g, '\n'), LONGEST),
        askedBy: acting.personId,
      })
      .onConflictDoNothing()
      .returning()
    if (!made) throw new AppError('conflict', 'A review of this study is open already; withdraw it first.')
    if (asked.point !== null)
      await tx
        .insert(pointResult)
        .values({
          runId: asked.runId,
          kind: 'submitted',
          point: asked.point,
          engineVersion: chosen.result.engineVersion,
          case: chosen.case as unknown as Record<string, unknown>,
          result: chosen.result as unknown as Record<string, unknown>,
          band: chosen.band as unknown as Record<string, unknown> | null,
        })
        .onConflictDoNothing()
    await recordAct(tx, acting, {
      act: 'review.ask',
      subject: 'study',
      subjectId: studyId,
      projectId: of.projectId,
      after: { review: made.id, run: asked.runId, point: asked.point ?? 'refined', note: made.note },
    })
    await tell(
      tx,
      {
        kind: 'reviewAsked',
        key: `review/${made.id}/asked`,
        projectId: of.projectId,
        sentence: `${acting.name} asks for a review of “${of.name}”: ${formatQuantity(area, 'area', 'si', { digits: 3 })}`,
        href: `/studies/${studyId}/decide`,
        details: made.note ? [made.note] : [],
      },
      await leadsOf(tx, of.projectId, acting.personId),
    )
    return made.id
  })
}

export async function withdrawReview(studyId: string, acting: Person): Promise<void> {
  await db.transaction(async (tx) => {
    const open = await lockOpen(tx, studyId)
    if (open.askedBy !== acting.personId)
      throw new AppError('conflict', 'Only who asked for the review can withdraw it; a lead can return it.')
    await answer(tx, open, 'withdrawn', '', acting)
  })
}

/** Returns what was asked for, with the reason. */
export async function returnReview(studyId: string, reason: string, acting: Person): Promise<void> {
  const words = trimmedTo(reason.replace(/\r\n?/g, '\n'), LONGEST)
  if (words === '') throw new AppError('invalid', 'Reason: say what should change before it can be accepted.')
  await db.transaction(async (tx) => {
    const open = await lockOpen(tx, studyId)
    await answer(tx, open, 'returned', words, acting)
    await tellAnswer(tx, open, 'returned', words, acting)
  })
}

/** Accepts what was asked for: the record is kept for good and becomes the project's baseline. */
export async function acceptReview(studyId: string, reason: string, acting: Person): Promise<string> {
  const words = trimmedTo(reason.replace(/\r\n?/g, '\n'), LONGEST)
  return db.transaction(async (tx) => {
    const open = await lockOpen(tx, studyId)
    const answered = await answer(tx, open, 'accepted', words, acting)
    const record = await keepRecord(tx, answered, acting)
    await tellAnswer(tx, open, 'accepted', words, acting, record.id)
    return record.id
  })
}

async function lockOpen(tx: Queryable, studyId: string): Promise<Review> {
  const [open] = await tx
    .select()
    .from(review)
    .where(and(eq(review.studyId, studyId), eq(review.state, 'asked')))
    .for('update')
  if (!open)
    throw new AppError('conflict', 'No review of this study is open any more; reload to see how it ended.')
  return open
}

async function answer(
  tx: Queryable,
  open: Review,
  state: 'accepted' | 'returned' | 'withdrawn',
  reason: string,
  acting: Person,
): Promise<Review> {
  const [answered] = await tx
    .update(review)
    .set({ state, reason, answeredBy: acting.personId, answeredAt: sql`now()` })
    .where(eq(review.id, open.id))
    .returning()
  await recordAct(tx, acting, {
    act: `review.${state === 'accepted' ? 'accept' : state === 'returned' ? 'return' : 'withdraw'}`,
    subject: 'study',
    subjectId: open.studyId,
    projectId: open.projectId,
    before: { review: open.id, state: 'asked' },
    after: { state, reason },
  })
  return answered
}

async function tellAnswer(
  tx: Queryable,
  open: Review,
  state: 'accepted' | 'returned',
  reason: string,
  acting: Person,
  recordId?: string,
): Promise<void> {
  const [{ name }] = await tx.select({ name: study.name }).from(study).where(eq(study.id, open.studyId))
  await tell(
    tx,
    {
      kind: 'reviewAnswered',
      key: `review/${open.id}/${state}`,
      projectId: open.projectId,
      sentence:
        state === 'accepted'
          ? `${acting.name} accepted “${name}”`
          : `${acting.name} returned “${name}” with a reason`,
      href: recordId ? `/projects/${open.projectId}/records/${recordId}` : `/studies/${open.studyId}/decide`,
      details: reason ? [reason] : [],
    },
    open.askedBy === acting.personId ? [] : [open.askedBy],
  )
}

const asker = alias(person, 'asker')
const answerer = alias(person, 'answerer')

/** Reviews of some studies, the latest first. */
async function listed(where: ReturnType<typeof eq>) {
  const rows = await db
    .select({
      id: review.id,
      studyId: review.studyId,
      studyName: study.name,
      runId: review.runId,
      point: review.point,
      note: review.note,
      state: review.state,
      askedBy: review.askedBy,
      askedByName: asker.name,
      askedAt: review.askedAt,
      answeredByName: answerer.name,
      answeredAt: review.answeredAt,
      reason: review.reason,
      recordId: sql<string | null>`(select r.id from accepted_record r where r.review_id = ${review.id})`,
    })
    .from(review)
    .innerJoin(study, eq(study.id, review.studyId))
    .innerJoin(asker, eq(asker.id, review.askedBy))
    .leftJoin(answerer, eq(answerer.id, review.answeredBy))
    .where(where)
    .orderBy(desc(review.askedAt))
    .limit(100)
  return rows.map(({ askedAt, answeredAt, ...row }) => ({
    ...row,
    askedAt: askedAt.toISOString(),
    answeredAt: answeredAt?.toISOString() ?? null,
  }))
}

export type ListedReview = Awaited<ReturnType<typeof listed>>[number]

export const reviewsOfStudy = (studyId: string) => listed(eq(review.studyId, studyId))

export const openReviews = (projectId: string) =>
  listed(and(eq(review.projectId, projectId), eq(review.state, 'asked')) as ReturnType<typeof eq>)

/** The state of each study's latest review, for lists of studies. */
export async function reviewStates(studyIds: readonly string[]): Promise<Map<string, Review['state']>> {
  if (studyIds.length === 0) return new Map()
  const rows = await db
    .selectDistinct({ studyId: review.studyId, state: review.state, askedAt: review.askedAt })
    .from(review)
    .where(inArray(review.studyId, [...studyIds]))
    .orderBy(review.askedAt)
  return new Map(rows.map(({ studyId, state }) => [studyId, state]))
}
