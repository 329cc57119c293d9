// Answers of an identity provider that are forged, stale or unusual: what is refused, and whom the rest stand for.
import { desc, eq, sql } from 'drizzle-orm'
import { OAuth2Server } from 'oauth2-mock-server'
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import { db } from '#app/db.server.ts'
import { auditEntry, authFlow, person, projectMember, session } from '#drizzle/schema/index.ts'

const BASE = 'http://127.0.0.1:3000'
const ADDRESS = '203.0.113.7'

type Claims = Record<string, unknown>
type Answer = { id_token: string; [name: string]: unknown }

const server = new OAuth2Server()
/** What this test's provider does to the ID token's claims, to the token answer, and to its user info. */
let claims: Claims
let alter: (answer: Answer) => void
let userInfo: Claims
let accounts: typeof import('#app/modules/accounts/sign-in.server.ts')
let viewerOfSession: typeof import('#app/modules/accounts/sessions.server.ts').viewerOfSession

beforeAll(async () => {
  await server.issuer.keys.generate('RS256')
  await server.start(0, '127.0.0.1')
  const issuer = `http://127.0.0.1:${server.address().port}`
  server.issuer.url = issuer
  server.service.on('beforeTokenSigning', ({ payload }: { payload: Claims }) => {
    Object.assign(payload, claims)
    for (const [name, value] of Object.entries(claims)) if (value === undefined) delete payload[name]
  })
  server.service.on('beforeResponse', ({ body }: { body: Answer }) => alter(body))
  server.service.on('beforeUserinfo', ({ body }: { body: Claims }) => Object.assign(body, userInfo))
  process.env.OIDC_ISSUER = issuer
  accounts = await import('#app/modules/accounts/sign-in.server.ts')
  ;({ viewerOfSession } = await import('#app/modules/accounts/sessions.server.ts'))
})
afterAll(async () => {
  if (server.listening) await server.stop()
})

let people = 0
beforeEach(() => {
  people += 1
  claims = {
    sub: `subject-${people}`,
    name: 'Someone',
    email: `someone-${people}@example.com`,
    email_verified: true,
    groups: ['condenser-engineers'],
  }
  alter = () => {}
  userInfo = {}
  // Refusals are told to the log.
  vi.spyOn(console, 'error').mockImplementation(() => {})
})

async function thrown(work: Promise<Response>): Promise<Response> {
  try {
    return await work
  } catch (error) {
    if (error instanceof Response) return error
    throw error
  }
}

/** A whole sign-in, with what the browser carries along. */
async function signIn({ cookies = '', between = async () => {} } = {}) {
  const begun = await thrown(
    accounts.signIn(
      new Request(`${BASE}/auth/start`, { method: 'POST', body: new URLSearchParams() }),
      ADDRESS,
    ),
  )
  const flow = /rowfall-flow=([\w-]+)/.exec(begun.headers.get('set-cookie') ?? '')?.[1]
  const sent = await fetch(begun.headers.get('location') ?? '', { redirect: 'manual' })
  await between()
  const response = await thrown(
    accounts.signIn(
      new Request(sent.headers.get('location') ?? '', {
        headers: { Cookie: `rowfall-flow=${flow}; ${cookies}` },
      }),
      ADDRESS,
    ),
  )
  return /rowfall-session=([\w-]+)/.exec(response.headers.get('set-cookie') ?? '')?.[1] ?? ''
}

const encode = (value: unknown) => Buffer.from(JSON.stringify(value)).toString('base64url')
const decode = (part: string): Claims => JSON.parse(Buffer.from(part, 'base64url').toString())

describe('an answer is refused', () => {
  const now = Math.floor(Date.now() / 1000)
  it.each<[string, Claims]>([
    ['with another nonce', { nonce: 'made-up' }],
    ['without a nonce', { nonce: undefined }],
    ['for another client', { aud: 'another-client' }],
    ['for several clients but not by this one', { aud: ['rowfall', 'another'], azp: 'another' }],
    ['by another issuer', { iss: 'https://evil.example' }],
    ['that has expired', { exp: now - 3600 }],
    ['from the future', { nbf: now + 3600 }],
    ['about nobody', { sub: undefined }],
  ])('%s', async (_, change) => {
    Object.assign(claims, change)
    await expect(signIn()).rejects.toMatchObject({ code: 'not-signed-in' })
  })

  it('whose claims were changed after signing', async () => {
    alter = (answer) => {
      const [header, payload, signature] = answer.id_token.split('.')
      answer.id_token = [
        header,
        encode({ ...decode(payload), groups: ['condenser-administrators'] }),
        signature,
      ].join('.')
    }
    await expect(signIn()).rejects.toMatchObject({ code: 'not-signed-in' })
  })

  it('that nobody signed', async () => {
    alter = (answer) => {
      answer.id_token = `${encode({ alg: 'none' })}.${answer.id_token.split('.')[1]}.`
    }
    await expect(signIn()).rejects.toMatchObject({ code: 'not-signed-in' })
  })

  it('without an identity', async () => {
    alter = (answer) => {
      delete (answer as Partial<Answer>).id_token
    }
    await expect(signIn()).rejects.toMatchObject({ code: 'not-signed-in' })
  })

  it('that comes after the sign-in’s time', async () => {
    const between = async () => {
      await db.update(authFlow).set({ expiresAt: sql`now() - interval '1 second'` })
    }
    await expect(signIn({ between })).rejects.toMatchObject({ code: 'bad-request' })
  })
})

