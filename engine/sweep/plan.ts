// A study laid out as points: point i is decoded from i alone, so that a million points need no stored inputs.
import type { Case } from '#engine/case.ts'
import { tubeCatalogue } from '#engine/tubes.ts'
import type { Dimension } from '#engine/units.ts'
import { type FlatLimits, flattenLimits } from './limits.ts'
import { CATALOGUE_PATH, findSweepPath, type SweepKind } from './paths.ts'
import { hash32, shuffledIndex, uniform } from './random.ts'
import { sobolBits } from './sobol.ts'
import {
  betweenEnds,
  countPoints,
  getPath,
  rangeValue,
  type Scale,
  type Study,
  type StudyVariable,
  type SweptValue,
  withSwept,
} from './study.ts'

export interface PlanVariable {
  path: string
  label: string
  symbol: string
  dimension: Dimension
  kind: SweepKind
  /** Head of the column in files. */
  column: string
  tubeSized: boolean
  /** The values it takes; of a range sampled in between, its two ends. */
  values: readonly SweptValue[]
  /** Set when a sampled design takes any value between the two ends. */
  between?: { from: number; to: number; scale: Scale | undefined; whole: boolean }
}

export interface SweepPlan {
  study: Study
  points: number
  variables: readonly PlanVariable[]
  /** Product of the value counts of the variables after each: the last variable turns fastest. */
  strides: readonly number[]
  limits: FlatLimits
  /** What each variable is in the base case, for a one-at-a-time design. */
  base: readonly SweptValue[]
}

/** Lays a checked study out as points. */
export function planSweep(study: Study): SweepPlan {
  const { design, samples } = study.sweep
  const sampled = design === 'latinHypercube' || design === 'sobol'
  const variables = study.sweep.variables.map((variable) => planVariable(variable, sampled))
  const strides = new Array<number>(variables.length).fill(1)
  for (let j = variables.length - 2; j >= 0; j--) strides[j] = strides[j + 1] * variables[j + 1].values.length
  return {
    study,
    points: countPoints(study.sweep.variables, design, samples),
    variables,
    strides,
    limits: flattenLimits(study.limits),
    base: variables.map((variable) => baseValue(study.case, variable.path)),
  }
}

function planVariable(variable: StudyVariable, sampled: boolean): PlanVariable {
  if ('catalogue' in variable)
    return {
      path: CATALOGUE_PATH,
      label: 'Tube',
      symbol: '',
      dimension: 'none',
      kind: 'choice',
      column: 'tube',
      tubeSized: false,
      values: variable.catalogue,
    }
  const info = findSweepPath(variable.path)
  if (!info) throw new RangeError(`${variable.path} is nothing a sweep can vary`)
  const { path, label, symbol, dimension, kind, column } = info
  const common = { path, label, symbol, dimension, kind, column, tubeSized: info.tubeSized === true }
  if ('values' in variable) return { ...common, values: variable.values }
  const { from, to, scale } = variable
  if (sampled) return { ...common, values: [from, to], between: { from, to, scale, whole: kind === 'whole' } }
  const count = variable.count ?? 1
  return { ...common, values: Array.from({ length: count }, (_, k) => rangeValue(from, to, scale, k, count)) }
}

function baseValue(base: Case, path: string): SweptValue {
  if (path !== CATALOGUE_PATH) {
    const value = getPath(base, path)
    return typeof value === 'number' || typeof value === 'string' ? value : 'as the method has it'
  }
  const tube = tubeCatalogue.find(
    (entry) =>
      entry.outsideDiameter === getPath(base, 'tube.outsideDiameter') &&
      entry.wallThickness === getPath(base, 'tube.wallThickness'),
  )
  return tube?.id ?? 'as the case gives it'
}

/** Index into `values` of variable j at point i of a full factorial design. */
export const factorialDigit = (plan: SweepPlan, i: number, j: number): number =>
  Math.floor(i / plan.strides[j]) % plan.variables[j].values.length

/** Which variable a one-at-a-time point changes (-1: none, the base case), and to which of its values. */
export function changedAt(plan: SweepPlan, i: number): { variable: number; value: number } {
  let rest = i - 1
  if (rest < 0) return { variable: -1, value: -1 }
  for (let j = 0; j < plan.variables.length; j++) {
    const { length } = plan.variables[j].values
    if (rest < length) return { variable: j, value: rest }
    rest -= length
  }
  throw new RangeError(`point ${i}; the study has ${plan.points}`)
}

/** The value of variable j at point i. */
export function pointValue(plan: SweepPlan, i: number, j: number): SweptValue {
  const variable = plan.variables[j]
  const { design } = plan.study.sweep
  if (design === 'factorial') return variable.values[factorialDigit(plan, i, j)]
  if (design === 'oneAtATime') {
    const changed = changedAt(plan, i)
    return changed.variable === j ? variable.values[changed.value] : plan.base[j]
  }
  const seed = plan.study.sweep.seed ?? 1
  const u =
    design === 'latinHypercube' ? latinHypercubeShare(seed, j, i, plan.points) : sobolShare(seed, j, i)
  return sampledValue(variable, u)
}

/** Coordinate j of point i of a Latin hypercube of `size` points: each of `size` equal strata holds one point. */
export const latinHypercubeShare = (seed: number, j: number, i: number, size: number): number =>
  (shuffledIndex(seed, j, i, size) + uniform(seed, j + 1000, i)) / size

/** Coordinate j of Sobol point i under a digital shift from the seed, which keeps its even spread. */
export const sobolShare = (seed: number, j: number, i: number): number =>
  (((sobolBits(j, i) ^ hash32(seed, j + 2000, 0)) >>> 0) + 0.5) / 4294967296

function sampledValue(variable: PlanVariable, u: number): SweptValue {
  const { between, values } = variable
  if (!between) return values[Math.min(values.length - 1, Math.floor(u * values.length))]
  if (!between.whole) return betweenEnds(between.from, between.to, between.scale, u)
  const low = Math.min(between.from, between.to)
  const high = Math.max(between.from, between.to)
  if (between.scale !== 'geometric') return Math.min(high, low + Math.floor(u * (high - low + 1)))
  return Math.min(high, Math.max(low, Math.round(betweenEnds(low, high, 'geometric', u))))
}

/** What point i puts in each variable, in SI units or as an id. */
export function pointInputs(plan: SweepPlan, i: number): SweptValue[] {
  assertPoint(plan, i)
  return plan.variables.map((_, j) => pointValue(plan, i, j))
}

/** Point i as a case of its own: `evaluate` gives the sweep's numbers for it. */
export function pointCase(plan: SweepPlan, i: number): Case {
  assertPoint(plan, i)
  if (plan.study.sweep.design === 'oneAtATime') {
    const changed = changedAt(plan, i)
    if (changed.variable < 0) return plan.study.case
    const variable = plan.variables[changed.variable]
    return withSwept(plan.study.case, variable.path, variable.values[changed.value])
  }
  let result = plan.study.case
  plan.variables.forEach((variable, j) => {
    result = withSwept(result, variable.path, pointValue(plan, i, j))
  })
  return result
}

function assertPoint(plan: SweepPlan, i: number): void {
  if (!(Number.isInteger(i) && i >= 0 && i < plan.points))
    throw new RangeError(`point ${i}; the study has points 0 to ${plan.points - 1}`)
}
