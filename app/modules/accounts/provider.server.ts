// The OpenID Connect provider, discovered once and again after a failure.
import * as oidc from 'openid-client'
import { env } from '#app/env.server.ts'
import { AppError } from '#app/http/errors.ts'
import { isLoopback } from '#app/settings.ts'

let found: Promise<oidc.Configuration> | undefined

export function provider(): Promise<oidc.Configuration> {
  found ??= discover().catch((error: unknown) => {
    found = undefined
    throw unreachable(error)
  })
  return found
}

function discover(): Promise<oidc.Configuration> {
  const issuer = new URL(env.OIDC_ISSUER)
  return oidc.discovery(issuer, env.OIDC_CLIENT_ID, env.OIDC_CLIENT_SECRET, undefined, {
    timeout: 10,
    execute: [
      // Checks the ID token's signature too; by itself the library trusts the connection that it came over.
      oidc.enableNonRepudiationChecks,
      // Plain http is for a provider on this machine; anywhere else the library refuses it.
      ...(issuer.protocol === 'http:' && isLoopback(issuer.hostname) ? [oidc.allowInsecureRequests] : []),
    ],
  })
}

/** What a person is told when the provider does not answer; the cause goes to the log. */
export function unreachable(error: unknown): AppError {
  console.error(
    `The identity provider did not answer: ${error instanceof Error ? error.message : String(error)}`,
  )
  return new AppError(
    'unavailable',
    'The identity provider could not be reached. Nothing is lost; try again in a moment.',
  )
}
