// Solves the bundle of one point, every number of it set: geometry, the march through the rows, the unknowns around it.
//
// One loop settles everything at once: each sweep marches the rows from top to bottom with the film properties, row
// condensate and coolant properties of the sweep before, then corrects what lies outside the rows (inlet vapour, tube
// length or coolant flow, pass inlet temperatures). Nothing is allocated per point, and every point starts from the
// same guesses, so that its numbers depend on its inputs alone.
import {
  chenTubeFactor,
  FILM_SUBCOOLING,
  filmDrive,
  nusseltTubeFlux,
  PROPERTY_TEMPERATURE_WEIGHT,
  ROHSENOW_COEFFICIENT,
} from '#engine/correlations/film.ts'
import { churchill, colebrook, passPressureDrop, returnPressureDrop } from '#engine/correlations/friction.ts'
import {
  bundleHeight,
  circularRowTubes,
  isStaggered,
  type LAYOUTS,
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
  wallPrandtlFactor,
  wallViscosityFactor,
} from '#engine/correlations/tube-side.ts'
import {
  gaddisEndLoss,
  gaddisInlineRow,
  gaddisLaminar,
  gaddisStaggeredRow,
  gaddisTurbulent,
  ishihara,
  jakob,
  rowPressureDrop,
  zukauskas,
} from '#engine/correlations/vapour-drop.ts'
import {
  COOLANT_CP,
  COOLANT_K,
  COOLANT_LENGTH,
  COOLANT_MU,
  COOLANT_RHO,
  type CoolantModel,
  CP_L,
  CP_V,
  type FluidModel,
  fillCoolant,
  fillFilm,
  fillVapour,
  fixedFluid,
  H_FG,
  K_L,
  MU_L,
  MU_V,
  outsideRange,
  P,
  RHO_L,
  RHO_V,
  SATURATION_LENGTH,
  SIGMA,
  saturationTemperature,
} from '#engine/fluids/index.ts'
import { OUTCOME_INDEX } from './key-results.ts'

/** Most rows and passes a case may have; the arrays are made for as many. */
const MAX_ROWS = 500
const MAX_PASSES = 64
/** Mismatch at which the loop stops: relative for flows and duty, of the driving difference for temperatures. */
const CLOSE = 2e-12
const MOST_SWEEPS = 400
/** Trial lengths stay below this; a duty that needs more is out of reach [m]. */
const LONGEST = 1e5
/** Vapour losing more of its pressure than this is refused; trials are held above a fifth of it. */
const EXHAUSTED = 0.5
const TOO_FAST = 0.7

const OUTCOME = OUTCOME_INDEX as Readonly<Record<string, number>>

/** Everything a point is made of, as numbers and records of one shape. NaN stands for "not given". */
export class PointState {
  fluid: FluidModel = fixedFluid({
    liquidDensity: 1,
    latentHeat: 1,
    liquidViscosity: 1,
    liquidConductivity: 1,
  })
  saturationTemperature = Number.NaN
  saturationPressure = Number.NaN
  duty = Number.NaN
  length = Number.NaN
  coolantDrive = true
  wallSubcooling = Number.NaN
  coolant: CoolantModel | null = null
  inletTemperature = Number.NaN
  velocity = Number.NaN
  massFlow = Number.NaN
  outletTemperature = Number.NaN
  insideFouling = 0
  outsideDiameter = Number.NaN
  wallThickness = Number.NaN
  conductivity = Number.NaN
  tubeDensity = Number.NaN
  roughness = 0
  outsideFouling = 0
  circular = false
  layout: (typeof LAYOUTS)[number] = 'triangular30'
  pitchRatio = Number.NaN
  rows = 1
  /** NaN: chosen from the coolant ("auto"). */
  tubesPerRow = Number.NaN
  passes = 1
  entryTop = false
}

/** Method ids in the order of the numbers that `BundleMarch` switches on. */
export const FILM = ['nusselt', 'chen'] as const
export const INUNDATION = [
  'condensateFlow',
  'drainageMode',
  'nusselt',
  'kern',
  'eissenberg',
  'chen',
  'none',
] as const
export const SHEAR = ['butterworth', 'shekriladzeGomelauri', 'rose', 'fujiiUeharaKurata', 'none'] as const
export const DROP = ['gaddisGnielinski', 'zukauskas', 'jakob', 'none'] as const
export const TUBE_SIDE = ['gnielinski', 'siederTate', 'dittusBoelter'] as const

