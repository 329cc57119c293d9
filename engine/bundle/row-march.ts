// The march through the rows: geometry of a point, one sweep from top to bottom, and what a sweep carries to the next.
//
// Each sweep starts from what the last one left (film properties, row condensate, coolant properties, share of the
// coolant's rise) and takes one Newton step or more on every wall, so that the wall and all that lags settle together.
// Nothing is allocated per point. What has stopped moving is not computed again: the thresholds below lie two orders
// under the closeness the balances are brought to.
import {
  chenTubeFactor,
  FILM_SUBCOOLING,
  filmDrive,
  NUSSELT_TUBE_CONSTANT,
  nusseltTubeFlux,
  PROPERTY_TEMPERATURE_WEIGHT,
  ROHSENOW_COEFFICIENT,
} from '#engine/correlations/film.ts'
import {
  bundleHeight,
  circularRowTubes,
  isStaggered,
  minimumAreaFraction,
  rectangularWidth,
  rowPitchFactor,
  transversePitchFactor,
  voidFraction,
  wallResistance,
} from '#engine/correlations/geometry.ts'
import {
  chenRowLocal,
  columnSheetToSheet,
  columnToColumnSheet,
  condensateFlowExponent,
  drainageExponent,
  drainageModeFlux,
  eissenbergRowLocal,
  galileo,
  inundatedFlux,
  kernRowLocal,
  nusseltRowLocal,
  tubesInVerticalLine,
} from '#engine/correlations/inundation.ts'
import {
  butterworthFlux,
  fujiiUeharaKurataFlux,
  roseFlux,
  shekriladzeGomelauriFlux,
  suctionGroupPerKelvin,
} from '#engine/correlations/shear.ts'
import {
  dittusBoelter,
  gnielinski,
  siederTate,
  WALL_PRANDTL_POWER,
  WALL_VISCOSITY_POWER,
  wallPrandtlFactor,
  wallViscosityFactor,
} from '#engine/correlations/tube-side.ts'
import {
  fillGaddisRow,
  gaddisEndLoss,
  gaddisLaminar,
  gaddisTurbulent,
  ishihara,
  jakob,
  rowPressureDrop,
  XI,
  XI_POWER,
  zukauskas,
} from '#engine/correlations/vapour-drop.ts'
import {
  COOLANT_CP,
  COOLANT_LENGTH,
  COOLANT_LINE,
  COOLANT_RHO,
  type CoolantModel,
  CP_V,
  FILM_LINE,
  fillCoolant,
  fillCoolantLine,
  fillFilmLine,
  fillVapour,
  fillVapourLine,
  H_FG,
  LINE_CP,
  LINE_CP_L,
  LINE_H_FG,
  LINE_K,
  LINE_K_L,
  LINE_MU,
  LINE_MU_L,
  LINE_MU_V,
  LINE_P,
  LINE_REFERENCE,
  LINE_RHO,
  LINE_RHO_L,
  LINE_RHO_V,
  LINE_T,
  MU_V,
  outsideRange,
  P,
  RHO_V,
  SATURATION_LENGTH,
  saturationTemperature,
  surfaceTension,
  VAPOUR_LINE,
} from '#engine/fluids/index.ts'
import { OUTCOME_INDEX } from './key-results.ts'
import { unitMultipliers } from './multipliers.ts'
import { MAX_PASSES, MAX_ROWS, PointState } from './point-state.ts'

const OUTCOME = OUTCOME_INDEX as Readonly<Record<string, number>>

/** Vapour pressure is held above this share of the inlet's inside trials. */
const PRESSURE_FLOOR = 0.2
/** Coolant properties follow straight lines as far as this [K], to 1e-10. */
const COOLANT_WINDOW = 3e-4
/** Film properties follow straight lines as far as this [K]: their curvature leaves 1e-11 of a flux. */
const FILM_WINDOW = 1e-3
/** As far in the first sweep, which only has to come near [K]. */
const FIRST_WINDOW = 2
/** The vapour's state follows parabolas in ln p as far as this, to 1e-11. */
const VAPOUR_WINDOW = 3e-4
/** A row's pressure loss follows powers of its flows as far as this, relative, to 2e-10 … */
const LOSS_WINDOW = 5e-5
/** … or to this share of what the rows still move by, but never further than that. */
const LOSS_SHARE = 0.005
const WIDEST_LOSS_WINDOW = 0.5
/** Below this relative move a power is followed by its series, to 1e-12. */
const SMALL_MOVE = 0.03
/** A wall's Newton steps stop below this share of the driving difference; the sweeps take it further. */
const STEP = 1e-4

// Laws that have a place of their own in the inner loop.
const CONDENSATE_FLOW = 0
const DRAINAGE_MODE = 1
export const CHEN_ROWS = 5
const NO_INUNDATION = 6
const BUTTERWORTH = 0
const SHEKRILADZE = 1
const ROSE = 2
const NO_SHEAR = 4
const NO_DROP = 3

export class RowMarch {
  readonly s = new PointState()
  film = 0
  plainLatent = false
  weight: number = PROPERTY_TEMPERATURE_WEIGHT.oneThird
  inundation = CONDENSATE_FLOW
  shear = BUTTERWORTH
  drop = 0
  tubeSide = 0
  colebrookFriction = false
  twoPhase = true
  /** Corrections and sampled factors together. */
  readonly factors = unitMultipliers()

  // --- what does not change within a point
  staggered = true
  tubes = 0
  width = 0
  height = 0
  insideDiameter = 0
  fixedResistance = 0
  boreArea = 0
  exponent = 0
  /** Mean coefficient of the rows over a dry one's, for guesses. */
  private meanRowFactor = 1
  private eps = 0
  private fmin = 0
  private a = 0
  private b = 0
  private lossLaminar = 0
  private lossTurbulent = 0
  private lossEnd = 0
  private readonly loss = new Float64Array(2)
  private flowPower = 0
  inletPressure = Number.NaN
  Ts = 0

