// A database of a test's own: a clone of the migrated template, made in a few hundredths of a second.
import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres'
import pg from 'pg'
import { inject } from 'vitest'
import * as schema from '#drizzle/schema/index.ts'
import { databaseUrl, TEMPLATE } from './postgres.ts'

export type TestDatabase = {
  url: string
  pool: pg.Pool
  db: NodePgDatabase<typeof schema>
  /** Closes the pool and drops the database. Without it both end with the test run. */
  drop: () => Promise<void>
}

let made = 0

/** Clones the template. For the database that `app/db.server.ts` uses in this file, see `fileDatabaseUrl`. */
export async function testDatabase(): Promise<TestDatabase> {
  const url = await cloneTemplate()
  const pool = new pg.Pool({ connectionString: url, max: 8 })
  return {
    url,
    pool,
    db: drizzle({ client: pool, schema }),
    async drop() {
      await pool.end()
      await onServer((server) =>
        server.query(`drop database "${new URL(url).pathname.slice(1)}" with (force)`),
      )
    },
  }
}

/** The database that DATABASE_URL names in this test file, so that modules which use the application's `db` find it. */
export function fileDatabaseUrl(): string {
  const url = process.env.DATABASE_URL
  if (!url) throw new Error('DATABASE_URL is not set; is this file named *.db.test.ts?')
  return url
}

export async function cloneTemplate(): Promise<string> {
  made += 1
  const name = `test_${process.pid}_${Date.now().toString(36)}_${made}`
  await onServer((server) => server.query(`create database "${name}" template ${TEMPLATE}`))
  return databaseUrl(inject('postgresUrl'), name)
}

async function onServer(work: (server: pg.Client) => Promise<unknown>): Promise<void> {
  const server = new pg.Client({ connectionString: inject('postgresUrl') })
  await server.connect()
  try {
    await work(server)
  } finally {
    await server.end()
  }
}
