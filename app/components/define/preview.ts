// What a definition amounts to while one types: its faults, its points, what they cost, and the base case's result.
// Runs in a web worker beside the page, and on the server for the first paint.
import { KEY_RESULT_INDEX, KEY_RESULTS, OUTCOMES } from '#engine/bundle/key-results.ts'
import { PointSolver } from '#engine/bundle/point-solver.ts'
import { type Case, type Fault, parseCase } from '#engine/case.ts'
import type { Result } from '#engine/result.ts'
import { evaluateRange } from '#engine/sweep/evaluate-range.ts'
import { LIMITS } from '#engine/sweep/limits.ts'
import { planSweep } from '#engine/sweep/plan.ts'
import { parseStudy, type Study } from '#engine/sweep/study.ts'
import type { Dimension } from '#engine/units.ts'

export type LimitCheck = {
  id: string
  label: string
  dimension: Dimension
  value: number | null
  min?: number
  max?: number
  met: boolean
}

export type Preview = {
  faults: Fault[]
  /** Notes on the study as a whole. */
  notes: string[]
  points: number | null
  /** How many values each swept variable takes; their product, where the design is factorial. */
  counts: { label: string; values: number }[]
  /** Of one core, measured on a stretch of the sweep's own points; null where not measured. */
  secondsPerPoint: number | null
  base: {
    case: Case
    result: Result
    refusal: { text: string; remedy: string } | null
    limits: LimitCheck[]
  } | null
}

const solver = new PointSolver()
const key = new Float64Array(KEY_RESULTS.length)

/** `measure` 0 leaves the cost out; `now` is the clock to measure with. */
export function previewDefinition(definition: unknown, measure = 0, now: () => number = () => 0): Preview {
  const parsed = parseStudy(definition)
  const kase = parsed.ok ? parsed.study.case : caseOf(definition)
  const preview: Preview = {
    faults: parsed.ok ? [] : parsed.faults,
    notes: parsed.ok ? parsed.notes : [],
    points: null,
    counts: [],
    secondsPerPoint: null,
    base: kase ? baseOf(kase, parsed.ok ? parsed.study : null) : null,
  }
  if (!parsed.ok) return preview
  const plan = planSweep(parsed.study)
  preview.points = plan.points
  preview.counts = plan.variables.map(({ label, values, between }) => ({
    label,
    values: between ? 0 : values.length,
  }))
  const count = Math.min(measure, plan.points)
  if (count > 0) {
    const out = new Float64Array(KEY_RESULTS.length * count)
    const first = Math.floor((plan.points - count) / 2)
    const begin = now()
    evaluateRange(plan, first, count, out)
    preview.secondsPerPoint = (now() - begin) / 1000 / count
  }
  return preview
}

function caseOf(definition: unknown): Case | null {
  if (typeof definition !== 'object' || definition === null || !('case' in definition)) return null
  const parsed = parseCase(definition.case)
  return parsed.ok ? parsed.case : null
}

function baseOf(kase: Case, study: Study | null): Preview['base'] {
  solver.load(kase)
  const outcome = OUTCOMES[solver.solve()]
  solver.keyResults(key, 0, 1)
  const limits = LIMITS.flatMap(({ id, label, dimension, result }): LimitCheck[] => {
    const limit = study?.limits[id]
    if (!limit) return []
    const value = key[KEY_RESULT_INDEX[result]]
    const met =
      Number.isFinite(value) &&
      value >= (limit.min ?? Number.NEGATIVE_INFINITY) &&
      value <= (limit.max ?? Number.POSITIVE_INFINITY)
    return [{ id, label, dimension, value: Number.isFinite(value) ? value : null, ...limit, met }]
  })
  return {
    case: kase,
    result: solver.result(),
    refusal: outcome.code === 'evaluated' ? null : { text: outcome.text, remedy: outcome.remedy },
    limits,
  }
}
