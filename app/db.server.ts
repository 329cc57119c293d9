// The application's connection to PostgreSQL.
import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres'
import pg from 'pg'
import { env } from '#app/env.server.ts'
import * as schema from '#drizzle/schema/index.ts'

export type Database = NodePgDatabase<typeof schema>
/** What queries are written against: the database itself or a transaction on it. */
export type Queryable = Pick<
  Database,
  'select' | 'selectDistinct' | 'insert' | 'update' | 'delete' | 'execute'
>

/** Reads DATABASE_URL at the first connection, not on import: commands and tests may set it after loading. */
class ApplicationPool extends pg.Pool {
  // biome-ignore lint/suspicious/noExplicitAny: pg's overloads of connect differ only in the callback.
  override connect(...callback: any[]): any {
    this.options.connectionString ??= env.DATABASE_URL
    return super.connect(...(callback as []))
  }
}

/**
 * A connection whose answer never came is dead, and a transaction hands it back to the pool as if it were not. Broken
 * off, the pool replaces it.
 */
function endWhenSilent(client: pg.PoolClient): void {
  // What breaks while it is lent out reaches the borrower through its query.
  client.on('error', () => {})
  const send = client.query.bind(client) as (...args: unknown[]) => unknown
  const query = (...args: unknown[]) => {
    const answer = send(...args)
    if (answer instanceof Promise)
      answer.catch((error: Error) => {
        if (error.message === 'Query read timeout')
          (client as unknown as { connection: { stream: { destroy(): void } } }).connection.stream.destroy()
      })
    return answer
  }
  client.query = query as typeof client.query
}

function createPool(): pg.Pool {
  const pool = new ApplicationPool({ max: 10, application_name: 'rowfall' })
  // A connection that breaks while idle is replaced at the next use; without a listener it would end the process.
  pool.on('connect', endWhenSilent)
  pool.on('error', (error) => console.warn(`PostgreSQL closed an idle connection: ${error.message}`))
  return pool
}

// Development reloads modules; the pool outlives them.
const kept = globalThis as typeof globalThis & { rowfallPool?: pg.Pool }
kept.rowfallPool ??= createPool()

export const pool: pg.Pool = kept.rowfallPool
export const db: Database = drizzle({ client: pool, schema })
