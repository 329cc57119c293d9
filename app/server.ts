// The web process: static files, then React Router. Stateless; any number may serve one database.
import { readdirSync } from 'node:fs'
import { createRequestHandler } from '@react-router/express'
import compression from 'compression'
import express from 'express'
import { RouterContextProvider, type ServerBuild } from 'react-router'
import { pool } from '#app/db.server.ts'
import { env, requireSettings } from '#app/env.server.ts'
import { addressContext } from '#app/http/context.ts'
import { FIXED_HEADERS } from '#app/http/security-headers.ts'
import { sendDueMail } from '#app/modules/mail/outbox.server.ts'

requireSettings('web')

/** What pages, forms and scripts of ours use; anything else never reaches the gate. */
const METHODS = ['GET', 'HEAD', 'POST']

const app = express()
app.disable('x-powered-by')
app.use(compression())
app.use((request, response, next) => {
  if (METHODS.includes(request.method)) next()
  else response.set(FIXED_HEADERS).set('Allow', METHODS.join(', ')).status(405).end()
})
const files = { setHeaders: (response: express.Response) => void response.set(FIXED_HEADERS) }
app.use('/assets', express.static('build/client/assets', { immutable: true, maxAge: '1y', ...files }))
const outside = express.static('build/client', { maxAge: '1h', ...files })
// Asking the disk at every request whether it is for a file would take longer than some answers.
const outsideNames = new Set(readdirSync('build/client'))
app.use((request, response, next) => {
  if (outsideNames.has(request.path.slice(1))) outside(request, response, next)
  else next()
})
app.all(
  '*path',
  createRequestHandler({
    build: () => import('virtual:react-router/server-build') as Promise<ServerBuild>,
    mode: 'production',
    getLoadContext(request) {
      const context = new RouterContextProvider()
      context.set(addressContext, request.socket.remoteAddress ?? '')
      return context
    },
  }),
)

const server = app.listen(env.PORT, env.HOST, (error?: Error) => {
  if (!error) return
  const { code } = error as NodeJS.ErrnoException
  console.error(
    code === 'EADDRINUSE'
      ? `PORT: ${env.PORT} is taken by another program; give another port, or stop that program.`
      : `PORT: cannot listen on ${env.HOST}:${env.PORT} (${code}).`,
  )
  process.exit(1)
})
// Keep-alive connections that a proxy in front holds must outlive its own timeout.
server.keepAliveTimeout = 65_000

/** E-mail goes out within so long of what it tells of. */
const MAIL_MS = 3000
let sending = false
const mail = setInterval(async () => {
  if (sending) return
  sending = true
  await sendDueMail().catch((error) => console.warn(`E-mail could not be sent: ${error.message}`))
  sending = false
}, MAIL_MS)

for (const signal of ['SIGTERM', 'SIGINT'] as const)
  process.once(signal, () => {
    clearInterval(mail)
    server.close(async () => {
      await pool.end()
      process.exit(0)
    })
    server.closeIdleConnections()
    setTimeout(() => {
      server.closeAllConnections()
    }, 3000).unref()
  })
