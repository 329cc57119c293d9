// Solves one point: the unknowns around the march through the rows.
//
// A quick loop corrects them after every sweep, together with all that lags in the rows; it settles in about eight
// sweeps. Where it does not, a bracketed search does, each trial swept until it stands still. Every point starts from
// the same guesses, so that its numbers depend on its inputs alone.
import {
  churchill,
  colebrook,
  PASS_HEADS,
  passPressureDrop,
  returnPressureDrop,
} from '#engine/correlations/friction.ts'
import {
  COOLANT_CP,
  COOLANT_RHO,
  type CoolantModel,
  fillCoolant,
  H_FG,
  outsideRange,
} from '#engine/fluids/index.ts'
import { OUTCOME_INDEX } from './key-results.ts'
import { MAX_PASSES, MAX_ROWS } from './point-state.ts'
import { CHEN_ROWS, RowMarch } from './row-march.ts'

/** What may remain when a point stands: of a balance, and of what a sweep still changes, relative. */
const CLOSE = 3e-10
/** A sweep may change this much if it changes so much less than the one before that `CLOSE` is what remains. */
const LAST_CHANGE = 1e-7
/** A sequence that shrinks slower is taken to shrink by this. */
const SLOWEST_PACE = 0.95
/** Sweeps after which the quick loop gives way to the bracketed search. */
const QUICK_SWEEPS = 80
/** Sweeps that one trial of the bracketed search may take. */
const TRIAL_SWEEPS = 1000
/** Rounds that a point's first guess takes. */
const GUESSES = 4
/** Sweeps after which what swings from one to the next is damped. */
const SWINGING = 12
/** Trial lengths stay below this; a duty that needs more is out of reach [m]. */
const LONGEST = 1e5
/** Coolant is not driven faster than this to hold a wall [m/s]. */
const FASTEST = 100
/** A bracket of this width across which the duty still changes by more than this has a leap in it. */
const NARROWEST = 1e-13
const LEAP = 1e-5
/** Below this Reynolds number a coolant may have two steady states at one flow. */
const TWO_STATES = 1e4
/** Two states differ by more than this. */
const SAME_STATE = 1e-6
/** Vapour losing more of its pressure than this is refused. */
const EXHAUSTED = 0.5
/** Vapour faster than this share of the speed of sound is refused. */
const TOO_FAST = 0.7

/** How far sweep `n` of a search follows the one before: what still swings after a dozen is damped. */
const heedAt = (n: number): number => (n < SWINGING ? 1 : n < 4 * SWINGING ? 0.5 : 0.25)

const OUTCOME = OUTCOME_INDEX as Readonly<Record<string, number>>

// What the bracketed search varies.
const BY_VAPOUR = 0
const BY_LENGTH = 1
const BY_FLOW = 2

export class BundleMarch extends RowMarch {
  sweeps = 0
  coolantDrop = Number.NaN
  readonly passDrop = new Float64Array(MAX_PASSES)

  /** Solves the point; 0 or the outcome that ended it. */
  solve(): number {
    const { s } = this
    this.sweeps = 0
    const ended = this.prepare()
    if (ended !== 0) return ended
    const size = !Number.isNaN(s.duty)
    if (!s.coolantDrive) {
      const outcome = this.solveSubcooling()
      if (outcome !== 0) return outcome
      this.scale(size ? s.duty / this.duty : s.length)
      if (size) this.duty = s.duty
      return s.coolant === null ? 0 : this.holdWall()
    }
    let outcome: number
    if (size) outcome = this.sizeLength()
    else {
      this.length = s.length
      this.flow = Number.isNaN(s.massFlow) ? this.velocityToFlow(s.velocity) : s.massFlow
      outcome = this.rate()
    }
    if (outcome !== 0) return outcome
    return this.finishCoolant()
  }

  /** Per metre of tube the duty of a given subcooling: inlet vapour in balance with the rows. */
  private solveSubcooling(): number {
    this.length = 1
    this.start(false)
    this.inletVapour = 0
    this.sweep(false)
    this.sweeps++
    this.inletVapour = this.condensate
    if (!this.quickVapour(false)) {
      const outcome = this.bracket(BY_VAPOUR, Number.NaN, false)
      if (outcome !== 0) return outcome
    }
    return this.refusal()
  }

