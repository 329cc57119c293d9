// Studies: listed, made, renamed, copied, archived; their drafts and the revisions that runs are computed from.
import { and, desc, eq, ilike, inArray, isNotNull, isNull, sql } from 'drizzle-orm'
import { db, type Queryable } from '#app/db.server.ts'
import { parseJson } from '#app/http/body.ts'
import { AppError } from '#app/http/errors.ts'
import { type Acting, recordAct } from '#app/modules/audit/audit.server.ts'
import { oneLine, trimmedTo, unstorableIn } from '#app/modules/stored-text.ts'
import {
  person,
  run,
  type StudyRevision,
  type Study as StudyRow,
  study,
  studyDraft,
  studyRevision,
} from '#drizzle/schema/index.ts'
import { type Fault, faultLine } from '#engine/case.ts'
import { parseStudy, type Study } from '#engine/sweep/study.ts'

export type Definition = Record<string, unknown>
type Person = Acting & { personId: string }

/** A definition larger than this is no study anyone typed. */
const LARGEST_DEFINITION = 2_000_000
const LONGEST_NAME = 200

export type StudyListing = {
  id: string
  name: string
  origin: string
  invented: boolean
  createdByName: string | null
  changedAt: Date
  archivedAt: Date | null
  revision: number | null
  run: { id: string; state: string; points: number; bestPoint: number | null; endedAt: Date | null } | null
}

/** A project's studies, the latest changed first; `search` looks in names. */
export async function listStudies(
  projectId: string,
  { search = '', archived = false }: { search?: string; archived?: boolean } = {},
): Promise<StudyListing[]> {
  const latest = db
    .selectDistinctOn([run.studyId], {
      studyId: run.studyId,
      id: run.id,
      state: run.state,
      points: run.points,
      bestPoint: run.bestPoint,
      endedAt: run.endedAt,
    })
    .from(run)
    .where(
      inArray(run.studyId, db.select({ id: study.id }).from(study).where(eq(study.projectId, projectId))),
    )
    .orderBy(run.studyId, desc(run.plannedAt))
    .as('latest')
  const rows = await db
    .select({
      id: study.id,
      name: study.name,
      origin: study.origin,
      invented: study.invented,
      createdByName: person.name,
      changedAt: study.changedAt,
      archivedAt: study.archivedAt,
      revision: sql<
        number | null
      >`(select max(r.number) from study_revision r where r.study_id = ${study.id})`,
      runId: latest.id,
      runState: latest.state,
      runPoints: latest.points,
      runBestPoint: latest.bestPoint,
      runEndedAt: latest.endedAt,
    })
    .from(study)
    .leftJoin(person, eq(person.id, study.createdBy))
    .leftJoin(latest, eq(latest.studyId, study.id))
    .where(
      and(
        eq(study.projectId, projectId),
        archived ? isNotNull(study.archivedAt) : isNull(study.archivedAt),
        search.trim() === ''
          ? undefined
          : ilike(study.name, `%${trimmedTo(search, LONGEST_NAME).replace(/[\\%_]/g, '\\$&')}%`),
      ),
    )
    .orderBy(desc(study.changedAt))
  return rows.map(({ runId, runState, runPoints, runBestPoint, runEndedAt, ...row }) => ({
    ...row,
    run:
      runId === null || runState === null
        ? null
        : {
            id: runId,
            state: runState,
            points: runPoints ?? 0,
            bestPoint: runBestPoint,
            endedAt: runEndedAt,
          },
  }))
}

export async function getStudy(studyId: string): Promise<StudyRow> {
  const [found] = await db.select().from(study).where(eq(study.id, studyId))
  if (!found)
    throw new AppError('not-found', 'There is no such study, or you are not a member of its project.')
  return found
}

/** A new study whose definition stands in its maker's draft until a run keeps it as a revision. */
export async function createStudy(
  projectId: string,
  { name, origin = '', definition }: { name: string; origin?: string; definition: Definition },
  acting: Person,
): Promise<StudyRow> {
  const title = checkedName(name)
  checkStorable(definition)
  return db.transaction(async (tx) => {
    const [made] = await tx
      .insert(study)
      .values({ projectId, name: title, origin, createdBy: acting.personId })
      .returning()
    await tx.insert(studyDraft).values({
      studyId: made.id,
      personId: acting.personId,
      definition: { ...definition, name: title },
      baseRevision: 0,
    })
    await recordAct(tx, acting, {
      act: 'study.create',
      subject: 'study',
      subjectId: made.id,
      projectId,
      after: { name: title, origin },
    })
    return made
  })
}

