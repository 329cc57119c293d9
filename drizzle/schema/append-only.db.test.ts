// What may only be added to is refused every change by the database itself.
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { db, pool } from '#app/db.server.ts'
import { auditEntry, project, study, studyRevision } from './index.ts'

beforeAll(async () => {
  await db
    .insert(auditEntry)
    .values({ personName: 'Someone', act: 'study.create', subject: 'study', subjectId: '1' })
  const [{ id: projectId }] = await db.insert(project).values({ name: 'Project' }).returning()
  const [{ id: studyId }] = await db.insert(study).values({ projectId, name: 'Study' }).returning()
  await db.insert(studyRevision).values({ studyId, number: 1, definition: {} })
})
afterAll(() => pool.end())

describe.each([
  ['audit_entry', 'act = act'],
  ['study_revision', 'definition = definition'],
])('%s', (table, nothing) => {
  it.each([
    ['changed', `update ${table} set ${nothing}`],
    ['taken away', `delete from ${table}`],
    ['emptied', `truncate ${table} cascade`],
  ])('is not %s', async (_, statement) => {
    await expect(pool.query(statement)).rejects.toThrow(`${table} is append-only`)
  })

  it('is not changed by a session that switches triggers off', async () => {
    const client = await pool.connect()
    try {
      await client.query('set session_replication_role = replica')
      await expect(client.query(`delete from ${table}`)).rejects.toThrow('append-only')
    } finally {
      client.release(true)
    }
  })
})

it('a study with a revision cannot be deleted under it', async () => {
  await expect(pool.query('delete from study')).rejects.toThrow(/violates foreign key|append-only/)
})
