// The two cookies: the session's, and the short-lived one that binds a sign-in to the browser that began it.
import { env } from '#app/env.server.ts'

type Purpose = 'session' | 'flow'

/** Under https the prefix makes browsers refuse the cookie from a subdomain or over http. */
const cookieName = (purpose: Purpose): string => `${env.SECURE_COOKIES ? '__Host-' : ''}rowfall-${purpose}`

export function readCookie(request: Request, purpose: Purpose): string | null {
  const wanted = `${cookieName(purpose)}=`
  for (const part of (request.headers.get('cookie') ?? '').split(';')) {
    const pair = part.trim()
    if (pair.startsWith(wanted)) {
      const value = pair.slice(wanted.length)
      return /^[\w-]{20,100}$/.test(value) ? value : null
    }
  }
  return null
}

/** A Set-Cookie value; `seconds` 0 takes the cookie away. */
export function cookie(purpose: Purpose, value: string, seconds: number): string {
  const secure = env.SECURE_COOKIES ? '; Secure' : ''
  return `${cookieName(purpose)}=${value}; Path=/; Max-Age=${seconds}; HttpOnly; SameSite=Lax${secure}`
}
