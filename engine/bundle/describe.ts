// The whole result of a solved point, and its notes in words.

import { nusseltTube, plainLatentHeat, rohsenowLatentHeat } from '#engine/correlations/film.ts'
import {
  condensateFlowFactor,
  DRAINAGE_MODES,
  drainageModeIndex,
  galileo,
} from '#engine/correlations/inundation.ts'
import { findCard } from '#engine/correlations/registry.ts'
import {
  CP_L,
  fillFilm,
  findFluid,
  K_L,
  MU_L,
  RHO_L,
  SATURATION_LENGTH,
  SIGMA,
} from '#engine/fluids/index.ts'
import { type Note, type NoteCode, noteCodes, type Severity } from '#engine/notes.ts'
import type { PassResult, Result, RowResult } from '#engine/result.ts'
import { ENGINE_VERSION } from '#engine/version.ts'
import { OUTCOME_INDEX, OUTCOMES } from './key-results.ts'
import { MULTIPLIER_GROUPS, type MultiplierGroup } from './multipliers.ts'
import { FREEZING_MARGIN, IMPINGEMENT, notesMask } from './notes-mask.ts'
import { PointSolver } from './point-solver.ts'

const liquid = new Float64Array(SATURATION_LENGTH)
const WALL_NOT_HELD = OUTCOME_INDEX.noVelocityHoldsWall

/** NaN and infinities are null: a result holds finite numbers. */
const finite = (value: number): number | null => (Number.isFinite(value) ? value : null)

export function describe(point: PointSolver): Result {
  const { march, outcome } = point
  const { s } = march
  const solved = outcome === 0 || outcome === WALL_NOT_HELD
  const cooled = s.coolant !== null && outcome === 0
  const known = (value: number) => (solved ? finite(value) : null)
  const area = point.area
  const notes: Note[] = []
  if (outcome !== 0) {
    const { code, text, remedy } = OUTCOMES[outcome]
    notes.push({
      code,
      severity: 'notMet',
      text: `${sentence(text)}. What would help: ${remedy}.`,
      source: 'the balance of this point',
    })
  }
  const rows = solved ? rowsOf(point) : []
  if (solved) for (const code of noteCodes(notesMask(point))) notes.push(noteOf(code, point, rows))
  for (const note of unverified(point)) notes.push(note)

  return {
    question: Number.isNaN(s.duty) ? 'rate' : 'size',
    duty: known(march.duty),
    condensateRate: known(march.condensate),
    outsideArea: known(area),
    tubeLength: known(march.length),
    tubeCount: finite(march.tubes),
    meanCoefficient: known(point.meanCoefficient),
    meanHeatFlux: known(march.duty / area),
    overallCoefficient: cooled ? finite(march.duty / (area * point.meanTemperatureDifference)) : null,
    meanTemperatureDifference: cooled ? finite(point.meanTemperatureDifference) : null,
    coolant:
      s.coolant === null
        ? null
        : {
            massFlow: cooled ? finite(march.flow) : null,
            velocity: cooled ? finite(point.coolantVelocity) : null,
            reynolds: cooled ? finite(meanOverPasses(point, march.passReynolds)) : null,
            coefficient: cooled ? finite(meanOverPasses(point, march.passCoefficient)) : null,
            inletTemperature: finite(s.inletTemperature),
            outletTemperature: cooled ? finite(point.coolantOutlet) : null,
            pressureDrop: cooled ? finite(march.coolantDrop) : null,
          },
    vapour: {
      inletVelocity: known(
        march.inletVapour / (march.rowVapourDensity[0] * march.length * march.flowWidth()),
      ),
      pressureDrop: known(march.vapourDrop),
      saturationTemperatureDrop: solved ? finite(point.saturationTemperatureDrop) : null,
    },
    bundle: { width: finite(march.width), height: finite(march.height), tubeMass: known(point.tubeMass) },
    pumpingPower: cooled ? finite(point.pumpingPower) : null,
    yearlyCost: cooled ? finite(point.yearlyCost) : null,
    rows,
    passes: cooled ? passesOf(point) : [],
    notes,
    methods: { ...point.methods },
    ...(point.corrections.length > 0 ? { corrections: [...point.corrections] } : {}),
    engineVersion: ENGINE_VERSION,
  }
}