/** A copy in the same project, from the latest revision or, where there is none, from the person's own draft. */
export async function copyStudy(studyId: string, acting: Person): Promise<StudyRow> {
  const from = await getStudy(studyId)
  const definition =
    (await latestRevision(studyId))?.definition ??
    (await getDraft(studyId, acting.personId))?.definition ??
    {}
  const name = `${trimmedTo(from.name, LONGEST_NAME - 7)} (copy)`
  return createStudy(from.projectId, { name, origin: `copy of ${from.name}`, definition }, acting)
}

export async function renameStudy(studyId: string, name: string, acting: Acting): Promise<void> {
  const title = checkedName(name)
  await change(
    studyId,
    acting,
    'study.rename',
    (before) => ({ before: { name: before.name }, after: { name: title } }),
    { name: title },
  )
}

/** Takes a study out of the list; its runs and records stay. */
export async function archiveStudy(studyId: string, acting: Acting): Promise<void> {
  await change(studyId, acting, 'study.archive', () => ({ after: { archived: true } }), {
    archivedAt: sql`now()`,
  })
}

export async function restoreStudy(studyId: string, acting: Acting): Promise<void> {
  await change(studyId, acting, 'study.restore', () => ({ after: { archived: false } }), { archivedAt: null })
}

async function change(
  studyId: string,
  acting: Acting,
  act: string,
  say: (before: StudyRow) => { before?: Record<string, unknown>; after?: Record<string, unknown> },
  set: Record<string, unknown>,
): Promise<void> {
  await db.transaction(async (tx) => {
    const [before] = await tx.select().from(study).where(eq(study.id, studyId)).for('update')
    if (!before) throw new AppError('not-found', 'There is no such study.')
    await tx
      .update(study)
      .set({ ...set, changedAt: sql`now()` })
      .where(eq(study.id, studyId))
    await recordAct(tx, acting, {
      act,
      subject: 'study',
      subjectId: studyId,
      projectId: before.projectId,
      ...say(before),
    })
  })
}

// --- drafts ---------------------------------------------------------------------------------------------------

export type Draft = { definition: Definition; version: number; baseRevision: number; savedAt: Date }

export async function getDraft(studyId: string, personId: string): Promise<Draft | null> {
  const [draft] = await db
    .select({
      definition: studyDraft.definition,
      version: studyDraft.version,
      baseRevision: studyDraft.baseRevision,
      savedAt: studyDraft.savedAt,
    })
    .from(studyDraft)
    .where(and(eq(studyDraft.studyId, studyId), eq(studyDraft.personId, personId)))
  return draft ?? null
}

export type DraftSaved =
  | { saved: true; version: number; savedAt: Date }
  | { saved: false; version: number; savedAt: Date }

/**
 * Keeps what a person has typed, valid or not, on top of the version they have seen (0: no draft yet). Another version
 * in the meantime, from another tab, is not overwritten: the answer says which one stands.
 */
export async function saveDraft(
  studyId: string,
  personId: string,
  definition: Definition,
  seenVersion: number,
): Promise<DraftSaved> {
  checkStorable(definition)
  return db.transaction(async (tx) => {
    if (seenVersion > 0) {
      const [saved] = await tx
        .update(studyDraft)
        .set({ definition, version: sql`${studyDraft.version} + 1`, savedAt: sql`now()` })
        .where(
          and(
            eq(studyDraft.studyId, studyId),
            eq(studyDraft.personId, personId),
            eq(studyDraft.version, seenVersion),
          ),
        )
        .returning({ version: studyDraft.version, savedAt: studyDraft.savedAt })
      if (saved) return { saved: true, ...saved }
    } else {
      const base = await latestRevision(studyId, tx)
      const [saved] = await tx
        .insert(studyDraft)
        .values({ studyId, personId, definition, baseRevision: base?.number ?? 0 })
        .onConflictDoNothing()
        .returning({ version: studyDraft.version, savedAt: studyDraft.savedAt })
      if (saved) return { saved: true, ...saved }
    }
    const [standing] = await tx
      .select({ version: studyDraft.version, savedAt: studyDraft.savedAt })
      .from(studyDraft)
      .where(and(eq(studyDraft.studyId, studyId), eq(studyDraft.personId, personId)))
    return standing ? { saved: false, ...standing } : { saved: false, version: 0, savedAt: new Date() }
  })
}

export async function discardDraft(studyId: string, personId: string): Promise<void> {
  await db.delete(studyDraft).where(and(eq(studyDraft.studyId, studyId), eq(studyDraft.personId, personId)))
}

// --- revisions ------------------------------------------------------------------------------------------------

