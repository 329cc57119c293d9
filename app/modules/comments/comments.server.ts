// Comments on a study or on a saved comparison.
import { and, asc, eq, isNull, type SQL, sql } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { AppError } from '#app/http/errors.ts'
import { isId } from '#app/http/ids.ts'
import { type Acting, recordAct } from '#app/modules/audit/audit.server.ts'
import { tell } from '#app/modules/notices/notices.server.ts'
import { listMembers } from '#app/modules/projects/projects.server.ts'
import { comment, comparison, person, study } from '#drizzle/schema/index.ts'
import { mentionsIn, type Piece } from './mentions.ts'

export type Subject = { studyId: string } | { comparisonId: string }

const LONGEST = 4000

export type ListedComment = {
  id: string
  writtenBy: string
  name: string
  writtenAt: string
  /** Null: withdrawn by its writer. */
  pieces: Piece[] | null
}

export async function listComments(subject: Subject, projectId: string): Promise<ListedComment[]> {
  const [rows, members] = await Promise.all([
    db
      .select({
        id: comment.id,
        body: comment.body,
        writtenBy: comment.writtenBy,
        name: person.name,
        writtenAt: comment.writtenAt,
        withdrawnAt: comment.withdrawnAt,
      })
      .from(comment)
      .innerJoin(person, eq(person.id, comment.writtenBy))
      .where(about(subject))
      .orderBy(asc(comment.writtenAt), asc(comment.id)),
    listMembers(projectId),
  ])
  return rows.map(({ body, writtenAt, withdrawnAt, ...row }) => ({
    ...row,
    writtenAt: writtenAt.toISOString(),
    pieces: withdrawnAt ? null : mentionsIn(body, members),
  }))
}

/** Adds a comment and tells the members whom it mentions. */
export async function addComment(
  subject: Subject,
  projectId: string,
  text: string,
  acting: Acting & { personId: string },
): Promise<void> {
  const body = text.replace(/\r\n?/g, '\n').trim()
  if (body === '' || body.length > LONGEST || /\0|\p{Cs}/u.test(body))
    throw new AppError('invalid', `Comment: write 1 to ${LONGEST} characters, all of which can be shown.`)
  const members = await listMembers(projectId)
  const mentioned = mentionsIn(body, members).flatMap(({ person: id }) => id ?? [])
  await db.transaction(async (tx) => {
    const { name, href } = await subjectOf(tx, subject, projectId)
    const [made] = await tx
      .insert(comment)
      .values({ ...subject, projectId, body, writtenBy: acting.personId })
      .returning({ id: comment.id })
    await recordAct(tx, acting, {
      act: 'comment.add',
      subject: 'comment',
      subjectId: made.id,
      projectId,
      after: { ...subject, body },
    })
    await tell(
      tx,
      {
        kind: 'mention',
        key: `comment/${made.id}`,
        projectId,
        sentence: `${acting.name} mentioned you in a comment on “${name}”`,
        href: `${href}#comment-${made.id}`,
        details: [body],
      },
      mentioned.filter((id) => id !== acting.personId),
    )
  })
}

/** Takes one's own comment back: its place and time stay, its words are not shown any more. */
export async function withdrawComment(
  commentId: string,
  projectId: string,
  acting: Acting & { personId: string },
): Promise<void> {
  if (!isId(commentId)) throw missing()
  await db.transaction(async (tx) => {
    const [gone] = await tx
      .update(comment)
      .set({ withdrawnAt: sql`now()` })
      .where(
        and(
          eq(comment.id, commentId),
          eq(comment.projectId, projectId),
          eq(comment.writtenBy, acting.personId),
          isNull(comment.withdrawnAt),
        ),
      )
      .returning({ id: comment.id })
    if (!gone) throw missing()
    await recordAct(tx, acting, {
      act: 'comment.withdraw',
      subject: 'comment',
      subjectId: commentId,
      projectId,
    })
  })
}

const missing = () => new AppError('not-found', 'There is no such comment of yours.')

function about(subject: Subject): SQL {
  return 'studyId' in subject
    ? eq(comment.studyId, subject.studyId)
    : eq(comment.comparisonId, subject.comparisonId)
}

async function subjectOf(tx: Pick<typeof db, 'select'>, subject: Subject, projectId: string) {
  const [found] =
    'studyId' in subject
      ? await tx
          .select({ name: study.name })
          .from(study)
          .where(and(eq(study.id, subject.studyId), eq(study.projectId, projectId)))
      : await tx
          .select({ name: comparison.name })
          .from(comparison)
          .where(and(eq(comparison.id, subject.comparisonId), eq(comparison.projectId, projectId)))
  if (!found) throw new AppError('not-found', 'What the comment is about is not there any more.')
  const href =
    'studyId' in subject
      ? `/studies/${subject.studyId}/decide`
      : `/projects/${projectId}/compare?saved=${subject.comparisonId}`
  return { name: found.name, href }
}