export class BundleMarch {
  readonly s = new PointState()
  film = 0
  plainLatent = false
  weight: number = PROPERTY_TEMPERATURE_WEIGHT.oneThird
  inundation = 0
  shear = 0
  drop = 0
  tubeSide = 0
  colebrookFriction = false
  twoPhase = true

  // --- what does not change within a point
  staggered = true
  tubes = 0
  width = 0
  height = 0
  insideDiameter = 0
  fixedResistance = 0
  boreArea = 0
  exponent = 0
  private eps = 0
  private fmin = 0
  private a = 0
  private b = 0
  private lossLaminar = 0
  private lossTurbulent = 0
  private lossEnd = 0
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
  readonly rowArriving = new Float64Array(MAX_ROWS)
  readonly rowCoolant = new Float64Array(MAX_ROWS)
  readonly rowVelocity = new Float64Array(MAX_ROWS)
  readonly rowReynolds = new Float64Array(MAX_ROWS)
  readonly rowGalileo = new Float64Array(MAX_ROWS)
  readonly rowSingle = new Float64Array(MAX_ROWS)
  readonly rowQuiescent = new Float64Array(MAX_ROWS)
  /** Where along the row's coolant rise the wall is solved: share κ of q g below the inlet difference. */
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
  readonly passDrop = new Float64Array(MAX_PASSES)
  private readonly passWall = new Float64Array(MAX_PASSES)
  private readonly passMean = new Float64Array(MAX_PASSES)

  private readonly inlet = new Float64Array(SATURATION_LENGTH)
  private readonly vapour = new Float64Array(SATURATION_LENGTH)
  private readonly liquid = new Float64Array(SATURATION_LENGTH)
  private readonly water = new Float64Array(COOLANT_LENGTH)

  // --- what a march found
  duty = 0
  condensate = 0
  inletVapour = 0
  vapourDrop = 0
  fastestOverSonic = 0
  lowestWall = 0
  clamped = false
  length = 0
  flow = 0
  sweeps = 0

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
    this.fixedResistance = cooled
      ? s.outsideFouling + wallResistance(Do, Di, s.conductivity) + (Do / Di) * s.insideFouling
      : s.outsideFouling
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

  /** Film flux of one clean tube at subcooling `x` from the properties of `liquid`, W/m². */
  private singleFlux(x: number, row: number, velocity: number): number {
    const { liquid, s } = this
    const Do = s.outsideDiameter
    const hfg = this.rowLatent[row]
    const k = liquid[K_L]
    const mu = liquid[MU_L]
    const rho = liquid[RHO_L]
    const rhoV = this.rowVapourDensity[row]
    const chen = this.film === 1
    const latent = this.plainLatent || chen ? hfg : hfg + ROHSENOW_COEFFICIENT * liquid[CP_L] * x
    const drive = filmDrive(Do, rho, rhoV, mu, k, latent)
    const kD = k / Do
    let q: number
    if (this.shear === 4 || !(velocity > 0)) q = nusseltTubeFlux(kD, drive, x)
    else {
      const re = (rho * velocity * Do) / mu
      if (this.shear === 0) q = butterworthFlux(kD, re, drive, x)
      else if (this.shear === 1) q = shekriladzeGomelauriFlux(kD, re, drive, x)
      else if (this.shear === 2) q = roseFlux(kD, re, drive, x)
      else
        q = fujiiUeharaKurataFlux(
          kD,
          re,
          drive,
          x,
          suctionGroupPerKelvin(hfg, k, rho, mu, rhoV, this.rowVapourViscosity[row]),
          this.staggered,
        )
    }
    return chen ? q * chenTubeFactor((liquid[CP_L] * x) / hfg, (k * x) / (mu * hfg)) : q
  }

  /** Flux of row `row` from the single tube's, under the condensate that arrives. */
  private rowLaw(q1: number, arriving: number, row: number, x: number, dh: number): number {
    switch (this.inundation) {
      case 0:
        return inundatedFlux(q1, arriving, this.exponent)
      case 1: {
        const ga = this.rowGalileo[row]
        const perFlux = (2 * Math.PI * this.s.outsideDiameter) / (dh * this.liquid[MU_L])
        return drainageModeFlux(
          q1,
          arriving,
          perFlux,
          columnToColumnSheet(ga),
          columnSheetToSheet(ga),
          this.staggered,
        )
      }
      case 6:
        return q1
    }
    const n = tubesInVerticalLine(row + 1, this.staggered)
    if (this.inundation === 2) return q1 * nusseltRowLocal(n)
    if (this.inundation === 3) return q1 * kernRowLocal(n)
    if (this.inundation === 4) return q1 * eissenbergRowLocal(n)
    return q1 * chenRowLocal(n, (this.liquid[CP_L] * x) / this.rowLatent[row])
  }

