// Signing in through a real OpenID Connect server: what is let in, and what is not.
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { type IdentityProvider, startIdentityProvider } from '#app/start/identity-provider.ts'
import { freePort } from '#drizzle/local-postgres/processes.mjs'

const BASE = 'http://127.0.0.1:3000'
const folder = mkdtempSync(join(tmpdir(), 'rowfall-sign-in-'))
let provider: IdentityProvider
let signIn: (request: Request, address: string) => Promise<Response>
let viewerOfSession: (token: string) => Promise<{ role: string; email: string } | null>

beforeAll(async () => {
  provider = await startIdentityProvider({
    port: (await freePort(0)) as number,
    keyFile: join(folder, 'key.jwk'),
  })
  // Read on first use: the modules come after.
  process.env.OIDC_ISSUER = provider.issuer
  ;({ signIn } = await import('#app/modules/accounts/sign-in.server.ts'))
  ;({ viewerOfSession } = await import('#app/modules/accounts/sessions.server.ts'))
})
afterAll(async () => {
  await provider.stop()
  rmSync(folder, { recursive: true, force: true })
})

/** Runs something that answers by throwing a response, as redirects do. */
async function answer(work: Promise<Response>): Promise<Response> {
  try {
    return await work
  } catch (error) {
    if (error instanceof Response) return error
    throw error
  }
}

async function begin(loginHint: string, returnTo = '/projects') {
  const response = await answer(
    signIn(
      new Request(`${BASE}/auth/start`, {
        method: 'POST',
        body: new URLSearchParams({ loginHint, returnTo }),
      }),
      '127.0.0.1',
    ),
  )
  const flow = /rowfall-flow=([\w-]+)/.exec(response.headers.get('set-cookie') ?? '')?.[1] ?? ''
  return {
    toProvider: new URL(response.headers.get('location') ?? ''),
    flow,
    cookie: response.headers.get('set-cookie') ?? '',
  }
}

/** What the provider sends the browser back to. */
async function atProvider(url: URL): Promise<URL> {
  const response = await fetch(url, { redirect: 'manual' })
  return new URL(response.headers.get('location') ?? '')
}

const finish = (callback: URL, flow: string) =>
  answer(
    signIn(
      new Request(callback, { headers: { Cookie: `rowfall-flow=${flow}`, 'User-Agent': 'a test' } }),
      '127.0.0.1',
    ),
  )

describe('signing in', () => {
  it('goes out with code, PKCE, state and nonce, and a cookie that scripts cannot read', async () => {
    const { toProvider, cookie } = await begin('engineer@example.com')
    const query = toProvider.searchParams
    expect(query.get('response_type') ?? 'code').toBe('code')
    expect(query.get('code_challenge_method')).toBe('S256')
    for (const name of ['code_challenge', 'state', 'nonce'])
      expect(query.get(name)?.length, name).toBeGreaterThan(20)
    expect(cookie).toMatch(/HttpOnly; SameSite=Lax/)
  })

  it.each([
    ['engineer@example.com', 'engineer'],
    ['lead@example.com', 'lead'],
    ['analyst@example.com', 'analyst'],
    ['administrator@example.com', 'administrator'],
  ])('%s comes back with a session as %s and to where they were going', async (email, role) => {
    const { toProvider, flow } = await begin(email, '/library?x=1')
    const response = await finish(await atProvider(toProvider), flow)
    expect(response.status).toBe(302)
    expect(response.headers.get('location')).toBe('/library?x=1')
    const token = /rowfall-session=([\w-]+)/.exec(response.headers.get('set-cookie') ?? '')?.[1] ?? ''
    expect(await viewerOfSession(token)).toMatchObject({ role, email })
  })

  it('takes an answer once', async () => {
    const { toProvider, flow } = await begin('lead@example.com')
    const callback = await atProvider(toProvider)
    expect((await finish(callback, flow)).status).toBe(302)
    await expect(finish(callback, flow)).rejects.toMatchObject({ code: 'bad-request' })
  })

  it('takes it only from the browser that asked, with the state that was sent', async () => {
    const first = await begin('lead@example.com')
    const second = await begin('engineer@example.com')
    const callback = await atProvider(first.toProvider)
    await expect(finish(callback, second.flow)).rejects.toMatchObject({ code: 'bad-request' })
    const forged = new URL(callback)
    forged.searchParams.set('state', 'made-up-state-made-up-state')
    await expect(finish(forged, first.flow)).rejects.toMatchObject({ code: 'bad-request' })
  })

  it('does not take a code of another sign-in', async () => {
    const mine = await begin('analyst@example.com')
    const theirs = await begin('administrator@example.com')
    const callback = await atProvider(mine.toProvider)
    callback.searchParams.set('code', (await atProvider(theirs.toProvider)).searchParams.get('code') ?? '')
    await expect(finish(callback, mine.flow)).rejects.toMatchObject({ code: 'not-signed-in' })
  })

  it('says so when the provider lets nobody in', async () => {
    const { toProvider, flow } = await begin('stranger@example.com')
    await expect(finish(await atProvider(toProvider), flow)).rejects.toMatchObject({ code: 'not-signed-in' })
  })

  it.each(['https://evil.example/', '//evil.example', '/\\evil.example', 'javascript:alert(1)', ''])(
    'does not go on to %s',
    async (to) => {
      const { toProvider, flow } = await begin('lead@example.com', to)
      const response = await finish(await atProvider(toProvider), flow)
      expect(response.headers.get('location')).toBe('/projects')
    },
  )
})
