// `npm start`: everything Rowfall needs on this machine, in order, and all of it ended again with this process.
//
// What is given by environment variables (database, identity provider, mail server) is used; what is not is brought:
// a private PostgreSQL, a local identity provider with demo people and data, a catcher for e-mail.
import { type ChildProcess, spawn } from 'node:child_process'
import { randomBytes } from 'node:crypto'
import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'
import { readSettings } from '#app/settings.ts'
import { startCluster } from '#drizzle/local-postgres/cluster.mjs'
import {
  firstFreePort,
  freePort,
  pause,
  SetUpError,
  say,
  takeLock,
} from '#drizzle/local-postgres/processes.mjs'
import { DEMO_PEOPLE, DEMO_ROLE_GROUPS } from './demo-people.ts'
import { migrateDatabase } from './migrate.ts'

const root = fileURLToPath(new URL('../..', import.meta.url))
const development = process.argv.includes('--dev')

type Ending = { what: string; end: () => Promise<unknown> }
/** What has been started, in order; ended in the opposite one. */
const endings: Ending[] = []
let ending = false

async function endAll(code: number): Promise<never> {
  if (!ending) {
    ending = true
    for (const { what, end } of endings.reverse())
      await end().catch((error) => say(`${what}: ${error?.message ?? error}`))
    process.exit(code)
  }
  return new Promise(() => {})
}
for (const [signal, code] of [
  ['SIGINT', 130],
  ['SIGTERM', 0],
  ['SIGHUP', 129],
] as const)
  process.on(signal, () => void endAll(code === 130 ? 0 : code))

function fail(message: string): Promise<never> {
  say(message)
  return endAll(1)
}

/** A value kept in a private file, made at first use. */
function kept(file: string, make: () => string): string {
  if (existsSync(file)) return readFileSync(file, 'utf8').trim()
  const value = make()
  writeFileSync(file, `${value}\n`, { mode: 0o600 })
  return value
}

/** The port used last time, if it is free, so that bookmarks stay good; else the first free one from `first`. */
async function rememberedPort(file: string, first: number): Promise<number> {
  const last = existsSync(file) ? Number(readFileSync(file, 'utf8')) : 0
  const port = last && (await freePort(last)) ? last : await firstFreePort(first)
  writeFileSync(file, String(port))
  return port
}

/** A child of ours: its lines to standard error, begun again when it dies, ended with us. */
function keepAlive(what: string, args: string[], env: NodeJS.ProcessEnv): void {
  let child: ChildProcess | undefined
  let stopping = false
  let begun = 0
  const begin = () => {
    begun = Date.now()
    child = spawn(process.execPath, args, { cwd: root, env, stdio: ['ignore', 2, 2] })
    child.on('exit', async (code, signal) => {
      child = undefined
      if (stopping) return
      say(`${what}: ended unexpectedly (${signal ?? code}); starting it again.`)
      await pause(Date.now() - begun < 5000 ? 2000 : 100)
      if (!stopping) begin()
    })
  }
  begin()
  endings.push({
    what,
    end: () =>
      new Promise<void>((done) => {
        stopping = true
        if (!child) return done()
        const running = child
        running.once('exit', () => done())
        running.kill('SIGTERM')
        setTimeout(() => running.kill('SIGKILL'), 12_000).unref()
      }),
  })
}

/** Waits until the web process answers. */
async function answering(address: string): Promise<boolean> {
  for (let waited = 0; waited < 600; waited += 1) {
    try {
      if ((await fetch(`${address}/health`)).status < 500) return true
    } catch {
      // Not listening yet.
    }
    await pause(100)
  }
  return false
}

