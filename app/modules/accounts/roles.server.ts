// Which groups give which role, and who may use Rowfall at all: an administrator's acts, in force from the next request.
import { asc, count, eq, isNull, sql } from 'drizzle-orm'
import { db, type Queryable } from '#app/db.server.ts'
import { env } from '#app/env.server.ts'
import { AppError } from '#app/http/errors.ts'
import { type Acting, recordAct } from '#app/modules/audit/audit.server.ts'
import { oneLine } from '#app/modules/stored-text.ts'
import { person, projectMember, ROLES, type Role, roleGroup, session } from '#drizzle/schema/index.ts'
import { roleOfGroups } from './people.server.ts'

type RoleMap = Record<string, Role>

/** The map that administrators keep; until they first change it, the settings' ROLE_GROUPS. */
export async function roleMap(tx: Queryable = db): Promise<RoleMap> {
  const rows = await tx.select().from(roleGroup).orderBy(asc(roleGroup.group))
  return rows.length > 0 ? Object.fromEntries(rows.map(({ group, role }) => [group, role])) : env.ROLE_GROUPS
}

/** Gives a group a role, or none (null); everyone in it has their new role at their next request. */
export async function mapGroup(group: string, role: string | null, acting: Acting): Promise<void> {
  const name = oneLine(group)
  if (name === null || name === '' || name.length > 200)
    throw new AppError('invalid', 'Group: give 1 to 200 characters, as the identity provider spells it.')
  if (role !== null && !isRole(role))
    throw new AppError('invalid', `Role: ${role.slice(0, 40)} is none; choose one of ${ROLES.join(', ')}.`)
  await db.transaction(async (tx) => {
    await lockRoles(tx)
    const map = await roleMap(tx)
    const before = Object.hasOwn(map, name) ? map[name] : null
    if (before === role) return
    const changed = Object.fromEntries(Object.entries(map).filter(([each]) => each !== name)) as RoleMap
    if (role !== null) changed[name] = role
    if (Object.keys(changed).length === 0)
      throw new AppError('conflict', 'The last group cannot be taken out; map another first.')
    await tx.delete(roleGroup)
    await tx
      .insert(roleGroup)
      .values(Object.entries(changed).map(([each, of]) => ({ group: each, role: of })))
    const people = await tx
      .select({ id: person.id, groups: person.groups, role: person.role })
      .from(person)
      .where(sql`cardinality(${person.groups}) > 0`)
    for (const each of people) {
      const now = roleOfGroups(each.groups, changed)
      if (now !== each.role) await tx.update(person).set({ role: now }).where(eq(person.id, each.id))
    }
    await requireAdministrator(tx)
    await recordAct(tx, acting, {
      act: 'role.map',
      subject: 'group',
      subjectId: name,
      projectId: null,
      before: { role: before },
      after: { role },
    })
  })
}

/** Shuts a person out: open tabs are refused at their next request, and signing in again is refused too. */
export async function removePerson(personId: string, acting: Acting): Promise<void> {
  await db.transaction(async (tx) => {
    await lockRoles(tx)
    const [removed] = await tx
      .update(person)
      .set({ removedAt: sql`now()` })
      .where(sql`${person.id} = ${personId} and ${person.removedAt} is null`)
      .returning({ name: person.name, role: person.role })
    if (!removed) throw new AppError('not-found', 'There is no such person to remove.')
    await requireAdministrator(tx)
    await tx
      .update(session)
      .set({ revokedAt: sql`now()` })
      .where(sql`${session.personId} = ${personId} and ${session.revokedAt} is null`)
    await recordAct(tx, acting, {
      act: 'person.remove',
      subject: 'person',
      subjectId: personId,
      projectId: null,
      before: { name: removed.name, role: removed.role },
    })
  })
}

/** Lets a removed person in again, with their projects as they were. */
export async function restorePerson(personId: string, acting: Acting): Promise<void> {
  await db.transaction(async (tx) => {
    const [restored] = await tx
      .update(person)
      .set({ removedAt: null })
      .where(sql`${person.id} = ${personId} and ${person.removedAt} is not null`)
      .returning({ name: person.name })
    if (!restored) throw new AppError('not-found', 'There is no such removed person.')
    await recordAct(tx, acting, {
      act: 'person.restore',
      subject: 'person',
      subjectId: personId,
      projectId: null,
      after: { name: restored.name },
    })
  })
}

export async function listPeople() {
  const projects = db
    .select({ personId: projectMember.personId, n: count().as('projects_n') })
    .from(projectMember)
    .groupBy(projectMember.personId)
    .as('projects')
  const sessions = db
    .select({ personId: session.personId, n: count().as('sessions_n') })
    .from(session)
    .where(sql`${session.revokedAt} is null and ${session.expiresAt} > now()`)
    .groupBy(session.personId)
    .as('sessions')
  return db
    .select({
      id: person.id,
      name: person.name,
      email: person.email,
      role: person.role,
      groups: person.groups,
      signedInAt: person.signedInAt,
      removedAt: person.removedAt,
      projects: sql<number>`coalesce(${projects.n}, 0)::int`,
      sessions: sql<number>`coalesce(${sessions.n}, 0)::int`,
    })
    .from(person)
    .leftJoin(projects, eq(projects.personId, person.id))
    .leftJoin(sessions, eq(sessions.personId, person.id))
    .orderBy(sql`${person.removedAt} is not null`, asc(person.name))
}

const isRole = (text: string): text is Role => (ROLES as readonly string[]).includes(text)

/** Two administrators who remove each other at once take turns. */
const lockRoles = (tx: Queryable) => tx.execute(sql`select pg_advisory_xact_lock(hashtext('rowfall roles'))`)

async function requireAdministrator(tx: Queryable): Promise<void> {
  const [left] = await tx
    .select({ id: person.id })
    .from(person)
    .where(
      sql`${person.role} = 'administrator' and ${person.subject} is not null and ${isNull(person.removedAt)}`,
    )
    .limit(1)
  if (!left)
    throw new AppError(
      'conflict',
      'That would leave no administrator. Give another person the role first, and let them sign in.',
    )
}
