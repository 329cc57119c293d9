// The way to a decision on a real database: asked, returned, asked again, accepted; and what nobody can change after.
import { eq, sql } from 'drizzle-orm'
import { SMTPServer } from 'smtp-server'
import { afterAll, beforeAll, expect, test } from 'vitest'
import { db, pool } from '#app/db.server.ts'
import { queue } from '#app/jobs/queue.server.ts'
import { addComment, listComments, withdrawComment } from '#app/modules/comments/comments.server.ts'
import { readStopToken, sendDueMail, stopToken } from '#app/modules/mail/outbox.server.ts'
import { listNotices, markRead, unreadNotices } from '#app/modules/notices/notices.server.ts'
import { renameStudy } from '#app/modules/studies/studies.server.ts'
import {
  auditEntry,
  mailOutbox,
  person,
  pointResult,
  projectMember,
  type Role,
  run,
  studyRevision,
} from '#drizzle/schema/index.ts'
import { evaluate } from '#engine/evaluate.ts'
import { planSweep, pointCase } from '#engine/sweep/plan.ts'
import { parseStudy } from '#engine/sweep/study.ts'
import { definition, type Planted, plantStudy } from '#tests/crash/fixtures.ts'
import { baselineOf, getRecord, listRecords, setBaseline } from './records.server.ts'
import { acceptReview, askReview, returnReview, reviewsOfStudy, withdrawReview } from './reviews.server.ts'

type Person = { personId: string; name: string; address: string }

let planted: Planted
let runId: string
let engineer: Person
let lead: Person
const STUDY = definition({ velocities: 5, inlets: 5 })
const POINT = 37

async function member(name: string, role: Role): Promise<Person> {
  const email = `${name.toLowerCase()}@example.com`
  const [{ id }] = await db.insert(person).values({ name, email, role }).returning()
  await db.insert(projectMember).values({ projectId: planted.projectId, personId: id })
  return { personId: id, name, address: '192.0.2.1' }
}

/** A run that has ended, without a worker: reviews ask nothing of how it was computed. */
async function finishedRun(of: Planted): Promise<string> {
  const [made] = await db
    .insert(run)
    .values({
      studyId: of.studyId,
      revisionId: of.revisionId,
      engineVersion: '0.0.9',
      points: 100,
      chunkPoints: 100,
      state: 'done',
      endedAt: new Date(),
      contentHash: 'f'.repeat(64),
      bestPoint: POINT,
    })
    .returning()
  const parsed = parseStudy(STUDY)
  if (!parsed.ok) throw new Error('the study does not parse')
  const bundle = pointCase(planSweep(parsed.study), POINT)
  await db.insert(pointResult).values({
    runId: made.id,
    kind: 'best',
    point: POINT,
    engineVersion: '0.0.9',
    case: bundle as never,
    // As an earlier engine found it: a record must say what was found then, not what is found now.
    result: { ...evaluate(bundle), outsideArea: 12.345, engineVersion: '0.0.9' } as never,
  })
  return made.id
}

beforeAll(async () => {
  planted = await plantStudy(STUDY)
  engineer = await member('Engineer', 'engineer')
  lead = await member('Lead', 'lead')
  runId = await finishedRun(planted)
})

afterAll(async () => {
  await (await queue()).stop({ close: false, graceful: false })
  await pool.end()
})