  private lossOf(re: number): number {
    if (!(re > 0)) return 0
    if (this.drop === 0)
      return this.staggered
        ? gaddisStaggeredRow(re, this.lossLaminar, this.lossTurbulent, this.lossEnd)
        : gaddisInlineRow(re, this.lossLaminar, this.lossTurbulent, this.lossEnd, (0.1 * this.b) / this.a)
    return this.drop === 1
      ? zukauskas(re, this.a, this.b, this.staggered)
      : jakob(re, this.a, this.b, this.staggered)
  }

  /** Guesses a point starts from. */
  private start(cooled: boolean): void {
    const { s } = this
    const guess = cooled ? 0.35 * (this.Ts - s.inletTemperature) : s.wallSubcooling
    for (let r = 0; r < s.rows; r++) {
      this.rowX[r] = guess
      this.rowCondensate[r] = 0
      this.rowShare[r] = 0.5
      this.rowTs[r] = this.Ts
      this.rowPressure[r] = this.inletPressure
      this.rowLatent[r] = this.inlet[H_FG]
      this.rowVapourDensity[r] = this.inlet[RHO_V]
      this.rowVapourViscosity[r] = this.inlet[MU_V]
    }
    for (let j = 0; j < s.passes; j++) {
      this.passIn[j] = s.inletTemperature
      this.passMean[j] = s.inletTemperature
      this.passWall[j] = s.inletTemperature
      this.passHeat[j] = 0
    }
  }

  /** Coolant properties and inside coefficient of each pass at its mean temperature of the last sweep. */
  private coolantSide(): void {
    const { s, water } = this
    const coolant = s.coolant as CoolantModel
    const Di = this.insideDiameter
    for (let j = 0; j < s.passes; j++) {
      fillCoolant(coolant, this.passWall[j], water)
      const muWall = water[COOLANT_MU]
      const prWall = (muWall * water[COOLANT_CP]) / water[COOLANT_K]
      fillCoolant(coolant, this.passMean[j], water)
      const rho = water[COOLANT_RHO]
      const mu = water[COOLANT_MU]
      const pr = (mu * water[COOLANT_CP]) / water[COOLANT_K]
      const v = this.flow / (rho * this.boreArea * this.passTubes[j])
      const re = (rho * v * Di) / mu
      const perLength = Di / this.length
      const nusselt =
        this.tubeSide === 0
          ? gnielinski(re, pr, perLength, wallPrandtlFactor(pr, prWall))
          : this.tubeSide === 1
            ? siederTate(re, pr, perLength, wallViscosityFactor(mu, muWall))
            : dittusBoelter(re, pr, perLength)
      this.passVelocity[j] = v
      this.passReynolds[j] = re
      this.passDensity[j] = rho
      this.passSpecificHeat[j] = water[COOLANT_CP]
      this.passCoefficient[j] = (nusselt * water[COOLANT_K]) / Di
    }
  }

