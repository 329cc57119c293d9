// One point after another: a case is loaded, single inputs are changed, the point is solved and read. A sweep and a
// single evaluation go through here, so that they cannot disagree.
import type { Case, Methods } from '#engine/case.ts'
import { capitalRecoveryFactor, pumpingPower, yearlyCost } from '#engine/correlations/economics.ts'
import { PROPERTY_TEMPERATURE_WEIGHT } from '#engine/correlations/film.ts'
import { type Layout, tubeMass } from '#engine/correlations/geometry.ts'
import {
  COOLANT_LENGTH,
  COOLANT_RHO,
  coolantModel,
  fillCoolant,
  findCoolant,
  fixedCoolant,
  fixedFluid,
  fluidModel,
  saturationTemperature,
} from '#engine/fluids/index.ts'
import { findMaterial, type Material } from '#engine/materials.ts'
import type { Result } from '#engine/result.ts'
import { describe } from './describe.ts'
import { KEY_RESULT_INDEX, OUTCOME_INDEX } from './key-results.ts'
import { BundleMarch } from './march.ts'
import { MULTIPLIER_IDS, type Multipliers, unitMultipliers } from './multipliers.ts'
import { notesMask } from './notes-mask.ts'
import { DROP, FILM, INUNDATION, SHEAR, TUBE_SIDE } from './point-state.ts'

/** A path into the case that may be set on a loaded point. */
export type SweepPath = string

const K = KEY_RESULT_INDEX as Readonly<Record<string, number>>
const WALL_NOT_HELD = OUTCOME_INDEX.noVelocityHoldsWall

export class PointSolver {
  readonly march = new BundleMarch()
  /** Inputs beside the march's own: what names, prices and notes are made from. */
  fluidId: string | null = null
  coolantId: string | null = null
  material: Material | null = null
  methods!: Methods
  economics!: Case['economics']
  autoTubes = false
  corrections: NonNullable<Case['corrections']> = []
  outcome = 0
  private readonly corrected = unitMultipliers()
  private recovery = 0
  private readonly water = new Float64Array(COOLANT_LENGTH)

  /** Takes every input from a checked case; nothing of the point before remains. */
  load(kase: Case): void {
    const s = this.march.s
    this.setFluid(kase.fluid)
    s.saturationTemperature = kase.saturationTemperature ?? Number.NaN
    s.saturationPressure = kase.saturationPressure ?? Number.NaN
    this.byPressure = kase.saturationPressure !== undefined
    s.duty = kase.duty ?? Number.NaN
    s.length = kase.bundle.length ?? Number.NaN

    const { drive } = kase
    s.coolantDrive = drive.kind === 'coolant'
    s.wallSubcooling = drive.kind === 'wallSubcooling' ? drive.wallSubcooling : Number.NaN
    const cooled = drive.kind === 'coolant' ? drive : drive.coolant
    this.setCoolant(cooled ? cooled.coolant : null)
    s.inletTemperature = cooled ? cooled.inletTemperature : Number.NaN
    s.insideFouling = cooled ? cooled.foulingResistance : 0
    s.velocity = drive.kind === 'coolant' ? (drive.velocity ?? Number.NaN) : Number.NaN
    s.massFlow = drive.kind === 'coolant' ? (drive.massFlow ?? Number.NaN) : Number.NaN
    s.outletTemperature = drive.kind === 'coolant' ? (drive.outletTemperature ?? Number.NaN) : Number.NaN

    const { tube, bundle } = kase
    s.outsideDiameter = tube.outsideDiameter
    s.wallThickness = tube.wallThickness ?? Number.NaN
    this.setMaterial(tube.material ?? null, tube.conductivity ?? Number.NaN)
    s.roughness = tube.roughness
    s.outsideFouling = tube.outsideFoulingResistance

    s.circular = bundle.shape === 'circular'
    s.layout = bundle.layout
    s.pitchRatio = bundle.pitchRatio
    s.rows = bundle.rows
    this.autoTubes = bundle.tubesPerRow === 'auto'
    s.tubesPerRow = typeof bundle.tubesPerRow === 'number' ? bundle.tubesPerRow : Number.NaN
    s.passes = bundle.passes
    s.entryTop = bundle.coolantEntry === 'top'

    this.methods = { ...kase.methods }
    for (const choice of Object.keys(kase.methods) as (keyof Methods)[]) this.applyMethod(choice)
    this.economics = { ...kase.economics }
    this.applyEconomics()

    this.corrections = kase.corrections ?? []
    for (const id of MULTIPLIER_IDS) this.corrected[id] = 1
    for (const { group, factor } of this.corrections) this.corrected[group] *= factor
    this.setMultipliers(null)
  }

