// Brings a database's tables up to date with drizzle/migrations.
import { fileURLToPath } from 'node:url'
import { drizzle } from 'drizzle-orm/node-postgres'
import { migrate } from 'drizzle-orm/node-postgres/migrator'
import pg from 'pg'

const MIGRATIONS = fileURLToPath(new URL('../../drizzle/migrations', import.meta.url))
/** Any number, the same in every process: whoever holds the lock of this name migrates, the others wait. */
const LOCK = 7_205_759

/** Applies what is missing. Safe to call from several processes or hosts at once. */
export async function migrateDatabase(url: string): Promise<void> {
  const client = new pg.Client({ connectionString: url, application_name: 'rowfall migrate' })
  await client.connect()
  try {
    await client.query('select pg_advisory_lock($1)', [LOCK])
    // Migrating an up-to-date database says so in notices that nobody needs.
    await client.query('set client_min_messages = warning')
    await migrate(drizzle({ client }), { migrationsFolder: MIGRATIONS })
  } finally {
    await client.end()
  }
}