/** Mean over the tubes. */
function meanOverPasses({ march }: PointSolver, values: Float64Array): number {
  let sum = 0
  for (let j = 0; j < march.s.passes; j++) sum += values[j] * march.passTubes[j]
  return sum / march.tubes
}

function rowsOf(point: PointSolver): RowResult[] {
  const { march } = point
  const { s } = march
  const rows: RowResult[] = []
  for (let r = 0; r < s.rows; r++) {
    const x = march.rowX[r]
    const q = march.rowFlux[r]
    const Ts = march.rowTs[r]
    fillFilm(s.fluid, Ts - x + march.weight * x, liquid)
    const made = march.rowCondensate[r] / (march.rowTubes[r] * march.length)
    const arriving = march.rowArriving[r]
    const leaving = arriving + made
    const reynolds = (2 * leaving) / liquid[MU_L]
    const ga = galileo(liquid[RHO_L], liquid[SIGMA], liquid[MU_L])
    const latent = march.plainLatent
      ? plainLatentHeat(march.rowLatent[r])
      : rohsenowLatentHeat(march.rowLatent[r], liquid[CP_L], x)
    const still =
      x > 0
        ? march.factors.film *
          nusseltTube(
            s.outsideDiameter,
            x,
            liquid[RHO_L],
            march.rowVapourDensity[r],
            liquid[MU_L],
            liquid[K_L],
            latent,
          )
        : 0
    const coefficient = x > 0 ? q / x : 0
    const dh = q > 0 ? (q * Math.PI * s.outsideDiameter) / made : march.rowLatent[r]
    const inundation = rowFactor(point, r, q, (arriving * dh) / (Math.PI * s.outsideDiameter), still)
    rows.push({
      row: r + 1,
      tubes: march.rowTubes[r],
      saturationTemperature: Ts,
      wallTemperature: Ts - x,
      coolantTemperature: s.coolant !== null && point.outcome === 0 ? march.rowCoolant[r] : null,
      coefficient,
      wallSubcooling: x,
      heatFlux: q,
      condensateIn: arriving,
      vapourVelocity: march.rowVapourDensity[r] > 0 ? march.rowVelocity[r] : null,
      gasMoleFraction: 0,
      filmReynolds: reynolds,
      galileo: finite(ga),
      drainageMode: Number.isFinite(ga) ? DRAINAGE_MODES[drainageModeIndex(reynolds, ga)] : null,
      factors: { inundation, shear: still > 0 ? coefficient / (still * inundation) : 1, gas: 1, surface: 1 },
    })
  }
  return rows
}

/** h of the row over h of a clean tube in the same vapour. */
function rowFactor(point: PointSolver, row: number, flux: number, arriving: number, still: number): number {
  const { march } = point
  if (row === 0) return 1
  if (march.inundation === 6) return march.factors.inundation
  if (march.inundation === 0)
    return march.factors.inundation * condensateFlowFactor(flux, arriving, march.exponent)
  const single = march.singleAt(row)
  return single > 0 ? flux / single : still > 0 ? 1 : 0
}

function passesOf(point: PointSolver): PassResult[] {
  const { march } = point
  return Array.from({ length: march.s.passes }, (_, j) => ({
    pass: j + 1,
    rows: march.passRows[j],
    inletTemperature: march.passIn[j],
    outletTemperature: march.passOut[j],
    velocity: march.passVelocity[j],
    reynolds: march.passReynolds[j],
    coefficient: march.passCoefficient[j],
    pressureDrop: march.passDrop[j],
  }))
}

const groupLabel = (id: MultiplierGroup) =>
  MULTIPLIER_GROUPS.find((group) => group.id === id)?.label.toLowerCase()
const sentence = (text: string) => text.charAt(0).toUpperCase() + text.slice(1)
const three = (value: number) => Number(value.toPrecision(3)).toString()

