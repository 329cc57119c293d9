// A thread of the study command: lays the study out once, then evaluates the stretches it is handed.
import { move, workerData } from 'piscina'
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { evaluateRange } from '#engine/sweep/evaluate-range.ts'
import { planSweep } from '#engine/sweep/plan.ts'
import type { Study } from '#engine/sweep/study.ts'

const plan = planSweep((workerData as { study: Study }).study)

export default function evaluateStretch({ first, count }: { first: number; count: number }): Float64Array {
  const table = new Float64Array(KEY_RESULTS.length * count)
  evaluateRange(plan, first, count, table)
  return move(table) as Float64Array
}
