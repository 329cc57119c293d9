// Comparisons and views that people keep by name: each is a page's query.
import { and, asc, desc, eq, or } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { AppError } from '#app/http/errors.ts'
import { isId } from '#app/http/ids.ts'
import { type Acting, recordAct } from '#app/modules/audit/audit.server.ts'
import { oneLine } from '#app/modules/stored-text.ts'
import { comparison, person, savedView } from '#drizzle/schema/index.ts'

type Person = Acting & { personId: string }

const LONGEST_QUERY = 4000

function nameOf(text: string): string {
  const name = oneLine(text)
  if (name === null || name === '' || name.length > 120)
    throw new AppError('invalid', 'Name: give 1 to 120 characters, all of which can be shown.')
  return name
}

/** A page's query, written anew: nothing but names and values survives. */
function queryOf(text: string): string {
  const query = new URLSearchParams(text.replace(/^\?/, '')).toString()
  if (query === '' || query.length > LONGEST_QUERY || query.includes('%00'))
    throw new AppError('invalid', 'There is nothing to save, or more than can be kept; change the view.')
  return query
}

export async function saveComparison(projectId: string, name: string, query: string, acting: Person) {
  const values = { projectId, name: nameOf(name), query: queryOf(query), createdBy: acting.personId }
  return db.transaction(async (tx) => {
    const [made] = await tx.insert(comparison).values(values).onConflictDoNothing().returning()
    if (!made)
      throw new AppError('conflict', `Name: a comparison is called "${values.name}" already; choose another.`)
    await recordAct(tx, acting, {
      act: 'comparison.save',
      subject: 'comparison',
      subjectId: made.id,
      projectId,
      after: { name: made.name, query: made.query },
    })
    return made
  })
}

export async function listComparisons(projectId: string) {
  const rows = await db
    .select({
      id: comparison.id,
      name: comparison.name,
      createdBy: person.name,
      createdAt: comparison.createdAt,
    })
    .from(comparison)
    .innerJoin(person, eq(person.id, comparison.createdBy))
    .where(eq(comparison.projectId, projectId))
    .orderBy(desc(comparison.createdAt))
  return rows.map((row) => ({ ...row, createdAt: row.createdAt.toISOString() }))
}

export async function getComparison(projectId: string, comparisonId: string) {
  const [found] = isId(comparisonId)
    ? await db
        .select()
        .from(comparison)
        .where(and(eq(comparison.id, comparisonId), eq(comparison.projectId, projectId)))
    : []
  if (!found) throw new AppError('not-found', 'There is no such comparison in this project.')
  return found
}

export async function deleteComparison(projectId: string, comparisonId: string, acting: Person) {
  const found = await getComparison(projectId, comparisonId)
  await db.transaction(async (tx) => {
    await tx.delete(comparison).where(eq(comparison.id, found.id))
    await recordAct(tx, acting, {
      act: 'comparison.delete',
      subject: 'comparison',
      subjectId: found.id,
      projectId,
      before: { name: found.name, query: found.query },
    })
  })
}

/** Views of a study that a person may use: shared ones and their own. */
export async function listViews(studyId: string, personId: string) {
  return db
    .select({
      id: savedView.id,
      name: savedView.name,
      query: savedView.query,
      shared: savedView.shared,
      createdBy: savedView.createdBy,
      createdByName: person.name,
    })
    .from(savedView)
    .innerJoin(person, eq(person.id, savedView.createdBy))
    .where(
      and(eq(savedView.studyId, studyId), or(eq(savedView.shared, true), eq(savedView.createdBy, personId))),
    )
    .orderBy(asc(savedView.name))
}

export async function saveView(
  of: { studyId: string; projectId: string },
  given: { name: string; query: string; shared: boolean },
  acting: Person,
) {
  const values = {
    studyId: of.studyId,
    name: nameOf(given.name),
    query: queryOf(given.query),
    shared: given.shared,
    createdBy: acting.personId,
  }
  return db.transaction(async (tx) => {
    const [made] = await tx.insert(savedView).values(values).onConflictDoNothing().returning()
    if (!made)
      throw new AppError('conflict', `Name: a view is called "${values.name}" already; choose another.`)
    await recordAct(tx, acting, {
      act: 'view.save',
      subject: 'study',
      subjectId: of.studyId,
      projectId: of.projectId,
      after: { view: made.name, query: made.query, shared: made.shared },
    })
    return made
  })
}

/** Takes away a view of one's own. */
export async function deleteView(
  of: { studyId: string; projectId: string },
  viewId: string,
  acting: Person,
): Promise<void> {
  await db.transaction(async (tx) => {
    const [gone] = isId(viewId)
      ? await tx
          .delete(savedView)
          .where(
            and(
              eq(savedView.id, viewId),
              eq(savedView.studyId, of.studyId),
              eq(savedView.createdBy, acting.personId),
            ),
          )
          .returning()
      : []
    if (!gone) throw new AppError('not-found', 'There is no such view of yours.')
    await recordAct(tx, acting, {
      act: 'view.delete',
      subject: 'study',
      subjectId: of.studyId,
      projectId: of.projectId,
      before: { view: gone.name, query: gone.query },
    })
  })
}
