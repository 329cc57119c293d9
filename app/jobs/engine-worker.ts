// What a thread of the pool does: evaluates a slice of a study's points.
import { move, transferableSymbol, valueSymbol } from 'piscina'
import { COLUMNS, evaluateRange } from '#engine/sweep/evaluate-range.ts'
import { planSweep, type SweepPlan } from '#engine/sweep/plan.ts'
import type { Study } from '#engine/sweep/study.ts'

/** Parts of analyses are computed by the same threads. */
export { computePart } from '#app/modules/analyses/tasks.ts'

export type Slice = {
  /** Names the study to the thread, which keeps the plans of the last few. */
  key: string
  /** The checked study as JSON in UTF-8, shared by all threads. */
  study: Uint8Array
  first: number
  count: number
  /** Evaluation stops when its first number turns non-zero. */
  stop: Int32Array
}

export type SliceResult = {
  /** Key results column by column; points from `evaluated` on are missing. */
  table: Float64Array
  evaluated: number
  seconds: number
}

const KEPT_PLANS = 8
const plans = new Map<string, SweepPlan>()

export default function evaluateSlice(slice: Slice): SliceResult {
  const plan = planOf(slice)
  const table = new Float64Array(slice.count * COLUMNS)
  const started = performance.now()
  const evaluated = evaluateRange(plan, slice.first, slice.count, table, slice.stop)
  const seconds = (performance.now() - started) / 1000
  return handedOver({ table, evaluated, seconds })
}

/** The table's memory moves to the thread that asked, without a copy. */
function handedOver(result: SliceResult): SliceResult {
  return move({
    [transferableSymbol]: [result.table.buffer as ArrayBuffer],
    [valueSymbol]: result,
  }) as unknown as SliceResult
}

function planOf({ key, study }: Slice): SweepPlan {
  const known = plans.get(key)
  if (known) return known
  // A view of shared memory cannot be decoded in place.
  const plan = planSweep(JSON.parse(new TextDecoder().decode(study.slice())) as Study)
  plans.set(key, plan)
  if (plans.size > KEPT_PLANS) plans.delete(plans.keys().next().value as string)
  return plan
}
