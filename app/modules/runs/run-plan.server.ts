// The plan of points behind a run, read once from its revision.
import { eq } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { AppError } from '#app/http/errors.ts'
import { studyRevision } from '#drizzle/schema/index.ts'
import { KEY_RESULT_INDEX } from '#engine/bundle/key-results.ts'
import { faultLine } from '#engine/fault.ts'
import { COLUMNS, evaluateRange } from '#engine/sweep/evaluate-range.ts'
import { planSweep, type SweepPlan } from '#engine/sweep/plan.ts'
import { parseStudy, type Study } from '#engine/sweep/study.ts'

/** Revisions never change, so a plan once made holds; the oldest used leaves first. */
const KEPT_PLANS = 32
const plans = new Map<string, Promise<SweepPlan>>()

export function planOfRevision(revisionId: string): Promise<SweepPlan> {
  const known = plans.get(revisionId)
  plans.delete(revisionId)
  const plan = known ?? readPlan(revisionId)
  plans.set(revisionId, plan)
  if (!known) {
    plan.catch(() => plans.delete(revisionId))
    if (plans.size > KEPT_PLANS) plans.delete(plans.keys().next().value as string)
  }
  return plan
}

async function readPlan(revisionId: string): Promise<SweepPlan> {
  const [revision] = await db
    .select({ definition: studyRevision.definition })
    .from(studyRevision)
    .where(eq(studyRevision.id, revisionId))
  if (!revision) throw new AppError('not-found', 'There is no such revision of the study.')
  return planSweep(readStudy(revision.definition))
}

/** A kept definition as a study; the engine may have become stricter since it was kept. */
export function readStudy(definition: Record<string, unknown>): Study {
  const parsed = parseStudy(definition)
  if (parsed.ok) return parsed.study
  throw new AppError(
    'invalid',
    `This definition does not run with the present engine: ${parsed.faults.map(faultLine).join('. ')}.`,
  )
}

const SAMPLE_POINTS = 32
/** Nothing else is answered meanwhile. */
const SAMPLE_MS = 60
const PASSES_MIN = 3

/** Seconds that one point costs one core, measured on points spread over the study. */
export function measurePointCost(plan: SweepPlan): number {
  const sample = Math.min(SAMPLE_POINTS, plan.points)
  const out = new Float64Array(COLUMNS)
  const begun = performance.now()
  // The first passes compile; the least of whole passes is what a warm thread needs.
  let least = Number.POSITIVE_INFINITY
  for (let pass = 0; pass < PASSES_MIN || performance.now() - begun < SAMPLE_MS; pass++) {
    const started = performance.now()
    for (let k = 0; k < sample; k++)
      evaluateRange(plan, Math.floor(((k + 0.5) * plan.points) / sample), 1, out)
    least = Math.min(least, (performance.now() - started) / 1000 / sample)
  }
  return least
}

/** A point's key results by id, from its column of numbers. */
export function keyResultValues(results: ArrayLike<number>): Record<string, number | null> {
  return Object.fromEntries(
    Object.entries(KEY_RESULT_INDEX).map(([id, column]) => [
      id,
      Number.isFinite(results[column]) ? results[column] : null,
    ]),
  )
}