  // --- rows
  readonly rowTubes = new Float64Array(MAX_ROWS)
  readonly rowPass = new Int32Array(MAX_ROWS)
  readonly rowPressure = new Float64Array(MAX_ROWS)
  readonly rowTs = new Float64Array(MAX_ROWS)
  readonly rowLatent = new Float64Array(MAX_ROWS)
  readonly rowVapourDensity = new Float64Array(MAX_ROWS)
  readonly rowVapourViscosity = new Float64Array(MAX_ROWS)
  readonly rowX = new Float64Array(MAX_ROWS)
  readonly rowFlux = new Float64Array(MAX_ROWS)
  readonly rowCondensate = new Float64Array(MAX_ROWS)
  /** Condensate that the next sweep takes a row to make when it sets the row's mean vapour flow. */
  private readonly rowExpected = new Float64Array(MAX_ROWS)
  readonly rowArriving = new Float64Array(MAX_ROWS)
  readonly rowCoolant = new Float64Array(MAX_ROWS)
  readonly rowVelocity = new Float64Array(MAX_ROWS)
  /** Film properties of each row at its reference temperature. */
  readonly rowDensity = new Float64Array(MAX_ROWS)
  readonly rowSpecificHeat = new Float64Array(MAX_ROWS)
  readonly rowViscosity = new Float64Array(MAX_ROWS)
  readonly rowConductivity = new Float64Array(MAX_ROWS)
  private readonly rowColumnLine = new Float64Array(MAX_ROWS)
  private readonly rowSheetLine = new Float64Array(MAX_ROWS)
  /** Lines that rows follow their film and vapour properties by, one made by each row, and where a row's stands. */
  private readonly filmLines = new Float64Array(MAX_ROWS * FILM_LINE)
  private readonly rowFilmLine = new Int32Array(MAX_ROWS)
  private readonly vapourLines = new Float64Array(MAX_ROWS * VAPOUR_LINE)
  private readonly rowVapourLine = new Int32Array(MAX_ROWS)
  /** Share of its own condensate in a row's leaving flow, and its power `exponent`, where last taken. */
  private readonly rowOwn = new Float64Array(MAX_ROWS)
  private readonly rowPower = new Float64Array(MAX_ROWS)
  /** Each row's pressure loss where last taken, the flows and density there inverted, and its powers of them. */
  private readonly rowLoss = new Float64Array(MAX_ROWS)
  private readonly rowLossPerVapour = new Float64Array(MAX_ROWS)
  private readonly rowLossPerLiquid = new Float64Array(MAX_ROWS)
  private readonly rowLossPerDensity = new Float64Array(MAX_ROWS)
  private readonly rowLossPerLiquidDensity = new Float64Array(MAX_ROWS)
  private readonly rowLossPerLiquidViscosity = new Float64Array(MAX_ROWS)
  private readonly rowLossWetShare = new Float64Array(MAX_ROWS)
  private readonly rowLossWetPower = new Float64Array(MAX_ROWS)
  private readonly rowLossByVapour = new Float64Array(MAX_ROWS)
  private readonly rowLossByLiquid = new Float64Array(MAX_ROWS)
  private readonly rowLossByDensity = new Float64Array(MAX_ROWS)
  /** Where along the row's coolant rise the wall is solved: share κ of the rise below the inlet difference. */
  private readonly rowShare = new Float64Array(MAX_ROWS)

  // --- passes, 0 where the coolant enters
  readonly passRows = new Int32Array(MAX_PASSES)
  readonly passTubes = new Float64Array(MAX_PASSES)
  readonly passIn = new Float64Array(MAX_PASSES)
  readonly passOut = new Float64Array(MAX_PASSES)
  readonly passHeat = new Float64Array(MAX_PASSES)
  readonly passVelocity = new Float64Array(MAX_PASSES)
  readonly passReynolds = new Float64Array(MAX_PASSES)
  readonly passCoefficient = new Float64Array(MAX_PASSES)
  readonly passDensity = new Float64Array(MAX_PASSES)
  readonly passSpecificHeat = new Float64Array(MAX_PASSES)
  /** Resistance inside the film [m² K/W], and the coolant's rise per flux [m² K/W], of the sweep at hand. */
  private readonly passInner = new Float64Array(MAX_PASSES)
  private readonly passRise = new Float64Array(MAX_PASSES)
  /** Lines that each pass follows its coolant's properties by, at its mean and at its wall temperature. */
  private readonly passLines = new Float64Array(2 * MAX_PASSES * COOLANT_LINE)
  /** Wall factor of the coefficient where the lines were made, and the ratio it is a power of. */
  private readonly passRatio = new Float64Array(MAX_PASSES)
  private readonly passWallFactor = new Float64Array(MAX_PASSES)
  private readonly passWall = new Float64Array(MAX_PASSES)
  private readonly passMean = new Float64Array(MAX_PASSES)

  protected readonly inlet = new Float64Array(SATURATION_LENGTH)
  protected readonly water = new Float64Array(COOLANT_LENGTH)

  // --- what the last sweep found
  duty = 0
  condensate = 0
  vapourDrop = 0
  lowestWall = 0
  clamped = false
  /** Largest change of a row's flux against the sweep before, over the mean flux. */
  protected moved = 1
  protected movedBefore = 1
  /** Largest change of a pass's temperatures, K, at the last sweep and the one before. */
  private changed = 0
  protected changedBefore = 0

  // --- what the sweeps are made for
  inletVapour = 0
  length = 0
  flow = 0
  private first = true
  /** Share of a row's new condensate, and of a pass's new inlet, that the next sweep starts from. */
  protected heed = 1

