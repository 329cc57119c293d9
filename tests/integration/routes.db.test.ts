// Every URL of the map for every role and for nobody, of one's own project and of another's: against the built
// application's own request handler and a real database.
import { existsSync } from 'node:fs'
import { fileURLToPath, pathToFileURL } from 'node:url'
import {
  createRequestHandler,
  type RequestHandler,
  RouterContextProvider,
  type ServerBuild,
} from 'react-router'
import { beforeAll, describe, expect, it } from 'vitest'
import { db } from '#app/db.server.ts'
import { addressContext } from '#app/http/context.ts'
import { can } from '#app/http/permissions.ts'
import { type Rule, rules } from '#app/http/rules.ts'
import { cookie } from '#app/modules/accounts/cookies.server.ts'
import { beginSession } from '#app/modules/accounts/sessions.server.ts'
import urlMap from '#app/routes.ts'
import {
  person,
  project,
  projectMember,
  ROLES,
  type Role,
  run,
  study,
  studyRevision,
} from '#drizzle/schema/index.ts'
import { seedDemo } from '#drizzle/seed/seed.ts'

const build = fileURLToPath(new URL('../../build/server/index.js', import.meta.url))
const BASE = 'http://127.0.0.1:3000'

type Entry = { path?: string; index?: boolean; children?: Entry[] }

/** The map flattened to URL patterns as the rules spell them. */
function patterns(entries: readonly Entry[], above = ''): string[] {
  return entries.flatMap((entry) => {
    const here = entry.path === undefined ? above : `${above}/${entry.path}`
    // A frame without a page of its own (a layout, or a route whose index is a child) is reached through its children.
    const own = entry.path !== undefined || entry.index ? [here === '' ? '/' : here] : []
    return [...own, ...patterns(entry.children ?? [], here)]
  })
}
const PATTERNS = [...new Set(patterns(urlMap as Entry[]))]

let handle: RequestHandler
const cookies: Record<string, string> = {}
const ids: Record<'own' | 'other', { projectId: string; studyId: string; runId: string }> = {
  own: { projectId: '', studyId: '', runId: '' },
  other: { projectId: '', studyId: '', runId: '' },
}

beforeAll(async () => {
  expect(existsSync(build), 'npm test builds the application first').toBe(true)
  const server = (await import(pathToFileURL(build).href)) as ServerBuild
  handle = createRequestHandler(server, 'production')
  await seedDemo(db)
  const [revision] = await db.select().from(studyRevision).limit(1)
  for (const side of ['own', 'other'] as const) {
    const [p] = await db
      .insert(project)
      .values({ name: `Project ${side}` })
      .returning()
    const [s] = await db
      .insert(study)
      .values({ projectId: p.id, name: `Study ${side}` })
      .returning()
    const [r] = await db
      .insert(studyRevision)
      .values({ studyId: s.id, number: 1, definition: revision.definition })
      .returning()
    const [planned] = await db
      .insert(run)
      .values({
        studyId: s.id,
        revisionId: r.id,
        engineVersion: 'test',
        points: 10,
        chunkPoints: 5,
        state: 'cancelled',
      })
      .returning()
    ids[side] = { projectId: p.id, studyId: s.id, runId: planned.id }
  }
  for (const role of ROLES) {
    const [made] = await db
      .insert(person)
      .values({ name: role, email: `${role}@test.example`, role, issuer: 'test', subject: role })
      .returning()
    await db.insert(projectMember).values({ projectId: ids.own.projectId, personId: made.id })
    cookies[role] = cookie('session', await beginSession(made.id, { userAgent: 'test' }), 60).split(';')[0]
  }
}, 60_000)

function urlOf(pattern: string, side: 'own' | 'other'): string {
  const { projectId, studyId, runId } = ids[side]
  return pattern
    .replace(':projectId', projectId)
    .replace(':studyId', studyId)
    .replace(':runId', runId)
    .replace(':point', '3')
    .replace(':fluidId', 'r134a')
    .replace(':methodId', 'film.nusselt')
    .replace('*', 'nowhere')
}

