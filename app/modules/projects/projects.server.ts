// Projects and their members.
import { and, asc, count, eq, isNull, max, sql } from 'drizzle-orm'
import { db, type Queryable } from '#app/db.server.ts'
import { AppError } from '#app/http/errors.ts'
import { type Acting, recordAct } from '#app/modules/audit/audit.server.ts'
import { oneLine, trimmedTo } from '#app/modules/stored-text.ts'
import { person, project, projectMember, study } from '#drizzle/schema/index.ts'

export type ProjectListing = {
  id: string
  name: string
  description: string
  invented: boolean
  studies: number
  members: number
  changedAt: Date | null
}

/** The projects a person belongs to, the latest touched first. */
export async function listProjects(personId: string): Promise<ProjectListing[]> {
  const members = db
    .select({ projectId: projectMember.projectId, n: count().as('members_n') })
    .from(projectMember)
    .groupBy(projectMember.projectId)
    .as('members')
  return db
    .select({
      id: project.id,
      name: project.name,
      description: project.description,
      invented: project.invented,
      studies: count(study.id),
      members: sql<number>`max(${members.n})::int`,
      changedAt: max(study.changedAt),
    })
    .from(project)
    .innerJoin(
      projectMember,
      and(eq(projectMember.projectId, project.id), eq(projectMember.personId, personId)),
    )
    .leftJoin(study, and(eq(study.projectId, project.id), isNull(study.archivedAt)))
    .leftJoin(members, eq(members.projectId, project.id))
    .groupBy(project.id)
    .orderBy(sql`max(${study.changedAt}) desc nulls last`, asc(project.name))
}

export async function getProject(projectId: string) {
  const [found] = await db.select().from(project).where(eq(project.id, projectId))
  if (!found) throw new AppError('not-found', 'There is no such project, or you are not a member of it.')
  return found
}

export async function listMembers(projectId: string) {
  return db
    .select({
      id: person.id,
      name: person.name,
      email: person.email,
      role: person.role,
      signedInAt: person.signedInAt,
    })
    .from(projectMember)
    .innerJoin(person, eq(person.id, projectMember.personId))
    .where(eq(projectMember.projectId, projectId))
    .orderBy(asc(person.name))
}

/** A new project with its maker as the first member. */
export async function createProject(
  name: string,
  description: string,
  acting: Acting & { personId: string },
) {
  const title = oneLine(name)
  if (title === null || title === '' || title.length > 120)
    throw new AppError('invalid', 'Project name: give 1 to 120 characters, all of which can be shown.')
  return db.transaction(async (tx) => {
    const [made] = await tx
      .insert(project)
      .values({ name: title, description: trimmedTo(description, 2000), createdBy: acting.personId })
      .onConflictDoNothing()
      .returning()
    if (!made)
      throw new AppError(
        'conflict',
        `Project name: there is a project called "${title}" already; choose another name.`,
      )
    await tx
      .insert(projectMember)
      .values({ projectId: made.id, personId: acting.personId, addedBy: acting.personId })
    await recordAct(tx, acting, {
      act: 'project.create',
      subject: 'project',
      subjectId: made.id,
      projectId: made.id,
      after: { name: title },
    })
    return made
  })
}

/** Adds a person by e-mail address; someone not seen yet is invited and becomes a member at their first sign-in. */
export async function addMember(projectId: string, email: string, acting: Acting) {
  const address = oneLine(email)
  if (address === null || !/^[^\s@]+@[^\s@]+$/.test(address) || address.length > 200)
    throw new AppError('invalid', 'E-mail: that is not an address; write name@company.example.')
  return db.transaction(async (tx) => {
    const id = (await personOfAddress(tx, address)) ?? (await invite(tx, address))
    const added = await tx
      .insert(projectMember)
      .values({ projectId, personId: id, addedBy: acting.personId })
      .onConflictDoNothing()
      .returning()
    if (added.length === 0) throw new AppError('conflict', `${address} is a member already.`)
    await recordAct(tx, acting, {
      act: 'project.addMember',
      subject: 'person',
      subjectId: id,
      projectId,
      after: { email: address },
    })
    return id
  })
}

/** Who goes by an address; of several, whoever signed in last. */
async function personOfAddress(tx: Queryable, address: string): Promise<string | undefined> {
  const [known] = await tx
    .select({ id: person.id })
    .from(person)
    .where(eq(sql`lower(${person.email})`, address.toLowerCase()))
    .orderBy(sql`${person.signedInAt} desc nulls last`)
    .limit(1)
  return known?.id
}

async function invite(tx: Queryable, address: string): Promise<string> {
  const [made] = await tx
    .insert(person)
    .values({ name: address, email: address })
    .onConflictDoNothing()
    .returning({ id: person.id })
  // Invited by someone else at the same moment.
  return made?.id ?? ((await personOfAddress(tx, address)) as string)
}

export async function removeMember(projectId: string, personId: string, acting: Acting) {
  await db.transaction(async (tx) => {
    const members = await tx
      .select({ personId: projectMember.personId })
      .from(projectMember)
      .where(eq(projectMember.projectId, projectId))
      .for('update')
    if (!members.some((member) => member.personId === personId))
      throw new AppError('not-found', 'That person is not a member.')
    if (members.length === 1)
      throw new AppError('conflict', 'The last member cannot be removed; add another first.')
    await tx
      .delete(projectMember)
      .where(and(eq(projectMember.projectId, projectId), eq(projectMember.personId, personId)))
    await recordAct(tx, acting, {
      act: 'project.removeMember',
      subject: 'person',
      subjectId: personId,
      projectId,
      before: { member: true },
    })
  })
}