  /** Geometry and inlet state; the outcome that ends the point here, or 0. */
  prepare(): number {
    const { s } = this
    const { layout, pitchRatio, rows, passes } = s
    const Do = s.outsideDiameter
    const Di = Do - 2 * s.wallThickness
    const cooled = s.coolant !== null
    if (cooled && !(Di > 0)) return OUTCOME.inputInvalid
    if (passes > rows || !(rows >= 1) || !(passes >= 1)) return OUTCOME.inputInvalid
    if (!s.fluid.fixed) {
      if (Number.isNaN(s.saturationTemperature))
        s.saturationTemperature = saturationTemperature(s.fluid, s.saturationPressure)
      if (outsideRange(s.fluid, s.saturationTemperature)) return OUTCOME.saturationOutsideTable
    }
    this.Ts = s.saturationTemperature
    fillVapour(s.fluid, this.Ts, this.inlet)
    if (s.fluid.fixed && Number.isNaN(this.inlet[RHO_V])) this.inlet[RHO_V] = 0
    this.inletPressure = this.inlet[P]
    if (cooled) {
      const c = s.coolant as CoolantModel
      if (outsideRange(c, s.inletTemperature) || s.inletTemperature <= c.freezingTemperature)
        return OUTCOME.coolantOutsideRange
      if (s.inletTemperature >= this.Ts) return OUTCOME.coolantTooWarm
    }
    this.insideDiameter = Di
    this.boreArea = (Math.PI / 4) * Di * Di
    this.staggered = isStaggered(layout)
    this.eps = voidFraction(layout, pitchRatio)
    this.fmin = minimumAreaFraction(layout, pitchRatio)
    this.exponent = condensateFlowExponent(this.staggered)
    const law = this.inundation === NO_INUNDATION ? 0 : this.exponent
    this.meanRowFactor =
      rows > 1 ? this.factors.inundation * Math.min(1, rows ** -law * (1 - law) ** (law - 1)) : 1
    const { foulingOutside, foulingInside, wall } = this.factors
    const outside = s.outsideFouling * foulingOutside
    this.fixedResistance = cooled
      ? outside + wallResistance(Do, Di, s.conductivity * wall) + (Do / Di) * s.insideFouling * foulingInside
      : outside
    const tubesPerRow = Number.isNaN(s.tubesPerRow) ? this.chosenTubesPerRow() : s.tubesPerRow
    if (!s.circular && !(tubesPerRow >= 1)) return OUTCOME.inputInvalid
    const pitch = pitchRatio * Do
    this.height = bundleHeight(layout, pitch, rows, Do)
    this.tubes = 0
    for (let r = 0; r < rows; r++) {
      const n = s.circular ? circularRowTubes(layout, rows, r + 1) : tubesPerRow
      this.rowTubes[r] = n
      this.tubes += n
    }
    this.width = s.circular ? this.height : rectangularWidth(layout, pitch, tubesPerRow)
    for (let j = 0; j < passes; j++) {
      const from = Math.floor((j * rows) / passes)
      const to = Math.floor(((j + 1) * rows) / passes)
      const pass = s.entryTop ? j : passes - 1 - j
      let n = 0
      for (let r = from; r < to; r++) {
        this.rowPass[r] = pass
        n += this.rowTubes[r]
      }
      this.passRows[pass] = to - from
      this.passTubes[pass] = n
    }
    this.a = transversePitchFactor(layout) * pitchRatio
    this.b = rowPitchFactor(layout) * pitchRatio
    if (this.drop === 0) {
      if (!(this.a > 0.85) || !(4 * this.a * this.b > Math.PI) || (!this.staggered && !(this.b > 0.94)))
        return OUTCOME.inputInvalid
      this.lossLaminar = gaddisLaminar(this.a, this.b, this.staggered)
      this.lossTurbulent = gaddisTurbulent(this.a, this.b, this.staggered)
      this.lossEnd = gaddisEndLoss(this.a, this.b, this.staggered, rows)
    }
    return 0
  }

  /** Width that the vapour passes through: a round bundle is taken at its mean chord. */
  flowWidth(): number {
    const { s } = this
    return s.circular
      ? (this.tubes / s.rows) * transversePitchFactor(s.layout) * s.pitchRatio * s.outsideDiameter
      : this.width
  }

  /** Sum of the narrowest gaps of a row, m. */
  get throatWidth(): number {
    return this.flowWidth() * this.fmin
  }

  /** Transverse pitch over diameter. */
  get transverseRatio(): number {
    return this.a
  }

  /** Tubes per row that bring the given velocity with the given flow or outlet temperature. */
  private chosenTubesPerRow(): number {
    const { s } = this
    if (s.coolant === null || Number.isNaN(s.velocity)) return Number.NaN
    fillCoolant(s.coolant, s.inletTemperature, this.water)
    const density = this.water[COOLANT_RHO]
    let flow = s.massFlow
    if (Number.isNaN(flow)) {
      fillCoolant(s.coolant, 0.5 * (s.inletTemperature + s.outletTemperature), this.water)
      flow = s.duty / (this.water[COOLANT_CP] * (s.outletTemperature - s.inletTemperature))
    }
    const perRow = (flow * s.passes) / (density * s.velocity * this.boreArea * s.rows)
    return Math.max(1, Math.round(perRow))
  }

  /** Guesses a point starts from; the first sweep takes each row's wall from the row above. */
  protected start(cooled: boolean): void {
    const { s } = this
    this.first = true
    this.heed = 1
    this.changed = Number.POSITIVE_INFINITY
    this.rowX[0] = cooled ? 0.35 * (this.Ts - s.inletTemperature) : s.wallSubcooling
    fillVapourLine(s.fluid, this.Ts, this.vapourLines, 0)
    for (let r = 0; r < s.rows; r++) {
      this.rowFlux[r] = 0
      this.rowShare[r] = 0.5
      this.rowTs[r] = this.Ts
      this.rowPressure[r] = this.inletPressure
      this.rowLatent[r] = this.inlet[H_FG]
      this.rowVapourDensity[r] = this.inlet[RHO_V]
      this.rowVapourViscosity[r] = this.inlet[MU_V]
      this.rowVapourLine[r] = 0
      this.rowFilmLine[r] = r * FILM_LINE
      this.filmLines[r * FILM_LINE + LINE_REFERENCE] = Number.NaN
      this.rowOwn[r] = Number.NaN
      this.rowLossPerVapour[r] = Number.NaN
    }
    for (let j = 0; j < s.passes; j++) {
      this.passIn[j] = s.inletTemperature
      this.passMean[j] = s.inletTemperature
      this.passWall[j] = s.inletTemperature
      this.passLines[2 * j * COOLANT_LINE + LINE_REFERENCE] = Number.NaN
      this.passHeat[j] = 0
    }
  }

  /** Guesses the passes' temperatures from the rise of the whole coolant; their walls too, once coefficients are known. */
  protected spreadRise(rise: number, known = false): void {
    const { passes, inletTemperature } = this.s
    const most = Math.min(rise, 0.98 * (this.Ts - inletTemperature))
    for (let j = 0; j < passes; j++) {
      this.passIn[j] = inletTemperature + (most * j) / passes
      const mean = inletTemperature + (most * (j + 0.5)) / passes
      this.passMean[j] = mean
      this.passWall[j] = mean
      if (known) {
        const conductance =
          Math.PI * this.insideDiameter * this.length * this.passTubes[j] * this.passCoefficient[j]
        const excess = (most * this.flow * this.passSpecificHeat[j]) / (passes * conductance)
        this.passWall[j] = Math.min(mean + excess, 0.5 * (mean + this.Ts))
      }
    }
  }

  /** Foresees the passes' temperatures when every rise changes by `factor`. */
  protected stretchRise(factor: number): void {
    const Tin = this.s.inletTemperature
    for (let j = 0; j < this.s.passes; j++) {
      this.passIn[j] = Tin + factor * (this.passIn[j] - Tin)
      this.passMean[j] = Tin + factor * (this.passMean[j] - Tin)
    }
  }

