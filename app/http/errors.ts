// Errors that modules throw, and the responses they become. Only this file knows status codes.

const STATUS = {
  'bad-request': 400,
  invalid: 400,
  'not-signed-in': 401,
  forbidden: 403,
  'not-found': 404,
  'method-not-allowed': 405,
  conflict: 409,
  'length-required': 411,
  'too-large': 413,
  unavailable: 503,
} as const

export type AppErrorCode = keyof typeof STATUS

export type AppErrorData = { code: AppErrorCode; message: string }

/**
 * A refusal with a sentence for the person: what is wrong and what to do. Anything else thrown is a defect.
 *
 * It has the shape that React Router gives to a thrown `data(…, { status })`, so a loader or action need not catch it:
 * error boundaries receive status and `AppErrorData`, resource routes answer the same as JSON (`failureOf` and the
 * response middleware see to that).
 */
export class AppError extends Error {
  readonly code: AppErrorCode
  readonly type = 'DataWithResponseInit'
  readonly data: AppErrorData
  readonly init: { status: number }

  constructor(code: AppErrorCode, message: string) {
    super(message)
    this.name = 'AppError'
    this.code = code
    this.data = { code, message }
    this.init = { status: STATUS[code] }
  }
}

/** What a resource route or the API answers. */
export function toJsonResponse({ code, message }: AppErrorData): Response {
  return Response.json({ error: code, message }, { status: STATUS[code] })
}

/** The refusal inside a caught error, whether thrown here or handed to an error boundary; null for defects. */
export function failureOf(error: unknown): AppErrorData | null {
  if (error instanceof AppError) return error.data
  if (typeof error !== 'object' || error === null || !('data' in error)) return null
  const { data } = error
  if (typeof data !== 'object' || data === null) return null
  const { code, message } = data as Partial<AppErrorData>
  return typeof code === 'string' && code in STATUS && typeof message === 'string' ? { code, message } : null
}
