import { expect, test } from 'vitest'
import { pool } from '#app/db.server.ts'
import { migrateDatabase } from '#app/start/migrate.ts'
import { person } from '#drizzle/schema/index.ts'
import { fileDatabaseUrl, testDatabase } from './database.ts'

test('a test database has the tables, is its own, and is gone after drop', async () => {
  const first = await testDatabase()
  const second = await testDatabase()
  await first.db.insert(person).values({ name: 'A', email: 'a@example.com' })
  expect(await first.db.select().from(person)).toHaveLength(1)
  expect(await second.db.select().from(person)).toHaveLength(0)
  await first.drop()
  const left = await second.pool.query('select 1 from pg_database where datname = $1', [
    new URL(first.url).pathname.slice(1),
  ])
  expect(left.rowCount).toBe(0)
  await second.drop()
})

test("the application's own connection is to the file's database", async () => {
  const { rows } = await pool.query('select current_database() as name')
  expect(`/${rows[0].name}`).toBe(new URL(fileDatabaseUrl()).pathname)
  await pool.end()
})

test('migrating at once from several processes applies each migration once', async () => {
  const empty = await testDatabase()
  await empty.pool.query('drop schema public cascade; drop schema drizzle cascade; create schema public')
  await Promise.all([migrateDatabase(empty.url), migrateDatabase(empty.url), migrateDatabase(empty.url)])
  const { rows } = await empty.pool.query(
    'select count(*)::int as n, count(distinct hash)::int as d from drizzle.__drizzle_migrations',
  )
  expect(rows[0].n).toBe(rows[0].d)
  expect(rows[0].n).toBeGreaterThan(1)
  await empty.drop()
})
