// E-mail on its way out. Queued in the transaction of what it tells of; sent by a web process, again where it failed.
import { createHmac, timingSafeEqual } from 'node:crypto'
import { eq, sql } from 'drizzle-orm'
import { createTransport, type Transporter } from 'nodemailer'
import { db, type Queryable } from '#app/db.server.ts'
import { env } from '#app/env.server.ts'
import { type Letter, mailOutbox, type NoticeKind, person } from '#drizzle/schema/index.ts'
import { writeOut } from './letter.ts'

const STOPS: Record<NoticeKind, string> = {
  runEnded: 'runs',
  reviewAsked: 'reviews',
  reviewAnswered: 'reviews',
  mention: 'mentions',
}

export async function queueMail(
  tx: Queryable,
  about: { key: string; kind: NoticeKind; personId: string },
  letter: Letter,
): Promise<void> {
  await tx
    .insert(mailOutbox)
    .values({ happening: about.key, kind: about.kind, personId: about.personId, letter })
    .onConflictDoNothing()
}

/** What a link in an e-mail may switch off without signing in: one kind, for its receiver. */
export function stopToken(personId: string, kind: NoticeKind): string {
  return `${personId}.${kind}.${signature(personId, kind)}`
}

export function readStopToken(token: string): { personId: string; kind: NoticeKind; stops: string } | null {
  const [personId, kind, signed, ...rest] = token.split('.')
  if (rest.length > 0 || signed === undefined || !Object.hasOwn(STOPS, kind)) return null
  const expected = Buffer.from(signature(personId, kind))
  const given = Buffer.from(signed)
  if (expected.length !== given.length || !timingSafeEqual(expected, given)) return null
  return { personId, kind: kind as NoticeKind, stops: STOPS[kind as NoticeKind] }
}

const signature = (personId: string, kind: string) =>
  createHmac('sha256', env.SESSION_SECRET).update(`mail:${personId}.${kind}`).digest('base64url')

/** Minutes until the next attempt, by how many have failed; after the last the e-mail is given up. */
const AGAIN_MINUTES = [1, 5, 30, 120, 480]
/** An e-mail whose sender fell silent in the middle is taken up again after so long. */
const CLAIM_MINUTES = 5

/**
 * Sends what is due, one at a time; answers how many. Claimed by moving its due time in one statement, so that two
 * processes never send the same; a sender that dies between sending and marking sends once more with the same
 * Message-ID, by which receiving servers tell the copy.
 */
export async function sendDueMail(server: string | undefined = env.SMTP_URL): Promise<number> {
  if (!server) return 0
  const transport = createTransport(server, { from: env.MAIL_FROM })
  for (let sent = 0; ; sent++) {
    const { rows } = await db.execute<{ id: string; attempts: number }>(sql`
      update mail_outbox set attempts = attempts + 1, due_at = now() + make_interval(mins => ${CLAIM_MINUTES})
      where id = (
        select id from mail_outbox where sent_at is null and given_up_at is null and due_at <= now()
        order by due_at limit 1 for update skip locked)
      returning id, attempts`)
    if (rows.length === 0) return sent
    await send(rows[0].id, rows[0].attempts, transport)
  }
}

async function send(id: string, attempts: number, by: Transporter): Promise<void> {
  const [{ letter, kind, personId, queuedAt, email }] = await db
    .select({
      letter: mailOutbox.letter,
      kind: mailOutbox.kind,
      personId: mailOutbox.personId,
      queuedAt: mailOutbox.queuedAt,
      email: person.email,
    })
    .from(mailOutbox)
    .innerJoin(person, eq(person.id, mailOutbox.personId))
    .where(eq(mailOutbox.id, id))
  const baseUrl = env.BASE_URL
  const stopUrl = `${baseUrl}/mail/stop/${stopToken(personId, kind)}`
  try {
    await by.sendMail({
      to: email,
      subject: letter.subject,
      ...writeOut(letter, { baseUrl, stopUrl, stops: STOPS[kind] }),
      messageId: `<${id}@${new URL(baseUrl).hostname}>`,
      date: queuedAt,
      headers: { 'List-Unsubscribe': `<${stopUrl}>`, 'Auto-Submitted': 'auto-generated' },
      // What people typed stays text: nothing in it is read as a file or fetched.
      disableFileAccess: true,
      disableUrlAccess: true,
    })
    await db.update(mailOutbox).set({ sentAt: sql`now()`, fault: null }).where(eq(mailOutbox.id, id))
  } catch (error) {
    const wait = AGAIN_MINUTES[attempts - 1]
    await db
      .update(mailOutbox)
      .set({
        fault: (error as Error).message.slice(0, 500),
        ...(wait === undefined
          ? { givenUpAt: sql`now()` }
          : { dueAt: sql`now() + make_interval(mins => ${wait})` }),
      })
      .where(eq(mailOutbox.id, id))
  }
}
