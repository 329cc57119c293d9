// What may only be added to is refused every change by the database itself.
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { db, pool } from '#app/db.server.ts'
import {
  acceptedRecord,
  auditEntry,
  baseline,
  person,
  project,
  review,
  run,
  study,
  studyRevision,
} from './index.ts'

beforeAll(async () => {
  await db
    .insert(auditEntry)
    .values({ personName: 'Someone', act: 'study.create', subject: 'study', subjectId: '1' })
  const [{ id: projectId }] = await db.insert(project).values({ name: 'Project' }).returning()
  const [{ id: studyId }] = await db.insert(study).values({ projectId, name: 'Study' }).returning()
  const [{ id: revisionId }] = await db
    .insert(studyRevision)
    .values({ studyId, number: 1, definition: {} })
    .returning()
  const [{ id: personId }] = await db.insert(person).values({ name: 'P', email: 'p@example.com' }).returning()
  const [{ id: runId }] = await db
    .insert(run)
    .values({ studyId, revisionId, engineVersion: '1', points: 1, chunkPoints: 1 })
    .returning()
  const [{ id: reviewId }] = await db
    .insert(review)
    .values({ projectId, studyId, runId, askedBy: personId })
    .returning()
  const [{ id: recordId }] = await db
    .insert(acceptedRecord)
    .values({
      number: 1,
      projectId,
      studyId,
      revisionId,
      runId,
      reviewId,
      content: {},
      contentHash: '',
      acceptedBy: personId,
    })
    .returning()
  await db.insert(baseline).values({ projectId, number: 1, recordId })
})
afterAll(() => pool.end())

describe.each([
  ['audit_entry', 'act = act'],
  ['study_revision', 'definition = definition'],
  ['accepted_record', 'content = content'],
  ['baseline', 'number = number'],
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
