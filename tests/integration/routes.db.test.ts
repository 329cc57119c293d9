// Every URL of the map for every role and for nobody, of one's own project and of another's: against the built
// application's own request handler and a real database.
import { beforeAll, describe, expect, it } from 'vitest'
import { can } from '#app/http/permissions.ts'
import { type Rule, rules } from '#app/http/rules.ts'
import { cookie } from '#app/modules/accounts/cookies.server.ts'
import { beginSession, endSession } from '#app/modules/accounts/sessions.server.ts'
import { ROLES } from '#drizzle/schema/index.ts'
import { type Asking, PATTERNS, type TestApplication, testApplication } from '#tests/setup/request-handler.ts'

let application: TestApplication
beforeAll(async () => {
  application = await testApplication()
}, 60_000)

async function ask(pattern: string, asking: Asking): Promise<Response> {
  const form: Asking =
    asking.method === 'POST' ? { ...asking, body: new URLSearchParams({ intent: 'nothing-known' }) } : asking
  const response = await application.ask(pattern, form)
  await response.body?.cancel()
  return response
}

const ruleOf = (pattern: string, method: string): Rule | undefined =>
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
      for (const method of ['GET', 'POST']) {
        const rule = ruleOf(pattern, method)
        if (LEAVES.has(pattern) && rule === 'anyone') continue
        const { status, headers } = await ask(pattern, { method, who })
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
      for (const method of ['GET', 'POST']) {
        const rule = ruleOf(pattern, method)
        if (typeof rule !== 'object' || !('scope' in rule) || !rule.scope) continue
        for (const who of ROLES) {
          const { status } = await ask(pattern, { method, who, side: 'other' })
          expect(status, `${method} ${pattern} as ${who}`).toBe(404)
        }
      }
    })

    it.each(['POST', 'PUT', 'PATCH', 'DELETE'])(
      'does nothing that another site asks for by %s',
      async (method) => {
        for (const site of ['cross-site', 'same-site']) {
          const headers = { 'Sec-Fetch-Site': site }
          expect((await ask(pattern, { method, who: 'administrator', headers })).status).toBe(403)
        }
      },
    )
  })

  it.each([
    '/studies/1/define',
    "/studies/'; drop table study; --/define",
    `/studies/${'-'.repeat(36)}/define`,
    '/studies/00000000-0000-4000-8000-000000000000/define',
    '/runs/%00/progress',
    '/runs/%ff/progress',
    '/projects/null',
    '/projects/00000000-0000-4000-8000-000000000000%00',
  ])('takes an id that is none for a stranger’s: %s', async (path) => {
    const { status } = await ask(path, { who: 'lead' })
    expect([400, 404]).toContain(status)
  })

  it('forgets a session that was revoked, at its next request', async () => {
    const token = await beginSession(application.people.lead, { userAgent: 'test' })
    const headers = { Cookie: cookie('session', token, 60).split(';')[0] }
    expect((await ask('/projects', { headers })).status).toBe(200)
    await endSession(token)
    expect((await ask('/projects', { headers })).status).toBe(302)
  })
})

describe('a body', () => {
  it('that says it is longer than 8 MB is not read', async () => {
    const headers = { 'Content-Length': String(9 * 1024 * 1024) }
    const { status } = await ask('/projects', { method: 'POST', who: 'lead', headers })
    expect(status).toBe(413)
  })

  it('that does not say how long it is is not read', async () => {
    const headers = { 'Transfer-Encoding': 'chunked' }
    const { status } = await ask('/projects', { method: 'POST', who: 'lead', headers })
    expect(status).toBe(411)
  })
})

it('every page carries a nonce of its own, in its scripts and in its policy', async () => {
  const nonces = await Promise.all(
    [1, 2].map(async () => {
      const response = await application.ask('/sign-in')
      const nonce = /'nonce-([^']+)'/.exec(response.headers.get('content-security-policy') ?? '')?.[1]
      const html = await response.text()
      for (const [script] of html.matchAll(/<script[^>]*>/g)) expect(script).toContain(`nonce="${nonce}"`)
      expect(html).toContain('<script')
      return nonce
    }),
  )
  expect(nonces[0]).not.toBe(nonces[1])
})
