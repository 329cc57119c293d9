// How sure a result is: the calculation repeated under factors drawn from the published scatter of its methods.
import { KEY_RESULT_INDEX, KEY_RESULTS, OUTCOMES } from '#engine/bundle/key-results.ts'
import {
  inTransition,
  MULTIPLIER_GROUPS,
  type MultiplierGroup,
  type Multipliers,
  scatterOf,
  unitMultipliers,
} from '#engine/bundle/multipliers.ts'
import { PointSolver } from '#engine/bundle/point-solver.ts'
import type { Case } from '#engine/case.ts'
import type { Result } from '#engine/result.ts'
import { formatQuantity } from '#engine/units.ts'
import { quantile } from './distributions.ts'
import { firstOrder } from './first-order.ts'
import { deviate, lognormal } from './sampling.ts'

/** Samples for a look, and for what is reported. */
export const SCREENING = 200
export const REPORT = 2000

export interface BandOptions {
  samples?: number
  seed?: number
  /** Sigma of ln of a group's factor, in the place of the published scatter. */
  sigmas?: Readonly<Partial<Record<MultiplierGroup, number>>>
  /** The length that is to give the duty; the nominal one when not given. Only where the length follows from a duty. */
  length?: number
  /** The duty that is to be met; only where the duty follows from a length. */
  target?: number
}

export interface GroupShare {
  id: MultiplierGroup
  label: string
  multiplies: string
  sigma: number
  /** Where sigma comes from: published scatter and source, or 'given'. */
  published: string
  source: string
  /** d ln quantity / d ln factor, from the factor moved by ±1 %. */
  elasticity: number | null
  /** The same by the first-order formula, where there is one. */
  firstOrder: number | null
  /** Share of the variance of ln quantity: in the samples, and by elasticity × sigma. */
  share: number
  shareFirstOrder: number
}

export interface Band {
  question: 'size' | 'rate'
  quantity: 'outsideArea' | 'duty'
  samples: number
  seed: number
  nominal: number
  /** Null where the quantile lies among samples without a result. */
  p10: number | null
  p50: number | null
  p90: number | null
  /** More of the distribution. */
  quantiles: { p: number; value: number | null }[]
  /** The length that was judged, and the share of samples in which it gives the duty. */
  length: number | null
  meets: number | null
  /** The factors that were drawn, the most important first. */
  groups: GroupShare[]
  /** The group with the greatest share; null where nothing is uncertain. */
  most: MultiplierGroup | null
  /** Whether the re-rates by ±1 % name the same group. */
  mostByRerates: boolean
  failures: { code: string; text: string; count: number }[]
  statement: string
}

const AREA = KEY_RESULT_INDEX.outsideArea
const LENGTH = KEY_RESULT_INDEX.tubeLength
const DUTY = KEY_RESULT_INDEX.duty
const WALL_NOT_HELD = OUTCOMES.findIndex(({ code }) => code === 'noVelocityHoldsWall')
const QUANTILES = [0.01, 0.05, 0.1, 0.25, 0.5, 0.75, 0.9, 0.95, 0.99]
const NOTHING = 1e-6
/** Relative room within which a length counts as enough: what the solver leaves open. */
const ENOUGH = 1e-8

/** The factors that are uncertain in a case: the published scatter of its methods, or what is given in its place. */
export function uncertainGroups(kase: Case, nominal: Result, sigmas: BandOptions['sigmas'] = {}) {
  const transition = nominal.passes.some(({ reynolds }) => inTransition(reynolds))
  return MULTIPLIER_GROUPS.flatMap(({ id, label, multiplies }, column) => {
    const scatter = scatterOf(id, kase.methods, transition)
    const given = sigmas[id]
    const sigma = given ?? scatter.sigmaLn ?? 0
    if (!(sigma > 0)) return []
    return [
      {
        id,
        label,
        multiplies,
        column,
        sigma,
        published: given === undefined ? scatter.published : 'given',
        source: given === undefined ? scatter.source : 'given in the study',
      },
    ]
  })
}

/** One point after another under drawn factors; `solve` leaves the key results in `key`. */
export class SampledPoint {
  readonly key = new Float64Array(KEY_RESULTS.length)
  readonly solver = new PointSolver()
  private readonly factors: Multipliers = unitMultipliers()

  load(kase: Case): void {
    this.solver.load(kase)
  }

  /** Under the factors of sample i; whether there is a result. */
  sample(groups: ReturnType<typeof uncertainGroups>, seed: number, i: number, samples: number): boolean {
    for (const { id, column, sigma } of groups)
      this.factors[id] = lognormal(sigma, deviate(seed, column, i, samples))
    return this.solve()
  }

  /** With one factor away from 1. */
  with(id: MultiplierGroup, factor: number): boolean {
    Object.assign(this.factors, unitMultipliers(), { [id]: factor })
    return this.solve()
  }

  nominal(): boolean {
    Object.assign(this.factors, unitMultipliers())
    return this.solve()
  }

  private solve(): boolean {
    this.solver.setMultipliers(this.factors)
    const outcome = this.solver.solve()
    this.solver.keyResults(this.key, 0, 1)
    // A given subcooling has its area whether or not a coolant can hold it.
    return outcome === 0 || outcome === WALL_NOT_HELD
  }
}