  /** Coolant drive at a given length and flow: inlet vapour in balance with the rows. */
  private rate(): number {
    const { s } = this
    this.start(true)
    this.coolantSide()
    const area = this.tubes * Math.PI * s.outsideDiameter * this.length
    const capacity = this.flow * this.passSpecificHeat[0]
    const reach = this.Ts - s.inletTemperature
    let guess = 0
    for (let n = 0; n < GUESSES; n++) {
      if (n === 2) {
        this.spreadRise(guess / capacity, true)
        this.coolantSide()
      }
      const inner = this.innerConductance()
      const h = this.meanRowCoefficient(this.rowX[0], guess / this.inlet[H_FG])
      const units = (inner * h * area) / ((inner + h) * capacity)
      guess = -Math.expm1(-units) * capacity * reach
      this.rowX[0] = guess / (h * area)
    }
    this.inletVapour = guess / this.inlet[H_FG]
    this.spreadRise(guess / capacity, true)
    if (!this.quickVapour(true)) {
      const outcome = this.bracket(BY_VAPOUR, Number.NaN, true)
      if (outcome !== 0) return outcome
    }
    return this.refusal()
  }

  /**
   * Whether the rows and the coolant (`change` and `close` in K) will move no more, by how fast both come to rest: a
   * sequence that shrinks by `pace` has pace/(1 − pace) of its last step before it.
   */
  private stands(change: number, close: number): boolean {
    const { moved } = this
    const coolantPace = change > 0 ? change / this.changedBefore : 0
    const pace = Math.min(SLOWEST_PACE, Math.max(moved / this.movedBefore, coolantPace))
    const left = pace / (1 - pace)
    return moved < LAST_CHANGE && moved * left < CLOSE && !(change * left > close)
  }

  /** Brings the inlet vapour to what the rows condense, a secant step in its logarithm after every sweep. */
  private quickVapour(cooled: boolean): boolean {
    const close = CLOSE * (this.Ts - this.s.inletTemperature)
    let slope = -1
    let lastLog = Number.NaN
    let lastMismatch = Number.NaN
    for (let n = 0; n < QUICK_SWEEPS; n++) {
      this.sweeps++
      this.heed = heedAt(n)
      let change = 0
      if (cooled) {
        this.coolantSide()
        this.sweep(true)
        change = this.passTemperatures(Number.NaN)
      } else this.sweep(false)
      const mismatch = Math.log(this.condensate / this.inletVapour)
      if (!Number.isFinite(mismatch)) return false
      // What is missing of the vapour moves the rows by the share that their condensate follows it.
      if (Math.abs(mismatch) * Math.max(0.2, Math.abs(1 + slope)) < CLOSE && this.stands(change, close)) {
        this.inletVapour = this.condensate
        return true
      }
      const log = Math.log(this.inletVapour)
      // What the rows are still settling by must not be taken for the vapour's doing.
      if (this.moved < 0.3 * Math.abs(log - lastLog)) {
        const seen = (mismatch - lastMismatch) / (log - lastLog)
        if (seen < -0.3 && seen > -6) slope = seen
      }
      lastLog = log
      lastMismatch = mismatch
      this.inletVapour *= Math.exp(Math.max(-1.5, Math.min(0.7, -mismatch / slope)))
    }
    return false
  }

  /** The length that gives the duty, at a given velocity, flow or outlet temperature. */
  private sizeLength(): number {
    const { s } = this
    const coolant = s.coolant as CoolantModel
    const reach = this.Ts - s.inletTemperature
    const byOutlet = Number.isNaN(s.massFlow) && !Number.isNaN(s.outletTemperature)
    if (byOutlet) {
      if (!(s.outletTemperature > s.inletTemperature && s.outletTemperature < this.Ts))
        return OUTCOME.outletNotReachable
      fillCoolant(coolant, 0.5 * (s.inletTemperature + s.outletTemperature), this.water)
      this.flow = s.duty / (this.water[COOLANT_CP] * (s.outletTemperature - s.inletTemperature))
    } else this.flow = Number.isNaN(s.massFlow) ? this.velocityToFlow(s.velocity) : s.massFlow
    fillCoolant(coolant, s.inletTemperature + 0.5 * reach, this.water)
    if (s.duty >= this.flow * this.water[COOLANT_CP] * reach) return OUTCOME.dutyNotReached
    const outlet = byOutlet ? s.outletTemperature : Number.NaN
    this.length = this.guessLength()
    this.start(true)
    this.spreadRise(s.duty / (this.flow * this.water[COOLANT_CP]), true)
    if (!this.quickLength(s.duty, outlet) || !this.ratesTo(s.duty)) {
      const outcome = this.bracket(BY_LENGTH, s.duty, true, outlet)
      if (outcome !== 0) return outcome
      if (!this.ratesTo(s.duty)) return OUTCOME.betweenStates
    }
    this.takeUp(s.duty)
    return this.refusal()
  }

