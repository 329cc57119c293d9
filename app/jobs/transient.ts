// Which database errors pass by themselves: lost connections, restarts, refused writes, lost races.

const CODES = new Set([
  'ECONNREFUSED',
  'ECONNRESET',
  'EPIPE',
  'ETIMEDOUT',
  'EHOSTUNREACH',
  'ENETUNREACH',
  'ENOTFOUND',
  'EAI_AGAIN',
  '25006', // read-only transaction
  '40001', // serialization failure
  '40P01', // deadlock detected
  '55P03', // lock not available
  '57014', // query cancelled
  '57P01', // shut down by the administrator
  '57P02', // crash shutdown
  '57P03', // cannot connect now
])
/** Classes: connection exceptions, insufficient resources, system errors. */
const CLASSES = ['08', '53', '58']
const MESSAGES = [/connection terminated/i, /timeout/i, /not queryable/i, /client was closed/i]

export function isTransient(error: unknown): boolean {
  for (let cause = error; cause instanceof Error; cause = cause.cause) {
    const { code } = cause as Error & { code?: unknown }
    if (typeof code === 'string' && (CODES.has(code) || CLASSES.includes(code.slice(0, 2)))) return true
    if (MESSAGES.some((message) => message.test((cause as Error).message))) return true
  }
  return false
}
