// A study as a problem to search: its combinations set on a point solver, its limits as excesses, its bounds from facts.
import { KEY_RESULT_INDEX, KEY_RESULTS, OUTCOME_INDEX } from '#engine/bundle/key-results.ts'
import { PointSolver } from '#engine/bundle/point-solver.ts'
import type { Case } from '#engine/case.ts'
import { capitalRecoveryFactor } from '#engine/correlations/economics.ts'
import { setSwept } from '#engine/sweep/evaluate-range.ts'
import { keyResultColumn, LIMITS, type LimitId, limitExcess } from '#engine/sweep/limits.ts'
import { objectiveColumn } from '#engine/sweep/objective.ts'
import { type Study, type SweptValue, withSwept } from '#engine/sweep/study.ts'
import type { Opened } from './combination.ts'
import type { Sign } from './falling.ts'
import type { Trial } from './line.ts'
import type { Problem, Spent } from './search.ts'
import { combinationValues, isSizing, type Space, spaceOf } from './space.ts'

/** One side of a limit. */
export interface Constraint {
  id: LimitId
  side: 'min' | 'max'
  bound: number
  column: number
}

/** What is made least: a key result, or less of it where `most` is asked for. */
export interface Goal {
  column: number
  most?: boolean
}

const FLOW_AXES = ['drive.velocity', 'drive.massFlow']
const SUBCOOLING_AXIS = 'drive.wallSubcooling'

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

export function constraintsOf(study: Study, lifted?: LimitId): Constraint[] {
  return LIMITS.flatMap(({ id, result }) => {
    const limit = study.limits[id]
    if (!limit || id === lifted) return []
    const column = keyResultColumn(result)
    return (['min', 'max'] as const).flatMap((side) => {
      const bound = limit[side]
      return bound === undefined ? [] : [{ id, side, bound, column }]
    })
  })
}

export class StudyProblem implements Problem {
  readonly study: Study
  readonly space: Space
  readonly constraints: readonly Constraint[]
  private readonly goal: Goal
  private readonly solver = new PointSolver()
  private readonly key = new Float64Array(KEY_RESULTS.length)
  private readonly cost: Spent = { evaluations: 0, rowMarches: 0 }
  private readonly sizing: boolean
  private readonly ownObjective: boolean

  constructor(study: Study, more: { goal?: Goal; lifted?: LimitId; space?: Space } = {}) {
    this.study = study
    this.space = more.space ?? spaceOf(study)
    this.constraints = constraintsOf(study, more.lifted)
    this.goal = more.goal ?? { column: objectiveColumn(study.objective) }
    this.ownObjective = more.goal === undefined
    this.sizing = isSizing(study)
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
      falling: this.falls() ? this.signs() : null,
    }
  }

  /** The combination's results at a place, as stored for a point; the outcome first. */
  keyResultsAt(combination: number, x: readonly number[]): Float64Array {
    this.open(combination).trial(x)
    return this.key.slice()
  }

  /**
   * The objective where every axis stands most favourably and no limit counts but those that cannot be met even so. Area
   * falls as the coolant flow, the subcooling and the saturation temperature rise, and rises with fouling. How a pitch
   * works is not known beforehand: the tightest has the fastest vapour, and its pressure drop is left out.
   */
  bound(combination: number): number | null {
    if (!this.ownObjective) return Number.MIN_SAFE_INTEGER
    const { objective } = this.study
    if (!this.sizing || objective === 'pumpingPower') return 0
    this.load(combination)
    const { solver } = this
    const { axes } = this.space
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
      } else return 0
    }
    if (axes.length > 0 && !axes.every(({ path }) => path.endsWith('oulingResistance')) && !this.monotone())
      return 0
    const outcome = this.solve()
    const { key } = this
    if (outcome !== 0 && outcome !== WALL_NOT_HELD) {
      if (alone && HOPELESS.includes(outcome)) return null
      return outcome === NOT_REACHED && (axes.length === 0 || this.movesFlow()) ? null : 0
    }
    for (const { id, side, bound, column } of this.constraints) {
      const least = side === 'max' && (id === 'length' || id === 'bundleWidth' || id === 'bundleHeight')
      if (least && key[column] > bound * (1 + 1e-9)) return null
      if (
        alone &&
        (RESPONSE[id] === 0 || (axes.length === 0 && outcome === 0)) &&
        this.excess(column, side, bound) > 1e-9
      )
        return null
    }
    if (objective !== 'yearlyCost') return key[this.goal.column]
    const { tubePrice, interest, years } = solver.economics
    return key[KEY_RESULT_INDEX.outsideArea] * tubePrice * capitalRecoveryFactor(interest, years)
  }

  private load(combination: number): void {
    this.solver.load(this.study.case)
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

  private falls(): boolean {
    const { objective } = this.study
    return (
      this.ownObjective &&
      this.sizing &&
      (objective === 'outsideArea' || objective === 'tubeMass') &&
      this.movesFlow() &&
      this.monotone()
    )
  }

  private signs(): Sign[] {
    const bySubcooling = this.space.axes[0].path === SUBCOOLING_AXIS
    return this.constraints.map(({ id, side }) => {
      const response = id === 'meanWallSubcooling' && bySubcooling ? 1 : (RESPONSE[id] ?? null)
      return response === null || side === 'max' ? response : ((-response || 0) as Sign)
    })
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
    return { objective: goal.most ? -key[goal.column] : key[goal.column], excess }
  }

  private excess(column: number, side: 'min' | 'max', bound: number): number {
    const value = this.key[column]
    return side === 'max'
      ? limitExcess(value, Number.NEGATIVE_INFINITY, bound)
      : limitExcess(value, bound, Number.POSITIVE_INFINITY)
  }
}
