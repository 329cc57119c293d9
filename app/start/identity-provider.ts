// The local identity provider: a real OpenID Connect server on loopback whose people are the demo's.
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import type { IncomingMessage } from 'node:http'
import { dirname } from 'node:path'
import { OAuth2Server } from 'oauth2-mock-server'
import { DEMO_PEOPLE } from './demo-people.ts'

export type IdentityProvider = { issuer: string; stop: () => Promise<void> }

type Asked = IncomingMessage & { query?: Record<string, unknown>; body?: Record<string, unknown> }

/**
 * Starts it. `keyFile` keeps its signing key, so that what it signed stays verifiable after a restart. Whom a sign-in
 * stands for is the login hint of the request; a request without one is refused as a person would refuse it.
 */
export async function startIdentityProvider({
  port,
  keyFile,
}: {
  port: number
  keyFile: string
}): Promise<IdentityProvider> {
  const server = new OAuth2Server()
  if (existsSync(keyFile)) await server.issuer.keys.add(JSON.parse(readFileSync(keyFile, 'utf8')))
  else {
    await server.issuer.keys.generate('RS256')
    mkdirSync(dirname(keyFile), { recursive: true })
    writeFileSync(keyFile, JSON.stringify(server.issuer.keys.toJSON(true)[0]), { mode: 0o600 })
  }
  await server.start(port, '127.0.0.1')
  server.issuer.url = `http://127.0.0.1:${port}`

  const personOfCode = new Map<string, (typeof DEMO_PEOPLE)[number]>()
  server.service.on('beforeAuthorizeRedirect', (redirect: { url: URL }, request: Asked) => {
    const person = DEMO_PEOPLE.find(({ email }) => email === request.query?.login_hint)
    const code = redirect.url.searchParams.get('code')
    if (person && code) {
      personOfCode.set(code, person)
      return
    }
    redirect.url.searchParams.delete('code')
    redirect.url.searchParams.set('error', 'access_denied')
  })
  server.service.on('beforeTokenSigning', (token: { payload: Record<string, unknown> }, request: Asked) => {
    const person = personOfCode.get(String(request.body?.code))
    if (!person) return
    Object.assign(token.payload, {
      sub: person.email,
      name: person.name,
      email: person.email,
      email_verified: true,
      groups: [...person.groups],
    })
  })
  return { issuer: `http://127.0.0.1:${port}`, stop: () => server.stop() }
}
