// The headers every response carries: what a browser may do with our pages, and what it may load into them.

export type HeaderOptions = {
  /** Scripts and style elements run only with this value, new for each response. */
  nonce: string
  /** People come over https: true everywhere but on loopback. */
  secure: boolean
  /** Origins that answering a form may lead to: the identity provider's. */
  formOrigins: readonly string[]
  /** Vite's own scripts, styles and socket are let in. */
  development: boolean
}

export function contentSecurityPolicy({ nonce, secure, formOrigins, development }: HeaderOptions): string {
  const directives: Record<string, readonly string[]> = {
    'default-src': ["'none'"],
    'script-src': ["'self'", `'nonce-${nonce}'`],
    'style-src-elem': development ? ["'self'", "'unsafe-inline'"] : ["'self'", `'nonce-${nonce}'`],
    // Charts and drawings place their marks by style attributes; an attribute can neither load nor run anything.
    'style-src-attr': ["'unsafe-inline'"],
    'img-src': ["'self'", 'data:', 'blob:'],
    'font-src': ["'self'"],
    'connect-src': development ? ["'self'", 'ws:'] : ["'self'"],
    'manifest-src': ["'self'"],
    'base-uri': ["'none'"],
    'form-action': ["'self'", ...formOrigins],
    'frame-ancestors': ["'none'"],
    ...(secure ? { 'upgrade-insecure-requests': [] } : {}),
  }
  return Object.entries(directives)
    .map(([name, sources]) => [name, ...sources].join(' '))
    .join('; ')
}

/** What files are sent with too. */
export const FIXED_HEADERS = {
  'X-Content-Type-Options': 'nosniff',
  'X-Frame-Options': 'DENY',
  'Referrer-Policy': 'same-origin',
  'Permissions-Policy': 'camera=(), geolocation=(), microphone=(), payment=(), usb=(), browsing-topics=()',
  'Cross-Origin-Opener-Policy': 'same-origin',
  'Cross-Origin-Resource-Policy': 'same-origin',
} as const

export function setSecurityHeaders(headers: Headers, options: HeaderOptions): void {
  for (const [name, value] of Object.entries(FIXED_HEADERS)) headers.set(name, value)
  headers.set('Content-Security-Policy', contentSecurityPolicy(options))
  if (options.secure) headers.set('Strict-Transport-Security', 'max-age=31536000; includeSubDomains')
}