  private guessLength(): number {
    const { s } = this
    this.length = 3
    this.start(true)
    this.coolantSide()
    const reach = this.Ts - s.inletTemperature
    const capacity = this.flow * this.passSpecificHeat[0]
    const effectiveness = Math.min(0.999, s.duty / (capacity * reach))
    const units = -Math.log1p(-effectiveness)
    const difference = (reach * effectiveness) / units
    const perMetre = this.tubes * Math.PI * s.outsideDiameter
    for (let n = 0; n < GUESSES; n++) {
      if (n === 2) {
        this.spreadRise(s.duty / capacity, true)
        this.coolantSide()
      }
      const inner = this.innerConductance()
      const h = this.meanRowCoefficient(this.rowX[0], s.duty / this.inlet[H_FG])
      const U = (inner * h) / (inner + h)
      this.rowX[0] = (U * difference) / h
      this.length = Math.min(LONGEST, Math.max(1e-3, (units * capacity) / (U * perMetre)))
    }
    return this.length
  }

  /**
   * Brings the duty to `total` by length, a Newton step in its logarithm after every sweep. The coolant is taken to carry
   * `total` all along; with an `outlet` temperature the flow follows.
   */
  private quickLength(total: number, outlet: number): boolean {
    const close = CLOSE * (this.Ts - this.s.inletTemperature)
    this.inletVapour = total / this.inlet[H_FG]
    for (let n = 0; n < QUICK_SWEEPS; n++) {
      this.sweeps++
      this.heed = heedAt(n)
      this.coolantSide()
      this.sweep(true)
      if (!(this.duty > 0)) return false
      const change = this.passTemperatures(total)
      const off = this.followOutlet(total, outlet)
      const short = Math.log(total / this.duty)
      if (Math.abs(short) < CLOSE && Math.abs(off) < CLOSE && this.stands(change, close)) return true
      this.inletVapour = (total * this.condensate) / this.duty
      this.length *= Math.exp(Math.max(-1, Math.min(1, short / this.lengthElasticity())))
      if (!(this.length < LONGEST)) return false
    }
    return false
  }

  /**
   * Brings the duty to `total` by coolant flow: a secant step in its logarithm whenever the rows have settled to well
   * under what is missing, because the passes' temperatures follow the flow only a sweep later.
   */
  private quickFlow(total: number): boolean {
    const close = CLOSE * (this.Ts - this.s.inletTemperature)
    this.inletVapour = total / this.inlet[H_FG]
    let low = Number.NEGATIVE_INFINITY
    let high = Number.POSITIVE_INFINITY
    let slope = 0.5
    let lastLog = Number.NaN
    let lastShort = Number.NaN
    for (let n = 0; n < 2 * QUICK_SWEEPS; n++) {
      this.sweeps++
      this.coolantSide()
      this.sweep(true)
      if (!(this.duty > 0)) return false
      const change = this.passTemperatures(Number.NaN)
      const short = Math.log(total / this.duty)
      const missing = Math.abs(short)
      if (missing < CLOSE && this.stands(change, close)) return true
      this.inletVapour = (total * this.condensate) / this.duty
      if (missing < CLOSE || this.moved > 0.2 * missing) continue
      const log = Math.log(this.flow)
      if (short > 0) low = log
      else high = log
      const seen = -(short - lastShort) / (log - lastLog)
      if (seen > 0.02 && seen < 4) slope = seen
      lastLog = log
      lastShort = short
      let next = log + Math.max(-1, Math.min(1, short / slope))
      if (!(next > low && next < high)) next = 0.5 * (low + high)
      this.flow = Math.exp(next)
      if (!(this.flow < 1e9)) return false
      this.stretchRise((total / this.duty) * Math.exp(log - next))
    }
    return false
  }

