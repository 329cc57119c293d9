// Measured points of a project: kept as uploaded, read as cases, fitted, and their factor given to a study's draft.
import { and, desc, eq } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { AppError } from '#app/http/errors.ts'
import { isId } from '#app/http/ids.ts'
import { type Acting, recordAct } from '#app/modules/audit/audit.server.ts'
import { oneLine, trimmedTo } from '#app/modules/stored-text.ts'
import {
  getDraft,
  getRevision,
  getStudy,
  latestRevision,
  saveDraft,
} from '#app/modules/studies/studies.server.ts'
import { benchData, person } from '#drizzle/schema/index.ts'
import { MULTIPLIER_IDS, type MultiplierGroup } from '#engine/bundle/multipliers.ts'
import { type Correction, faultLine, parseCase } from '#engine/case.ts'
import { correctionFrom, type Fit, fitGroup, parityOf } from '#engine/uncertainty/measured.ts'
import { parseQuantity } from '#engine/units.ts'
import {
  baseCase,
  type Column,
  checkRows,
  columnFaults,
  guessColumns,
  type Measured,
  MOST_FITTED,
  measuredPoints,
  type RowFault,
  type StoredPoint,
} from './columns.ts'
import { LARGEST_FILE, readCsv, type Sheet } from './read.ts'
import { readWorkbook } from './workbook.server.ts'

type Person = Acting & { personId: string }
type Raw = Record<string, unknown>

const MOST_FAULTS = 200

export type Mapping = {
  base: { studyId: string; studyName: string; revisionId: string; revision: number }
  head: string[]
  columns: Column[]
  /** Length of the tubes in all rows, as typed; '' where a column or the study gives it. */
  length: string
  rows: number
  /** Rows that are no point: the first faults, and of how many rows. */
  faults: RowFault[]
  invalidRows: number
  checked: boolean
}
export type KeptFit = { result: Measured; fit: Fit }

const invalid = (message: string) => new AppError('invalid', message)

export async function uploadBenchData(
  projectId: string,
  given: { name: string; fileName: string; file: Buffer; studyId: string },
  acting: Person,
) {
  const name = oneLine(given.name)
  if (name === null || name === '' || name.length > 120)
    throw invalid('Name: give 1 to 120 characters, all of which can be shown.')
  const base = await baseOf(projectId, given.studyId)
  const sheet = await readSheet(given.file)
  const mapping: Mapping = {
    base,
    head: sheet.head,
    columns: guessColumns(sheet.head),
    length: '',
    rows: sheet.rows.length,
    faults: [],
    invalidRows: 0,
    checked: false,
  }
  return db.transaction(async (tx) => {
    const [made] = await tx
      .insert(benchData)
      .values({
        projectId,
        name,
        fileName: oneLine(trimmedTo(given.fileName, 200)) || 'file',
        original: given.file,
        mapping,
        points: [],
        uploadedBy: acting.personId,
      })
      .onConflictDoNothing()
      .returning({ id: benchData.id, name: benchData.name, fileName: benchData.fileName })
    if (!made)
      throw new AppError('conflict', `Name: measured points are called "${name}" already; choose another.`)
    await recordAct(tx, acting, {
      act: 'benchData.upload',
      subject: 'benchData',
      subjectId: made.id,
      projectId,
      after: {
        name,
        file: made.fileName,
        rows: sheet.rows.length,
        study: base.studyName,
        revision: base.revision,
      },
    })
    return made
  })
}

async function baseOf(projectId: string, studyId: string): Promise<Mapping['base']> {
  const study = await studyOf(projectId, studyId)
  const revision = await latestRevision(study.id)
  if (!revision) throw invalid(`Base study: "${study.name}" has no revision yet; run it, or choose another.`)
  return { studyId: study.id, studyName: study.name, revisionId: revision.id, revision: revision.number }
}

async function studyOf(projectId: string, studyId: string) {
  const study = isId(studyId) ? await getStudy(studyId).catch(() => null) : null
  if (study?.projectId !== projectId) throw invalid('Study: choose one of this project.')
  return study
}

const ZIP = 'PK'

async function readSheet(file: Buffer): Promise<Sheet> {
  if (file.length === 0)
    throw invalid('File: it is empty or not chosen; choose a CSV file or a workbook (.xlsx).')
  if (file.length > LARGEST_FILE)
    throw new AppError('too-large', 'File: it is larger than 8 MB; send the measured rows alone.')
  if (file.subarray(0, 2).toString('latin1') === ZIP) return readWorkbook(file)
  if (file.includes(0))
    throw invalid('File: it is neither text nor a workbook; save it as CSV (UTF-8) or .xlsx.')
  try {
    return readCsv(new TextDecoder('utf-8', { fatal: true }).decode(file))
  } catch (error) {
    if (error instanceof AppError) throw error
    // Spreadsheets of older offices write Windows-1252.
    return readCsv(new TextDecoder('windows-1252').decode(file))
  }
}

