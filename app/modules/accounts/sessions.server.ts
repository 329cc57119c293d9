// Sessions in PostgreSQL: begun at sign-in, looked up at every request, gone as soon as they are revoked.
import { and, desc, eq, gt, isNull, lt, ne, sql } from 'drizzle-orm'
import { db, type Queryable } from '#app/db.server.ts'
import type { Viewer } from '#app/http/context.ts'
import { person, session } from '#drizzle/schema/index.ts'
import { randomToken, tokenHash } from './secrets.server.ts'

/** Unused for so long a session ends; used, it lives on to the absolute limit. */
export const IDLE_SECONDS = 12 * 3600
export const LONGEST_SECONDS = 14 * 24 * 3600
/** A session's last use is written at most this often. */
const TOUCH_SECONDS = 60

/** Begins a session for a person; the token goes to the browser and nowhere else. Expired ones are cleared away. */
export async function beginSession(
  personId: string,
  { userAgent, idToken }: { userAgent: string; idToken?: string },
  tx: Queryable = db,
): Promise<string> {
  const token = randomToken()
  await tx.delete(session).where(lt(session.expiresAt, sql`now()`))
  await tx.insert(session).values({
    idHash: tokenHash('session', token),
    personId,
    expiresAt: sql`now() + make_interval(secs => ${IDLE_SECONDS})`,
    userAgent: userAgent.slice(0, 300),
    idToken,
  })
  return token
}

/** Asked at every request: parsed and planned once a connection. */
const openSession = db
  .select({
    personId: person.id,
    name: person.name,
    email: person.email,
    role: person.role,
    units: person.units,
    theme: person.theme,
    sessionId: session.publicId,
    stale: sql<boolean>`${session.seenAt} < now() - make_interval(secs => ${sql.raw(String(TOUCH_SECONDS))})`,
  })
  .from(session)
  .innerJoin(person, eq(person.id, session.personId))
  .where(
    and(
      eq(session.idHash, sql.placeholder('idHash')),
      isNull(session.revokedAt),
      gt(session.expiresAt, sql`now()`),
      isNull(person.removedAt),
    ),
  )
  .prepare('open_session')

/** The person a token stands for, with the role they have now; null when it stands for nobody any more. */
export async function viewerOfSession(token: string): Promise<Viewer | null> {
  const idHash = tokenHash('session', token)
  const [row] = await openSession.execute({ idHash })
  if (!row?.role) return null
  const { stale, role, ...viewer } = row
  if (stale) {
    await db
      .update(session)
      .set({
        seenAt: sql`now()`,
        expiresAt: sql`least(now() + make_interval(secs => ${IDLE_SECONDS}), ${session.createdAt} + make_interval(secs => ${LONGEST_SECONDS}))`,
      })
      .where(eq(session.idHash, idHash))
  }
  return { ...viewer, role }
}

/** Ends the session of a token, if it is open; the provider's ID token is for signing out there too. */
export async function endSession(
  token: string,
  tx: Queryable = db,
): Promise<{ personId: string; idToken: string | null } | null> {
  const [ended] = await tx
    .update(session)
    .set({ revokedAt: sql`now()` })
    .where(and(eq(session.idHash, tokenHash('session', token)), isNull(session.revokedAt)))
    .returning({ personId: session.personId, idToken: session.idToken })
  return ended ?? null
}

/** A person's open sessions, the latest used first. */
export async function listSessions(personId: string) {
  return db
    .select({
      id: session.publicId,
      createdAt: session.createdAt,
      seenAt: session.seenAt,
      userAgent: session.userAgent,
    })
    .from(session)
    .where(and(eq(session.personId, personId), isNull(session.revokedAt), gt(session.expiresAt, sql`now()`)))
    .orderBy(desc(session.seenAt))
}

/** Ends one other session of the person; false when there is no such one. */
export async function revokeSession(personId: string, sessionId: string): Promise<boolean> {
  const ended = await db
    .update(session)
    .set({ revokedAt: sql`now()` })
    .where(and(eq(session.personId, personId), eq(session.publicId, sessionId), isNull(session.revokedAt)))
    .returning({ id: session.publicId })
  return ended.length > 0
}

/** Ends every session of a person but one. */
export async function revokeOtherSessions(personId: string, keep: string): Promise<void> {
  await db
    .update(session)
    .set({ revokedAt: sql`now()` })
    .where(and(eq(session.personId, personId), ne(session.publicId, keep), isNull(session.revokedAt)))
}
