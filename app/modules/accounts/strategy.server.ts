// Sign-in at the company's identity provider: authorization code with PKCE, state, nonce and a verified ID token.

import { and, eq, gt, lt, sql } from 'drizzle-orm'
import * as oidc from 'openid-client'
import { redirect } from 'react-router'
import { Strategy } from 'remix-auth/strategy'
import { db } from '#app/db.server.ts'
import { env } from '#app/env.server.ts'
import { readForm } from '#app/http/body.ts'
import { AppError } from '#app/http/errors.ts'
import { trimmedTo } from '#app/modules/stored-text.ts'
import { authFlow } from '#drizzle/schema/index.ts'
import { cookie, readCookie } from './cookies.server.ts'
import type { Identity } from './people.server.ts'
import { provider, unreachable } from './provider.server.ts'
import { randomToken, tokenHash } from './secrets.server.ts'

export type SignedIn = { identity: Identity; idToken: string; returnTo: string }

const FLOW_SECONDS = 600
const CALLBACK = '/auth/callback'

/**
 * A POST begins the flow by throwing the redirect to the provider; the provider's answer, a GET, ends it with the
 * person. What must not be guessed or replayed lies in a row that only this browser's cookie together with this very
 * answer's state finds, and finding it removes it.
 */
export class OpenIdConnectStrategy<User> extends Strategy<User, SignedIn> {
  name = 'openid-connect'

  override async authenticate(request: Request): Promise<User> {
    return request.method === 'POST' ? this.begin(request) : this.finish(request)
  }

  private async begin(request: Request): Promise<never> {
    const form = await readForm(request)
    const config = await provider()
    const codeVerifier = oidc.randomPKCECodeVerifier()
    const nonce = oidc.randomNonce()
    const state = oidc.randomState()
    const token = randomToken()
    await db.transaction(async (tx) => {
      await tx.delete(authFlow).where(lt(authFlow.expiresAt, sql`now()`))
      await tx.insert(authFlow).values({
        idHash: tokenHash('flow', `${token}.${state}`),
        nonce,
        codeVerifier,
        returnTo: localPath(form.get('returnTo')),
        expiresAt: sql`now() + make_interval(secs => ${FLOW_SECONDS})`,
      })
    })
    const hint = form.get('loginHint')
    const url = oidc.buildAuthorizationUrl(config, {
      redirect_uri: `${env.BASE_URL}${CALLBACK}`,
      scope: scopeOf(config),
      code_challenge: await oidc.calculatePKCECodeChallenge(codeVerifier),
      code_challenge_method: 'S256',
      state,
      nonce,
      ...(typeof hint === 'string' && hint !== '' ? { login_hint: hint.slice(0, 200) } : {}),
    })
    throw redirect(url.href, { headers: { 'Set-Cookie': cookie('flow', token, FLOW_SECONDS) } })
  }

  private async finish(request: Request): Promise<User> {
    const url = new URL(request.url)
    const flow = await takeFlow(readCookie(request, 'flow'), url.searchParams.get('state'))
    if (!flow)
      throw new AppError(
        'bad-request',
        'This sign-in is too old, was begun in another browser, or was used already. Sign in again.',
      )
    const refused = url.searchParams.get('error')
    if (refused !== null)
      throw new AppError(
        'not-signed-in',
        refused === 'access_denied'
          ? 'The identity provider did not let this person in. Sign in again, or ask your administrator for access to Rowfall.'
          : 'The identity provider refused the sign-in. Sign in again; if it happens again, tell your administrator.',
      )
    const config = await provider()
    const answered = new URL(`${env.BASE_URL}${CALLBACK}${url.search}`)
    let tokens: oidc.TokenEndpointResponse & oidc.TokenEndpointResponseHelpers
    try {
      tokens = await oidc.authorizationCodeGrant(config, answered, {
        pkceCodeVerifier: flow.codeVerifier,
        expectedNonce: flow.nonce,
        expectedState: url.searchParams.get('state') ?? undefined,
        idTokenExpected: true,
      })
    } catch (error) {
      if (error instanceof oidc.ClientError && error.code === 'OAUTH_TIMEOUT') throw unreachable(error)
      if (error instanceof TypeError) throw unreachable(error)
      console.error(`A sign-in was refused: ${error instanceof Error ? error.message : String(error)}`)
      throw new AppError(
        'not-signed-in',
        'The identity provider’s answer could not be verified. Sign in again.',
      )
    }
    const claims = tokens.claims()
    if (!claims) throw new AppError('not-signed-in', 'The identity provider sent no identity. Sign in again.')
    return this.verify({
      identity: identityOf(await withUserInfo(config, claims, tokens.access_token)),
      idToken: tokens.id_token as string,
      returnTo: flow.returnTo,
    })
  }
}

/** Group claims come of themselves or are asked for by a scope; a provider that does not list it may refuse it. */
function scopeOf(config: oidc.Configuration): string {
  const known = config.serverMetadata().scopes_supported
  return ['openid', 'profile', 'email', ...(!known || known.includes('groups') ? ['groups'] : [])].join(' ')
}

/** Some providers name groups only at their user info endpoint. */
async function withUserInfo(
  config: oidc.Configuration,
  claims: oidc.IDToken,
  accessToken: string,
): Promise<oidc.IDToken> {
  if (claims.groups !== undefined || !config.serverMetadata().userinfo_endpoint) return claims
  try {
    return { ...(await oidc.fetchUserInfo(config, accessToken, claims.sub)), ...claims }
  } catch (error) {
    throw unreachable(error)
  }
}

/** Takes the row of a flow: it is found once, in time, and by its own browser. */
async function takeFlow(token: string | null, state: string | null) {
  if (token === null || state === null) return null
  const [flow] = await db
    .delete(authFlow)
    .where(
      and(eq(authFlow.idHash, tokenHash('flow', `${token}.${state}`)), gt(authFlow.expiresAt, sql`now()`)),
    )
    .returning()
  return flow ?? null
}

function identityOf(claims: oidc.IDToken): Identity {
  const text = (value: unknown) => (typeof value === 'string' ? trimmedTo(value, 200) : '')
  const email = text(claims.email)
  return {
    issuer: claims.iss,
    subject: claims.sub,
    email,
    emailTrusted: email !== '' && claims.email_verified !== false,
    name: text(claims.name) || text(claims.preferred_username) || email || claims.sub.slice(0, 200),
    groups: [claims.groups].flat().filter((group): group is string => typeof group === 'string'),
  }
}

/** A path on this site to go on to; anything else becomes the first page. */
export function localPath(value: unknown): string {
  if (typeof value !== 'string' || !value.startsWith('/') || value.startsWith('//') || value.includes('\\'))
    return '/projects'
  try {
    const url = new URL(value, 'http://localhost')
    return url.origin === 'http://localhost' ? `${url.pathname}${url.search}`.slice(0, 2000) : '/projects'
  } catch {
    return '/projects'
  }
}
