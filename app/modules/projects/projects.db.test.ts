import { desc, eq } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { db, pool } from '#app/db.server.ts'
import { auditEntry, person } from '#drizzle/schema/index.ts'
import { seedDemo } from '#drizzle/seed/seed.ts'
import { addMember, createProject, listMembers, listProjects, removeMember } from './projects.server.ts'

let acting: { personId: string; name: string; address: string }
beforeAll(async () => {
  const [{ id, name }] = await db
    .insert(person)
    .values({ name: 'Lead', email: 'a-lead@example.com', role: 'lead', issuer: 'i', subject: 's' })
    .returning()
  acting = { personId: id, name, address: '203.0.113.9' }
})
afterAll(() => pool.end())

const latestAct = async () => (await db.select().from(auditEntry).orderBy(desc(auditEntry.id)).limit(1))[0]

describe('a project', () => {
  it('is made with its maker as a member, and the trail says by whom and from where', async () => {
    const { id } = await createProject('  Line \n A ', 'x'.repeat(5000), acting)
    const mine = await listProjects(acting.personId)
    expect(mine).toMatchObject([{ id, name: 'Line A', studies: 0, members: 1 }])
    expect(mine[0].description).toHaveLength(2000)
    expect(await latestAct()).toMatchObject({
      act: 'project.create',
      personId: acting.personId,
      address: '203.0.113.9',
      projectId: id,
      after: { name: 'Line A' },
    })
  })

  it.each(['', '  ', 'x'.repeat(121), 'a\0b', 'a\u0007b'])('is not called %j', async (name) => {
    await expect(createProject(name, '', acting)).rejects.toMatchObject({ code: 'invalid' })
  })

  it('has a name of its own, whatever the case', async () => {
    await createProject('Line B', '', acting)
    const before = await latestAct()
    await expect(createProject('LINE b', '', acting)).rejects.toMatchObject({ code: 'conflict' })
    expect(await latestAct()).toEqual(before)
  })
})

describe('members', () => {
  it('are added by address, known or not, in any case, and once', async () => {
    const { id } = await createProject('Line C', '', acting)
    await addMember(id, ' New@Example.com ', acting)
    await expect(addMember(id, 'new@example.com', acting)).rejects.toMatchObject({ code: 'conflict' })
    await expect(addMember(id, 'A-LEAD@example.com', acting)).rejects.toMatchObject({ code: 'conflict' })
    expect((await listMembers(id)).map(({ email }) => email)).toEqual([
      'a-lead@example.com',
      'New@Example.com',
    ])
    expect(await latestAct()).toMatchObject({ act: 'project.addMember', after: { email: 'New@Example.com' } })
  })

  it('invited by two at once are one person', async () => {
    const [a, b] = [await createProject('Line D', '', acting), await createProject('Line E', '', acting)]
    const ids = await Promise.all([a, b].map(({ id }) => addMember(id, 'both@example.com', acting)))
    expect(ids[0]).toBe(ids[1])
  })

  it('of two people with one address are the one who signed in', async () => {
    await db.insert(person).values({ name: 'Invited', email: 'twice@example.com' })
    const [signedIn] = await db
      .insert(person)
      .values({
        name: 'Signed in',
        email: 'twice@example.com',
        issuer: 'i',
        subject: 'twice',
        signedInAt: new Date(),
      })
      .returning()
    const { id } = await createProject('Line F', '', acting)
    expect(await addMember(id, 'twice@example.com', acting)).toBe(signedIn.id)
  })

  it.each(['', 'nobody', 'a b@example.com', 'a@b@c', `${'x'.repeat(200)}@example.com`, 'a\0@example.com'])(
    'are not added as %j',
    async (address) => {
      const { id } = await createProject(`For ${Math.random()}`, '', acting)
      await expect(addMember(id, address, acting)).rejects.toMatchObject({ code: 'invalid' })
    },
  )

  it('are removed, but for the last one', async () => {
    const { id } = await createProject('Line G', '', acting)
    const added = await addMember(id, 'leaving@example.com', acting)
    await removeMember(id, added, acting)
    expect(await latestAct()).toMatchObject({ act: 'project.removeMember', subjectId: added })
    await expect(removeMember(id, added, acting)).rejects.toMatchObject({ code: 'not-found' })
    await expect(removeMember(id, 'no-id', acting)).rejects.toMatchObject({ code: 'not-found' })
    await expect(removeMember(id, acting.personId, acting)).rejects.toMatchObject({ code: 'conflict' })
  })

  it('removed by two at once still leave one', async () => {
    const { id } = await createProject('Line H', '', acting)
    const other = await addMember(id, 'other-half@example.com', acting)
    await Promise.allSettled([removeMember(id, other, acting), removeMember(id, acting.personId, acting)])
    expect(await listMembers(id)).toHaveLength(1)
  })
})

it('the demo is there once, however often it is seeded', async () => {
  await Promise.all([seedDemo(db), seedDemo(db)])
  await seedDemo(db)
  const [analyst] = await db.select().from(person).where(eq(person.email, 'analyst@example.com'))
  const projects = await listProjects(analyst.id)
  expect(projects.map(({ name }) => name).sort()).toEqual([
    'Binary plant Hollin',
    'Chiller line K4',
    'Test stand B',
  ])
  for (const { invented, studies, members } of projects)
    expect({ invented, studies, members }).toEqual({ invented: true, studies: 1, members: 4 })
})
