// A database cluster for measuring, as durable as a real one, removed afterwards.
import { mkdirSync, rmSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { pool } from '#app/db.server.ts'
import { queue } from '#app/jobs/queue.server.ts'
import { migrateDatabase } from '#app/start/migrate.ts'
import { startCluster } from '#drizzle/local-postgres/cluster.mjs'
import { freePort } from '#drizzle/local-postgres/processes.mjs'

const PRIVATE = fileURLToPath(new URL('../../.data', import.meta.url))

let opened: Promise<() => Promise<void>> | undefined

/** One for all that is measured. Sets DATABASE_URL, so nothing may have used the application's database before. */
export async function openBenchDatabase(): Promise<void> {
  opened ??= open()
  await opened
}

export async function closeBenchDatabase(): Promise<void> {
  await (await opened)?.()
}

async function open(): Promise<() => Promise<void>> {
  const folder = join(PRIVATE, 'bench', String(process.pid))
  mkdirSync(folder, { recursive: true })
  const cluster = await startCluster({ folder, packages: join(PRIVATE, 'postgresql'), durable: true })
  const port = await freePort(0)
  Object.assign(process.env, {
    DATABASE_URL: cluster.url,
    PORT: String(port),
    HOST: '127.0.0.1',
    BASE_URL: `http://127.0.0.1:${port}`,
    SESSION_SECRET: 'only-for-measuring-only-for-measuring',
    OIDC_ISSUER: 'http://127.0.0.1:1/',
    OIDC_CLIENT_ID: 'rowfall',
    OIDC_CLIENT_SECRET: 'only-for-measuring',
    ROLE_GROUPS: 'engineers=engineer',
    NODE_ENV: 'production',
  })
  await migrateDatabase(cluster.url)
  return async () => {
    await (await queue()).stop({ close: false, graceful: false })
    await pool.end()
    await cluster.stop('immediate')
    const { dataFolder } = cluster.record
    rmSync(dataFolder, { recursive: true, force: true })
    if (dirname(dataFolder) !== folder) rmSync(dirname(dataFolder), { recursive: true, force: true })
    rmSync(folder, { recursive: true, force: true })
  }
}