async function ask(
  pattern: string,
  method: 'GET' | 'POST',
  who: Role | null,
  side: 'own' | 'other' = 'own',
  headers: Record<string, string> = {},
): Promise<Response> {
  const context = new RouterContextProvider()
  context.set(addressContext, '127.0.0.1')
  const response = await handle(
    new Request(`${BASE}${urlOf(pattern, side)}`, {
      method,
      headers: {
        'Sec-Fetch-Site': 'same-origin',
        ...(who ? { Cookie: cookies[who] } : {}),
        ...(method === 'POST' ? { 'Content-Type': 'application/x-www-form-urlencoded' } : {}),
        ...headers,
      },
      ...(method === 'POST' ? { body: 'intent=nothing-known' } : {}),
    }),
    context,
  )
  await response.body?.cancel()
  return response
}

const ruleOf = (pattern: string, method: 'GET' | 'POST'): Rule | undefined =>
  method === 'GET' ? rules[pattern]?.loader : rules[pattern]?.action

/** Acts that lead away or end the very sessions this test goes on with are only checked for their refusals. */
const LEAVES = new Set(['/auth/start', '/auth/callback', '/sign-out'])

describe('the URL map', () => {
  it('has a rule for every URL, and no rule for a URL that does not exist', () => {
    expect(PATTERNS.filter((pattern) => !rules[pattern])).toEqual([])
    expect(Object.keys(rules).filter((pattern) => !PATTERNS.includes(pattern))).toEqual([])
  })

  describe.each(PATTERNS)('%s', (pattern) => {
    it.each([...ROLES, null])('for %s', async (who) => {
      for (const method of ['GET', 'POST'] as const) {
        const rule = ruleOf(pattern, method)
        if (LEAVES.has(pattern) && rule === 'anyone') continue
        const { status, headers } = await ask(pattern, method, who)
        const said = `${method} ${pattern} as ${who ?? 'nobody'}: ${status}`
        expect(status, said).not.toBe(500)
        expect(headers.get('content-security-policy'), said).toContain("default-src 'none'")
        if (rule === undefined) expect([404, 405], said).toContain(status)
        else if (rule === 'anyone') expect([401, 403], said).not.toContain(status)
        else if (who === null) {
          if (method === 'GET' && !rules[pattern].resource) {
            expect(status, said).toBe(302)
            expect(headers.get('location'), said).toMatch(/^\/sign-in/)
          } else expect(status, said).toBe(401)
        } else if ('can' in rule && !can(who, rule.can)) expect(status, said).toBe(403)
        else expect([401, 403], said).not.toContain(status)
      }
    })

    it('is not there for members of another project', async () => {
      for (const method of ['GET', 'POST'] as const) {
        const rule = ruleOf(pattern, method)
        if (typeof rule !== 'object' || !('scope' in rule) || !rule.scope) continue
        for (const who of ROLES)
          expect((await ask(pattern, method, who, 'other')).status, `${method} ${pattern} as ${who}`).toBe(
            404,
          )
      }
    })

    it('does nothing that another site asks for', async () => {
      if (ruleOf(pattern, 'POST') === undefined) return
      for (const site of ['cross-site', 'same-site'])
        expect((await ask(pattern, 'POST', 'administrator', 'own', { 'Sec-Fetch-Site': site })).status).toBe(
          403,
        )
    })
  })

  it('takes ids that are none for strangers’', async () => {
    const context = new RouterContextProvider()
    for (const path of [
      '/studies/1/define',
      "/studies/'; drop table study; --/define",
      '/runs/%00/progress',
      '/projects/null',
    ]) {
      const response = await handle(
        new Request(`${BASE}${path}`, { headers: { Cookie: cookies.lead } }),
        context,
      )
      expect([400, 404], path).toContain(response.status)
    }
  })

  it('forgets a session that was revoked, at its next request', async () => {
    const { endSession } = await import('#app/modules/accounts/sessions.server.ts')
    const token = await beginSession((await db.select().from(person).limit(1))[0].id, { userAgent: 'test' })
    await endSession(token)
    const response = await handle(
      new Request(`${BASE}/projects`, { headers: { Cookie: cookie('session', token, 60).split(';')[0] } }),
      new RouterContextProvider(),
    )
    expect(response.status).toBe(302)
  })
})
