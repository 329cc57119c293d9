// One case to its result.

import { PointSolver } from './bundle/point-solver.ts'
import type { Case } from './case.ts'
import type { Result } from './result.ts'

const solver = new PointSolver()

/** The result of a checked case (`parseCase`): finite numbers, or null with a note that says why. Never throws. */
export function evaluate(kase: Case): Result {
  solver.load(kase)
  solver.solve()
  return solver.result()
}
