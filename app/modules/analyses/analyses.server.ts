// Analyses beyond a sweep: asked for here, computed by workers (app/jobs/analysis.server.ts), immutable once ended.
import { and, desc, eq, inArray, sql } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { AppError } from '#app/http/errors.ts'
import { isId } from '#app/http/ids.ts'
import { enqueueAnalysis, queue, withdrawAnalysis } from '#app/jobs/queue.server.ts'
import { type Acting, recordAct } from '#app/modules/audit/audit.server.ts'
import {
  type Analysis,
  type AnalysisKind,
  analysis,
  person,
  study,
  studyRevision,
} from '#drizzle/schema/index.ts'
import type { Case } from '#engine/case.ts'
import type { Certificate } from '#engine/optimise/certificate.ts'
import type { Infeasibility } from '#engine/optimise/feasibility.ts'
import type { FrontAxes, FrontPoint } from '#engine/optimise/front.ts'
import { MAX_COMBINATIONS, type Optimum } from '#engine/optimise/optimise.ts'
import { spaceOf } from '#engine/optimise/space.ts'
import type { Why } from '#engine/optimise/why.ts'
import type { Band } from '#engine/uncertainty/bands.ts'
import type { RobustOptimum } from '#engine/uncertainty/robust.ts'
import { ENGINE_VERSION } from '#engine/version.ts'
import { planOfRevision } from '../runs/run-plan.server.ts'

/** What each kind is asked and what it comes to. */
export type AnalysisOf = {
  optimum: {
    request: object
    result:
      | {
          found: true
          optimum: Optimum
          certificate: Certificate
          why: Why
          band: Band | null
          /** Null where the study gives lengths, or nothing is long enough within the limits. */
          robust: RobustOptimum | null
        }
      | { found: false; infeasibility: Infeasibility }
  }
  front: {
    request: { axes: FrontAxes; points: number }
    result: { front: (FrontPoint & { band: Band | null })[]; seconds: number }
  }
  band: { request: { case: Case; samples: number; seed: number }; result: { band: Band | null } }
}

const OPEN: Analysis['state'][] = ['queued', 'running']

/** Asks for an analysis of a kept revision. One of a kind at a time and study: asking again while one is open is refused. */
export async function askAnalysis<Kind extends AnalysisKind>(
  of: { studyId: string; revisionId: string; runId?: string },
  kind: Kind,
  request: AnalysisOf[Kind]['request'],
  acting: Acting,
): Promise<string> {
  const [revision] = await db
    .select({ number: studyRevision.number, projectId: study.projectId, archivedAt: study.archivedAt })
    .from(studyRevision)
    .innerJoin(study, eq(study.id, studyRevision.studyId))
    .where(and(eq(studyRevision.id, of.revisionId), eq(study.id, of.studyId)))
  if (!revision) throw new AppError('not-found', 'There is no such revision of this study.')
  if (revision.archivedAt) throw new AppError('conflict', 'The study is archived; restore it first.')
  if (kind !== 'band') await requireSearchable(of.revisionId)
  await queue()
  return db.transaction(async (tx) => {
    await tx.select({ id: study.id }).from(study).where(eq(study.id, of.studyId)).for('no key update')
    const [open] = await tx
      .select({ id: analysis.id })
      .from(analysis)
      .where(and(eq(analysis.studyId, of.studyId), eq(analysis.kind, kind), inArray(analysis.state, OPEN)))
      .limit(1)
    if (open) throw new AppError('conflict', 'That is being worked out already; cancel it, or let it end.')
    const [made] = await tx
      .insert(analysis)
      .values({
        kind,
        studyId: of.studyId,
        revisionId: of.revisionId,
        runId: of.runId,
        request: request as Record<string, unknown>,
        engineVersion: ENGINE_VERSION,
        requestedBy: acting.personId,
      })
      .returning()
    await enqueueAnalysis(tx, made)
    await recordAct(tx, acting, {
      act: 'analysis.ask',
      subject: 'analysis',
      subjectId: made.id,
      projectId: revision.projectId,
      after: { kind, study: of.studyId, revision: revision.number },
    })
    return made.id
  })
}

async function requireSearchable(revisionId: string): Promise<void> {
  const { study: checked } = await planOfRevision(revisionId)
  const { combinations } = spaceOf(checked)
  if (combinations > MAX_COMBINATIONS)
    throw new AppError(
      'invalid',
      `The study has ${combinations} combinations of whole-number and named values; at most ${MAX_COMBINATIONS} can be searched. Give some variables fewer values.`,
    )
}

/** Ends an analysis that has not ended; what was found so far is let go. */
export async function cancelAnalysis(studyId: string, analysisId: string, acting: Acting): Promise<void> {
  if (!isId(analysisId)) throw missing()
  await queue()
  await db.transaction(async (tx) => {
    const [cancelled] = await tx
      .update(analysis)
      .set({ state: 'cancelled', endedAt: sql`now()`, checkpoint: null })
      .where(and(eq(analysis.id, analysisId), eq(analysis.studyId, studyId), inArray(analysis.state, OPEN)))
      .returning()
    if (!cancelled) throw new AppError('conflict', 'It has ended already; reload to see how.')
    await withdrawAnalysis(tx, cancelled)
    const [{ projectId }] = await tx
      .select({ projectId: study.projectId })
      .from(study)
      .where(eq(study.id, studyId))
    await recordAct(tx, acting, {
      act: 'analysis.cancel',
      subject: 'analysis',
      subjectId: analysisId,
      projectId,
    })
  })
}

const missing = () => new AppError('not-found', 'There is no such analysis of this study.')

export type AnalysisView<Kind extends AnalysisKind> = {
  id: string
  state: Analysis['state']
  revision: number
  progress: Analysis['progress']
  request: AnalysisOf[Kind]['request']
  result: AnalysisOf[Kind]['result'] | null
  fault: string | null
  engineVersion: string
  askedBy: string | null
  askedAt: string
  endedAt: string | null
}

/** A study's latest analysis of a kind. */
export async function latestAnalysis<Kind extends AnalysisKind>(
  studyId: string,
  kind: Kind,
): Promise<AnalysisView<Kind> | null> {
  const [found] = await db
    .select({ analysis, revision: studyRevision.number, askedBy: person.name })
    .from(analysis)
    .innerJoin(studyRevision, eq(studyRevision.id, analysis.revisionId))
    .leftJoin(person, eq(person.id, analysis.requestedBy))
    .where(and(eq(analysis.studyId, studyId), eq(analysis.kind, kind)))
    .orderBy(desc(analysis.askedAt), desc(analysis.id))
    .limit(1)
  if (!found) return null
  const { id, state, progress, request, result, fault, engineVersion, askedAt, endedAt } = found.analysis
  return {
    id,
    state,
    revision: found.revision,
    progress,
    request: request as AnalysisOf[Kind]['request'],
    result: result as AnalysisOf[Kind]['result'] | null,
    fault,
    engineVersion,
    askedBy: found.askedBy,
    askedAt: askedAt.toISOString(),
    endedAt: endedAt?.toISOString() ?? null,
  }
}

export const isOpen = ({ state }: Pick<AnalysisView<AnalysisKind>, 'state'>): boolean => OPEN.includes(state)