  /** Conductance of everything inside the film, mean of the passes as they stand, W/(m² K). */
  protected innerConductance(): number {
    const { s } = this
    let sum = 0
    for (let j = 0; j < s.passes; j++)
      sum +=
        this.passRows[j] /
        (this.fixedResistance + s.outsideDiameter / (this.insideDiameter * this.passCoefficient[j]))
    return sum / s.rows
  }

  /** Coolant properties and inside coefficient of each pass at its mean temperature of the last sweep. */
  protected coolantSide(): void {
    const { s, passLines: lines } = this
    const coolant = s.coolant as CoolantModel
    const Di = this.insideDiameter
    const perLength = Di / this.length
    for (let j = 0; j < s.passes; j++) {
      const mean = this.passMean[j]
      const wall = this.passWall[j]
      const at = 2 * j * COOLANT_LINE
      const atWall = at + COOLANT_LINE
      let off = mean - lines[at + LINE_REFERENCE]
      let offWall = wall - lines[atWall + LINE_REFERENCE]
      const anew = !(Math.abs(off) < COOLANT_WINDOW && Math.abs(offWall) < COOLANT_WINDOW)
      if (anew) {
        fillCoolantLine(coolant, mean, lines, at)
        fillCoolantLine(coolant, wall, lines, atWall)
        off = 0
        offWall = 0
      }
      const rho = lines[at + LINE_RHO] + off * lines[at + LINE_RHO + 1]
      const cp = lines[at + LINE_CP] + off * lines[at + LINE_CP + 1]
      const mu = lines[at + LINE_MU] + off * lines[at + LINE_MU + 1]
      const k = lines[at + LINE_K] + off * lines[at + LINE_K + 1]
      const pr = (mu * cp) / k
      let factor = 1
      if (this.tubeSide < 2) {
        const muWall = lines[atWall + LINE_MU] + offWall * lines[atWall + LINE_MU + 1]
        const cpWall = lines[atWall + LINE_CP] + offWall * lines[atWall + LINE_CP + 1]
        const kWall = lines[atWall + LINE_K] + offWall * lines[atWall + LINE_K + 1]
        const byPrandtl = this.tubeSide === 0
        const ratio = byPrandtl ? (pr * kWall) / (muWall * cpWall) : mu / muWall
        if (anew) {
          this.passRatio[j] = ratio
          this.passWallFactor[j] = byPrandtl
            ? wallPrandtlFactor(pr, (muWall * cpWall) / kWall)
            : wallViscosityFactor(mu, muWall)
        }
        const d = ratio / this.passRatio[j] - 1
        const power = byPrandtl ? WALL_PRANDTL_POWER : WALL_VISCOSITY_POWER
        factor = this.passWallFactor[j] * (1 + power * d * (1 + ((power - 1) / 2) * d))
      }
      this.passDensity[j] = rho
      this.passSpecificHeat[j] = cp
      const v = this.flow / (rho * this.boreArea * this.passTubes[j])
      const re = (rho * v * Di) / mu
      const nusselt =
        this.tubeSide === 0
          ? gnielinski(re, pr, perLength, factor)
          : this.tubeSide === 1
            ? siederTate(re, pr, perLength, factor)
            : dittusBoelter(re, pr, perLength)
      this.passVelocity[j] = v
      this.passReynolds[j] = re
      this.passCoefficient[j] = (this.factors.tubeSide * nusselt * k) / Di
    }
  }

