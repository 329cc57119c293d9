// Which notes a solved point carries, as a bit mask: cheap enough for every point of a sweep. What they say stands in
// describe.ts.
import {
  columnSheetToSheet,
  dropletColumnToColumn,
  galileo,
  tubesInVerticalLine,
} from '#engine/correlations/inundation.ts'
import {
  COOLANT_CP,
  COOLANT_K,
  COOLANT_LENGTH,
  COOLANT_MU,
  fillCoolant,
  findFluid,
  outsideRange,
  surfaceTension,
} from '#engine/fluids/index.ts'
import { NOTE_BIT, type NoteCode } from '#engine/notes.ts'
import { inTransition } from './multipliers.ts'
import type { PointSolver } from './point-solver.ts'
import { DROP, SHEAR } from './point-state.ts'

const water = new Float64Array(COOLANT_LENGTH)
const BIT = Object.fromEntries(Object.entries(NOTE_BIT).map(([code, bit]) => [code, 2 ** bit])) as Record<
  NoteCode,
  number
>

/** Steam below this is under vacuum [Pa]. */
export const VACUUM = 9e4
/** Condenser-side momentum above which an impingement plate is usual [Pa]; common practice. */
export const IMPINGEMENT = 2200
/** Inner wall closer than this to freezing is noted [K]. */
export const FREEZING_MARGIN = 2

const ZUKAUSKAS = DROP.indexOf('zukauskas')
const FUJII = SHEAR.indexOf('fujiiUeharaKurata')
/** Two-phase Reynolds numbers that Fujii, Uehara and Kurata's law was validated in (VDI Heat Atlas). */
export const FUJII_RANGE = [3e5, 1e6] as const

