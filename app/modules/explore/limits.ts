// A point held against the study's limits, each with what is to spare or missing.

import type { Result } from '#engine/result.ts'
import { LIMITS, type LimitId, type Limits } from '#engine/sweep/limits.ts'
import type { DisplayHint } from '#engine/units.ts'
import { resultColumns } from './columns.ts'

export type LimitStanding = {
  id: LimitId
  label: string
  result: string
  dimension: (typeof LIMITS)[number]['dimension']
  hint?: DisplayHint
  value: number | null
  min?: number
  max?: number
  /** null where the point has no such value; that counts as not met. */
  met: boolean | null
  /** Distance to the nearer bound as a share of that bound: positive inside, negative outside. */
  margin: number | null
}

const HINTS = new Map(resultColumns().map(({ id, hint }) => [id, hint]))

export function limitStandings(
  limits: Limits,
  readValue: (result: string) => number | null,
): LimitStanding[] {
  return LIMITS.flatMap(({ id, label, result, dimension }): LimitStanding[] => {
    const given = limits[id]
    if (!given) return []
    const { min, max } = given
    const value = readValue(result)
    const standing = { id, label, result, dimension, hint: HINTS.get(result), value, min, max }
    if (value === null || !Number.isFinite(value))
      return [{ ...standing, value: null, met: null, margin: null }]
    const margins = [
      ...(max === undefined ? [] : [(max - value) / Math.abs(max)]),
      ...(min === undefined ? [] : [(value - min) / Math.abs(min || 1)]),
    ]
    const margin = Math.min(...margins)
    return [{ ...standing, met: margin >= 0, margin }]
  })
}

/** A key result read out of a full result. */
export function keyResultOf(result: Result, id: string): number | null {
  switch (id) {
    case 'coolantPressureDrop':
      return result.coolant?.pressureDrop ?? null
    case 'vapourPressureDrop':
      return result.vapour.pressureDrop
    case 'saturationTemperatureDrop':
      return result.vapour.saturationTemperatureDrop
    case 'coolantVelocity':
      return result.coolant?.velocity ?? null
    case 'coolantMassFlow':
      return result.coolant?.massFlow ?? null
    case 'coolantOutletTemperature':
      return result.coolant?.outletTemperature ?? null
    case 'tubeMass':
      return result.bundle.tubeMass
    case 'bundleWidth':
      return result.bundle.width
    case 'bundleHeight':
      return result.bundle.height
    case 'meanWallSubcooling':
      return result.meanHeatFlux !== null && result.meanCoefficient
        ? result.meanHeatFlux / result.meanCoefficient
        : null
    case 'outsideArea':
    case 'tubeLength':
    case 'duty':
    case 'overallCoefficient':
    case 'meanCoefficient':
    case 'tubeCount':
    case 'pumpingPower':
    case 'yearlyCost':
      return result[id]
    default:
      return null
  }
}