  /** All rows once, top to bottom, from the state the last sweep left. */
  protected sweep(cooled: boolean): void {
    const { s } = this
    const { rows, fluid } = s
    const Do = s.outsideDiameter
    const L = this.length
    const perMetre = Math.PI * Do
    const flowArea = L * this.flowWidth()
    const { weight, eps, exponent, first, heed } = this
    const filmWindow = first ? FIRST_WINDOW : FILM_WINDOW
    const lossWindow = Math.max(
      LOSS_WINDOW,
      Math.min(
        WIDEST_LOSS_WINDOW,
        Math.sqrt((LOSS_SHARE * this.moved * this.inletPressure) / this.vapourDrop),
      ),
    )
    const b2 = (exponent - 1) / 2
    const b3 = (exponent - 2) / 3
    const b4 = (exponent - 3) / 4
    const b5 = (exponent - 4) / 5
    const b6 = (exponent - 5) / 6
    const {
      rowTubes,
      rowPass,
      rowPressure,
      rowTs,
      rowLatent,
      rowVapourDensity,
      rowX,
      rowFlux,
      rowCondensate,
      rowExpected,
      rowArriving,
      rowCoolant,
      rowVelocity,
    } = this
    const { rowDensity, rowSpecificHeat, rowViscosity, rowConductivity, rowShare, rowOwn, rowPower } = this
    const { passIn, passHeat, passInner, passRise } = this
    const dropping = this.drop !== NO_DROP && this.inlet[RHO_V] > 0
    const sheared = this.shear !== NO_SHEAR && this.inlet[RHO_V] > 0
    // The common laws are written out below; the others go through `lineFlux` and `flowFactor`.
    const written = this.film === 0 && (this.shear <= SHEKRILADZE || this.shear === NO_SHEAR)
    const flowLaw = this.inundation === CONDENSATE_FLOW
    const shearConstant = this.shear === BUTTERWORTH ? 0.416 : 0.64
    const gravityConstant = this.shear === BUTTERWORTH ? 9.47 : 1.69
    const filmFactor = this.factors.film
    const shearFactor = this.factors.shear
    const rowFactor = this.factors.inundation
    let remaining = this.inletVapour
    let pressure = this.inletPressure
    let gathered = 0
    let duty = 0
    let lowest = Number.POSITIVE_INFINITY
    let most = 0
    this.clamped = false
    if (cooled)
      for (let j = 0; j < s.passes; j++) {
        passHeat[j] = 0
        passInner[j] = this.fixedResistance + Do / (this.insideDiameter * this.passCoefficient[j])
        passRise[j] = (perMetre * L * this.passTubes[j]) / (this.flow * this.passSpecificHeat[j])
      }

    for (let r = 0; r < rows; r++) {
      if (dropping && !fluid.fixed && pressure !== rowPressure[r]) this.takeVapour(r, pressure)
      const Ts = rowTs[r]
      const rhoV = rowVapourDensity[r]
      const hfg = rowLatent[r]
      const tubes = rowTubes[r]
      if (first && r > 0) {
        rowX[r] = rowX[r - 1]
        rowExpected[r] = rowCondensate[r - 1]
      } else if (first) rowExpected[r] = this.inletVapour / rows
      const middle = Math.max(0, remaining - 0.5 * rowExpected[r])
      const velocity = rhoV > 0 ? middle / (rhoV * flowArea * eps) : 0
      let x = rowX[r]
      const reference = Ts - x + weight * x
      this.takeFilm(r, reference, filmWindow)
      const rho = rowDensity[r]
      const mu = rowViscosity[r]
      const k = rowConductivity[r]
      const cp = this.plainLatent ? 0 : rowSpecificHeat[r]
      const onTube = gathered / (tubes * L)
      let dh = hfg + FILM_SUBCOOLING * cp * x
      const arriving = (onTube * dh) / perMetre
      const film = sheared ? velocity : 0
      let q = 0
      if (cooled) {
        const j = rowPass[r]
        const inner = passInner[j]
        const g = passRise[j]
        const T = Ts - passIn[j]
        if (T > 0) {
          const U = 1 / (inner + rowShare[r] * g)
          let low = 0
          let high = T
          if (!(x < T && x > 0)) x = 0.5 * T
          let e = 0.75
          if (written && (flowLaw || this.inundation === NO_INUNDATION)) {
            const latent = hfg + ROHSENOW_COEFFICIENT * cp * x
            const drive = filmDrive(Do, rho, rhoV, mu, k, latent)
            const kD = ((r > 0 ? filmFactor * rowFactor : filmFactor) * k) / Do
            const re = (rho * film * Do) / mu
            const flooded = flowLaw && arriving > 0
            for (let i = 0; i < 60; i++) {
              // Flux of the clean tube and its exponent e in x.
              let q1: number
              if (re > 0) {
                const y = re * x
                const gravity = gravityConstant * drive * x
                const root = Math.sqrt(y * y + gravity)
                q1 = shearConstant * kD * Math.sqrt(x * (y + root))
                e = 0.75 + (0.25 * y) / root
                if (shearFactor !== 1) {
                  const still = (1 - shearFactor) * shearConstant * kD * Math.sqrt(x * Math.sqrt(gravity))
                  const flowing = shearFactor * q1
                  q1 = flowing + still
                  e = (e * flowing + 0.75 * still) / q1
                }
              } else {
                q1 = NUSSELT_TUBE_CONSTANT * kD * Math.sqrt(Math.sqrt(drive * x * x * x))
                e = 0.75
              }
              const line = U * (T - x)
              // q1 (q/(q + a))^s − q with q on the coolant's line: rises with x.
              let f = q1 - line
              let slope = (e * q1) / x + U
              if (flooded) {
                const total = line + arriving
                const own = line / total
                const d = own / rowOwn[r] - 1
                let power: number
                if (d < SMALL_MOVE && d > -SMALL_MOVE)
                  power =
                    rowPower[r] *
                    (1 +
                      exponent * d * (1 + b2 * d * (1 + b3 * d * (1 + b4 * d * (1 + b5 * d * (1 + b6 * d))))))
                else {
                  power = Math.exp(exponent * Math.log(own))
                  rowOwn[r] = own
                  rowPower[r] = power
                }
                const row = q1 * power
                f = row - line
                slope = row * (e / x - (exponent * arriving * U) / (line * total)) + U
              }
              if (f > 0) high = x
              else low = x
              // Closeness is tested before the bracket: a step that has converged must not be bisected away.
              const step = f / slope
              const next = x - step
              if (Math.abs(step) <= STEP * T && next > 0 && next < T) {
                x = next
                break
              }
              x = next > low && next < high ? next : 0.5 * (low + high)
            }
            if (flooded) {
              q = U * (T - x)
              e /= 1 - (exponent * arriving) / (q + arriving)
            }
          } else {
            for (let i = 0; i < 60; i++) {
              const line = U * (T - x)
              const single = this.lineFlux(x, r, film)
              const row = single * this.flowFactor(line, arriving, r, hfg + FILM_SUBCOOLING * cp * x)
              e = (this.lineFlux(1.000001 * x, r, film) / single - 1) * 1e6
              const f = row - line
              const slope = row * (e / x - (this.flowPower * U) / line) + U
              if (f > 0) high = x
              else low = x
              const step = f / slope
              const next = x - step
              if (Math.abs(step) <= STEP * T && next > 0 && next < T) {
                x = next
                break
              }
              x = next > low && next < high ? next : 0.5 * (low + high)
            }
            e /= 1 - this.flowPower
          }
          q = U * (T - x)
          dh = hfg + FILM_SUBCOOLING * cp * x
          const star = inner * q + x
          // Power of the difference to the coolant that the flux goes by: 1/(1 − w + w/e) with w = x/star.
          const under = e * (star - x) + x
          const p = (e * star) / under
          const rise = q * g
          const both = 2 * T - rise
          const u = rise / both
          if (u > 0 && u < 0.16) {
            // `riseShare` as a series about the arithmetic mean, to 1e-11.
            const v = u * u
            const z =
              ((p * (p + 1)) / 6) *
              v *
              (1 +
                (p + 2) *
                  (p + 3) *
                  v *
                  (1 / 20) *
                  (1 +
                    (p + 4) *
                      (p + 5) *
                      v *
                      (1 / 42) *
                      (1 + (p + 6) * (p + 7) * v * (1 / 72) * (1 + (p + 8) * (p + 9) * v * (1 / 110)))))
            const y = -z * (1 - z * (1 / 2 - z * (1 / 3 - z * (1 / 4)))) * (under / (e * star))
            const lowered = -y * (1 + y * (1 / 2 + y * (1 / 6 + y * (1 / 24 + y * (1 / 120)))))
            rowShare[r] = 0.5 + lowered * (both / (rise + rise))
          } else rowShare[r] = riseShare(T, rise, star, p)
          passHeat[j] += q * perMetre * L * tubes
          rowCoolant[r] = Ts - star
        } else {
          q = 0
          x = 0
          rowCoolant[r] = passIn[j]
        }
      } else {
        x = s.wallSubcooling
        dh = hfg + FILM_SUBCOOLING * cp * x
        q = this.rowFluxAt(x, r, film, arriving, dh)
      }
      const heat = q * perMetre * L * tubes
      const made = heat / dh
      const before = rowFlux[r]
      const change = Math.abs(q - before)
      if (change > most) most = change
      rowX[r] = x
      rowFlux[r] = q
      rowArriving[r] = onTube
      rowVelocity[r] = velocity
      rowCondensate[r] = made
      rowExpected[r] += heed * (made - rowExpected[r])
      duty += heat
      const wall = Ts - x
      if (wall < lowest) lowest = wall
      if (dropping) {
        pressure -= this.rowPressureLoss(r, middle / flowArea, (gathered + 0.5 * made) / flowArea, lossWindow)
        if (pressure < PRESSURE_FLOOR * this.inletPressure) {
          pressure = PRESSURE_FLOOR * this.inletPressure
          this.clamped = true
        }
      }
      gathered += made
      remaining = Math.max(0, remaining - made)
    }
    this.movedBefore = first ? 1 : this.moved
    this.first = false
    this.duty = duty
    this.condensate = gathered
    this.vapourDrop = dropping ? this.inletPressure - pressure : this.drop === NO_DROP ? 0 : Number.NaN
    this.lowestWall = lowest
    this.moved = (most * this.tubes * perMetre * L) / duty
  }

