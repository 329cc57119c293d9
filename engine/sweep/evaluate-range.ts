// Evaluates a run of a study's points into a flat table, for a worker thread; nothing is allocated per point.
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { PointSolver, type SweepPath } from '#engine/bundle/point-solver.ts'
import { tubeCatalogue } from '#engine/tubes.ts'
import { keyResultColumn, limitsMask } from './limits.ts'
import { CATALOGUE_PATH } from './paths.ts'
import { changedAt, factorialDigit, pointValue, type SweepPlan } from './plan.ts'
import type { SweptValue } from './study.ts'

/** Numbers a point has in the table. */
export const COLUMNS = KEY_RESULTS.length

const solvers = new WeakMap<SweepPlan, PointSolver>()

const tubeById = new Map(tubeCatalogue.map((tube) => [tube.id, tube]))

/**
 * Evaluates points `first` to `first + count - 1` into `out`, key result c of the k-th of them at `c * count + k`, and
 * returns how many were evaluated: fewer than `count` only when `stop[0]` turned non-zero. A point's numbers depend on
 * its index alone, never on the range it is evaluated in.
 */
export function evaluateRange(
  plan: SweepPlan,
  first: number,
  count: number,
  out: Float64Array,
  stop?: Int32Array,
): number {
  if (!(first >= 0 && count >= 0 && first + count <= plan.points))
    throw new RangeError(`points ${first} to ${first + count - 1}; the study has ${plan.points}`)
  if (out.length < count * COLUMNS)
    throw new RangeError(`${count} points need ${count * COLUMNS} numbers, the table holds ${out.length}`)
  let solver = solvers.get(plan)
  if (!solver) {
    solver = new PointSolver()
    solvers.set(plan, solver)
  }
  solver.load(plan.study.case)
  const { design } = plan.study.sweep
  const maskColumn = keyResultColumn('limitsNotMet')
  const variables = plan.variables.length
  const last = new Int32Array(variables).fill(-1)
  for (let k = 0; k < count; k++) {
    if (stop !== undefined && Atomics.load(stop, 0) !== 0) return k
    const i = first + k
    if (design === 'factorial') {
      for (let j = 0; j < variables; j++) {
        const digit = factorialDigit(plan, i, j)
        if (digit === last[j]) continue
        last[j] = digit
        setSwept(solver, plan.variables[j].path, plan.variables[j].values[digit])
      }
    } else if (design === 'oneAtATime') {
      solver.load(plan.study.case)
      const changed = changedAt(plan, i)
      if (changed.variable >= 0) {
        const variable = plan.variables[changed.variable]
        setSwept(solver, variable.path, variable.values[changed.value])
      }
    } else {
      for (let j = 0; j < variables; j++) setSwept(solver, plan.variables[j].path, pointValue(plan, i, j))
    }
    solver.solve()
    solver.keyResults(out, k, count)
    out[maskColumn * count + k] = limitsMask(plan.limits, out, k, count)
  }
  return count
}

export function setSwept(solver: PointSolver, path: string, value: SweptValue): void {
  if (path !== CATALOGUE_PATH) {
    solver.set(path as SweepPath, value)
    return
  }
  const tube = tubeById.get(value as string)
  if (!tube) throw new RangeError(`tube ${value} is not in the catalogue`)
  solver.set('tube.outsideDiameter', tube.outsideDiameter)
  solver.set('tube.wallThickness', tube.wallThickness)
}
