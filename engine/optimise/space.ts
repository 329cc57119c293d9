// What an optimiser may choose: every combination of the discrete variables of a study, and the axes it moves along.

import { findSweepPath } from '#engine/sweep/paths.ts'
import { planSweep } from '#engine/sweep/plan.ts'
import { getPath, type Study, type SweptValue } from '#engine/sweep/study.ts'
import type { Dimension } from '#engine/units.ts'

/** Variables that may take any value between the swept ones; sizes sold in steps are not among them. */
export const CONTINUOUS = [
  'drive.velocity',
  'drive.massFlow',
  'drive.wallSubcooling',
  'bundle.length',
  'drive.outletTemperature',
  'saturationTemperature',
  'saturationPressure',
  'bundle.pitchRatio',
] as const

export interface DiscreteVariable {
  path: string
  label: string
  dimension: Dimension
  values: readonly SweptValue[]
}

export interface Axis {
  path: string
  label: string
  dimension: Dimension
  low: number
  high: number
}

export interface Space {
  discrete: readonly DiscreteVariable[]
  /** The first is the one that limits are met along; it is always at its best for the others. */
  axes: readonly Axis[]
  combinations: number
}

/**
 * The space of a study. A list of whole numbers or ids stands for itself, a range of whole numbers for all between its
 * ends; of a continuous variable the least and the greatest value are the bounds. `optimise.variables` take the place
 * of what the sweep says of the same path.
 */
export function spaceOf(study: Study): Space {
  const discrete: DiscreteVariable[] = []
  const axes: Axis[] = []
  const add = (
    { path, label, dimension }: { path: string; label: string; dimension: Dimension },
    low: number,
    high: number,
  ) => {
    if (high > low && low > 0) axes.push({ path, label, dimension, low, high })
    else discrete.push({ path, label, dimension, values: low === high ? [low] : [low, high] })
  }
  const bounded = new Map((study.optimise?.variables ?? []).map((variable) => [variable.path, variable]))
  const { variables } = planSweep(study)
  variables.forEach((variable, j) => {
    if (bounded.has(variable.path)) return
    const { path, label, dimension, kind, values } = variable
    if (kind === 'number' && (CONTINUOUS as readonly string[]).includes(path)) {
      const numbers = values as readonly number[]
      add(variable, least(numbers), greatest(numbers))
      return
    }
    const given = study.sweep.variables[j]
    discrete.push({
      path,
      label,
      dimension,
      values: kind === 'whole' && 'from' in given ? wholes(given.from, given.to) : [...new Set(values)],
    })
  })
  for (const { path, from, to } of bounded.values()) {
    const info = findSweepPath(path)
    if (!info) continue
    if (info.kind === 'whole') discrete.push({ ...info, values: wholes(from, to) })
    else add(info, from, to)
  }
  const sizing = isSizing(study)
  const rank = (axis: Axis) => {
    if (axis.path === 'bundle.length' && !sizing) return -1
    const place = (CONTINUOUS as readonly string[]).indexOf(axis.path)
    return place < 0 ? CONTINUOUS.length : place
  }
  axes.sort((a, b) => rank(a) - rank(b))
  return {
    discrete,
    axes,
    combinations: discrete.reduce((product, { values }) => product * values.length, 1),
  }
}

/** What combination k puts in each discrete variable; the last turns fastest. */
export function combinationValues(space: Space, k: number): SweptValue[] {
  const picked: SweptValue[] = new Array(space.discrete.length)
  let rest = k
  for (let j = space.discrete.length - 1; j >= 0; j--) {
    const { values } = space.discrete[j]
    picked[j] = values[rest % values.length]
    rest = Math.floor(rest / values.length)
  }
  return picked
}

/** The place of each discrete variable's value in combination k. */
export function combinationDigits(space: Space, k: number): number[] {
  const digits: number[] = new Array(space.discrete.length)
  let rest = k
  for (let j = space.discrete.length - 1; j >= 0; j--) {
    const { length } = space.discrete[j].values
    digits[j] = rest % length
    rest = Math.floor(rest / length)
  }
  return digits
}

/** The combination with these places. */
export const combinationOf = (space: Space, digits: readonly number[]): number =>
  space.discrete.reduce((k, { values }, j) => k * values.length + digits[j], 0)

/** Whether the length follows from a duty, as against the duty from a length. */
export const isSizing = (study: Study): boolean =>
  getPath(study.case, 'duty') !== undefined ||
  study.sweep.variables.some((variable) => 'path' in variable && variable.path === 'duty')

const least = (values: readonly number[]) => values.reduce((a, b) => Math.min(a, b))
const greatest = (values: readonly number[]) => values.reduce((a, b) => Math.max(a, b))
function wholes(from: number, to: number): number[] {
  const low = Math.ceil(Math.min(from, to) - 1e-9)
  const high = Math.floor(Math.max(from, to) + 1e-9)
  return Array.from({ length: high - low + 1 }, (_, k) => low + k)
}