  /** Takes the flow that carries `total` to the outlet temperature asked for; by how much it moved, relative. */
  private followOutlet(total: number, outlet: number): number {
    if (Number.isNaN(outlet)) return 0
    const { s } = this
    let weighted = 0
    let rise = 0
    for (let j = 0; j < s.passes; j++) {
      const risen = this.passOut[j] - this.passIn[j]
      weighted += this.passSpecificHeat[j] * risen
      rise += risen
    }
    if (!(rise > 0)) return 0
    const flow = (total * rise) / (weighted * (outlet - s.inletTemperature))
    const moved = flow / this.flow - 1
    this.flow = flow
    return moved
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
    return Math.max(0.05, sum / this.duty)
  }

  /** Sweeps a trial, what is searched for held, until it stands still; what is missing, in logarithms. */
  private trial(by: number, x: number, total: number, cooled: boolean, outlet: number): number {
    const close = CLOSE * (this.Ts - this.s.inletTemperature)
    if (by === BY_VAPOUR) this.inletVapour = Math.exp(x)
    else if (by === BY_LENGTH) this.length = Math.exp(x)
    else this.flow = Math.exp(x)
    if (by !== BY_VAPOUR) this.inletVapour = total / this.inlet[H_FG]
    this.start(cooled)
    for (let n = 0; n < TRIAL_SWEEPS; n++) {
      this.sweeps++
      this.heed = heedAt(n)
      let change = 0
      let off = 0
      if (cooled) {
        this.coolantSide()
        this.sweep(true)
        change = this.passTemperatures(Number.NaN)
        off = this.followOutlet(total, outlet)
      } else this.sweep(false)
      if (by !== BY_VAPOUR && this.duty > 0) this.inletVapour = (total * this.condensate) / this.duty
      if (this.moved < CLOSE && !(change > close) && Math.abs(off) < CLOSE) break
    }
    return by === BY_VAPOUR ? x - Math.log(this.condensate) : Math.log(this.duty / total)
  }

  /**
   * The search that always ends: what is missing rises with ln vapour, ln length or ln flow. Regula falsi with the far
   * end's weight halved when it stays (Illinois).
   */
  private bracket(by: number, total: number, cooled: boolean, outlet = Number.NaN): number {
    const { s } = this
    let low: number
    let high: number
    if (by === BY_VAPOUR) {
      // More than everything the coolant can take up, or than still vapour at the inlet's saturation would condense.
      this.inletVapour = 0
      this.start(cooled)
      let most = 0
      for (let n = 0; n < 8; n++) {
        if (cooled) this.coolantSide()
        this.sweep(cooled)
        if (cooled) this.passTemperatures(Number.NaN)
        most = this.condensate
      }
      if (!(most > 0)) return OUTCOME.notSolved
      low = Math.log(most) - 12
      high = Math.log(most) + 3
    } else if (by === BY_LENGTH) {
      low = Math.log(1e-4)
      high = Math.log(LONGEST)
    } else {
      high = Math.log(this.velocityToFlow(FASTEST))
      low = Math.min(high, Math.log(total / (this.leastSpecificHeat() * (this.Ts - s.inletTemperature)))) - 1
    }
    let fHigh = this.trial(by, high, total, cooled, outlet)
    if (!(fHigh > 0)) return by === BY_FLOW ? OUTCOME.noVelocityHoldsWall : OUTCOME.dutyNotReached
    let fLow = this.trial(by, low, total, cooled, outlet)
    if (fLow > 0) return OUTCOME.notSolved
    // Where the vapour runs out of pressure short of the root, the duty may leap over it: no root, and no mistake.
    let exhausted = this.exhausted
    let missing = 0
    let stayed = 0
    let width = high - low
    for (let n = 0; high - low > NARROWEST && n < 150; n++) {
      let x = high - (fHigh * (high - low)) / (fHigh - fLow)
      if (n % 3 === 2) {
        // Three steps must have halved the bracket.
        if (high - low > 0.5 * width || !Number.isFinite(x)) x = 0.5 * (low + high)
        width = high - low
      }
      const edge = 1e-3 * (high - low)
      x = Math.min(high - edge, Math.max(low + edge, x))
      const f = this.trial(by, x, total, cooled, outlet)
      missing = Math.abs(f)
      if (missing < CLOSE && this.moved < LAST_CHANGE) return 0
      if (f > 0) {
        high = x
        fHigh = f
        if (stayed > 0) fLow *= 0.5
        stayed = 1
      } else {
        low = x
        fLow = f
        exhausted = this.exhausted
        if (stayed < 0) fHigh *= 0.5
        stayed = -1
      }
    }
    if (exhausted) return OUTCOME.vapourPressureExhausted
    return high - low <= NARROWEST && missing > LEAP ? OUTCOME.betweenStates : OUTCOME.notSolved
  }