  /** The vapour's state in row `r` at a pressure, by the line it followed before, that of the row above, or a new one. */
  private takeVapour(r: number, pressure: number): void {
    const lines = this.vapourLines
    let at = this.rowVapourLine[r]
    let off = pressure / lines[at + LINE_P] - 1
    if (!(off < VAPOUR_WINDOW && off > -VAPOUR_WINDOW)) {
      if (r > 0) at = this.rowVapourLine[r - 1]
      off = pressure / lines[at + LINE_P] - 1
      if (!(off < VAPOUR_WINDOW && off > -VAPOUR_WINDOW)) {
        at = r * VAPOUR_LINE
        fillVapourLine(this.s.fluid, saturationTemperature(this.s.fluid, pressure), lines, at)
        off = pressure / lines[at + LINE_P] - 1
      }
      this.rowVapourLine[r] = at
    }
    const d = off * (1 - off * (1 / 2 - off * (1 / 3)))
    const density = d * (lines[at + LINE_RHO_V + 1] + d * lines[at + LINE_RHO_V + 2])
    this.rowPressure[r] = pressure
    this.rowTs[r] = lines[at + LINE_T] + d * (lines[at + LINE_T + 1] + d * lines[at + LINE_T + 2])
    this.rowVapourDensity[r] =
      lines[at + LINE_RHO_V] * (1 + density * (1 + density * (1 / 2 + density * (1 / 6))))
    this.rowLatent[r] =
      lines[at + LINE_H_FG] + d * (lines[at + LINE_H_FG + 1] + d * lines[at + LINE_H_FG + 2])
    this.rowVapourViscosity[r] =
      lines[at + LINE_MU_V] + d * (lines[at + LINE_MU_V + 1] + d * lines[at + LINE_MU_V + 2])
  }

  /** Film properties of row `r`, by the line it followed before, that of the row above, or a new one. */
  private takeFilm(r: number, reference: number, window: number): void {
    const lines = this.filmLines
    let at = this.rowFilmLine[r]
    let off = reference - lines[at + LINE_REFERENCE]
    if (!(off < window && off > -window)) {
      if (r > 0) at = this.rowFilmLine[r - 1]
      off = reference - lines[at + LINE_REFERENCE]
      if (!(off < window && off > -window)) {
        at = r * FILM_LINE
        fillFilmLine(this.s.fluid, reference, lines, at)
        off = 0
      }
      this.rowFilmLine[r] = at
    }
    this.rowDensity[r] = lines[at + LINE_RHO_L] + off * lines[at + LINE_RHO_L + 1]
    this.rowSpecificHeat[r] = lines[at + LINE_CP_L] + off * lines[at + LINE_CP_L + 1]
    this.rowViscosity[r] = lines[at + LINE_MU_L] + off * lines[at + LINE_MU_L + 1]
    this.rowConductivity[r] = lines[at + LINE_K_L] + off * lines[at + LINE_K_L + 1]
    if (this.inundation === DRAINAGE_MODE) {
      const tension = surfaceTension(this.s.fluid, reference)
      const ga = galileo(this.rowDensity[r], tension, this.rowViscosity[r])
      this.rowColumnLine[r] = columnToColumnSheet(ga)
      this.rowSheetLine[r] = columnSheetToSheet(ga)
    }
  }

  /** Pressure loss of a row from its mean vapour flow and what drains through it, kg/s per m² of frontal area. */
  private rowPressureLoss(r: number, vapourFlux: number, liquidFlux: number, window: number): number {
    const Do = this.s.outsideDiameter
    const rhoV = this.rowVapourDensity[r]
    const more = vapourFlux * this.rowLossPerVapour[r] - 1
    const wetter = liquidFlux * this.rowLossPerLiquid[r] - 1
    const denser = rhoV * this.rowLossPerDensity[r] - 1
    if (Math.max(Math.abs(more), Math.abs(wetter), Math.abs(denser)) < window) {
      const a = this.rowLossByVapour[r] * more
      const b = this.rowLossByLiquid[r] * wetter
      const c = -this.rowLossByDensity[r] * denser
      // The film's own properties move by little here: their first order is enough.
      const thicker = this.rowDensity[r] * this.rowLossPerLiquidDensity[r] - 1
      const slower = this.rowViscosity[r] * this.rowLossPerLiquidViscosity[r] - 1
      const sum = a + b + c - this.rowLossWetShare[r] * (thicker + this.rowLossWetPower[r] * slower)
      return this.rowLoss[r] * (1 + sum + 0.5 * (sum * sum - a * more - b * wetter - c * denser))
    }
    const throat = vapourFlux / (rhoV * this.fmin)
    this.takeLossOf((rhoV * throat * Do) / this.rowVapourViscosity[r])
    let loss = rowPressureDrop(this.loss[XI], rhoV, throat)
    let byVapour = 2 + this.loss[XI_POWER]
    let byLiquid = 0
    let byDensity = 1
    this.rowLossWetShare[r] = 0
    if (this.twoPhase) {
      const rhoL = this.rowDensity[r]
      const slow = liquidFlux / (rhoL * this.fmin)
      this.takeLossOf((rhoL * slow * Do) / this.rowViscosity[r])
      const wet = rowPressureDrop(this.loss[XI], rhoL, slow)
      const both = ishihara(loss, wet)
      const shared = 0.5 * (both - loss - wet)
      byDensity = (loss + shared) / both
      byVapour *= byDensity
      const share = (wet + shared) / both
      byLiquid = (2 + this.loss[XI_POWER]) * share
      this.rowLossWetShare[r] = share
      this.rowLossWetPower[r] = this.loss[XI_POWER]
      this.rowLossPerLiquidDensity[r] = 1 / rhoL
      this.rowLossPerLiquidViscosity[r] = 1 / this.rowViscosity[r]
      loss = this.factors.twoPhase * both
    }
    loss *= this.factors.vapourDrop
    this.rowLoss[r] = loss
    this.rowLossPerVapour[r] = 1 / vapourFlux
    this.rowLossPerLiquid[r] = 1 / liquidFlux
    this.rowLossPerDensity[r] = 1 / rhoV
    this.rowLossByDensity[r] = byDensity
    this.rowLossByVapour[r] = byVapour
    this.rowLossByLiquid[r] = byLiquid
    return loss
  }

