import { AppError } from '#app/http/errors.ts'
import type { Reading } from '#app/modules/points/point-query.ts'

/** The question in the address, or a refusal that lists all that is wrong with it. */
export function asked<T>(reading: Reading<T>): T {
  if (reading.ok) return reading.query
  throw new AppError('bad-request', `${reading.faults.join('. ')}.`)
}