export async function listBenchData(projectId: string) {
  const rows = await db
    .select({
      id: benchData.id,
      name: benchData.name,
      fileName: benchData.fileName,
      uploadedBy: person.name,
      uploadedAt: benchData.uploadedAt,
    })
    .from(benchData)
    .innerJoin(person, eq(person.id, benchData.uploadedBy))
    .where(eq(benchData.projectId, projectId))
    .orderBy(desc(benchData.uploadedAt))
  return rows.map((row) => ({ ...row, uploadedAt: row.uploadedAt.toISOString() }))
}

export async function getBenchData(projectId: string, benchId: string) {
  const [found] = isId(benchId)
    ? await db
        .select()
        .from(benchData)
        .where(and(eq(benchData.id, benchId), eq(benchData.projectId, projectId)))
    : []
  if (!found) throw new AppError('not-found', 'There are no such measured points in this project.')
  return {
    ...found,
    mapping: found.mapping as unknown as Mapping,
    points: found.points as unknown as StoredPoint[],
    fit: found.fit as unknown as KeptFit | null,
  }
}
export type Bench = Awaited<ReturnType<typeof getBenchData>>

/** Reads the kept file anew under a choice of columns; a fit of other points no longer holds. */
export async function mapBenchData(
  projectId: string,
  benchId: string,
  chosen: { columns: Column[]; length: string },
  acting: Person,
): Promise<{ faults: string[] }> {
  const bench = await getBenchData(projectId, benchId)
  const { head } = bench.mapping
  const columns = head.map((_, i) => chosen.columns[i] ?? { target: '', unit: '' })
  const faults = columnFaults(head, columns)
  const typed = trimmedTo(chosen.length, 60)
  const length = typed === '' ? null : parseQuantity(typed, 'length')
  if (length && !length.ok) faults.push(`Tube length: ${length.problem}; ${length.remedy}.`)
  if (faults.length > 0) return { faults }
  const sheet = await readSheet(bench.original)
  const base = await baseCaseOf({ ...bench.mapping, length: typed })
  const checked = checkRows(sheet, columns, base)
  const mapping: Mapping = {
    ...bench.mapping,
    columns,
    length: typed,
    faults: checked.faults.slice(0, MOST_FAULTS),
    invalidRows: new Set(checked.faults.map(({ line }) => line)).size,
    checked: true,
  }
  await db.transaction(async (tx) => {
    await tx
      .update(benchData)
      .set({ mapping, points: checked.points, fit: null })
      .where(eq(benchData.id, bench.id))
    await recordAct(tx, acting, {
      act: 'benchData.map',
      subject: 'benchData',
      subjectId: bench.id,
      projectId,
      after: { name: bench.name, points: checked.points.length, invalidRows: mapping.invalidRows },
    })
  })
  return { faults: [] }
}

async function baseCaseOf({ base, length }: Pick<Mapping, 'base' | 'length'>): Promise<Raw> {
  const { definition } = await getRevision(base.revisionId)
  const read = length === '' ? null : parseQuantity(length, 'length')
  return baseCase(definition, read?.ok ? read.value : null)
}

/** Measured against predicted for one result: of the first hundred points that have it. */
export async function benchParity(bench: Bench, result: Measured) {
  const points = measuredPoints(
    bench.points.filter(({ measured }) => measured[result] !== undefined).slice(0, MOST_FITTED),
    await baseCaseOf(bench.mapping),
    result,
  )
  return parityOf(points, result)
}

export async function fitBenchData(
  projectId: string,
  benchId: string,
  result: Measured,
  group: string,
  acting: Person,
): Promise<void> {
  const bench = await getBenchData(projectId, benchId)
  if (!(MULTIPLIER_IDS as readonly string[]).includes(group))
    throw invalid('Part of the calculation: choose one of the list.')
  const having = bench.points.filter(({ measured }) => measured[result] !== undefined)
  if (having.length === 0)
    throw invalid('Measured result: no valid row has it; choose another, or a column for it above.')
  if (having.length > MOST_FITTED)
    throw invalid(
      `There are ${having.length} points; a factor is fitted to at most ${MOST_FITTED}: upload a file with the steadiest of them.`,
    )
  const points = measuredPoints(having, await baseCaseOf(bench.mapping), result)
  const fit = fitGroup(points, result, group as MultiplierGroup)
  if (!fit)
    throw invalid(
      'No factor on this part brings any point to what was measured; choose a part that the result depends on.',
    )
  const kept: KeptFit = { result, fit }
  await db.transaction(async (tx) => {
    await tx.update(benchData).set({ fit: kept }).where(eq(benchData.id, bench.id))
    await recordAct(tx, acting, {
      act: 'benchData.fit',
      subject: 'benchData',
      subjectId: bench.id,
      projectId,
      after: {
        name: bench.name,
        result,
        group,
        factor: fit.factor,
        points: fit.used,
        outliers: fit.outliers.length,
      },
    })
  })
}