test('a study goes from asked to returned, asked again, and accepted', async () => {
  const asked = { runId, point: POINT, note: 'The least within the limits.' }
  await askReview(planted.studyId, asked, engineer)
  await expect(askReview(planted.studyId, asked, engineer)).rejects.toThrow(/open already/)
  expect((await listNotices(lead.personId))[0]).toMatchObject({ kind: 'reviewAsked', readAt: null })
  expect(await listNotices(engineer.personId)).toEqual([])

  await expect(returnReview(planted.studyId, '  ', lead)).rejects.toThrow(/Reason/)
  await returnReview(planted.studyId, 'Show it with two passes more.', lead)
  expect((await listNotices(engineer.personId))[0].sentence).toContain('returned')
  await expect(acceptReview(planted.studyId, '', lead)).rejects.toThrow(/No review/)

  await askReview(planted.studyId, asked, engineer)
  await expect(withdrawReview(planted.studyId, lead)).rejects.toThrow(/Only who asked/)
  const recordId = await acceptReview(planted.studyId, 'Agreed.', lead)

  const record = await getRecord(planted.projectId, recordId)
  expect(record.intact).toBe(true)
  expect(record.content).toMatchObject({
    number: 1,
    point: POINT,
    isBest: true,
    run: { id: runId, engineVersion: '0.0.9', contentHash: 'f'.repeat(64) },
    result: { outsideArea: 12.345, engineVersion: '0.0.9' },
    asked: { name: 'Engineer', note: asked.note },
    accepted: { name: 'Lead', reason: 'Agreed.' },
  })
  expect(record.content.methods.length).toBeGreaterThan(5)
  expect(record.content.standings).toEqual([expect.objectContaining({ id: 'coolantPressureDrop' })])
  expect(await baselineOf(planted.projectId)).toMatchObject({ id: recordId, number: 1, area: 12.345 })
  expect((await reviewsOfStudy(planted.studyId)).map(({ state }) => state)).toEqual(['accepted', 'returned'])

  const acts = await db
    .select({ act: auditEntry.act, name: auditEntry.personName, address: auditEntry.address })
    .from(auditEntry)
    .where(eq(auditEntry.projectId, planted.projectId))
    .orderBy(auditEntry.id)
  expect(acts.map(({ act }) => act)).toEqual([
    'review.ask',
    'review.return',
    'review.ask',
    'review.accept',
    'record.keep',
    'project.setBaseline',
  ])
  expect(acts.every(({ address }) => address === '192.0.2.1')).toBe(true)
})

test('a record stays as it was when everything around it changes', async () => {
  const [{ id }] = await listRecords(planted.projectId)
  const before = await getRecord(planted.projectId, id)
  await renameStudy(planted.studyId, 'Another name', engineer)
  await db.update(person).set({ name: 'Renamed' }).where(eq(person.id, engineer.personId))
  await db.update(pointResult).set({ result: {} }).where(eq(pointResult.runId, runId))
  await db.update(run).set({ engineVersion: '9.9.9' }).where(eq(run.id, runId))
  expect(await getRecord(planted.projectId, id)).toEqual(before)
  await db.update(person).set({ name: 'Engineer' }).where(eq(person.id, engineer.personId))
})

test('another record becomes the baseline, and the earlier can be made it again', async () => {
  const second = await plantStudy({ ...STUDY, name: 'Second' })
  await db.execute(sql`update study set project_id = ${planted.projectId} where id = ${second.studyId}`)
  const other = await finishedRun(second)
  await askReview(second.studyId, { runId: other, point: POINT, note: '' }, engineer)
  const id = await acceptReview(second.studyId, '', lead)
  expect(await baselineOf(planted.projectId)).toMatchObject({ id, number: 2 })
  await expect(setBaseline(planted.projectId, id, lead)).rejects.toThrow(/already/)
  const [, first] = await listRecords(planted.projectId)
  await setBaseline(planted.projectId, first.id, lead)
  expect(await baselineOf(planted.projectId)).toMatchObject({ id: first.id, number: 1 })
  await expect(setBaseline(second.projectId, first.id, lead)).rejects.toThrow(/no such record/)
})

test('a review rests on a finished run of the study, and on a point with a result', async () => {
  const [open] = await db
    .insert(run)
    .values({ ...planted, engineVersion: '1', points: 100, chunkPoints: 100, state: 'running' })
    .returning()
  await expect(askReview(planted.studyId, { runId: open.id, point: 0, note: '' }, engineer)).rejects.toThrow(
    /is running/,
  )
  const foreign = await finishedRun(await plantStudy(STUDY))
  await expect(
    askReview(planted.studyId, { runId: foreign, point: POINT, note: '' }, engineer),
  ).rejects.toThrow(/no such run/)
  await expect(askReview(planted.studyId, { runId, point: null, note: '' }, engineer)).rejects.toThrow(
    /no refined point/,
  )
  await expect(askReview(planted.studyId, { runId, point: 100, note: '' }, engineer)).rejects.toThrow(
    /0 to 99/,
  )
  expect(
    await db.select().from(studyRevision).where(eq(studyRevision.studyId, planted.studyId)),
  ).toHaveLength(1)
})