  /**
   * Takes factors on the parts of the calculation, over and above the case's own corrections; null takes them away.
   * They stay for every point until the next `load`.
   */
  setMultipliers(given: Readonly<Multipliers> | null): void {
    const { factors } = this.march
    for (const id of MULTIPLIER_IDS)
      factors[id] = given === null ? this.corrected[id] : this.corrected[id] * given[id]
  }

  private byPressure = false

  /** Takes every input from another solver as it stands. */
  copy(other: PointSolver): void {
    Object.assign(this.march.s, other.march.s)
    this.byPressure = other.byPressure
    this.fluidId = other.fluidId
    this.coolantId = other.coolantId
    this.material = other.material
    this.autoTubes = other.autoTubes
    this.methods = { ...other.methods }
    for (const choice of Object.keys(this.methods) as (keyof Methods)[]) this.applyMethod(choice)
    this.economics = { ...other.economics }
    this.applyEconomics()
    this.corrections = other.corrections
    Object.assign(this.corrected, other.corrected)
    Object.assign(this.march.factors, other.march.factors)
  }

  /** Changes one input of the loaded case; `value` in SI or an id. Unknown paths throw RangeError. */
  set(path: SweepPath, value: number | string): void {
    const s = this.march.s
    const number = value as number
    switch (path) {
      case 'fluid':
        this.setFluid(value as string)
        return
      case 'saturationTemperature':
        this.byPressure = false
        s.saturationTemperature = number
        return
      case 'saturationPressure':
        this.byPressure = true
        s.saturationPressure = number
        return
      case 'duty':
        s.duty = number
        s.length = Number.NaN
        return
      case 'bundle.length':
        s.length = number
        s.duty = Number.NaN
        return
      case 'drive.wallSubcooling':
        s.wallSubcooling = number
        return
      case 'drive.coolant':
      case 'drive.coolant.coolant':
        this.setCoolant(value as string)
        return
      case 'drive.inletTemperature':
      case 'drive.coolant.inletTemperature':
        s.inletTemperature = number
        return
      case 'drive.foulingResistance':
      case 'drive.coolant.foulingResistance':
        s.insideFouling = number
        return
      case 'drive.velocity':
        s.velocity = number
        if (!this.autoTubes) {
          s.massFlow = Number.NaN
          s.outletTemperature = Number.NaN
        }
        return
      case 'drive.massFlow':
        s.massFlow = number
        if (!this.autoTubes) s.velocity = Number.NaN
        s.outletTemperature = Number.NaN
        return
      case 'drive.outletTemperature':
        s.outletTemperature = number
        if (!this.autoTubes) s.velocity = Number.NaN
        s.massFlow = Number.NaN
        return
      case 'tube.outsideDiameter':
        s.outsideDiameter = number
        return
      case 'tube.wallThickness':
        s.wallThickness = number
        return
      case 'tube.material':
        this.setMaterial(value as string, Number.NaN)
        return
      case 'tube.conductivity':
        this.setMaterial(null, number)
        return
      case 'tube.roughness':
        s.roughness = number
        return
      case 'tube.outsideFoulingResistance':
        s.outsideFouling = number
        return
      case 'bundle.shape':
        s.circular = value === 'circular'
        return
      case 'bundle.layout':
        s.layout = value as Layout
        return
      case 'bundle.pitchRatio':
        s.pitchRatio = number
        return
      case 'bundle.rows':
        s.rows = number
        return
      case 'bundle.tubesPerRow':
        this.autoTubes = false
        s.tubesPerRow = number
        return
      case 'bundle.passes':
        s.passes = number
        return
      case 'bundle.coolantEntry':
        s.entryTop = value === 'top'
        return
    }
    const [group, name] = path.split('.') as [string, string]
    if (group === 'methods' && name in this.methods) {
      const choice = name as keyof Methods
      ;(this.methods as Record<keyof Methods, string>)[choice] = value as string
      this.applyMethod(choice)
      return
    }
    if (group === 'economics' && name in this.economics) {
      ;(this.economics as Record<string, number>)[name] = number
      this.applyEconomics()
      return
    }
    throw new RangeError(`"${path}" is nothing a point can vary`)
  }

