// Random values handed to browsers, and the keyed hashes under which they are stored.
import { createHmac, randomBytes } from 'node:crypto'
import { env } from '#app/env.server.ts'

/** 256 random bits, fit for a cookie. */
export const randomToken = (): string => randomBytes(32).toString('base64url')

/** What is stored of a token: without the session secret a copy of the table signs nobody in. */
export function tokenHash(purpose: 'session' | 'flow', token: string): string {
  return createHmac('sha256', env.SESSION_SECRET).update(`${purpose}:${token}`).digest('base64url')
}