  private get exhausted(): boolean {
    return this.clamped || this.vapourDrop > EXHAUSTED * this.inletPressure
  }

  private leastSpecificHeat(): number {
    const { s } = this
    fillCoolant(s.coolant as CoolantModel, 0.5 * (s.inletTemperature + this.Ts), this.water)
    return this.water[COOLANT_CP]
  }

  /** Closes a point that was brought to its balance; the outcome that refuses it, or 0. */
  private refusal(): number {
    const { s } = this
    this.closePressure()
    if (this.exhausted) return OUTCOME.vapourPressureExhausted
    if (this.fastestOverSonic > TOO_FAST) return OUTCOME.vapourTooFast
    if (!Number.isFinite(this.duty)) return OUTCOME.notSolved
    if (!s.fluid.fixed && this.lowestWall < s.fluid.minTemperature) return OUTCOME.wallBelowRange
    return 0
  }

  private velocityToFlow(velocity: number): number {
    const { s } = this
    fillCoolant(s.coolant as CoolantModel, s.inletTemperature, this.water)
    return (this.water[COOLANT_RHO] * velocity * this.boreArea * this.tubes) / s.passes
  }

  private scale(length: number): void {
    this.length = length
    this.duty *= length
    this.condensate *= length
    this.inletVapour *= length
    for (let r = 0; r < this.s.rows; r++) this.rowCondensate[r] *= length
  }

  /** The coolant flow whose march gives the duty that stands; the rows stay those of the given subcooling. */
  private holdWall(): number {
    const { s } = this
    const duty = this.duty
    if (s.inletTemperature >= this.Ts - s.wallSubcooling) return OUTCOME.noVelocityHoldsWall
    this.remember()
    this.start(true)
    this.guessFlow(duty)
    let outcome = 0
    const quick = this.quickFlow(duty) && this.flow <= this.velocityToFlow(FASTEST)
    if (!quick || !this.ratesTo(duty)) {
      this.length = this.kept[KEPT_LENGTH]
      outcome = this.bracket(BY_FLOW, duty, true)
      if (outcome === 0 && !this.ratesTo(duty)) outcome = OUTCOME.betweenStates
    }
    this.takeUp(duty)
    if (outcome === 0) outcome = this.refusal() === 0 ? this.finishCoolant() : OUTCOME.noVelocityHoldsWall
    this.recall()
    return outcome
  }

  /**
   * Whether the coolant drive itself comes to the duty at the length and flow found. A coolant near the laminar limit, thinner the
   * warmer it gets, may stand in two states at one flow, and so may rows under Chen's law, whose factor grows with
   * subcooling.
   */
  private ratesTo(duty: number): boolean {
    let slowest = Number.POSITIVE_INFINITY
    for (let j = 0; j < this.s.passes; j++) slowest = Math.min(slowest, this.passReynolds[j])
    if (slowest > TWO_STATES && this.inundation !== CHEN_ROWS) return true
    this.rate()
    return Math.abs(this.duty / duty - 1) < SAME_STATE
  }

  /** The march came to the duty within what its search leaves; rows and coolant are brought to the duty itself. */
  private takeUp(duty: number): void {
    const factor = duty / this.duty
    for (let j = 0; j < this.s.passes; j++) this.passHeat[j] *= factor
    for (let r = 0; r < this.s.rows; r++) {
      this.rowFlux[r] *= factor
      this.rowCondensate[r] *= factor
    }
    this.condensate *= factor
    this.duty = duty
  }

