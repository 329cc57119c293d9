// Telling people: a notice in the application, and an e-mail for those who chose it, written in the transaction of
// what they tell of.
import { and, count, desc, eq, inArray, isNull, ne, sql } from 'drizzle-orm'
import { db, type Queryable } from '#app/db.server.ts'
import { composeMail } from '#app/modules/mail/letter.ts'
import { queueMail } from '#app/modules/mail/outbox.server.ts'
import { type NoticeKind, notice, type Person, person, projectMember } from '#drizzle/schema/index.ts'

export type Happening = {
  kind: NoticeKind
  /** Names what happened, once and for all: telling it again tells nobody twice. */
  key: string
  projectId: string | null
  /** One sentence; the e-mail's subject and first line too. */
  sentence: string
  /** Where to look, from the root. */
  href: string
  /** More for the e-mail: what was written, figures. */
  details?: readonly string[]
  /** Minutes that a run took; people choose from how many on they are told by e-mail. */
  minutes?: number
}

/** Tells people who may sign in; whoever is removed hears nothing. */
export async function tell(tx: Queryable, happening: Happening, personIds: readonly string[]): Promise<void> {
  if (personIds.length === 0) return
  const people = await tx
    .select()
    .from(person)
    .where(and(inArray(person.id, [...new Set(personIds)]), isNull(person.removedAt)))
  for (const each of people) {
    const key = `${happening.key}/${each.id}`
    await tx
      .insert(notice)
      .values({
        personId: each.id,
        projectId: happening.projectId,
        kind: happening.kind,
        sentence: happening.sentence,
        href: happening.href,
        happening: key,
      })
      .onConflictDoNothing()
    if (wantsMail(each, happening))
      await queueMail(tx, { key, kind: happening.kind, personId: each.id }, composeMail(happening))
  }
}

function wantsMail(to: Person, { kind, minutes }: Happening): boolean {
  switch (kind) {
    case 'runEnded':
      return to.mailRunMinutes !== null && (minutes ?? 0) >= to.mailRunMinutes
    case 'mention':
      return to.mailMentions
    default:
      return to.mailReviews
  }
}

/** Members of a project who may accept, but for one person. */
export async function leadsOf(tx: Queryable, projectId: string, except: string | null): Promise<string[]> {
  const rows = await tx
    .select({ id: person.id })
    .from(projectMember)
    .innerJoin(person, eq(person.id, projectMember.personId))
    .where(
      and(
        eq(projectMember.projectId, projectId),
        inArray(person.role, ['lead', 'administrator']),
        except === null ? undefined : ne(person.id, except),
      ),
    )
  return rows.map(({ id }) => id)
}

/**
 * What a person was told, latest first. A notice of a project that they have left is not theirs any more.
 */
export async function listNotices(personId: string, limit = 50) {
  return db
    .select({
      id: notice.id,
      kind: notice.kind,
      sentence: notice.sentence,
      href: notice.href,
      at: notice.at,
      readAt: notice.readAt,
    })
    .from(notice)
    .where(visibleTo(personId))
    .orderBy(desc(notice.at), desc(notice.id))
    .limit(limit)
}

export async function unreadNotices(personId: string): Promise<number> {
  const [{ n }] = await db
    .select({ n: count() })
    .from(notice)
    .where(and(visibleTo(personId), isNull(notice.readAt)))
  return n
}

/** Marks one notice as read, or all of them. */
export async function markRead(personId: string, noticeId?: string): Promise<void> {
  await db
    .update(notice)
    .set({ readAt: sql`now()` })
    .where(
      and(
        eq(notice.personId, personId),
        isNull(notice.readAt),
        noticeId === undefined ? undefined : eq(notice.id, noticeId),
      ),
    )
}

const visibleTo = (personId: string) =>
  and(
    eq(notice.personId, personId),
    sql`(${notice.projectId} is null or exists (select from ${projectMember}
      where ${projectMember.projectId} = ${notice.projectId} and ${projectMember.personId} = ${personId}))`,
  )
