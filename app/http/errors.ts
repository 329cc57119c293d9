// Errors that modules throw, and the responses they become. Only this file knows status codes.
import { data } from 'react-router'

const STATUS = {
  'bad-request': 400,
  invalid: 400,
  'not-signed-in': 401,
  forbidden: 403,
  'not-found': 404,
  'method-not-allowed': 405,
  conflict: 409,
  'too-large': 413,
  unavailable: 503,
} as const

export type AppErrorCode = keyof typeof STATUS

/** A refusal with a sentence for the person: what is wrong and what to do. Anything else thrown is a defect. */
export class AppError extends Error {
  readonly code: AppErrorCode
  constructor(code: AppErrorCode, message: string) {
    super(message)
    this.name = 'AppError'
    this.code = code
  }
}

export function statusOf(error: unknown): number {
  return error instanceof AppError ? STATUS[error.code] : 500
}

/** What a page route throws so that the error boundary receives status and sentence. */
export function toRouteError(error: AppError) {
  return data({ code: error.code, message: error.message }, { status: statusOf(error) })
}

/** What a resource route or the API answers. */
export function toJsonResponse(error: AppError): Response {
  return Response.json({ error: error.code, message: error.message }, { status: statusOf(error) })
}

/** The sentence of a caught route error, for error boundaries. */
export function messageOf(routeErrorData: unknown): string | null {
  if (typeof routeErrorData !== 'object' || routeErrorData === null) return null
  const { message } = routeErrorData as { message?: unknown }
  return typeof message === 'string' ? message : null
}
