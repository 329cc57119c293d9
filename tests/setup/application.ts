// Starts the built application for browser tests: a database of its own with the demo in it, the local identity
// provider, one web process and one worker. Ended and removed with the test run.
import { type ChildProcess, spawn } from 'node:child_process'
import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import pg from 'pg'
import type { TestProject } from 'vitest/node'
import { DEMO_ROLE_GROUPS } from '#app/start/demo-people.ts'
import { startIdentityProvider } from '#app/start/identity-provider.ts'
import { startMailCatcher } from '#app/start/mail-catcher.ts'
import { freePort, pause } from '#drizzle/local-postgres/processes.mjs'
import { databaseUrl, TEMPLATE } from './postgres.ts'

const root = fileURLToPath(new URL('../..', import.meta.url))

declare module 'vitest' {
  export interface ProvidedContext {
    applicationUrl: string
    applicationDatabaseUrl: string
    chromiumPath: string
  }
}

export default async function setup(project: TestProject) {
  if (!existsSync(join(root, 'build/server/web.js')))
    throw new Error('The application is not built; npm test builds it, or run npm run build.')
  const server = project.getProvidedContext().postgresUrl
  const name = `application_${process.pid}_${Date.now().toString(36)}`
  const client = new pg.Client({ connectionString: server })
  await client.connect()
  await client.query(`create database "${name}" template ${TEMPLATE}`)
  await client.end()
  const url = databaseUrl(server, name)

  const folder = mkdtempSync(join(tmpdir(), 'rowfall-test-'))
  const port = async () => (await freePort(0)) as number
  const provider = await startIdentityProvider({ port: await port(), keyFile: join(folder, 'key.jwk') })
  const mail = await startMailCatcher({ port: await port(), folder: join(folder, 'mail') })
  const webPort = await port()
  const address = `http://127.0.0.1:${webPort}`
  const env = {
    ...process.env,
    NODE_ENV: 'production',
    DATABASE_URL: url,
    HOST: '127.0.0.1',
    PORT: String(webPort),
    BASE_URL: address,
    SESSION_SECRET: 'only-for-tests-only-for-tests-only-for-tests',
    LOCAL_DEMO: '1',
    OIDC_ISSUER: provider.issuer,
    OIDC_CLIENT_ID: 'rowfall',
    OIDC_CLIENT_SECRET: 'local',
    ROLE_GROUPS: DEMO_ROLE_GROUPS,
    SMTP_URL: mail.url,
    MAIL_FROM: 'Rowfall <rowfall@example.com>',
    MAIL_CATCHER_FOLDER: join(folder, 'mail'),
    // vitest's own settings are not the application's.
    VITEST: '',
    NODE_OPTIONS: '',
  }
  const children: ChildProcess[] = []
  const begin = (args: string[]) => {
    const child = spawn(process.execPath, args, { cwd: root, env, stdio: ['ignore', 'ignore', 'inherit'] })
    children.push(child)
    return child
  }
  const seeding = begin(['--import', 'tsx', 'app/start/database.ts', 'seed'])
  const code = await new Promise((done) => seeding.on('exit', done))
  if (code !== 0) throw new Error(`The demo could not be put into the database (exit ${code}).`)
  begin(['build/server/web.js'])
  begin(['build/server/job-worker.js'])
  for (let waited = 0; ; waited += 1) {
    if (waited > 300) throw new Error('The web process did not answer within 30 s.')
    try {
      if ((await fetch(`${address}/health`)).ok) break
    } catch {
      // Not listening yet.
    }
    await pause(100)
  }
  project.provide('applicationUrl', address)
  project.provide('applicationDatabaseUrl', url)
  project.provide('chromiumPath', chromium())

  return async () => {
    for (const child of children) child.kill('SIGTERM')
    await Promise.all(
      children.map((child) =>
        child.exitCode !== null || child.signalCode !== null
          ? undefined
          : new Promise<void>((done) => {
              child.once('exit', () => done())
              setTimeout(() => child.kill('SIGKILL'), 8000).unref()
            }),
      ),
    )
    await provider.stop()
    await mail.stop()
    rmSync(folder, { recursive: true, force: true })
  }
}

/** Where the bootstrap found or put Debian's Chromium. */
function chromium(): string {
  const noted = join(root, '.data', 'chromium.path')
  return existsSync(noted) ? readFileSync(noted, 'utf8').trim() : '/usr/bin/chromium'
}