/** The band of a case; null where its nominal point has no result. */
export function bandOf(kase: Case, options: BandOptions = {}): Band | null {
  const { samples = SCREENING, seed = 1, sigmas, target } = options
  const sizing = kase.duty !== undefined
  const column = sizing ? AREA : DUTY
  const point = new SampledPoint()
  point.load(kase)
  if (!point.nominal()) return null
  const nominal = point.key[column]
  const nominalLength = point.key[LENGTH]
  const result = point.solver.result()
  const groups = uncertainGroups(kase, result, sigmas)
  const length = sizing ? (options.length ?? nominalLength) : nominalLength

  const values = new Float64Array(samples)
  const lengths = new Float64Array(samples)
  const failed = new Map<number, number>()
  // What has no result needs more than any area, or gives no duty.
  const none = sizing ? Number.POSITIVE_INFINITY : 0
  for (let i = 0; i < samples; i++) {
    const solved = point.sample(groups, seed, i, samples)
    values[i] = solved ? point.key[column] : none
    lengths[i] = solved ? point.key[LENGTH] : none
    if (!solved) failed.set(point.solver.outcome, (failed.get(point.solver.outcome) ?? 0) + 1)
  }

  const shares = groupShares(groups, values, seed)
  const formula = firstOrder(kase, result)
  const described = groups.map(({ column: _, ...group }, j): GroupShare => {
    const up = point.with(group.id, 1.01) ? point.key[column] : Number.NaN
    const down = point.with(group.id, 0.99) ? point.key[column] : Number.NaN
    const elasticity = Math.log(up / down) / Math.log(1.01 / 0.99)
    return {
      ...group,
      elasticity: Number.isFinite(elasticity) ? elasticity : null,
      firstOrder: formula[group.id] ?? null,
      // What a factor that moves nothing shares with the result is chance.
      share: Math.abs(elasticity * group.sigma) > NOTHING ? shares[j] : 0,
      shareFirstOrder: 0,
    }
  })
  const variance = described.reduce((sum, { elasticity, sigma }) => sum + ((elasticity ?? 0) * sigma) ** 2, 0)
  for (const group of described)
    group.shareFirstOrder = variance > 0 ? ((group.elasticity ?? 0) * group.sigma) ** 2 / variance : 0
  described.sort((a, b) => b.share - a.share)
  const byRerates = [...described].sort((a, b) => b.shareFirstOrder - a.shareFirstOrder)[0]?.id ?? null

  const sorted = Float64Array.from(values).sort()
  const at = (p: number) => finite(quantile(sorted, p))
  const met = sizing
    ? share(lengths, (needed) => needed <= length * (1 + ENOUGH))
    : target === undefined
      ? null
      : share(values, (given) => given >= target * (1 - ENOUGH))
  const band = { p10: at(0.1), p50: at(0.5), p90: at(0.9) }
  const most = described.length > 0 && described[0].share > 0 ? described[0].id : null
  return {
    question: sizing ? 'size' : 'rate',
    quantity: sizing ? 'outsideArea' : 'duty',
    samples,
    seed,
    nominal,
    ...band,
    quantiles: QUANTILES.map((p) => ({ p, value: at(p) })),
    length: finite(length),
    meets: met,
    groups: described,
    most,
    mostByRerates: most === byRerates,
    failures: [...failed].map(([outcome, count]) => ({
      code: OUTCOMES[outcome].code,
      text: OUTCOMES[outcome].text,
      count,
    })),
    statement: statementOf(sizing, nominal, band, length, met),
  }
}

const finite = (value: number): number | null => (Number.isFinite(value) ? value : null)

function share(values: Float64Array, holds: (value: number) => boolean): number {
  let count = 0
  for (const value of values) if (holds(value)) count++
  return count / values.length
}

/** Squared correlation of ln value with each column of deviates: they are near enough orthogonal to be shares. */
function groupShares(
  groups: ReturnType<typeof uncertainGroups>,
  values: Float64Array,
  seed: number,
): number[] {
  const kept = Array.from(values, (value, i) => ({ i, log: Math.log(value) })).filter(({ log }) =>
    Number.isFinite(log),
  )
  const mean = kept.reduce((sum, { log }) => sum + log, 0) / kept.length
  const spread = kept.reduce((sum, { log }) => sum + (log - mean) ** 2, 0)
  return groups.map(({ column }) => {
    const z = kept.map(({ i }) => deviate(seed, column, i, values.length))
    const middle = z.reduce((sum, value) => sum + value, 0) / kept.length
    let along = 0
    let across = 0
    kept.forEach(({ log }, n) => {
      along += (z[n] - middle) * (log - mean)
      across += (z[n] - middle) ** 2
    })
    return spread > 1e-20 && across > 0 ? along ** 2 / (across * spread) : 0
  })
}

function statementOf(
  sizing: boolean,
  nominal: number,
  { p10, p90 }: Pick<Band, 'p10' | 'p90'>,
  length: number,
  meets: number | null,
): string {
  const say = (value: number | null) =>
    value === null
      ? 'more than can be found'
      : formatQuantity(value, sizing ? 'area' : 'power', 'si', { digits: 3 })
  const chance = meets === null ? '' : `; ${(meets * 100).toFixed(0)} % of samples meet the duty`
  const tube = formatQuantity(length, 'length', 'si', { digits: 3 })
  return `${sizing ? 'Required area' : 'Duty'} ${say(nominal)}, in eight of ten cases ${say(p10)} to ${say(p90)}${
    chance === '' ? '' : `${chance} with ${tube}`
  }.`
}
