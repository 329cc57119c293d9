// A study as a problem to search: its combinations set on a point solver, its limits as excesses, its bounds from facts.
import { KEY_RESULT_INDEX, KEY_RESULTS, OUTCOME_INDEX } from '#engine/bundle/key-results.ts'
import { PointSolver } from '#engine/bundle/point-solver.ts'
import type { Case } from '#engine/case.ts'
import { capitalRecoveryFactor } from '#engine/correlations/economics.ts'
import { setSwept } from '#engine/sweep/evaluate-range.ts'
import { keyResultColumn, LIMITS, type LimitId, limitExcess } from '#engine/sweep/limits.ts'
import { type Objective, objectiveColumn } from '#engine/sweep/objective.ts'
import { type Study, type SweptValue, withSwept } from '#engine/sweep/study.ts'
import { lowerOf, type Opened } from './combination.ts'
import type { Sign } from './falling.ts'
import type { Trial } from './line.ts'
import type { Problem, Spent } from './search.ts'
import { combinationValues, isSizing, type Space, spaceOf } from './space.ts'

export type Side = 'min' | 'max'

/** One side of a limit; `id` is null for a bound on a result that no limit of a study speaks of. */
export interface Constraint {
  id: LimitId | null
  side: Side
  bound: number
  column: number
}

/** What is made least (or most) in the place of the study's objective; 'worst': the greatest excess over any limit. */
export type Goal = { column: number; most?: boolean } | 'worst'

export interface ProblemOptions {
  goal?: Goal
  /** One side of a limit left out. */
  lifted?: { id: LimitId; side: Side }
  /** Bounds beside the study's limits. */
  more?: readonly Constraint[]
}

const FLOW_AXES = ['drive.velocity', 'drive.massFlow']
const SUBCOOLING_AXIS = 'drive.wallSubcooling'
const LENGTH_AXIS = 'bundle.length'

/**
 * How the result behind a limit goes as the flow or the subcooling rises at a given duty: the bundle gets shorter, so its
 * vapour faster; pressure drops, flow and velocity rise, the outlet gets colder.
 */
const RESPONSE: Readonly<Partial<Record<LimitId, Sign>>> = {
  coolantPressureDrop: 1,
  vapourPressureDrop: 1,
  coolantVelocity: 1,
  coolantMassFlow: 1,
  coolantOutletTemperature: -1,
  length: -1,
  bundleWidth: 0,
  bundleHeight: 0,
  duty: 0,
}

/** The same as the length rises at a given coolant flow. */
const LENGTH_RESPONSE: Readonly<Partial<Record<LimitId, Sign>>> = {
  duty: 1,
  coolantPressureDrop: 1,
  coolantOutletTemperature: 1,
  coolantVelocity: 0,
  coolantMassFlow: 0,
  length: 1,
  bundleWidth: 0,
  bundleHeight: 0,
}

/** Objectives in proportion to the length. */
const SIZES: readonly Objective[] = ['outsideArea', 'tubeMass']

/** Outcomes that no value of a coolant flow or a subcooling changes. */
const HOPELESS = [
  'inputInvalid',
  'propertyMissing',
  'saturationOutsideTable',
  'coolantOutsideRange',
  'coolantTooWarm',
].map((code) => OUTCOME_INDEX[code])
const NOT_REACHED = OUTCOME_INDEX.dutyNotReached
const WALL_NOT_HELD = OUTCOME_INDEX.noVelocityHoldsWall

export function constraintsOf(study: Study): Constraint[] {
  return LIMITS.flatMap(({ id, result }) => {
    const column = keyResultColumn(result)
    return (['min', 'max'] as const).flatMap((side) => {
      const bound = study.limits[id]?.[side]
      return bound === undefined ? [] : [{ id, side, bound, column }]
    })
  })
}

export class StudyProblem implements Problem {
  readonly study: Study
  readonly space: Space
  readonly constraints: readonly Constraint[]
  private readonly goal: Exclude<Goal, 'worst'>
  private readonly worst: boolean
  private readonly solver = new PointSolver()
  private readonly key = new Float64Array(KEY_RESULTS.length)
  private readonly cost: Spent = { evaluations: 0, rowMarches: 0 }
  private readonly sizing: boolean
  private readonly ownObjective: boolean
  /** Without the coolant where a given subcooling has its area without one. */
  private readonly bareCase: Case