  /** All rows once, top to bottom, from the state the last sweep left. */
  private sweep(cooled: boolean): void {
    const { s, liquid, vapour } = this
    const { rows } = s
    const Do = s.outsideDiameter
    const L = this.length
    const perMetre = Math.PI * Do
    const flowArea = L * this.flowWidth()
    const dropping = this.drop !== 3 && this.inlet[RHO_V] > 0
    const sheared = this.shear !== 4 && this.inlet[RHO_V] > 0
    let remaining = this.inletVapour
    let pressure = this.inletPressure
    let gathered = 0
    let duty = 0
    let fastest = 0
    let lowest = Number.POSITIVE_INFINITY
    this.clamped = false
    if (cooled) for (let j = 0; j < s.passes; j++) this.passHeat[j] = 0

    for (let r = 0; r < rows; r++) {
      if (dropping && !s.fluid.fixed && pressure !== this.rowPressure[r]) {
        this.rowPressure[r] = pressure
        const Ts = pressure === this.inletPressure ? this.Ts : saturationTemperature(s.fluid, pressure)
        if (Math.abs(Ts - this.rowTs[r]) > 1e-12 * Ts) {
          this.rowTs[r] = Ts
          fillVapour(s.fluid, Ts, vapour)
          this.rowLatent[r] = vapour[H_FG]
          this.rowVapourDensity[r] = vapour[RHO_V]
          this.rowVapourViscosity[r] = vapour[MU_V]
        }
      }
      const Ts = this.rowTs[r]
      const rhoV = this.rowVapourDensity[r]
      const hfg = this.rowLatent[r]
      const tubes = this.rowTubes[r]
      const middle = Math.max(0, remaining - 0.5 * this.rowCondensate[r])
      const velocity = rhoV > 0 ? middle / (rhoV * flowArea * this.eps) : 0
      let x = this.rowX[r]
      fillFilm(s.fluid, Ts - x + this.weight * x, liquid)
      const cp = this.plainLatent ? 0 : liquid[CP_L]
      if (this.inundation === 1) this.rowGalileo[r] = galileo(liquid[RHO_L], liquid[SIGMA], liquid[MU_L])
      const onTube = gathered / (tubes * L * perMetre)
      const film = sheared ? velocity : 0
      let q: number
      let dh = hfg + FILM_SUBCOOLING * cp * x
      if (cooled) {
        const j = this.rowPass[r]
        const inner = this.fixedResistance + Do / (this.insideDiameter * this.passCoefficient[j])
        const T = Ts - this.passIn[j]
        const g = (perMetre * L * this.passTubes[j]) / (this.flow * this.passSpecificHeat[j])
        if (T > 0) {
          const share = this.rowShare[r]
          const U = 1 / (inner + share * g)
          // Newton on the film's subcooling; the flux rises with it, the coolant's falls.
          let low = 0
          let high = T
          if (!(x < T)) x = 0.5 * T
          let e = 0.75
          q = 0
          for (let i = 0; i < 40; i++) {
            dh = hfg + FILM_SUBCOOLING * cp * x
            const arriving = onTube * dh
            const q1 = this.singleFlux(x, r, film)
            q = this.rowLaw(q1, arriving, r, x, dh)
            // The flux rises about as x^e: exact for still vapour, a good slope under shear.
            e = this.shearedExponent(x, r, film)
            if (this.inundation < 2 && arriving > 0) e /= 1 - (this.exponent * arriving) / (q + arriving)
            const f = q - U * (T - x)
            if (f > 0) high = x
            else low = x
            let next = x - f / ((e * q) / x + U)
            if (!(next > low && next < high)) next = 0.5 * (low + high)
            const moved = Math.abs(next - x)
            x = next
            if (moved <= 1e-13 * T) break
          }
          q = U * (T - x)
          const rise = Math.min(q * g, 0.999999 * T)
          // The coolant's difference at which this flux stands: the flux goes as its power p along the row.
          const star = inner * q + x
          const w = x / star
          const p = 1 / (1 - w + w / e)
          const ratio = Math.log1p(-rise / T)
          const power = 1 - p
          const integral = Math.abs(power) < 1e-9 ? -ratio : -Math.expm1(power * ratio) / power
          const mean = T * Math.exp(-Math.log(integral / (rise / T)) / p)
          if (rise > 0) this.rowShare[r] = (T - mean) / (q * g)
          this.passHeat[j] += q * perMetre * L * tubes
          this.rowCoolant[r] = Ts - star
        } else {
          q = 0
          x = 0
          this.rowCoolant[r] = this.passIn[j]
        }
      } else {
        x = s.wallSubcooling
        dh = hfg + FILM_SUBCOOLING * cp * x
        const arriving = onTube * dh
        q = this.rowLaw(this.singleFlux(x, r, film), arriving, r, x, dh)
      }
      const heat = q * perMetre * L * tubes
      const made = heat / dh
      this.rowX[r] = x
      this.rowFlux[r] = q
      this.rowArriving[r] = gathered / (tubes * L)
      this.rowVelocity[r] = velocity
      this.rowCondensate[r] = made
      duty += heat
      const wall = Ts - x
      if (wall < lowest) lowest = wall
      if (dropping) {
        const mu = this.rowVapourViscosity[r]
        const throat = middle / (rhoV * flowArea * this.fmin)
        let loss = rowPressureDrop(this.lossOf((rhoV * throat * Do) / mu), rhoV, throat)
        if (this.twoPhase) {
          const rhoL = liquid[RHO_L]
          const slow = (gathered + 0.5 * made) / (rhoL * flowArea * this.fmin)
          loss = ishihara(loss, rowPressureDrop(this.lossOf((rhoL * slow * Do) / liquid[MU_L]), rhoL, slow))
        }
        pressure -= loss
        if (pressure < 0.2 * this.inletPressure) {
          pressure = 0.2 * this.inletPressure
          this.clamped = true
        }
        const sonic = this.sonicVelocity(r)
        if (throat > fastest * sonic) fastest = throat / sonic
      }
      gathered += made
      remaining = Math.max(0, remaining - made)
    }
    this.duty = duty
    this.condensate = gathered
    this.vapourDrop = dropping ? this.inletPressure - pressure : this.drop === 3 ? 0 : Number.NaN
    this.fastestOverSonic = fastest
    this.lowestWall = lowest
  }

