// Whether a request that changes something was sent by our own pages.

/**
 * Browsers say where a request comes from: `Sec-Fetch-Site` over https and on loopback, `Origin` with every POST.
 * Neither can be set by another site's script, so either one naming our own site is enough, and either one naming
 * another is a refusal. A client that sends neither is no browser and has no business with a session cookie.
 */
export function isSameOrigin(headers: Headers, baseUrl: string): boolean {
  const site = headers.get('sec-fetch-site')
  if (site !== null) return site === 'same-origin'
  const origin = headers.get('origin')
  return origin !== null && origin === new URL(baseUrl).origin
}