  constructor(study: Study, { goal, lifted, more = [] }: ProblemOptions = {}) {
    this.study = study
    this.space = spaceOf(study)
    this.constraints = [
      ...constraintsOf(study).filter(({ id, side }) => !(id === lifted?.id && side === lifted.side)),
      ...more,
    ]
    this.worst = goal === 'worst'
    this.goal = goal === undefined || goal === 'worst' ? { column: objectiveColumn(study.objective) } : goal
    this.ownObjective = goal === undefined
    this.sizing = isSizing(study)
    const { drive } = study.case
    const coolantVaries = [...this.space.discrete, ...this.space.axes].some(({ path }) =>
      path.startsWith('drive.coolant'),
    )
    this.bareCase =
      drive.kind === 'wallSubcooling' && !coolantVaries && study.objective !== 'yearlyCost'
        ? { ...study.case, drive: { kind: drive.kind, wallSubcooling: drive.wallSubcooling } }
        : study.case
  }

  get axes() {
    return this.space.axes
  }
  get combinations() {
    return this.space.combinations
  }
  spent(): Spent {
    return { ...this.cost }
  }

  /** The case at a place of the space. */
  caseAt(combination: number, x: readonly number[]): Case {
    let kase = this.study.case
    combinationValues(this.space, combination).forEach((value, j) => {
      kase = withSwept(kase, this.space.discrete[j].path, value)
    })
    this.space.axes.forEach(({ path }, j) => {
      kase = withSwept(kase, path, x[j])
    })
    return kase
  }

  open(combination: number): Opened {
    this.load(combination)
    const { axes } = this.space
    return {
      trial: (x) => {
        for (let j = 0; j < axes.length; j++) this.solver.set(axes[j].path, x[j])
        return this.look()
      },
      falling: this.falling(),
    }
  }

  /** The combination's results at a place, as stored for a point; the outcome first. */
  keyResultsAt(combination: number, x: readonly number[]): Float64Array {
    this.open(combination).trial(x)
    return this.key.slice()
  }

  /** The study's own objective at a place, whatever is made least here. */
  objectiveAt(combination: number, x: readonly number[]): number {
    return this.keyResultsAt(combination, x)[objectiveColumn(this.study.objective)]
  }

  /**
   * The objective where every axis stands most favourably and no limit counts but those that cannot be met even so. Area
   * falls as the coolant flow, the subcooling and the saturation temperature rise, and rises with fouling. How a pitch
   * works is not known beforehand: the tightest has the fastest vapour, and its pressure drop is left out.
   */
  bound(combination: number): number | null {
    if (!this.ownObjective) return this.boundOfGoal(combination)
    const { objective } = this.study
    if (objective === 'pumpingPower') return 0
    this.load(combination, this.bareCase)
    const { solver } = this
    const { axes } = this.space
    const length = axes.find(({ path }) => path === LENGTH_AXIS)
    const needed = this.study.limits.duty?.min
    const cooled = this.study.case.drive.kind === 'coolant'
    const alone = axes.length === 0 || (axes.length === 1 && this.movesFlow())
    for (const { path, low, high } of axes) {
      if (FLOW_AXES.includes(path) || path === SUBCOOLING_AXIS) solver.set(path, high)
      else if ((path === 'saturationTemperature' || path === 'saturationPressure') && cooled)
        solver.set(path, high)
      else if (path.endsWith('oulingResistance')) solver.set(path, low)
      else if (path === 'bundle.pitchRatio' && cooled) {
        solver.set(path, low)
        solver.set('methods.vapourPressureDrop', 'none')
      } else if (path === LENGTH_AXIS) {
        // The length that the duty asks for at least.
        if (needed === undefined) solver.set(path, low)
        else solver.set('duty', needed)
      } else return 0
    }
    if (axes.length > 0 && !axes.every(({ path }) => path.endsWith('oulingResistance')) && !this.monotone())
      return 0
    const outcome = this.solve()
    const { key } = this
    if (!this.sizing) {
      const short = length ? Math.max(1, length.low / key[KEY_RESULT_INDEX.tubeLength]) : 1
      return outcome === 0 ? short * this.withoutEnergy(objective) : 0
    }
    if (outcome !== 0 && outcome !== WALL_NOT_HELD) {
      if (alone && HOPELESS.includes(outcome)) return null
      return outcome === NOT_REACHED && (axes.length === 0 || this.movesFlow()) ? null : 0
    }
    for (const { id, side, bound, column } of this.constraints) {
      if (this.bareCase !== this.study.case && LIMITS.find((limit) => limit.id === id)?.needsCoolant) continue
      const least = side === 'max' && (id === 'length' || id === 'bundleWidth' || id === 'bundleHeight')
      if (least && key[column] > bound * (1 + 1e-9)) return null
      if (
        alone &&
        ((id !== null && RESPONSE[id] === 0) || (axes.length === 0 && outcome === 0)) &&
        this.excess(column, side, bound) > 1e-9
      )
        return null
    }
    return this.withoutEnergy(objective)
  }