/** Chosen methods whose numbers are from memory and unverified, in one note. */
function unverified(point: PointSolver): Note[] {
  const names: string[] = []
  for (const [choice, id] of Object.entries(point.methods)) {
    if (choice === 'fins' || choice === 'dropwise' || choice === 'gas') continue
    if (choice === 'twoPhase' && point.methods.vapourPressureDrop === 'none') continue
    const card = findCard(`${choice}.${id}`)
    if (card?.evidence === 'from memory, unverified') names.push(card.name)
  }
  if (names.length === 0) return []
  return [
    {
      code: 'methodUnverified',
      severity: 'info',
      text: `Constants from memory, not checked against a printed value: ${names.join('; ')}.`,
      source: 'the cards of these methods',
    },
  ]
}

function noteOf(code: NoteCode, point: PointSolver, rows: RowResult[]): Note {
  const { march } = point
  const { s } = march
  const note = (severity: Severity, text: string, source: string): Note => ({ code, severity, text, source })
  const highest = rows.reduce((most, row) => Math.max(most, row.filmReynolds), 0)
  const list = (which: (row: RowResult) => boolean) => rowList(rows.filter(which).map((row) => row.row))
  switch (code) {
    case 'filmReynoldsHigh':
      return note(
        'outOfRange',
        `Film Reynolds number up to ${three(highest)}, ${three(highest / 3600)} times the laminar limit of 3600; the laminar law is extrapolated.`,
        'ASHRAE Handbook Fundamentals, single horizontal tube',
      )
    case 'jakobNumberHigh':
      return note(
        'outOfRange',
        'The Jakob number of the film is above 0.5; less wall subcooling brings the film laws into their range.',
        'Rohsenow 1956',
      )
    case 'nearCritical':
      return note(
        'caution',
        `Saturation is at ${three(march.Ts / s.fluid.criticalTemperature)} of the critical temperature; properties and film laws are uncertain there.`,
        'range of the film laws',
      )
    case 'referenceTemperatureOutsideTable':
      return note(
        'outOfRange',
        'The film’s reference temperature leaves the property table in some row; the nearest end is used.',
        'property table of the fluid',
      )
    case 'sheetUnderFixedExponent':
      return note(
        'caution',
        `Rows ${list((row) => row.drainageMode === 'sheet')} drain as sheets, where an exponent of ${march.exponent} is on the hopeful side; see what drainageMode gives.`,
        'Hu and Jacobi 1996',
      )
    case 'idleRows':
      return note(
        'caution',
        `Rows ${list((row) => row.heatFlux === 0)} condense nothing: their coolant is as warm as the vapour's saturation there.`,
        'balance of this point',
      )
    case 'shearRange':
      return note(
        'outOfRange',
        `The two-phase Reynolds number of the first row is ${three(march.shearReynolds(0))}; the shear law was validated from 3e5 to 1e6.`,
        'VDI Heat Atlas, Ja7',
      )
    case 'layoutRange':
      return note(
        'outOfRange',
        `Transverse pitch over diameter is ${three(march.transverseRatio)}; the loss charts run from 1.25 to 2.5 and are held at their ends.`,
        findCard(`vapourPressureDrop.${point.methods.vapourPressureDrop}`)?.source[0] ?? '',
      )
    case 'manyRows':
      return note(
        'outOfRange',
        `${s.rows} rows: the row laws rest on data up to about 30.`,
        'methods compared by Wilson 1972, Grant and Osment 1968',
      )
    case 'chenBeyondRange':
      return note(
        'outOfRange',
        '(N − 1) Ja is above 2; the growth factor is held at its value there.',
        'Chen 1961',
      )
    case 'eissenbergClipped':
      return note(
        'info',
        'The printed law gives 1.02 for a single tube and is clipped at 1.',
        'Eissenberg 1972',
      )
    case 'drainageModeArea': {
      const modes = rowList(
        rows
          .filter(
            (row) =>
              row.drainageMode !== null &&
              row.drainageMode !== 'droplet' &&
              row.drainageMode !== 'dropletColumn',
          )
          .map((row) => row.row),
      )
      return note(
        'info',
        `Rows ${modes} drain in columns or sheets. ${drainageModeComparison(point)}`,
        'Hu and Jacobi 1996; exponents by mode are an assumption',
      )
    }
    case 'rowLawCountsVerticalLine':
      return note(
        'info',
        'The row law counts tubes in a vertical line: every second row in this staggered layout.',
        'geometry of the layout',
      )
    case 'coolantTransition':
      return note(
        'caution',
        'Coolant Reynolds number between 2300 and 4000 in some pass: the coefficient is a blend, uncertain by a quarter.',
        'Gnielinski 2013',
      )
    case 'coolantVelocityOutsideWindow': {
      const [low, high] = point.material?.velocityRange ?? [0, 0]
      return note(
        'caution',
        `Coolant at ${three(point.coolantVelocity)} m/s in ${point.material?.name.toLowerCase()} tubes; usual is ${low} to ${high} m/s against fouling and erosion.`,
        'assumption of the material table',
      )
    }
    case 'coolantApproachSmall':
      return note(
        'caution',
        Number.isNaN(point.meanTemperatureDifference)
          ? 'The coolant leaves at saturation: more length takes up no more heat, and mean difference and overall coefficient have no value.'
          : `The coolant leaves ${three(march.Ts - point.coolantOutlet)} K below saturation; area is very sensitive there.`,
        'balance of this point',
      )
    case 'coolantOutletNearWall':
      return note(
        'caution',
        'The coolant leaves close to the wall temperature that is to be held.',
        'balance of this point',
      )
    case 'innerWallNearFreezing':
      return note(
        'caution',
        `The coolant is within ${FREEZING_MARGIN} K of freezing somewhere.`,
        'coolant table',
      )
    case 'coolantMethodRange':
      return note(
        'outOfRange',
        'The tube-side method is outside its Reynolds or Prandtl range in some pass.',
        findCard(`tubeSide.${point.methods.tubeSide}`)?.source[0] ?? '',
      )
    case 'vapourReynoldsRange':
      return note(
        'outOfRange',
        'The vapour Reynolds number between the tubes is outside 1 to 3e5 at the inlet.',
        findCard(`vapourPressureDrop.${point.methods.vapourPressureDrop}`)?.source[0] ?? '',
      )
    case 'fewRows':
      return note(
        'outOfRange',
        `${s.rows} rows: the loss per row rests on banks of five or more.`,
        findCard(`vapourPressureDrop.${point.methods.vapourPressureDrop}`)?.source[0] ?? '',
      )
    case 'pitchRatioWide':
      return note(
        'outOfRange',
        `Pitch ratio ${three(s.pitchRatio)} is beyond the 2.5 that the bank laws rest on.`,
        'range of the vapour-side methods',
      )
    case 'vapourPressureDropHigh':
      return note(
        'caution',
        `The vapour loses ${three((100 * march.vapourDrop) / march.inletPressure)} % of its pressure across the rows.`,
        'balance of this point',
      )
    case 'vapourMomentumHigh':
      return note(
        'caution',
        `Vapour momentum between the first tubes is above ${IMPINGEMENT} Pa: an impingement plate or a wider entrance is usual.`,
        'common practice',
      )
    case 'vapourSonic':
      return note(
        'caution',
        `Vapour reaches ${three(march.fastestOverSonic)} of the speed of sound between the tubes.`,
        'estimate from the vapour’s specific heat',
      )
    case 'vibrationNotCovered':
      return note('info', 'Tube vibration and supports are not covered.', 'scope of the calculation')
    case 'unevenPasses':
      return note(
        'info',
        `${s.rows} rows do not divide into ${s.passes} passes evenly; velocities differ from pass to pass.`,
        'geometry of the bundle',
      )
    case 'noCoolantState':
      return note(
        'info',
        'No coolant is named: overall coefficient, coolant figures, pumping power and yearly cost have no value.',
        'inputs of this point',
      )
    case 'noTubeMass':
      return note(
        'info',
        'Tube mass has no value without a material and a wall thickness.',
        'inputs of this point',
      )
    case 'economicsAssumed':
      return note('info', 'Prices, hours and interest are the listed assumptions.', 'assumption')
    case 'vacuumSteamWithoutGas':
      return note(
        'caution',
        'Steam under vacuum carries air: mole fractions of 0.001, 0.005 and 0.02 would cost about 2, 8 and 36 % of area. None is assumed here.',
        'row balances with air, computed for a typical bundle',
      )
    case 'ammoniaWithoutFouling':
      return note(
        'caution',
        'Ammonia usually carries oil to the tubes; no outside fouling is assumed here.',
        'common practice',
      )
    case 'fluidSafety': {
      const card = point.fluidId ? findFluid(point.fluidId) : undefined
      return note(
        'caution',
        `${card?.name ?? 'The fluid'} is in safety class ${card?.safetyClass?.value}: charge, ventilation and detection follow local codes and licensed practice.`,
        card?.safetyClass?.basis ?? 'ASHRAE 34',
      )
    }
    case 'propertyGrade': {
      const card = point.fluidId ? findFluid(point.fluidId) : undefined
      return note(
        'caution',
        `Transport properties: viscosity ${card?.grades.viscosity}, conductivity ${card?.grades.conductivity}.`,
        card?.sources.viscosity ?? 'fluid table',
      )
    }
    case 'circularFlowWidth':
      return note(
        'info',
        'A round bundle’s vapour is taken through its mean chord from top to bottom.',
        'assumption',
      )
    case 'noVapourState':
      return note(
        'info',
        'No vapour density is given: buoyancy of the vapour is neglected and velocities have no value.',
        'inputs of this point',
      )
    case 'noSurfaceTension':
      return note(
        'info',
        'No surface tension is given: drainage modes have no value.',
        'inputs of this point',
      )
    case 'corrected':
      return note(
        'info',
        `Corrected from bench data: ${point.corrections.map(({ name, group, factor }) => `${name} (${groupLabel(group)} × ${three(factor)})`).join('; ')}.`,
        [...new Set(point.corrections.map(({ source }) => source))].join('; '),
      )
    case 'tubesPerRowChosen':
      return note(
        'info',
        `${march.rowTubes[0]} tubes per row come nearest to the coolant velocity asked for; the velocity is ${three(point.coolantVelocity)} m/s.`,
        'inputs of this point',
      )
    default:
      // The rest belong to surfaces, gas and superheat, which a case of this version cannot ask for.
      throw new Error(`the note ${code} has no words`)
  }
}