const personOf = async (subject: unknown) =>
  (
    await db
      .select()
      .from(person)
      .where(eq(person.subject, String(subject)))
  )[0]

describe('whom an answer stands for', () => {
  it('ends the session the browser came with and begins another', async () => {
    const first = await signIn()
    const second = await signIn({ cookies: `rowfall-session=${first}` })
    expect(second).not.toBe(first)
    expect(await viewerOfSession(first)).toBeNull()
    expect(await viewerOfSession(second)).toMatchObject({ role: 'engineer', name: 'Someone' })
  })

  it('takes the highest role of several groups, and one group given as text', async () => {
    claims.groups = ['condenser-analysts', 'unheard-of', 'condenser-leads', '__proto__']
    expect(await viewerOfSession(await signIn())).toMatchObject({ role: 'lead' })
    claims.groups = 'condenser-analysts'
    expect(await viewerOfSession(await signIn())).toMatchObject({ role: 'analyst' })
  })

  it('asks the user info endpoint where the ID token names no groups', async () => {
    claims.groups = undefined
    userInfo = { sub: claims.sub, groups: ['condenser-leads'] }
    expect(await viewerOfSession(await signIn())).toMatchObject({ role: 'lead' })
  })

  it('does not take another person’s user info', async () => {
    claims.groups = undefined
    userInfo = { sub: 'someone-else', groups: ['condenser-administrators'] }
    await expect(signIn()).rejects.toMatchObject({ code: 'unavailable' })
  })

  it('lets nobody in whose groups have no role, ends what they had open, and records it', async () => {
    const open = await signIn()
    claims.groups = ['bystanders']
    await expect(signIn()).rejects.toMatchObject({ code: 'forbidden' })
    expect(await viewerOfSession(open)).toBeNull()
    const [entry] = await db.select().from(auditEntry).orderBy(desc(auditEntry.id)).limit(1)
    expect(entry).toMatchObject({ act: 'person.signInRefused', address: ADDRESS, after: { role: null } })
    expect(
      await db
        .select()
        .from(session)
        .where(eq(session.personId, entry.personId as string)),
    ).toHaveLength(1)
  })

  it('makes an invited address the person’s own at the first sign-in, memberships included', async () => {
    const { addMember, createProject, listProjects } = await import(
      '#app/modules/projects/projects.server.ts'
    )
    const [maker] = await db
      .insert(person)
      .values({ name: 'Maker', email: 'maker@example.com', role: 'lead' })
      .returning()
    const acting = { personId: maker.id, name: 'Maker', address: '' }
    const { id } = await createProject('Invited ones', '', acting)
    await addMember(id, String(claims.email).toUpperCase(), acting)
    const viewer = await viewerOfSession(await signIn())
    expect((await listProjects(viewer?.personId ?? '')).map(({ name }) => name)).toEqual(['Invited ones'])
  })

  it('does not hand an invitation to an address that the provider calls unverified', async () => {
    await db.insert(person).values({ name: 'Invited', email: String(claims.email) })
    claims.email_verified = false
    await signIn()
    expect((await personOf(claims.sub)).name).toBe('Someone')
    expect(
      await db
        .select()
        .from(person)
        .where(eq(person.email, String(claims.email))),
    ).toHaveLength(2)
  })

  it('knows a person by issuer and subject, whatever their name and address become', async () => {
    await signIn()
    const { id } = await personOf(claims.sub)
    Object.assign(claims, { name: 'Someone Else', email: 'renamed@example.com' })
    await signIn()
    expect(await personOf(claims.sub)).toMatchObject({
      id,
      name: 'Someone Else',
      email: 'renamed@example.com',
    })
    expect(await db.select().from(projectMember).where(eq(projectMember.personId, id))).toEqual([])
  })
})

describe('signing out', () => {
  it('ends the session here and sends the browser to end it at the provider', async () => {
    const token = await signIn()
    const viewer = await viewerOfSession(token)
    const response = await accounts.signOut(
      new Request(`${BASE}/sign-out`, { method: 'POST', headers: { Cookie: `rowfall-session=${token}` } }),
      { personId: viewer?.personId ?? null, name: 'Someone', address: ADDRESS },
    )
    const to = new URL(response.headers.get('location') ?? '')
    expect(to.origin).toBe(new URL(server.issuer.url ?? '').origin)
    expect(to.searchParams.get('id_token_hint')).toMatch(/^ey/)
    expect(to.searchParams.get('post_logout_redirect_uri')).toBe(`${BASE}/sign-in?signedOut=1`)
    expect(response.headers.get('set-cookie')).toMatch(/rowfall-session=; .*Max-Age=0/)
    expect(await viewerOfSession(token)).toBeNull()
    const [entry] = await db.select().from(auditEntry).orderBy(desc(auditEntry.id)).limit(1)
    expect(entry).toMatchObject({ act: 'person.signOut', personId: viewer?.personId, address: ADDRESS })
  })
})

describe('a provider that has gone', () => {
  it('is said to be out of reach, and nothing is lost', async () => {
    const between = async () => {
      await server.stop()
    }
    await expect(signIn({ between })).rejects.toMatchObject({ code: 'unavailable' })
  })
})