async function main(): Promise<void> {
  const reading = readSettings(process.env, 'start')
  if (!reading.ok) return fail(reading.faults.join('\n'))
  const { settings } = reading
  const data = resolve(root, settings.DATA_FOLDER)
  mkdirSync(data, { recursive: true })

  const holder = takeLock(join(data, 'start.lock'))
  if (holder)
    return fail('Rowfall is running already from this folder; stop it first, or open the address it printed.')
  endings.push({ what: 'Lock', end: async () => rmSync(join(data, 'start.lock'), { force: true }) })

  let databaseUrl = settings.DATABASE_URL
  if (!databaseUrl) {
    const cluster = await startCluster({ folder: data, packages: join(data, 'postgresql') })
    endings.push({ what: 'PostgreSQL', end: () => cluster.stop('fast') })
    databaseUrl = cluster.url
  }
  await migrateDatabase(databaseUrl)

  const env: NodeJS.ProcessEnv = {
    ...process.env,
    NODE_ENV: development ? 'development' : 'production',
    DATABASE_URL: databaseUrl,
    HOST: settings.HOST,
    SESSION_SECRET:
      settings.SESSION_SECRET ?? kept(join(data, 'session-secret'), () => randomBytes(48).toString('base64')),
  }
  const port = settings.PORT ?? (await rememberedPort(join(data, 'web.port'), 3000))
  const host = settings.HOST.includes(':') ? `[${settings.HOST}]` : settings.HOST
  const address = settings.BASE_URL ?? `http://${host}:${port}`
  Object.assign(env, { PORT: String(port), BASE_URL: address })

  if (settings.LOCAL_DEMO) {
    const { startIdentityProvider } = await import('./identity-provider.ts')
    const provider = await startIdentityProvider({
      port: await rememberedPort(join(data, 'identity-provider.port'), 9100),
      keyFile: join(data, 'identity-provider.jwk'),
    })
    endings.push({ what: 'Identity provider', end: provider.stop })
    Object.assign(env, {
      LOCAL_DEMO: '1',
      OIDC_ISSUER: provider.issuer,
      OIDC_CLIENT_ID: 'rowfall',
      OIDC_CLIENT_SECRET: 'local',
      ROLE_GROUPS: DEMO_ROLE_GROUPS,
    })
  }
  if (!settings.SMTP_URL) {
    const { startMailCatcher } = await import('./mail-catcher.ts')
    const folder = join(data, 'mail')
    const catcher = await startMailCatcher({ port: await firstFreePort(2525), folder })
    endings.push({ what: 'Mail catcher', end: catcher.stop })
    Object.assign(env, {
      SMTP_URL: catcher.url,
      MAIL_FROM: settings.MAIL_FROM,
      MAIL_CATCHER_FOLDER: folder,
    })
  }

  if (settings.LOCAL_DEMO) {
    process.env.DATABASE_URL = databaseUrl
    const { closeDatabase, seedDatabase } = await import('./seed.ts')
    endings.push({ what: 'Database', end: closeDatabase })
    await seedDatabase()
  }

  if (development) {
    keepAlive(
      'Web',
      [
        join(root, 'node_modules/@react-router/dev/bin.js'),
        'dev',
        '--port',
        String(port),
        '--host',
        settings.HOST,
        '--strictPort',
      ],
      env,
    )
    keepAlive('Worker', ['--import', 'tsx', 'app/jobs/job-worker.ts'], env)
  } else {
    keepAlive('Web', ['build/server/web.js'], env)
    keepAlive('Worker', ['build/server/job-worker.js'], env)
  }
  if (!(await answering(`http://${host === '0.0.0.0' ? '127.0.0.1' : host}:${port}`)))
    return fail('Web: it did not answer within a minute; its messages are above.')

  console.log(`Rowfall: ${address}`)
  if (settings.LOCAL_DEMO) {
    console.log('Demo sign-ins, offered on the sign-in page, no password:')
    for (const { email } of DEMO_PEOPLE) console.log(`  ${email}`)
    const { runShippedStudy } = await import('./seed.ts')
    await runShippedStudy(
      (line) => console.log(line),
      () => ending,
    )
  }
}

main().catch((error) => fail(error instanceof SetUpError ? error.message : (error?.stack ?? String(error))))
