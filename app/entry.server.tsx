// Renders pages as a stream, with the nonce that the content security policy asks of scripts.
import { PassThrough } from 'node:stream'
import { createReadableStreamFromReadable } from '@react-router/node'
import { isbot } from 'isbot'
import { renderToPipeableStream } from 'react-dom/server'
import {
  type EntryContext,
  type HandleErrorFunction,
  isRouteErrorResponse,
  type RouterContextProvider,
  ServerRouter,
} from 'react-router'
import { failureContext, nonceContext } from './http/context.ts'
import { failureOf } from './http/errors.ts'

/** A page that is not complete after this is sent as far as it is. */
export const streamTimeout = 10_000

export default function handleRequest(
  request: Request,
  status: number,
  headers: Headers,
  entry: EntryContext,
  context: RouterContextProvider,
): Promise<Response> {
  const nonce = context.get(nonceContext)
  // Crawlers and pages without JavaScript get everything at once.
  const whole = isbot(request.headers.get('user-agent') ?? '') || entry.isSpaMode
  let code = status
  return new Promise((resolve, reject) => {
    let begun = false
    const { pipe, abort } = renderToPipeableStream(
      <ServerRouter context={entry} url={request.url} nonce={nonce} />,
      {
        nonce,
        [whole ? 'onAllReady' : 'onShellReady']() {
          begun = true
          const body = new PassThrough()
          headers.set('Content-Type', 'text/html; charset=utf-8')
          resolve(new Response(createReadableStreamFromReadable(body), { headers, status: code }))
          pipe(body)
        },
        onShellError: reject,
        onError(error: unknown) {
          code = 500
          if (begun) console.error(error)
        },
      },
    )
    setTimeout(abort, streamTimeout + 1000)
  })
}

/** Refusals are answers, not defects: only the rest is logged. */
export const handleError: HandleErrorFunction = (error, { request, context }) => {
  context.set(failureContext, error)
  if (request.signal.aborted || failureOf(error) || isRouteErrorResponse(error)) return
  console.error(error)
}