  /** Flux of a clean tube at the subcooling and vapour velocity that row `row` was left with, W/m². */
  singleAt(row: number): number {
    const x = this.rowX[row]
    fillFilm(this.s.fluid, this.rowTs[row] - x + this.weight * x, this.liquid)
    return this.singleFlux(x, row, this.shear === 4 ? 0 : this.rowVelocity[row])
  }

  /** d ln q1/d ln x of the single tube. */
  private shearedExponent(x: number, row: number, velocity: number): number {
    if (this.shear > 1 || !(velocity > 0)) return 0.75
    const { liquid, s } = this
    const r = ((liquid[RHO_L] * velocity * s.outsideDiameter) / liquid[MU_L]) * x
    const c = this.shear === 0 ? 9.47 : 1.69
    const drive = filmDrive(
      s.outsideDiameter,
      liquid[RHO_L],
      this.rowVapourDensity[row],
      liquid[MU_L],
      liquid[K_L],
      this.rowLatent[row],
    )
    const root = Math.sqrt(r * r + c * drive * x)
    return 0.5 * (1 + (r + (2 * r * r + c * drive * x) / (2 * root)) / (r + root))
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

  /** Carries the heat of a sweep to the passes' inlets, means and wall temperatures; returns the largest change, K. */
  private passTemperatures(total = Number.NaN): number {
    const { s } = this
    const coolant = s.coolant as CoolantModel
    const perMetre = Math.PI * this.insideDiameter * this.length
    let T = s.inletTemperature
    let change = 0
    for (let j = 0; j < s.passes; j++) {
      const moved = T - this.passIn[j]
      if (Math.abs(moved) > change) change = Math.abs(moved)
      // A pass that starts warmer takes up less: corrected in proportion to its driving difference.
      const difference = Math.max(1e-9, this.Ts - this.passIn[j])
      const heat =
        this.passHeat[j] * (Number.isNaN(total) ? Math.max(0, 1 - moved / difference) : total / this.duty)
      const rise = heat / (this.flow * this.passSpecificHeat[j])
      this.passIn[j] = T
      const mean = T + 0.5 * rise
      const wall = mean + heat / (perMetre * this.passTubes[j] * this.passCoefficient[j])
      change = Math.max(change, Math.abs(mean - this.passMean[j]), Math.abs(wall - this.passWall[j]))
      this.passMean[j] = mean
      this.passWall[j] = Math.min(wall, coolant.maxTemperature)
      T += rise
      this.passOut[j] = T
    }
    return change
  }

  /** Per metre of tube the duty of a given subcooling: inlet vapour in balance with the rows. */
  solveSubcooling(): number {
    this.length = 1
    this.start(false)
    this.inletVapour = 0
    let settled = 0
    let lastDuty = 0
    let slope = 0
    let lastLog = Number.NaN
    let lastMismatch = Number.NaN
    for (this.sweeps = 1; this.sweeps <= MOST_SWEEPS; this.sweeps++) {
      this.sweep(false)
      const mismatch =
        this.inletVapour > 0 ? Math.log(this.condensate / this.inletVapour) : Number.POSITIVE_INFINITY
      const change = Math.abs(this.duty - lastDuty)
      lastDuty = this.duty
      if (Math.abs(mismatch) < CLOSE && change < CLOSE * this.duty) settled++
      else settled = 0
      if (settled >= 2) break
      if (!Number.isFinite(mismatch)) {
        this.inletVapour = this.condensate
        continue
      }
      const log = Math.log(this.inletVapour)
      if (Math.abs(log - lastLog) > 1e-9) {
        const seen = (mismatch - lastMismatch) / (log - lastLog)
        if (seen < -0.2 && seen > -8) slope = seen
      }
      lastLog = log
      lastMismatch = mismatch
      const step = mismatch / (slope === 0 ? 1 : -slope)
      this.inletVapour *= Math.exp(Math.max(-0.7, Math.min(0.7, step)))
    }
    return this.refusal()
  }

  /** Coolant drive at the length and flow that stand: everything but those two in balance. */
  private rateCoolant(): number {
    let lastDuty = 0
    let slope = 0
    let lastLog = Number.NaN
    let lastMismatch = Number.NaN
    let settled = 0
    const close = CLOSE * (this.Ts - this.s.inletTemperature)
    for (this.sweeps = 1; this.sweeps <= MOST_SWEEPS; this.sweeps++) {
      this.coolantSide()
      this.sweep(true)
      const change = this.passTemperatures()
      const mismatch =
        this.inletVapour > 0 ? Math.log(this.condensate / this.inletVapour) : Number.POSITIVE_INFINITY
      const moved = Math.abs(this.duty - lastDuty)
      lastDuty = this.duty
      if (Math.abs(mismatch) < CLOSE && moved < CLOSE * this.duty && change < 50 * close) settled++
      else settled = 0
      if (settled >= 2) break
      if (!Number.isFinite(mismatch)) {
        this.inletVapour = this.condensate
        continue
      }
      const log = Math.log(this.inletVapour)
      if (Math.abs(log - lastLog) > 1e-9) {
        const seen = (mismatch - lastMismatch) / (log - lastLog)
        if (seen < -0.2 && seen > -8) slope = seen
      }
      lastLog = log
      lastMismatch = mismatch
      const step = mismatch / (slope === 0 ? 1 : -slope)
      this.inletVapour *= Math.exp(Math.max(-0.7, Math.min(0.7, step)))
    }
    return this.refusal()
  }

  /** The length that gives the duty, at a given velocity, flow or outlet temperature. */
  private sizeCoolant(): number {
    const { s } = this
    const coolant = s.coolant as CoolantModel
    const byOutlet = !Number.isNaN(s.outletTemperature)
    const reach = this.Ts - s.inletTemperature
    if (byOutlet && !(s.outletTemperature > s.inletTemperature && s.outletTemperature < this.Ts))
      return OUTCOME.outletNotReachable
    if (byOutlet) {
      fillCoolant(coolant, 0.5 * (s.inletTemperature + s.outletTemperature), this.water)
      this.flow = s.duty / (this.water[COOLANT_CP] * (s.outletTemperature - s.inletTemperature))
    }
    fillCoolant(coolant, s.inletTemperature + 0.5 * reach, this.water)
    if (s.duty >= this.flow * this.water[COOLANT_CP] * reach) return OUTCOME.dutyNotReached
    this.length = 3
    this.inletVapour = s.duty / this.inlet[H_FG]
    let settled = 0
    let lastDuty = 0
    const close = CLOSE * reach
    for (this.sweeps = 1; this.sweeps <= MOST_SWEEPS; this.sweeps++) {
      this.coolantSide()
      this.sweep(true)
      const change = this.passTemperatures(s.duty)
      const short = Math.log(s.duty / this.duty)
      const moved = Math.abs(this.duty / lastDuty - 1)
      lastDuty = this.duty
      const last = s.passes - 1
      let off = 0
      if (byOutlet) {
        off = (this.passOut[last] - s.inletTemperature) / (s.outletTemperature - s.inletTemperature) - 1
        this.flow *= 1 + Math.max(-0.5, Math.min(1, off)) * (Math.abs(short) < 0.05 ? 1 : 0)
      }
      if (Math.abs(short) < CLOSE && moved < CLOSE && change < 50 * close && Math.abs(off) < 1e-11) settled++
      else settled = 0
      if (settled >= 2) break
      // The quick loop settles in about twenty sweeps or not at all; the bracketed search always does.
      if (this.sweeps > 45 || (this.sweeps > 20 && Math.abs(short) > 1e-3)) return this.bracketLength()
      this.inletVapour = (s.duty * this.condensate) / this.duty
      const elasticity = this.lengthElasticity()
      const grow = Math.exp(Math.max(-1.5, Math.min(1.5, short / elasticity)))
      this.length *= grow
      // The rows' condensate stands for the length it was found at.
      if (this.length > LONGEST) return OUTCOME.dutyNotReached
    }
    return this.refusal()
  }

  /** The length whose rating gives the duty, by a bracketed secant in ln length: the duty rises with length. */
  private bracketLength(): number {
    const { s } = this
    const byOutlet = !Number.isNaN(s.outletTemperature)
    this.start(true)
    this.inletVapour = 0
    const at = (x: number): number => {
      this.length = Math.exp(x)
      this.rateCoolant()
      return Math.log(this.duty / s.duty)
    }
    // With an outlet temperature the flow is the duty's: found to the coolant's specific heat, refined below.
    for (let round = 0; round < (byOutlet ? 12 : 1); round++) {
      const outcome = this.bracketedRoot(
        at,
        Math.log(1e-3),
        Math.log(LONGEST),
        Math.log(4),
        OUTCOME.dutyNotReached,
      )
      if (outcome !== 0) return outcome
      if (!byOutlet) break
      const off =
        (this.passOut[s.passes - 1] - s.inletTemperature) / (s.outletTemperature - s.inletTemperature) - 1
      if (Math.abs(off) < 1e-11) break
      this.flow *= 1 + off
    }
    return this.refusal()
  }

  /**
   * Root of a rising function of x between two bounds, left solved at the root. The secant is taken unless it lands
   * near an end of the bracket; `beyond` is the outcome when even the upper bound falls short.
   */
  private bracketedRoot(
    at: (x: number) => number,
    lowest: number,
    highest: number,
    first: number,
    beyond: number,
  ): number {
    let low = lowest
    let high = highest
    let fLow = Number.NEGATIVE_INFINITY
    let fHigh = at(high)
    if (!(fHigh > 0)) return beyond
    let x = first
    let stayed = 0
    for (let i = 0; i < 100; i++) {
      const f = at(x)
      if (Math.abs(f) < 1e-12 || high - low < 1e-13) return 0
      const above = f > 0
      if (above) {
        high = x
        fHigh = f
        stayed = stayed > 0 ? stayed + 1 : 1
      } else {
        low = x
        fLow = f
        stayed = stayed < 0 ? stayed - 1 : -1
      }
      // Twice on one side: halve the far end's weight, so that the bracket closes from there.
      if (stayed >= 2) fLow *= 0.5
      if (stayed <= -2) fHigh *= 0.5
      if (!Number.isFinite(fLow)) x = Math.max(low + 0.1 * (high - low), x - 1.2 * f)
      else x = high - (fHigh * (high - low)) / (fHigh - fLow)
      if (!(x > low && x < high)) x = 0.5 * (low + high)
    }
    return 0
  }

  /** d ln duty/d ln length with the passes' inlets held: NTU (1 − ε)/ε of each pass, weighted by its heat. */
  private lengthElasticity(): number {
    const { s } = this
    let sum = 0
    for (let j = 0; j < s.passes; j++) {
      const rise = this.passHeat[j] / (this.flow * this.passSpecificHeat[j])
      const effectiveness = Math.min(0.999999, Math.max(1e-9, rise / (this.Ts - this.passIn[j])))
      sum += (this.passHeat[j] * -Math.log1p(-effectiveness) * (1 - effectiveness)) / effectiveness
    }
    return Math.max(0.02, sum / this.duty)
  }

  private refusal(): number {
    const { s } = this
    if (this.clamped || this.vapourDrop > EXHAUSTED * this.inletPressure)
      return OUTCOME.vapourPressureExhausted
    if (this.fastestOverSonic > TOO_FAST) return OUTCOME.vapourTooFast
    if (this.sweeps > MOST_SWEEPS || !Number.isFinite(this.duty)) return OUTCOME.notSolved
    if (!s.fluid.fixed && this.lowestWall < s.fluid.minTemperature) return OUTCOME.wallBelowRange
    return 0
  }

  private velocityToFlow(velocity: number): number {
    const { s } = this
    fillCoolant(s.coolant as CoolantModel, s.inletTemperature, this.water)
    return (this.water[COOLANT_RHO] * velocity * this.boreArea * this.tubes) / s.passes
  }

  /** Solves the point; 0 or the outcome that ended it. */
  solve(): number {
    const { s } = this
    const ended = this.prepare()
    if (ended !== 0) return ended
    const size = !Number.isNaN(s.duty)
    if (!s.coolantDrive) {
      const outcome = this.solveSubcooling()
      if (outcome !== 0) return outcome
      const length = size ? s.duty / this.duty : s.length
      this.scale(length)
      if (s.coolant === null) return 0
      return this.holdWall()
    }
    this.start(true)
    this.flow = !Number.isNaN(s.massFlow)
      ? s.massFlow
      : Number.isNaN(s.outletTemperature)
        ? this.velocityToFlow(s.velocity)
        : Number.NaN
    let outcome: number
    if (size) outcome = this.sizeCoolant()
    else {
      this.length = s.length
      this.inletVapour = 0
      outcome = this.rateCoolant()
    }
    if (outcome !== 0) return outcome
    const outlet = this.passOut[s.passes - 1]
    if (outsideRange(s.coolant as CoolantModel, outlet)) return OUTCOME.coolantOutletOutsideRange
    this.coolantDrops()
    return 0
  }

  private scale(length: number): void {
    this.length = length
    this.duty *= length
    this.condensate *= length
    this.inletVapour *= length
    for (let r = 0; r < this.s.rows; r++) this.rowCondensate[r] *= length
  }

  /** The coolant flow whose march gives the duty that stands, by a bracketed secant in ln velocity. */
  private holdWall(): number {
    const duty = this.duty
    const length = this.length
    const found = this.remember()
    this.start(true)
    this.inletVapour = 0
    const at = (x: number): number => {
      this.flow = this.velocityToFlow(Math.exp(x))
      this.length = length
      this.rateCoolant()
      return Math.log(this.duty / duty)
    }
    const outcome = this.bracketedRoot(
      at,
      Math.log(1e-3),
      Math.log(60),
      Math.log(1.5),
      OUTCOME.noVelocityHoldsWall,
    )
    if (outcome === 0) {
      this.coolantDrops()
    }
    this.recall(found)
    return outcome
  }

  weightedSubcooling(): number {
    let sum = 0
    for (let r = 0; r < this.s.rows; r++) sum += this.rowX[r] * this.rowTubes[r]
    return sum / this.tubes
  }

  private readonly keptRows = [
    new Float64Array(MAX_ROWS),
    new Float64Array(MAX_ROWS),
    new Float64Array(MAX_ROWS),
    new Float64Array(MAX_ROWS),
    new Float64Array(MAX_ROWS),
  ]
  private readonly kept = new Float64Array(8)
  private remember(): Float64Array {
    this.keptRows[0].set(this.rowX)
    this.keptRows[1].set(this.rowFlux)
    this.keptRows[2].set(this.rowCondensate)
    this.keptRows[3].set(this.rowArriving)
    this.keptRows[4].set(this.rowVelocity)
    this.kept[0] = this.duty
    this.kept[1] = this.condensate
    this.kept[2] = this.inletVapour
    this.kept[3] = this.vapourDrop
    this.kept[4] = this.fastestOverSonic
    this.kept[5] = this.lowestWall
    this.kept[6] = this.length
    return this.kept
  }
  private recall(kept: Float64Array): void {
    this.rowX.set(this.keptRows[0])
    this.rowFlux.set(this.keptRows[1])
    this.rowCondensate.set(this.keptRows[2])
    this.rowArriving.set(this.keptRows[3])
    this.rowVelocity.set(this.keptRows[4])
    this.duty = kept[0]
    this.condensate = kept[1]
    this.inletVapour = kept[2]
    this.vapourDrop = kept[3]
    this.fastestOverSonic = kept[4]
    this.lowestWall = kept[5]
    this.length = kept[6]
  }

  coolantDrop = Number.NaN
  private coolantDrops(): void {
    const { s } = this
    const Di = this.insideDiameter
    let total = 0
    for (let j = 0; j < s.passes; j++) {
      const re = this.passReynolds[j]
      const f = this.colebrookFriction ? colebrook(re, s.roughness / Di) : churchill(re, s.roughness / Di)
      const rho = this.passDensity[j]
      const v = this.passVelocity[j]
      let drop = passPressureDrop(f, this.length, Di, rho, v)
      if (j > 0) drop += returnPressureDrop(rho, v)
      this.passDrop[j] = drop
      total += drop
    }
    this.coolantDrop = total
  }
}