  /** The flow at which the inner conductance carries the duty from the wall to the coolant's mean temperature. */
  private guessFlow(duty: number): void {
    const { s } = this
    const wall = this.Ts - s.wallSubcooling
    const area = this.tubes * Math.PI * s.outsideDiameter * this.length
    const cp = this.leastSpecificHeat()
    const least = (1.02 * duty) / (cp * (wall - s.inletTemperature))
    const most = this.velocityToFlow(FASTEST)
    let flow = Math.max(least, this.velocityToFlow(1.5))
    for (let n = 0; n < 12; n++) {
      const rise = duty / (flow * cp)
      this.flow = flow
      this.spreadRise(rise)
      this.coolantSide()
      const carried = (this.innerConductance() * area * (wall - s.inletTemperature - 0.5 * rise)) / duty
      const next = Math.min(most, Math.max(least, flow * Math.min(4, Math.max(0.25, carried ** -1.6))))
      if (!(Math.abs(next - flow) > 0.01 * flow)) break
      flow = next
    }
  }

  /** Outlet temperatures from the heat of the rows as it stands, and the coolant's pressure drop. */
  private finishCoolant(): number {
    const { s } = this
    let T = s.inletTemperature
    for (let j = 0; j < s.passes; j++) {
      this.passIn[j] = T
      // The pass's own mean temperature, which sweeps that settle slowly may have left a little behind.
      let rise = this.passHeat[j] / (this.flow * this.passSpecificHeat[j])
      for (let n = 0; n < 2; n++)
        rise = this.passHeat[j] / (this.flow * this.specificHeatAt(j, T + 0.5 * rise))
      T += rise
      this.passOut[j] = T
    }
    if (outsideRange(s.coolant as CoolantModel, T)) return OUTCOME.coolantOutletOutsideRange
    const { coolantFriction, coolantLosses } = this.factors
    const Di = this.insideDiameter
    const rough = s.roughness / Di
    let total = 0
    for (let j = 0; j < s.passes; j++) {
      const re = this.passReynolds[j]
      const f = coolantFriction * (this.colebrookFriction ? colebrook(re, rough) : churchill(re, rough))
      const rho = this.passDensity[j]
      const v = this.passVelocity[j]
      let drop = passPressureDrop(f, this.length, Di, rho, v, coolantLosses * PASS_HEADS)
      if (j > 0) drop += coolantLosses * returnPressureDrop(rho, v)
      this.passDrop[j] = drop
      total += drop
    }
    this.coolantDrop = total
    return 0
  }

  weightedSubcooling(): number {
    let sum = 0
    for (let r = 0; r < this.s.rows; r++) sum += this.rowX[r] * this.rowTubes[r]
    return sum / this.tubes
  }

  /** Everything of the rows that the coolant's search overwrites, and where it is kept meanwhile. */
  private readonly lentRows = [
    this.rowX,
    this.rowFlux,
    this.rowCondensate,
    this.rowArriving,
    this.rowVelocity,
    this.rowPressure,
    this.rowTs,
    this.rowLatent,
    this.rowVapourDensity,
    this.rowVapourViscosity,
    this.rowDensity,
    this.rowSpecificHeat,
    this.rowViscosity,
    this.rowConductivity,
  ]
  private readonly keptRows = this.lentRows.map(() => new Float64Array(MAX_ROWS))
  private readonly kept = new Float64Array(6)

  private remember(): void {
    for (let n = 0; n < this.lentRows.length; n++) this.keptRows[n].set(this.lentRows[n])
    this.kept[0] = this.duty
    this.kept[1] = this.condensate
    this.kept[2] = this.inletVapour
    this.kept[3] = this.vapourDrop
    this.kept[4] = this.lowestWall
    this.kept[KEPT_LENGTH] = this.length
  }

  private recall(): void {
    for (let n = 0; n < this.lentRows.length; n++) this.lentRows[n].set(this.keptRows[n])
    this.duty = this.kept[0]
    this.condensate = this.kept[1]
    this.inletVapour = this.kept[2]
    this.vapourDrop = this.kept[3]
    this.lowestWall = this.kept[4]
    this.length = this.kept[KEPT_LENGTH]
  }
}

const KEPT_LENGTH = 5
