// Whatever the URL map does not know.
import { AppError } from '#app/http/errors.ts'

export function loader() {
  throw new AppError(
    'not-found',
    'There is no page at this address. It may have moved; start from your projects.',
  )
}

export default function NotFound() {
  return null
}
