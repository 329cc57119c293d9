// The limits a study may set on its results, in the order of the bits in a point's mask of limits not met.

import { KEY_RESULT_INDEX, KEY_RESULTS } from '#engine/bundle/key-results.ts'
import type { Dimension } from '#engine/units.ts'

export interface Limit {
  min?: number
  max?: number
}

export interface LimitInfo {
  id: LimitId
  label: string
  /** The key result it bounds. */
  result: string
  dimension: Dimension
  /** What a bare number means. */
  bare: 'min' | 'max'
  /** Its value is null unless a coolant is named. */
  needsCoolant: boolean
}

const limit = (
  id: string,
  result: string,
  label: string,
  dimension: Dimension,
  needsCoolant: boolean,
  bare: 'min' | 'max' = 'max',
) => ({ id: id as LimitId, result, label, dimension, bare, needsCoolant })

/** Every limit; the position is the bit. Append only: stored masks keep their meaning. */
export const LIMITS: readonly LimitInfo[] = [
  limit('coolantPressureDrop', 'coolantPressureDrop', 'Coolant pressure drop', 'pressure', true),
  limit('vapourPressureDrop', 'vapourPressureDrop', 'Vapour pressure drop', 'pressure', false),
  limit('coolantVelocity', 'coolantVelocity', 'Coolant velocity', 'velocity', true),
  limit('coolantMassFlow', 'coolantMassFlow', 'Coolant mass flow', 'massFlow', true),
  limit(
    'coolantOutletTemperature',
    'coolantOutletTemperature',
    'Coolant outlet temperature',
    'temperature',
    true,
  ),
  limit('length', 'tubeLength', 'Tube length', 'length', false),
  limit('bundleWidth', 'bundleWidth', 'Bundle width', 'length', false),
  limit('bundleHeight', 'bundleHeight', 'Bundle height', 'length', false),
  limit('meanWallSubcooling', 'meanWallSubcooling', 'Mean wall subcooling', 'temperatureDifference', false),
  limit('duty', 'duty', 'Duty', 'power', false, 'min'),
]

export const LIMIT_IDS = [
  'coolantPressureDrop',
  'vapourPressureDrop',
  'coolantVelocity',
  'coolantMassFlow',
  'coolantOutletTemperature',
  'length',
  'bundleWidth',
  'bundleHeight',
  'meanWallSubcooling',
  'duty',
] as const
export type LimitId = (typeof LIMIT_IDS)[number]

export type Limits = Partial<Record<LimitId, Limit>>

/** A study's limits laid flat, so that testing a point allocates nothing. */
export interface FlatLimits {
  /** Bit of each limit in the mask. */
  bits: readonly number[]
  /** Key result column of each. */
  columns: readonly number[]
  min: Float64Array
  max: Float64Array
}

export function flattenLimits(limits: Limits): FlatLimits {
  const bits: number[] = []
  LIMITS.forEach((info, bit) => {
    const given = limits[info.id]
    if (given && (given.min !== undefined || given.max !== undefined)) bits.push(bit)
  })
  return {
    bits,
    columns: bits.map((bit) => keyResultColumn(LIMITS[bit].result)),
    min: Float64Array.from(bits, (bit) => limits[LIMITS[bit].id]?.min ?? Number.NEGATIVE_INFINITY),
    max: Float64Array.from(bits, (bit) => limits[LIMITS[bit].id]?.max ?? Number.POSITIVE_INFINITY),
  }
}

/**
 * The mask of limits not met by the point whose key results begin at `first` and lie `stride` apart.
 * A result that is null (NaN here) meets no limit.
 */
export function limitsMask(flat: FlatLimits, out: Float64Array, first: number, stride: number): number {
  let mask = 0
  for (let k = 0; k < flat.bits.length; k++) {
    const value = out[first + flat.columns[k] * stride]
    if (!(value >= flat.min[k] && value <= flat.max[k])) mask |= 1 << flat.bits[k]
  }
  return mask
}

/** How far a value is from meeting its limit, as a share of the limit: at or under 0 when met, +Infinity when null. */
export function limitExcess(value: number, min: number, max: number): number {
  if (!Number.isFinite(value)) return Number.POSITIVE_INFINITY
  let excess = Number.NEGATIVE_INFINITY
  if (max < Number.POSITIVE_INFINITY) excess = Math.max(excess, (value - max) / scaleOf(max))
  if (min > Number.NEGATIVE_INFINITY) excess = Math.max(excess, (min - value) / scaleOf(min))
  return excess
}

const scaleOf = (bound: number) => Math.max(Math.abs(bound), 1e-12)

export type Met = true | false | null

/** For each limit of the study: met, not met, or null because the point has no such value. */
export function limitsMet(
  limits: Limits,
  resultOf: (result: string) => number | null,
): Partial<Record<LimitId, Met>> {
  const met: Partial<Record<LimitId, Met>> = {}
  for (const info of LIMITS) {
    const given = limits[info.id]
    if (!given) continue
    const value = resultOf(info.result)
    met[info.id] =
      value === null || Number.isNaN(value)
        ? null
        : value >= (given.min ?? Number.NEGATIVE_INFINITY) && value <= (given.max ?? Number.POSITIVE_INFINITY)
  }
  return met
}

/** Column of a key result by id. */
export function keyResultColumn(id: string): number {
  const column = KEY_RESULT_INDEX[id]
  if (column === undefined)
    throw new RangeError(`no key result ${id}; ${KEY_RESULTS.map((k) => k.id).join(', ')}`)
  return column
}
