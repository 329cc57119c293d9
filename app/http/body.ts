// What a request carries, read or refused with the reason.
import { AppError } from './errors.ts'

/** No input of ours is nested deeper; what walks through an input may go down as far. */
const DEEPEST = 64

export async function readForm(request: Request): Promise<FormData> {
  try {
    return await request.formData()
  } catch {
    throw new AppError(
      'bad-request',
      'The body is no form; send multipart/form-data or application/x-www-form-urlencoded, whole.',
    )
  }
}

/** Like JSON.parse, but for text from outside: throws with a reason on what is nested beyond any use too. */
export function parseJson(text: string): unknown {
  const value: unknown = JSON.parse(text)
  if (isDeeperThan(value, DEEPEST)) throw new SyntaxError(`it is nested deeper than ${DEEPEST} levels`)
  return value
}

function isDeeperThan(value: unknown, levels: number): boolean {
  if (typeof value !== 'object' || value === null) return false
  return levels === 0 || Object.values(value).some((inner) => isDeeperThan(inner, levels - 1))
}