  /** Solves the point as it stands; the index of its outcome, 0 when evaluated. */
  solve(): number {
    const { march } = this
    const { s } = march
    // The one not given is found from the other: what the point before found must not stand in for it.
    if (this.byPressure) s.saturationTemperature = Number.NaN
    march.duty = Number.NaN
    march.coolantDrop = Number.NaN
    march.tubes = Number.NaN
    this.outcome = march.solve()
    return this.outcome
  }

  /** Writes the point's key results, key result c at `first + c * stride`; null is NaN, limitsNotMet is left 0. */
  keyResults(out: Float64Array, first: number, stride: number): void {
    const { march, outcome } = this
    const { s } = march
    for (let at = first, c = 0; c < COLUMN_COUNT; c++, at += stride) out[at] = Number.NaN
    out[first + K.outcome * stride] = outcome
    out[first + K.limitsNotMet * stride] = 0
    out[first + K.notes * stride] = 0
    if (Number.isFinite(march.tubes)) {
      out[first + K.tubeCount * stride] = march.tubes
      out[first + K.bundleWidth * stride] = march.width
      out[first + K.bundleHeight * stride] = march.height
    }
    if (outcome !== 0 && outcome !== WALL_NOT_HELD) return
    const area = this.area
    out[first + K.outsideArea * stride] = area
    out[first + K.tubeLength * stride] = march.length
    out[first + K.duty * stride] = march.duty
    out[first + K.meanCoefficient * stride] = this.meanCoefficient
    out[first + K.vapourPressureDrop * stride] = march.vapourDrop
    out[first + K.saturationTemperatureDrop * stride] = this.saturationTemperatureDrop
    out[first + K.meanWallSubcooling * stride] = march.weightedSubcooling()
    out[first + K.tubeMass * stride] = this.tubeMass
    if (s.coolant !== null && outcome === 0) {
      const outlet = this.coolantOutlet
      out[first + K.overallCoefficient * stride] = march.duty / (area * this.meanTemperatureDifference)
      out[first + K.coolantPressureDrop * stride] = march.coolantDrop
      out[first + K.coolantVelocity * stride] = this.coolantVelocity
      out[first + K.coolantMassFlow * stride] = march.flow
      out[first + K.coolantOutletTemperature * stride] = outlet
      const power = this.pumpingPower
      out[first + K.pumpingPower * stride] = power
      out[first + K.yearlyCost * stride] = this.yearlyCost
    }
    out[first + K.notes * stride] = notesMask(this)
  }

  /** The whole result of the point as it stands; allocates. */
  result(): Result {
    return describe(this)
  }