/** Uploaded points go with whoever uploaded them; corrections that studies have from them stay. */
export async function deleteBenchData(projectId: string, benchId: string, acting: Person): Promise<void> {
  const bench = await getBenchData(projectId, benchId)
  if (bench.uploadedBy !== acting.personId)
    throw new AppError('forbidden', 'Only who uploaded measured points can delete them.')
  await db.transaction(async (tx) => {
    await tx.delete(benchData).where(eq(benchData.id, bench.id))
    await recordAct(tx, acting, {
      act: 'benchData.delete',
      subject: 'benchData',
      subjectId: bench.id,
      projectId,
      before: { name: bench.name, file: bench.fileName },
    })
  })
}

// --- corrections of a study -----------------------------------------------------------------------------------

const correctionsOf = (definition: Raw): Correction[] => {
  const list = (definition.case as Raw | undefined)?.corrections
  return Array.isArray(list) ? list : []
}

/** Corrections of each study as the person's draft has them, or else its latest revision. */
export async function studyCorrections(studies: readonly { id: string; name: string }[], personId: string) {
  return Promise.all(
    studies.map(async ({ id, name }) => {
      const definition = (await standing(id, personId)).definition
      return {
        id,
        name,
        corrections: correctionsOf(definition).map((entry) => ({
          name: String(entry?.name),
          factor: Number(entry?.factor),
        })),
      }
    }),
  )
}

async function standing(studyId: string, personId: string): Promise<{ definition: Raw; version: number }> {
  const draft = await getDraft(studyId, personId)
  return {
    definition: draft?.definition ?? (await latestRevision(studyId))?.definition ?? {},
    version: draft?.version ?? 0,
  }
}

/** Puts the fitted factor into the person's draft of a study, in place of an earlier one of the same name. */
export async function applyFit(
  projectId: string,
  benchId: string,
  studyId: string,
  acting: Person,
): Promise<string> {
  const bench = await getBenchData(projectId, benchId)
  if (!bench.fit) throw invalid('There is no fitted factor yet; fit one first.')
  const { fit } = bench.fit
  const interval = fit.interval
    ? `, 95 % from ${fit.interval.low.toPrecision(3)} to ${fit.interval.high.toPrecision(3)}`
    : ''
  const source = trimmedTo(`${fit.used} measured points of ${trimmedTo(bench.fileName, 80)}${interval}`, 200)
  const correction = correctionFrom(fit, bench.name, source)
  return changeCorrections(projectId, studyId, acting, (list) => [
    ...list.filter(({ name }) => name !== bench.name),
    correction,
  ])
}

export function removeCorrection(
  projectId: string,
  name: string,
  studyId: string,
  acting: Person,
): Promise<string> {
  return changeCorrections(projectId, studyId, acting, (list) => list.filter((entry) => entry.name !== name))
}

/** Gives the study's name. */
async function changeCorrections(
  projectId: string,
  studyId: string,
  acting: Person,
  change: (list: Correction[]) => Correction[],
): Promise<string> {
  const study = await studyOf(projectId, studyId)
  if (study.archivedAt)
    throw new AppError('conflict', 'Study: it is archived; restore it before changing it.')
  const { definition, version } = await standing(study.id, acting.personId)
  const kase = { ...(definition.case as Raw | undefined) }
  const corrections = change(correctionsOf(definition))
  if (corrections.length > 0) kase.corrections = corrections
  else delete kase.corrections
  if (corrections.length > 0) {
    const parsed = parseCase(kase)
    const wrong = parsed.ok ? [] : parsed.faults.filter(({ path }) => path.startsWith('corrections'))
    if (wrong.length > 0) throw invalid(`Study: ${faultLine(wrong[0])}.`)
  }
  const saved = await saveDraft(study.id, acting.personId, { ...definition, case: kase }, version)
  if (!saved.saved)
    throw new AppError('conflict', 'Study: its draft changed just now in another tab; try again.')
  return study.name
}