/** "9 to 14", "3, 5 and 7": row numbers, runs folded. */
function rowList(numbers: number[]): string {
  if (numbers.length === 0) return 'none'
  const runs: [number, number][] = []
  for (const n of numbers) {
    const last = runs.at(-1)
    if (last && n === last[1] + 1) last[1] = n
    else runs.push([n, n])
  }
  return runs.map(([from, to]) => (from === to ? `${from}` : `${from} to ${to}`)).join(', ')
}

/** What the drainage-mode law gives for the same point, from a solver of its own. */
function drainageModeComparison(point: PointSolver): string {
  const other = new PointSolver()
  other.copy(point)
  other.set('methods.inundation', 'drainageMode')
  if (other.solve() !== 0 && other.outcome !== WALL_NOT_HELD)
    return 'The drainage-mode law could not be solved for it.'
  if (!Number.isNaN(point.march.s.duty)) {
    const change = (other.area / point.area - 1) * 100
    return `By the drainage-mode law the area would be ${three(other.area)} m² (${change >= 0 ? '+' : '−'}${three(Math.abs(change))} %).`
  }
  const change = (other.march.duty / point.march.duty - 1) * 100
  return `By the drainage-mode law the duty would be ${three(other.march.duty / 1000)} kW (${change >= 0 ? '+' : '−'}${three(Math.abs(change))} %).`
}