  /** The rows' pressure losses taken afresh at what they came to: a sweep may have followed them from further off. */
  protected closePressure(): void {
    if (this.drop === NO_DROP || !(this.inlet[RHO_V] > 0)) return
    const flowArea = this.length * this.flowWidth()
    const floor = PRESSURE_FLOOR * this.inletPressure
    let pressure = this.inletPressure
    let remaining = this.inletVapour
    let gathered = 0
    for (let r = 0; r < this.s.rows; r++) {
      const made = this.rowCondensate[r]
      const middle = Math.max(0, remaining - 0.5 * made)
      pressure -= this.rowPressureLoss(r, middle / flowArea, (gathered + 0.5 * made) / flowArea, 0)
      pressure = Math.max(floor, pressure)
      gathered += made
      remaining = Math.max(0, remaining - made)
    }
    this.vapourDrop = this.inletPressure - pressure
  }

  /** Loss coefficient of a row and the power of the Reynolds number that it goes by, into `loss`. */
  private takeLossOf(re: number): void {
    const { loss, a, b } = this
    if (!(re > 0)) {
      loss[XI] = 0
      loss[XI_POWER] = 0
    } else if (this.drop === 0)
      fillGaddisRow(
        re,
        this.lossLaminar,
        this.lossTurbulent,
        this.lossEnd,
        this.staggered,
        (0.1 * b) / a,
        loss,
      )
    else {
      const xi = this.bankLoss(re)
      loss[XI] = xi
      loss[XI_POWER] = (this.bankLoss(1.000001 * re) / xi - 1) * 1e6
    }
  }

  private bankLoss(re: number): number {
    return this.drop === 1
      ? zukauskas(re, this.a, this.b, this.staggered)
      : jakob(re, this.a, this.b, this.staggered)
  }

  /** Film flux of one clean tube at subcooling `x` from the row's properties, W/m². */
  private singleFlux(x: number, row: number, velocity: number): number {
    const Do = this.s.outsideDiameter
    const hfg = this.rowLatent[row]
    const k = this.rowConductivity[row]
    const mu = this.rowViscosity[row]
    const rho = this.rowDensity[row]
    const cp = this.rowSpecificHeat[row]
    const rhoV = this.rowVapourDensity[row]
    const chen = this.film === 1
    const latent = this.plainLatent || chen ? hfg : hfg + ROHSENOW_COEFFICIENT * cp * x
    const drive = filmDrive(Do, rho, rhoV, mu, k, latent)
    const kD = (this.factors.film * k) / Do
    let q: number
    if (this.shear === NO_SHEAR || !(velocity > 0)) q = nusseltTubeFlux(kD, drive, x)
    else {
      q = this.shearedFlux(kD, (rho * velocity * Do) / mu, drive, x, row)
      const factor = this.factors.shear
      if (factor !== 1) q = factor * q + (1 - factor) * this.shearedFlux(kD, 0, drive, x, row)
    }
    return chen ? q * chenTubeFactor((cp * x) / hfg, (k * x) / (mu * hfg)) : q
  }

  private shearedFlux(kD: number, re: number, drive: number, x: number, row: number): number {
    if (this.shear === BUTTERWORTH) return butterworthFlux(kD, re, drive, x)
    if (this.shear === SHEKRILADZE) return shekriladzeGomelauriFlux(kD, re, drive, x)
    if (this.shear === ROSE) return roseFlux(kD, re, drive, x)
    const suction = suctionGroupPerKelvin(
      this.rowLatent[row],
      this.rowConductivity[row],
      this.rowDensity[row],
      this.rowViscosity[row],
      this.rowVapourDensity[row],
      this.rowVapourViscosity[row],
    )
    return fujiiUeharaKurataFlux(kD, re, drive, x, suction, this.staggered)
  }

  /** Flux of row `row` under the condensate that arrives (as the flux that would make it). */
  private rowFluxAt(x: number, row: number, velocity: number, arriving: number, dh: number): number {
    const q1 = this.lineFlux(x, row, velocity)
    if (this.inundation === CONDENSATE_FLOW) return inundatedFlux(q1, arriving, this.exponent)
    if (this.inundation !== DRAINAGE_MODE) return q1
    const perFlux = this.reynoldsPerFlux(row, dh)
    return drainageModeFlux(
      q1,
      arriving,
      perFlux,
      this.rowColumnLine[row],
      this.rowSheetLine[row],
      this.staggered,
    )
  }

  /** Flux of the single tube under what a law makes of its place in a vertical line, W/m². */
  private lineFlux(x: number, row: number, velocity: number): number {
    const single = this.singleFlux(x, row, velocity)
    const q1 = row > 0 ? this.factors.inundation * single : single
    if (this.inundation < 2 || this.inundation === NO_INUNDATION) return q1
    const n = tubesInVerticalLine(row + 1, this.staggered)
    if (this.inundation === 2) return q1 * nusseltRowLocal(n)
    if (this.inundation === 3) return q1 * kernRowLocal(n)
    if (this.inundation === 4) return q1 * eissenbergRowLocal(n)
    return q1 * chenRowLocal(n, (this.rowSpecificHeat[row] * x) / this.rowLatent[row])
  }

  /** Film Reynolds number under a row per flux that falls from it, (m² K)/W times K. */
  private reynoldsPerFlux(row: number, dh: number): number {
    return (2 * Math.PI * this.s.outsideDiameter) / (dh * this.rowViscosity[row])
  }