export async function latestRevision(studyId: string, tx: Queryable = db): Promise<StudyRevision | null> {
  const [found] = await tx
    .select()
    .from(studyRevision)
    .where(eq(studyRevision.studyId, studyId))
    .orderBy(desc(studyRevision.number))
    .limit(1)
  return found ?? null
}

export async function getRevision(revisionId: string): Promise<StudyRevision> {
  const [found] = await db.select().from(studyRevision).where(eq(studyRevision.id, revisionId))
  if (!found) throw new AppError('not-found', 'There is no such revision.')
  return found
}

export type Kept =
  | { ok: true; revision: StudyRevision; study: Study; isNew: boolean }
  | { ok: false; faults: Fault[] }

/**
 * Keeps a definition as the study's next revision, if it can be run; one equal to the latest revision is that one.
 * The person's draft has then served.
 */
export async function keepRevision(studyId: string, definition: Definition, acting: Person): Promise<Kept> {
  checkStorable(definition)
  const parsed = parseStudy(definition)
  if (!parsed.ok) return { ok: false, faults: parsed.faults }
  return db.transaction(async (tx) => {
    const [owner] = await tx.select().from(study).where(eq(study.id, studyId)).for('update')
    if (!owner) throw new AppError('not-found', 'There is no such study.')
    if (owner.archivedAt)
      throw new AppError('conflict', 'The study is archived; restore it before changing it.')
    const latest = await latestRevision(studyId, tx)
    const same =
      latest !== null && JSON.stringify(sorted(latest.definition)) === JSON.stringify(sorted(definition))
    let revision = latest as StudyRevision
    if (!same) {
      ;[revision] = await tx
        .insert(studyRevision)
        .values({ studyId, number: (latest?.number ?? 0) + 1, definition, createdBy: acting.personId })
        .returning()
      await tx
        .update(study)
        .set({ name: parsed.study.name, changedAt: sql`now()` })
        .where(eq(study.id, studyId))
      await recordAct(tx, acting, {
        act: 'study.revise',
        subject: 'study',
        subjectId: studyId,
        projectId: owner.projectId,
        before: latest ? { revision: latest.number } : undefined,
        after: { revision: revision.number },
      })
    }
    await tx
      .delete(studyDraft)
      .where(and(eq(studyDraft.studyId, studyId), eq(studyDraft.personId, acting.personId)))
    return { ok: true, revision, study: parsed.study, isNew: !same }
  })
}

// --- checks ---------------------------------------------------------------------------------------------------

function checkedName(name: string): string {
  const title = oneLine(name)
  if (title === null)
    throw new AppError('invalid', 'Study name: it has a character that cannot be shown; type it anew.')
  if (title === '') throw new AppError('invalid', 'Study name: it is empty; give it a name.')
  if (title.length > LONGEST_NAME)
    throw new AppError('invalid', `Study name: it has ${title.length} characters; at most ${LONGEST_NAME}.`)
  return title
}

function checkStorable(definition: Definition): void {
  if (JSON.stringify(definition).length > LARGEST_DEFINITION)
    throw new AppError('too-large', 'The study is larger than 2 MB; give ranges instead of long lists.')
  const text = unstorableIn(definition)
  if (text !== undefined)
    throw new AppError(
      'invalid',
      `The study has a character that cannot be stored, in "${trimmedTo(text, 60)}"; type that text anew.`,
    )
}

/** Keys in one order: jsonb gives them back in its own. */
function sorted(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(sorted)
  if (typeof value !== 'object' || value === null) return value
  return Object.fromEntries(
    Object.entries(value)
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .map(([key, inner]) => [key, sorted(inner)]),
  )
}

/** A study file as uploaded or posted: JSON, within size; faults as lines where it cannot even be kept as a draft. */
export function readStudyFile(
  text: string,
): { ok: true; definition: Definition } | { ok: false; problem: string } {
  if (text.length > LARGEST_DEFINITION)
    return { ok: false, problem: 'Study file: it is larger than 2 MB; give ranges instead of long lists.' }
  let value: unknown
  try {
    value = parseJson(text)
  } catch (error) {
    return {
      ok: false,
      problem: `Study file: it is not JSON (${(error as Error).message}); download one from a study to see the form.`,
    }
  }
  if (typeof value !== 'object' || value === null || Array.isArray(value))
    return {
      ok: false,
      problem: 'Study file: it holds no study; give an object with name, case, sweep, objective and limits.',
    }
  return { ok: true, definition: value as Definition }
}

export const faultLines = (faults: readonly Fault[]): string[] => faults.map(faultLine)
