import { parseJson } from '#app/http/body.ts'
import { AppError } from '#app/http/errors.ts'

/** A definition with a long list of values in every variable stays well below this. */
const BODY_BYTES = 4 * 1024 * 1024

/** The JSON in a request's body, refused when it is too long or no JSON. */
export async function readJson(request: Request): Promise<unknown> {
  const parts: Uint8Array[] = []
  let length = 0
  if (request.body)
    for await (const part of request.body as unknown as AsyncIterable<Uint8Array>) {
      length += part.byteLength
      if (length > BODY_BYTES)
        throw new AppError('too-large', `The body is longer than ${BODY_BYTES / 1024 / 1024} MiB.`)
      parts.push(part)
    }
  try {
    return parseJson(Buffer.concat(parts).toString('utf8'))
  } catch (error) {
    throw new AppError('bad-request', `The body is not JSON: ${(error as Error).message}.`)
  }
}