export function notesMask(point: PointSolver): number {
  const { march } = point
  const { s } = march
  const { rows, fluid } = s
  let mask = BIT.vibrationNotCovered

  // --- film and rows
  let high = 0
  let jakob = 0
  let reference = false
  let idle = false
  for (let r = 0; r < rows; r++) {
    if (march.rowFlux[r] === 0) idle = true
    const x = march.rowX[r]
    const T = march.rowTs[r] - x + march.weight * x
    if (!fluid.fixed && outsideRange(fluid, T)) reference = true
    const flow = march.rowArriving[r] + march.rowCondensate[r] / (march.rowTubes[r] * march.length)
    const re = (2 * flow) / march.rowViscosity[r]
    if (re > high) high = re
    const ja = (march.rowSpecificHeat[r] * x) / march.rowLatent[r]
    if (ja > jakob) jakob = ja
  }
  if (high > 3600) mask += BIT.filmReynoldsHigh
  if (jakob > 0.5) mask += BIT.jakobNumberHigh
  if (march.Ts > 0.9 * fluid.criticalTemperature) mask += BIT.nearCritical
  if (reference) mask += BIT.referenceTemperatureOutsideTable
  if (idle) mask += BIT.idleRows
  if (rows > 30) mask += BIT.manyRows
  const last = rows - 1
  const tension = surfaceTension(fluid, march.rowTs[last] - (1 - march.weight) * march.rowX[last])
  const ga = galileo(march.rowDensity[last], tension, march.rowViscosity[last])
  if (Number.isNaN(ga)) mask += BIT.noSurfaceTension
  else if (march.inundation === 0) {
    if (high > dropletColumnToColumn(ga)) mask += BIT.drainageModeArea
    if (march.exponent <= 0.16 && high > columnSheetToSheet(ga)) mask += BIT.sheetUnderFixedExponent
  }
  if (march.inundation >= 2 && march.inundation <= 5) {
    if (march.staggered) mask += BIT.rowLawCountsVerticalLine
    const line = tubesInVerticalLine(rows, march.staggered)
    if (march.inundation === 5 && (line - 1) * jakob > 2) mask += BIT.chenBeyondRange
    if (march.inundation === 4) mask += BIT.eissenbergClipped
  }

  // --- vapour
  const frontal = march.inletVapour / (march.rowVapourDensity[0] * march.length * march.width)
  if (!(march.rowVapourDensity[0] > 0)) mask += BIT.noVapourState
  else {
    const throat = (frontal * march.width) / march.throatWidth
    if (march.drop !== 3) {
      const re = (march.rowVapourDensity[0] * throat * s.outsideDiameter) / march.rowVapourViscosity[0]
      if (re < 1 || re > 3e5) mask += BIT.vapourReynoldsRange
      if (rows < 5) mask += BIT.fewRows
      if (march.drop === ZUKAUSKAS && (march.transverseRatio < 1.25 || march.transverseRatio > 2.5))
        mask += BIT.layoutRange
    }
    if (march.rowVapourDensity[0] * throat * throat > IMPINGEMENT) mask += BIT.vapourMomentumHigh
    if (march.shear === FUJII) {
      const re = march.shearReynolds(0)
      if (re < FUJII_RANGE[0] || re > FUJII_RANGE[1]) mask += BIT.shearRange
    }
  }
  if (s.pitchRatio > 2.5) mask += BIT.pitchRatioWide
  if (march.vapourDrop > 0.1 * march.inletPressure) mask += BIT.vapourPressureDropHigh
  if (march.fastestOverSonic > 0.3) mask += BIT.vapourSonic
  if (s.circular) mask += BIT.circularFlowWidth
  if (rows % s.passes !== 0) mask += BIT.unevenPasses

  // --- coolant
  if (s.coolant === null) mask += BIT.noCoolantState
  else if (point.outcome === 0) {
    let transition = false
    let beyond = false
    let coldest = Number.POSITIVE_INFINITY
    let slowest = Number.POSITIVE_INFINITY
    let fastest = 0
    for (let j = 0; j < s.passes; j++) {
      const re = march.passReynolds[j]
      if (inTransition(re)) transition = true
      if (march.tubeSide !== 0 && re < 1e4) beyond = true
      const v = march.passVelocity[j]
      if (v < slowest) slowest = v
      if (v > fastest) fastest = v
      const inner = march.passIn[j]
      if (inner < coldest) coldest = inner
      fillCoolant(s.coolant, inner, water)
      const pr = (water[COOLANT_MU] * water[COOLANT_CP]) / water[COOLANT_K]
      if (pr < 0.5 || pr > 2000 || re > 5e6) beyond = true
    }
    if (transition) mask += BIT.coolantTransition
    if (beyond) mask += BIT.coolantMethodRange
    const window = point.material?.velocityRange
    if (window && (slowest < window[0] || fastest > window[1])) mask += BIT.coolantVelocityOutsideWindow
    const outlet = point.coolantOutlet
    if (march.Ts - outlet < 1) mask += BIT.coolantApproachSmall
    if (!s.coolantDrive && outlet > march.Ts - 1.1 * s.wallSubcooling) mask += BIT.coolantOutletNearWall
    if (coldest < s.coolant.freezingTemperature + FREEZING_MARGIN) mask += BIT.innerWallNearFreezing
  }

  // --- what was assumed, and cautions
  if (Number.isNaN(point.tubeMass)) mask += BIT.noTubeMass
  mask += BIT.economicsAssumed
  if (point.autoTubes) mask += BIT.tubesPerRowChosen
  if (point.corrections.length > 0) mask += BIT.corrected
  if (point.fluidId === 'water' && march.inletPressure < VACUUM) mask += BIT.vacuumSteamWithoutGas
  if (point.fluidId === 'r717' && s.outsideFouling === 0) mask += BIT.ammoniaWithoutFouling
  const card = point.fluidId === null ? undefined : findFluid(point.fluidId)
  if (card?.safetyClass && card.safetyClass.value !== 'A1') mask += BIT.fluidSafety
  if (card && (uncertain(card.grades.viscosity) || uncertain(card.grades.conductivity)))
    mask += BIT.propertyGrade
  return mask
}

const uncertain = (grade: string) => grade === 'suspect' || grade.startsWith('entropy')
