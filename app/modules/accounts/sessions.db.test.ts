import { eq, sql } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { db, pool } from '#app/db.server.ts'
import { person, ROLES, session } from '#drizzle/schema/index.ts'
import { cookie, readCookie } from './cookies.server.ts'
import { roleOfGroups, setPreferences } from './people.server.ts'
import {
  beginSession,
  endSession,
  IDLE_SECONDS,
  LONGEST_SECONDS,
  listSessions,
  revokeOtherSessions,
  revokeSession,
  viewerOfSession,
} from './sessions.server.ts'
import { signIn } from './sign-in.server.ts'
import { localPath } from './strategy.server.ts'

let personId = ''
let otherId = ''
beforeAll(async () => {
  const made = await db
    .insert(person)
    .values([
      { name: 'Someone', email: 'someone@example.com', role: 'engineer' },
      { name: 'Other', email: 'other@example.com', role: 'lead' },
    ])
    .returning()
  ;[personId, otherId] = made.map(({ id }) => id)
})
afterAll(() => pool.end())

const begin = (who = personId) => beginSession(who, { userAgent: 'a browser' })
const rowOf = async (token: string) => {
  const viewer = await viewerOfSession(token)
  const [row] = await db
    .select({
      idHash: session.idHash,
      idleFor: sql<number>`extract(epoch from ${session.expiresAt} - now())::float`,
    })
    .from(session)
    .where(eq(session.publicId, viewer?.sessionId ?? ''))
  return row
}
/** As if the session had begun and been used so long ago. */
const age = (token: string, begunSeconds: number, seenSeconds: number) =>
  rowOf(token).then(({ idHash }) =>
    db
      .update(session)
      .set({
        createdAt: sql`now() - make_interval(secs => ${begunSeconds})`,
        seenAt: sql`now() - make_interval(secs => ${seenSeconds})`,
        expiresAt: sql`now() - make_interval(secs => ${seenSeconds - IDLE_SECONDS})`,
      })
      .where(eq(session.idHash, idHash)),
  )

describe('a session', () => {
  it('stands for its person, and the table does not hold what the browser holds', async () => {
    const token = await begin()
    expect(await viewerOfSession(token)).toMatchObject({ personId, name: 'Someone', role: 'engineer' })
    expect(JSON.stringify(await db.select().from(session))).not.toContain(token)
    expect(await viewerOfSession(`${token.slice(0, -1)}_`)).toBeNull()
  })

  it('lives on while it is used, and ends when it is not', async () => {
    const token = await begin()
    await age(token, 3600, 3600)
    await viewerOfSession(token)
    expect((await rowOf(token)).idleFor).toBeCloseTo(IDLE_SECONDS, -1)
    await age(token, IDLE_SECONDS + 1, IDLE_SECONDS + 1)
    expect(await viewerOfSession(token)).toBeNull()
  })

  it('ends at the latest after its longest time, however much it is used', async () => {
    const token = await begin()
    await age(token, LONGEST_SECONDS - 600, 3600)
    await viewerOfSession(token)
    expect((await rowOf(token)).idleFor).toBeCloseTo(600, -1)
  })

  it('is gone at once when ended, and is ended once', async () => {
    const token = await begin()
    expect(await endSession(token)).toEqual({ personId, idToken: null })
    expect(await viewerOfSession(token)).toBeNull()
    expect(await endSession(token)).toBeNull()
  })

  it('has the role its person has now, and none when they have none', async () => {
    const token = await begin()
    await db.update(person).set({ role: 'analyst' }).where(eq(person.id, personId))
    expect((await viewerOfSession(token))?.role).toBe('analyst')
    await db.update(person).set({ role: null }).where(eq(person.id, personId))
    expect(await viewerOfSession(token)).toBeNull()
    await db.update(person).set({ role: 'engineer' }).where(eq(person.id, personId))
  })

  it('is listed and revoked by its own person only', async () => {
    const [mine, elsewhere] = [await begin(otherId), await begin(otherId)]
    const listed = await listSessions(otherId)
    expect(listed).toHaveLength(2)
    const away = (await viewerOfSession(elsewhere))?.sessionId ?? ''
    expect(await revokeSession(personId, away)).toBe(false)
    expect(await revokeSession(otherId, away)).toBe(true)
    expect(await viewerOfSession(elsewhere)).toBeNull()
    const third = await begin(otherId)
    await revokeOtherSessions(otherId, (await viewerOfSession(mine))?.sessionId ?? '')
    expect(await viewerOfSession(third)).toBeNull()
    expect(await viewerOfSession(mine)).not.toBeNull()
  })

  it('leaves the table once it has expired', async () => {
    const token = await begin()
    const { idHash } = await rowOf(token)
    await age(token, IDLE_SECONDS * 2, IDLE_SECONDS * 2)
    await begin(otherId)
    expect(await db.select().from(session).where(eq(session.idHash, idHash))).toEqual([])
  })
})

describe('the cookie', () => {
  it('is out of reach of scripts and other sites', () => {
    expect(cookie('session', 'x', 60)).toBe('rowfall-session=x; Path=/; Max-Age=60; HttpOnly; SameSite=Lax')
  })

  it('is read by its whole name, and not at all when it cannot be ours', () => {
    const read = (value: string) =>
      readCookie(new Request('http://x/', { headers: { Cookie: value } }), 'session')
    const token = 'a'.repeat(43)
    expect(read(`a=b; rowfall-session=${token}`)).toBe(token)
    expect(read(`not-rowfall-session=${token}`)).toBeNull()
    expect(read(`rowfall-session=${'a'.repeat(5000)}`)).toBeNull()
    expect(read('rowfall-session=%00')).toBeNull()
  })
})

describe('people', () => {
  it('have the highest role that one of their groups names', () => {
    const map = Object.fromEntries(ROLES.map((role) => [`${role}s`, role]))
    expect(roleOfGroups(['analysts', 'leads', 'engineers'], map)).toBe('lead')
    expect(roleOfGroups(['constructor', '__proto__', 'Leads'], map)).toBeNull()
    expect(roleOfGroups([], map)).toBeNull()
  })

  it('keep the preferences they do not change', async () => {
    await setPreferences(personId, { units: 'us' })
    await setPreferences(personId, { theme: 'dark' })
    await setPreferences(personId, {})
    expect(await viewerOfSession(await begin())).toMatchObject({ units: 'us', theme: 'dark' })
  })
})

it.each([
  ['/studies/1/define?x=1', '/studies/1/define?x=1'],
  ['https://evil.example', '/projects'],
  ['//evil.example', '/projects'],
  ['/\\evil.example', '/projects'],
  ['/\t/evil.example', '/projects'],
  [null, '/projects'],
])('after signing in, %j leads to %s', (asked, path) => {
  expect(localPath(asked)).toBe(path)
})

it('a provider that cannot be reached is said to be so', async () => {
  vi.spyOn(console, 'error').mockImplementation(() => {})
  const request = new Request('http://127.0.0.1:3000/auth/start', {
    method: 'POST',
    body: new URLSearchParams(),
  })
  await expect(signIn(request, '')).rejects.toMatchObject({ code: 'unavailable' })
})
