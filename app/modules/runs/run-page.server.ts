// What the Run page shows of a study's runs, put together from run, plan and stored points.
import { AppError } from '#app/http/errors.ts'
import { describeCase } from '#app/modules/explore/case-words.ts'
import { caseNames, choiceNames } from '#app/modules/explore/names.server.ts'
import { limitEffects, pointSheet } from '#app/modules/points/points.server.ts'
import { latestRevision } from '#app/modules/studies/studies.server.ts'
import { evaluate } from '#engine/evaluate.ts'
import { pointCase } from '#engine/sweep/plan.ts'
import { runProgress } from './progress.server.ts'
import { isFinal } from './progress.ts'
import { planOfRevision } from './run-plan.server.ts'
import { listRuns, type RunListing } from './runs.server.ts'

function listing({ id, state, points, done, revision, requestedByName, engineVersion, ...at }: RunListing) {
  return {
    id,
    state,
    points,
    done,
    revision,
    requestedByName,
    engineVersion,
    plannedAt: at.plannedAt.toISOString(),
    seconds: at.startedAt && at.endedAt ? (at.endedAt.getTime() - at.startedAt.getTime()) / 1000 : null,
  }
}

export async function runPage(studyId: string, asked: string | null, units: 'si' | 'us') {
  const [runs, revision] = await Promise.all([listRuns(studyId), latestRevision(studyId)])
  const run = asked === null ? (runs[0] ?? null) : runs.find(({ id }) => id === asked)
  if (run === undefined) throw new AppError('not-found', 'This study has no such run.')
  const kept = revision && { number: revision.number, points: (await planOfRevision(revision.id)).points }
  if (!run) return { run: null, revision: kept, runs: [] }
  const plan = await planOfRevision(run.revisionId)
  const progress = await runProgress(run.id)
  const { best } = progress
  const bestCase = best && pointCase(plan, best.point)
  return {
    run: { ...listing(run), contentHash: run.contentHash },
    revision: kept,
    runs: runs.map(listing),
    progress,
    objective: plan.study.objective,
    limits: plan.study.limits,
    variables: plan.variables.map(({ path, label, symbol, dimension, kind, tubeSized }) => ({
      path,
      label,
      symbol,
      dimension,
      kind,
      tubeSized,
    })),
    names: choiceNames(plan.variables),
    effects: isFinal(run.state) ? await limitEffects(run.id) : null,
    best:
      best && bestCase
        ? {
            point: best.point,
            described: describeCase(
              bestCase,
              caseNames(bestCase),
              plan.variables.map(({ path }) => path),
              units,
            ),
            case: bestCase,
            rows: (isFinal(run.state) ? (await pointSheet(run.id, best.point)).result : evaluate(bestCase))
              .rows,
          }
        : null,
  }
}

export type RunPage = Extract<Awaited<ReturnType<typeof runPage>>, { progress: unknown }>
