// Groups, roles and removal on a real database.
import { eq } from 'drizzle-orm'
import { afterAll, beforeEach, expect, test } from 'vitest'
import { db, pool } from '#app/db.server.ts'
import { auditEntry, person, type Role, roleGroup } from '#drizzle/schema/index.ts'
import { listPeople, mapGroup, removePerson, restorePerson, roleMap } from './roles.server.ts'
import { beginSession, viewerOfSession } from './sessions.server.ts'

const acting = { personId: null, name: 'Test', address: '192.0.2.1' }

afterAll(() => pool.end())

async function signedIn(name: string, groups: string[], role: Role | null) {
  const [made] = await db
    .insert(person)
    .values({
      name,
      email: `${name}@example.com`,
      issuer: 'https://id.example',
      subject: crypto.randomUUID(),
      groups,
      role,
      signedInAt: new Date(),
    })
    .returning()
  return made.id
}

beforeEach(async () => {
  // Whoever an earlier test left is out of this one.
  await db.update(person).set({ removedAt: new Date(), groups: [] })
  await db.delete(roleGroup)
  await db.insert(roleGroup).values([
    { group: 'admins', role: 'administrator' },
    { group: 'leads', role: 'lead' },
  ])
})

test('a new mapping changes the roles of open sessions at their next request', async () => {
  await signedIn('admin', ['admins'], 'administrator')
  const token = await beginSession(await signedIn('ann', ['staff', 'leads'], 'lead'), { userAgent: '' })
  expect((await viewerOfSession(token))?.role).toBe('lead')
  await mapGroup('staff', 'administrator', acting)
  expect((await viewerOfSession(token))?.role).toBe('administrator')
  await mapGroup('staff', null, acting)
  await mapGroup('leads', 'analyst', acting)
  expect((await viewerOfSession(token))?.role).toBe('analyst')
  await mapGroup('leads', null, acting)
  expect(await viewerOfSession(token)).toBeNull()
  expect(await roleMap()).toEqual({ admins: 'administrator' })
  const acts = await db.select().from(auditEntry).where(eq(auditEntry.act, 'role.map'))
  expect(acts.slice(-1)[0]).toMatchObject({
    subjectId: 'leads',
    before: { role: 'analyst' },
    after: { role: null },
    address: '192.0.2.1',
  })
})

test('the last administrator stays, whichever way they would go', async () => {
  const only = await signedIn('admin', ['admins'], 'administrator')
  await expect(mapGroup('admins', 'lead', acting)).rejects.toThrow(/no administrator/)
  await expect(mapGroup('admins', null, acting)).rejects.toThrow(/no administrator/)
  await expect(removePerson(only, acting)).rejects.toThrow(/no administrator/)
  expect((await listPeople()).find(({ id }) => id === only)).toMatchObject({
    role: 'administrator',
    removedAt: null,
  })
})

test('two administrators who remove each other at once leave one', async () => {
  const pair = [
    await signedIn('one', ['admins'], 'administrator'),
    await signedIn('two', ['admins'], 'administrator'),
  ]
  const ended = await Promise.allSettled(pair.map((id) => removePerson(id, acting)))
  expect(ended.filter(({ status }) => status === 'rejected')).toHaveLength(1)
})

test('a removed person is refused at the next request, and comes back when restored', async () => {
  await signedIn('admin', ['admins'], 'administrator')
  const id = await signedIn('bea', ['leads'], 'lead')
  const token = await beginSession(id, { userAgent: '' })
  await removePerson(id, acting)
  expect(await viewerOfSession(token)).toBeNull()
  await expect(removePerson(id, acting)).rejects.toThrow(/no such person/)
  await restorePerson(id, acting)
  expect(await viewerOfSession(token)).toBeNull()
  expect((await viewerOfSession(await beginSession(id, { userAgent: '' })))?.role).toBe('lead')
})

test.each([
  ['', 'lead', /Group/],
  ['x'.repeat(201), 'lead', /Group/],
  ['a\0b', 'lead', /Group/],
  ['staff', 'constructor', /Role/],
])('group %j and role %j are refused by name', async (group, role, fault) => {
  await expect(mapGroup(group, role, acting)).rejects.toThrow(fault)
})