  get area(): number {
    return this.march.tubes * Math.PI * this.march.s.outsideDiameter * this.march.length
  }
  /** Duty over Σ area × wall subcooling. */
  get meanCoefficient(): number {
    const { march } = this
    const { s } = march
    let sum = 0
    for (let r = 0; r < s.rows; r++) sum += march.rowTubes[r] * march.rowX[r]
    return march.duty / (sum * Math.PI * s.outsideDiameter * march.length)
  }
  get coolantOutlet(): number {
    return this.march.passOut[this.march.s.passes - 1]
  }
  /** In the first pass at the inlet's density, all passes taken as equal. */
  get coolantVelocity(): number {
    const { march } = this
    fillCoolant(march.s.coolant as NonNullable<typeof march.s.coolant>, march.s.inletTemperature, this.water)
    return (march.flow * march.s.passes) / (this.water[COOLANT_RHO] * march.boreArea * march.tubes)
  }
  /** Log mean on the inlet saturation temperature; NaN where the coolant leaves at saturation. */
  get meanTemperatureDifference(): number {
    const first = this.march.Ts - this.march.s.inletTemperature
    const last = this.march.Ts - this.coolantOutlet
    if (!(last > 1e-9 * first)) return Number.NaN
    const ratio = first / last
    return Math.abs(ratio - 1) < 1e-9 ? first : (first - last) / Math.log(ratio)
  }
  /** Saturation temperature lost across all rows; NaN where the fluid has no saturation line. */
  get saturationTemperatureDrop(): number {
    const { march } = this
    if (march.vapourDrop === 0) return 0
    if (march.s.fluid.fixed) return Number.NaN
    return march.Ts - saturationTemperature(march.s.fluid, march.inletPressure - march.vapourDrop)
  }
  get tubeMass(): number {
    const { march } = this
    const density = this.material?.density ?? Number.NaN
    return tubeMass(march.tubes, march.length, density, march.s.outsideDiameter, march.insideDiameter)
  }
  get pumpingPower(): number {
    const { march } = this
    fillCoolant(march.s.coolant as NonNullable<typeof march.s.coolant>, march.s.inletTemperature, this.water)
    return pumpingPower(march.coolantDrop, march.flow, this.water[COOLANT_RHO], this.economics.pumpEfficiency)
  }
  get yearlyCost(): number {
    const { tubePrice, hoursPerYear, energyPrice } = this.economics
    return yearlyCost(this.area, tubePrice, this.recovery, this.pumpingPower, hoursPerYear, energyPrice)
  }

  private setFluid(fluid: Case['fluid']): void {
    this.fluidId = typeof fluid === 'string' ? fluid : null
    this.march.s.fluid = typeof fluid === 'string' ? fluidModel(fluid) : fixedFluid(fluid.properties)
  }
  private setCoolant(coolant: string | { properties: Parameters<typeof fixedCoolant>[0] } | null): void {
    this.coolantId = typeof coolant === 'string' ? (findCoolant(coolant)?.id ?? coolant) : null
    this.march.s.coolant =
      coolant === null
        ? null
        : typeof coolant === 'string'
          ? coolantModel(this.coolantId as string)
          : fixedCoolant(coolant.properties)
  }
  private setMaterial(id: string | null, conductivity: number): void {
    this.material = id === null ? null : (findMaterial(id) ?? null)
    this.march.s.conductivity = this.material?.conductivity ?? conductivity
    this.march.s.tubeDensity = this.material?.density ?? Number.NaN
  }
  private applyMethod(choice: keyof Methods): void {
    const { march } = this
    const id = this.methods[choice]
    const place = (list: readonly string[]) => list.indexOf(id)
    switch (choice) {
      case 'film':
        march.film = place(FILM)
        return
      case 'latentHeat':
        march.plainLatent = id === 'plain'
        return
      case 'propertyTemperature':
        march.weight = PROPERTY_TEMPERATURE_WEIGHT[id as keyof typeof PROPERTY_TEMPERATURE_WEIGHT]
        return
      case 'inundation':
        march.inundation = place(INUNDATION)
        return
      case 'vapourShear':
        march.shear = place(SHEAR)
        return
      case 'vapourPressureDrop':
        march.drop = place(DROP)
        return
      case 'twoPhase':
        march.twoPhase = id === 'ishihara'
        return
      case 'tubeSide':
        march.tubeSide = place(TUBE_SIDE)
        return
      case 'tubeFriction':
        march.colebrookFriction = id === 'colebrook'
        return
    }
  }
  private applyEconomics(): void {
    this.recovery = capitalRecoveryFactor(this.economics.interest, this.economics.years)
  }
}

const COLUMN_COUNT = Object.keys(KEY_RESULT_INDEX).length