  /** The objective of the point that stands, of a yearly cost only what the area costs. */
  private withoutEnergy(objective: Study['objective']): number {
    if (objective !== 'yearlyCost') return this.key[this.goal.column]
    const { tubePrice, interest, years } = this.solver.economics
    return this.key[KEY_RESULT_INDEX.outsideArea] * tubePrice * capitalRecoveryFactor(interest, years)
  }

  private load(combination: number, kase = this.study.case): void {
    this.solver.load(kase)
    const values: readonly SweptValue[] = combinationValues(this.space, combination)
    for (let j = 0; j < values.length; j++) setSwept(this.solver, this.space.discrete[j].path, values[j])
  }

  private movesFlow(): boolean {
    const path = this.space.axes[0]?.path
    return path !== undefined && (FLOW_AXES.includes(path) || path === SUBCOOLING_AXIS)
  }

  /** Chen's rows may stand in two states, and a number of tubes chosen from the velocity moves in steps. */
  private monotone(): boolean {
    return this.solver.methods.inundation !== 'chen' && !this.solver.autoTubes
  }

  /** Along the first axis, where it moves the flow and the duty is given, or is the length that the duty follows from. */
  private falling(): Opened['falling'] {
    if (this.worst || !this.monotone()) return null
    if (!this.sizing) {
      const ownSize = this.ownObjective && SIZES.includes(this.study.objective)
      if (!ownSize || this.space.axes[0]?.path !== LENGTH_AXIS) return null
      return { signs: this.signs((id) => LENGTH_RESPONSE[id] ?? null), reversed: true }
    }
    if (!this.movesFlow()) return null
    const way = this.goalResponse()
    return way === null ? null : { signs: this.signs((id) => this.response(id)), reversed: way > 0 }
  }

  /** How what is made least goes as the first axis rises. */
  private goalResponse(): Sign {
    if (this.ownObjective) return SIZES.includes(this.study.objective) ? -1 : null
    const { column, most } = this.goal
    const limit = LIMITS.find(({ result }) => keyResultColumn(result) === column)
    const response = limit ? this.response(limit.id) : null
    return response === null || !most ? response : ((-response || 0) as Sign)
  }

  private response(id: LimitId): Sign {
    if (id === 'meanWallSubcooling' && this.space.axes[0].path === SUBCOOLING_AXIS) return 1
    return RESPONSE[id] ?? null
  }

  private signs(responseOf: (id: LimitId) => Sign): Sign[] {
    return this.constraints.map(({ id, side }) => {
      const response = id === null ? null : responseOf(id)
      return response === null || side === 'max' ? response : ((-response || 0) as Sign)
    })
  }

  /** The goal where the first axis stands most favourably; without a bound where that is not known. */
  private boundOfGoal(combination: number): number {
    const { trial, falling } = this.open(combination)
    const [first, second, third] = this.space.axes
    if (falling === null || third !== undefined) return Number.MIN_SAFE_INTEGER
    const reversed = falling.reversed === true
    const lower =
      second === undefined
        ? (trial([reversed ? first.low : first.high])?.objective ?? Number.NaN)
        : lowerOf(trial, first, second, reversed)
    return Number.isFinite(lower) ? lower : Number.MIN_SAFE_INTEGER
  }

  private solve(): number {
    const outcome = this.solver.solve()
    this.solver.keyResults(this.key, 0, 1)
    this.cost.evaluations++
    this.cost.rowMarches += this.solver.march.sweeps
    return outcome
  }

  private look(): Trial | null {
    const outcome = this.solve()
    if (outcome !== 0 && outcome !== WALL_NOT_HELD) return null
    const { key, goal } = this
    const excess = this.constraints.map(({ side, bound, column }) => this.excess(column, side, bound))
    // A wall that no coolant holds is a limit not met, even where no limit speaks of the coolant.
    if (outcome !== 0) excess.push(Number.POSITIVE_INFINITY)
    if (this.worst) return { objective: Math.max(...excess), excess: [] }
    return { objective: goal.most ? -key[goal.column] : key[goal.column], excess }
  }

  private excess(column: number, side: 'min' | 'max', bound: number): number {
    const value = this.key[column]
    return side === 'max'
      ? limitExcess(value, Number.NEGATIVE_INFINITY, bound)
      : limitExcess(value, bound, Number.POSITIVE_INFINITY)
  }
}