  /** Factor (q/(q + a))^s of a law in condensate flow at the flux q; leaves d ln factor/d ln q in `flowPower`. */
  private flowFactor(q: number, arriving: number, row: number, dh: number): number {
    this.flowPower = 0
    if (this.inundation > DRAINAGE_MODE || !(arriving > 0)) return 1
    const total = q + arriving
    const lnShare = Math.log(q / total)
    if (this.inundation === CONDENSATE_FLOW) {
      this.flowPower = (this.exponent * arriving) / total
      return Math.exp(this.exponent * lnShare)
    }
    const re = this.reynoldsPerFlux(row, dh) * total
    const columns = this.rowColumnLine[row]
    const sheets = this.rowSheetLine[row]
    const s = drainageExponent(re, columns, sheets, this.staggered)
    const rise = (drainageExponent(1.000001 * re, columns, sheets, this.staggered) - s) * 1e6
    this.flowPower = (s * arriving + rise * q * lnShare) / total
    return Math.exp(s * lnShare)
  }

  /** Flux of a clean tube at the subcooling and vapour velocity that row `row` was left with, W/m². */
  singleAt(row: number): number {
    return this.singleFlux(this.rowX[row], row, this.shear === NO_SHEAR ? 0 : this.rowVelocity[row])
  }

  /** Film coefficient of a row that stands for all, at subcooling `x` with half of the vapour passing: what guesses rest on. */
  protected meanRowCoefficient(x: number, vapour: number): number {
    const rhoV = this.inlet[RHO_V]
    this.takeFilm(0, this.Ts - x + this.weight * x, FIRST_WINDOW)
    const sheared = this.shear !== NO_SHEAR && rhoV > 0
    const velocity = sheared ? (0.5 * vapour) / (rhoV * this.length * this.flowWidth() * this.eps) : 0
    return (this.meanRowFactor * this.singleFlux(x, 0, velocity)) / x
  }

  /** Re~ of a row: liquid properties, vapour velocity. */
  shearReynolds(row: number): number {
    return (this.rowDensity[row] * this.rowVelocity[row] * this.s.outsideDiameter) / this.rowViscosity[row]
  }

  /** Fastest vapour between the tubes over the speed of sound there. */
  get fastestOverSonic(): number {
    let fastest = 0
    for (let r = 0; r < this.s.rows; r++) {
      const throat = (this.rowVelocity[r] * this.eps) / this.fmin
      const sonic = this.sonicVelocity(r)
      if (throat > fastest * sonic) fastest = throat / sonic
    }
    return fastest
  }

  /** Ideal-gas estimate (γ p/ρ)^(1/2) with γ from the vapour's specific heat, held within 1 to 5/3. */
  private sonicVelocity(row: number): number {
    const { fluid } = this.s
    const p = fluid.fixed ? this.inletPressure : this.rowPressure[row]
    const cp = this.inlet[CP_V]
    const R = 8.314462618 / fluid.molarMass
    const gamma = cp > R ? Math.min(5 / 3, Math.max(1, cp / (cp - R))) : 1.1
    const speed = Math.sqrt((gamma * p) / this.rowVapourDensity[row])
    return Number.isFinite(speed) ? speed : Number.POSITIVE_INFINITY
  }

  /** Specific heat of the coolant in pass `j` at `T`, along the pass's line. */
  protected specificHeatAt(j: number, T: number): number {
    const at = 2 * j * COOLANT_LINE
    const off = T - this.passLines[at + LINE_REFERENCE]
    return this.passLines[at + LINE_CP] + off * this.passLines[at + LINE_CP + 1]
  }

  /** Heat of pass `j` if it started at `T`: one that starts warmer takes up less, in proportion to its driving difference. */
  private foreseenHeat(j: number, T: number): number {
    const difference = Math.max(1e-9, this.Ts - this.passIn[j])
    return this.passHeat[j] * Math.max(0, 1 - (T - this.passIn[j]) / difference)
  }

  /**
   * Carries the heat of a sweep to the passes' inlets, means and wall temperatures; returns the largest change, K.
   * With `total` given, the passes share that heat as they shared the sweep's.
   */
  protected passTemperatures(total: number): number {
    const { s } = this
    const coolant = s.coolant as CoolantModel
    const perMetre = Math.PI * this.insideDiameter * this.length
    let scale = 1
    // Twice: what a pass takes up moves the start of the next.
    if (!Number.isNaN(total)) {
      scale = total / this.duty
      for (let n = 0; n < 2; n++) {
        let T = s.inletTemperature
        let sum = 0
        for (let j = 0; j < s.passes; j++) {
          const heat = this.foreseenHeat(j, T)
          sum += heat
          T += (scale * heat) / (this.flow * this.passSpecificHeat[j])
        }
        scale = total / sum
      }
    }
    let T = s.inletTemperature
    let change = 0
    for (let j = 0; j < s.passes; j++) {
      T = this.passIn[j] + this.heed * (T - this.passIn[j])
      const moved = T - this.passIn[j]
      if (Math.abs(moved) > change) change = Math.abs(moved)
      const heat = scale * this.foreseenHeat(j, T)
      const rise = heat / (this.flow * this.passSpecificHeat[j])
      this.passIn[j] = T
      const mean = T + 0.5 * rise
      const wall = Math.min(
        mean + heat / (perMetre * this.passTubes[j] * this.passCoefficient[j]),
        coolant.maxTemperature,
      )
      change = Math.max(change, Math.abs(mean - this.passMean[j]), Math.abs(wall - this.passWall[j]))
      this.passMean[j] += this.heed * (mean - this.passMean[j])
      this.passWall[j] += this.heed * (wall - this.passWall[j])
      T += rise
      this.passOut[j] = T
    }
    this.changedBefore = this.changed
    this.changed = change
    return change
  }
}

/**
 * Share κ of the coolant's rise in a row at which the flux of the whole row stands, the flux going as a power p of the
 * difference to the coolant: the generalised mean of the end differences `T` and `T − rise` is T − κ rise. `rise` is what
 * the flux found at the difference `star` would give.
 *
 * Along the row the difference falls as dθ = −(rise/star^p) θ^p: its end value comes first, which no guess of κ can upset.
 */
function riseShare(T: number, rise: number, star: number, p: number): number {
  if (!(rise > 0)) return 0.5
  const power = 1 - p
  const units = rise / star
  let integral = units
  let end: number
  if (Math.abs(power) < 1e-9) end = Math.exp(-units)
  else {
    integral = units * (star / T) ** power
    const left = 1 - power * integral
    // The difference is used up within the row: the rise is all of it, whatever lies beyond.
    if (!(left > 0)) return Math.max(0.5, 1 - star / T)
    end = left ** (1 / power)
  }
  const whole = 1 - end
  return (1 - (whole / integral) ** (1 / p)) / whole
}
