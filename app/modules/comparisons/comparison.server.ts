// Studies of a project set side by side: of each the latest run with points, its best point and its front.
import { AppError } from '#app/http/errors.ts'
import { isId } from '#app/http/ids.ts'
import { caseNames } from '#app/modules/explore/names.server.ts'
import { aggregates, paretoFront, pointSheet, refinedBest } from '#app/modules/points/points.server.ts'
import { planOfRevision } from '#app/modules/runs/run-plan.server.ts'
import { listRuns } from '#app/modules/runs/runs.server.ts'
import { getStudy } from '#app/modules/studies/studies.server.ts'
import type { Band } from '#engine/uncertainty/bands.ts'

export const MOST_COMPARED = 6

/** The study's latest run with points, its candidate (the refined point where there is one) and its counts. */
export async function candidateOf(studyId: string) {
  const study = await getStudy(studyId)
  const runs = await listRuns(studyId)
  const run =
    runs.find(({ state, done }) => state === 'done' && done > 0) ?? runs.find(({ done }) => done > 0)
  const base = { id: study.id, projectId: study.projectId, name: study.name }
  if (!run) return { ...base, run: null }
  const plan = await planOfRevision(run.revisionId)
  const [counts, refined] = await Promise.all([aggregates(run.id), refinedBest(run.id)])
  const best = run.bestPoint === null ? null : await pointSheet(run.id, run.bestPoint)
  const sheetOf = (
    point: number | 'refined',
    from: { case: typeof plan.study.case; result: SheetResult; band: Band | null },
  ) => ({
    point,
    case: from.case,
    result: from.result,
    band: from.band,
    names: caseNames(from.case),
  })
  return {
    ...base,
    run: {
      id: run.id,
      state: run.state,
      revision: run.revision,
      points: run.points,
      done: run.done,
      engineVersion: run.engineVersion,
      plannedAt: run.plannedAt.toISOString(),
    },
    objective: plan.study.objective,
    limits: plan.study.limits,
    swept: plan.variables.map(({ label, values, between }) => ({
      label,
      values: between ? null : values.length,
    })),
    evaluated: counts.evaluated,
    meetingLimits: counts.meetingLimits,
    best: best && sheetOf(best.point, best),
    refined: refined && {
      ...sheetOf('refined', refined),
      improved: refined.improved === true,
      statement: typeof refined.statement === 'string' ? refined.statement : '',
    },
  }
}

type SheetResult = Awaited<ReturnType<typeof pointSheet>>['result']

export type Candidate = Awaited<ReturnType<typeof candidateOf>>
export type RunCandidate = Extract<Candidate, { objective: unknown }>

/** Studies of one project; another project's study counts as unknown. */
export async function comparedStudies(projectId: string, studyIds: readonly string[]) {
  const asked = [...new Set(studyIds)]
  if (asked.length > MOST_COMPARED)
    throw new AppError(
      'bad-request',
      `${asked.length} studies are too many to compare; choose up to ${MOST_COMPARED}.`,
    )
  if (!asked.every(isId)) throw missing()
  const found = await Promise.all(asked.map(candidateOf))
  if (found.some((study) => study.projectId !== projectId)) throw missing()
  return Promise.all(
    found.map(async (study) => ({
      ...study,
      front: study.run
        ? await paretoFront(study.run.id, {
            x: 'coolantPressureDrop',
            y: 'outsideArea',
            filters: { outcome: 'evaluated' },
          })
        : [],
    })),
  )
}

const missing = () => new AppError('not-found', 'There is no such study in this project.')