test('a comment tells whom it mentions, once, and can be taken back by its writer alone', async () => {
  const subject = { studyId: planted.studyId }
  await markRead(lead.personId)
  await addComment(subject, planted.projectId, 'Have a look, @Lead and again @lead@example.com', engineer)
  expect(await unreadNotices(lead.personId)).toBe(1)
  const [said] = await listComments(subject, planted.projectId)
  expect(said.pieces?.filter((piece) => piece.person === lead.personId)).toHaveLength(2)
  await expect(withdrawComment(said.id, planted.projectId, lead)).rejects.toThrow(/no such comment of yours/)
  await withdrawComment(said.id, planted.projectId, engineer)
  expect((await listComments(subject, planted.projectId))[0].pieces).toBeNull()
  await expect(addComment(subject, planted.projectId, ' ', engineer)).rejects.toThrow(/Comment/)
  await expect(
    addComment({ studyId: crypto.randomUUID() }, planted.projectId, 'x', engineer),
  ).rejects.toThrow(/not there/)
})

test('who has left a project sees its notices no more', async () => {
  expect((await listNotices(lead.personId)).length).toBeGreaterThan(0)
  await db.delete(projectMember).where(eq(projectMember.personId, lead.personId))
  expect(await listNotices(lead.personId)).toEqual([])
  await db.insert(projectMember).values({ projectId: planted.projectId, personId: lead.personId })
})

test('e-mail is sent once to each who chose it, and again after a server that refuses', async () => {
  const received: string[] = []
  let refusing = true
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    onData(stream, _session, done) {
      let text = ''
      stream.on('data', (part) => {
        text += part
      })
      stream.on('end', () => {
        if (refusing) return done(new Error('Come back later'))
        received.push(text)
        done()
      })
    },
  })
  const port = await new Promise<number>((listening) => {
    const socket = server.listen(0, '127.0.0.1', () => listening((socket.address() as { port: number }).port))
  })
  const send = () => sendDueMail(`smtp://127.0.0.1:${port}`)
  const queued = await db.select().from(mailOutbox)
  expect(queued.length).toBeGreaterThanOrEqual(5)
  expect(queued.map(({ kind }) => kind).sort()).toEqual(
    expect.arrayContaining(['mention', 'reviewAnswered', 'reviewAsked']),
  )
  await send()
  expect(received).toEqual([])
  expect((await db.select().from(mailOutbox)).every(({ fault }) => fault?.includes('Come back later'))).toBe(
    true,
  )
  // Nothing is due again at once.
  expect(await send()).toBe(0)

  refusing = false
  await db.update(mailOutbox).set({ dueAt: sql`now()` })
  const senders = await Promise.all([send(), send(), send()])
  expect(senders.reduce((a, b) => a + b)).toBe(queued.length)
  expect(received).toHaveLength(queued.length)
  expect(new Set(received.map((mail) => /Message-ID: (.*)/i.exec(mail)?.[1])).size).toBe(queued.length)
  expect(received.some((mail) => mail.includes('lead@example.com') && mail.includes('text/html'))).toBe(true)
  expect(await send()).toBe(0)
  await new Promise<void>((closed) => server.close(closed))
})

test('whoever switched e-mail off gets the notice alone; a stop link works for its receiver and kind only', async () => {
  await db.update(person).set({ mailMentions: false }).where(eq(person.id, lead.personId))
  const before = (await db.select().from(mailOutbox)).length
  await addComment({ studyId: planted.studyId }, planted.projectId, '@Lead again', engineer)
  expect((await db.select().from(mailOutbox)).length).toBe(before)
  expect((await listNotices(lead.personId))[0].sentence).toContain('mentioned')

  const token = stopToken(lead.personId, 'mention')
  expect(readStopToken(token)).toMatchObject({ personId: lead.personId, kind: 'mention' })
  expect(readStopToken(token.replace('mention', 'runEnded'))).toBeNull()
  expect(readStopToken(token.replace(lead.personId, engineer.personId))).toBeNull()
  expect(readStopToken('')).toBeNull()
})
