// The least area that meets the duty with a given probability: each candidate gets the length that enough samples are
// content with, and must meet every limit with that length.
import { KEY_RESULT_INDEX, KEY_RESULTS } from '#engine/bundle/key-results.ts'
import type { Case } from '#engine/case.ts'
import { bestOfCombination, QUICK } from '#engine/optimise/combination.ts'
import type { Trial } from '#engine/optimise/line.ts'
import { inputsOf, type Optimiser, type OptimumInput } from '#engine/optimise/optimise.ts'
import type { SearchState } from '#engine/optimise/search.ts'
import { limitExcess } from '#engine/sweep/limits.ts'
import { objectiveColumn } from '#engine/sweep/objective.ts'
import { withPath } from '#engine/sweep/study.ts'
import { type BandOptions, SampledPoint, SCREENING, uncertainGroups } from './bands.ts'
import { quantile } from './distributions.ts'

const LENGTH = KEY_RESULT_INDEX.tubeLength
const WIDEST = 1e-9

export interface RobustOptions extends Pick<BandOptions, 'samples' | 'seed' | 'sigmas'> {
  /** Share of samples that must have the duty. */
  probability: number
}

export interface LengthFor {
  length: number
  nominalLength: number
  /** What the length is over the nominal one, less 1. */
  margin: number
}

/** The length with which the given share of samples has the duty; null where too many have no result at any length. */
export function lengthFor(kase: Case, options: RobustOptions, point = new SampledPoint()): LengthFor | null {
  const { probability, samples = SCREENING, seed = 1, sigmas } = options
  if (!(probability > 0 && probability < 1))
    throw new RangeError(`probability ${probability}; above 0 and under 1`)
  if (kase.duty === undefined)
    throw new RangeError('the case gives a length; a length follows only from a duty')
  point.load(kase)
  if (!point.nominal()) return null
  const nominalLength = point.key[LENGTH]
  const groups = uncertainGroups(kase, point.solver.result(), sigmas)
  const lengths = new Float64Array(samples)
  for (let i = 0; i < samples; i++)
    lengths[i] = point.sample(groups, seed, i, samples) ? point.key[LENGTH] : Number.POSITIVE_INFINITY
  const length = quantile(lengths.sort(), probability)
  return Number.isFinite(length) ? { length, nominalLength, margin: length / nominalLength - 1 } : null
}

export interface RobustCandidate extends LengthFor {
  combination: number
  x: number[]
  objective: number
}

export interface RobustOptimum extends RobustCandidate {
  probability: number
  samples: number
  seed: number
  inputs: OptimumInput[]
  /** With the length given in place of the duty. */
  case: Case
  /** Combinations that were compared: the best few of the search without scatter. */
  compared: number
  statement: string
}

/** The best of one combination with the length that the probability asks for; a task of its own for a worker. */
export function robustCandidate(
  { problem, study }: Optimiser,
  combination: number,
  options: RobustOptions,
): RobustCandidate | null {
  const point = new SampledPoint()
  const key = new Float64Array(KEY_RESULTS.length)
  const column = objectiveColumn(study.objective)
  const found = new Map<string, LengthFor>()
  const trial = (x: readonly number[]): Trial | null => {
    const kase = problem.caseAt(combination, x)
    const needed = lengthFor(kase, options, point)
    if (needed === null) return null
    found.set(x.join(' '), needed)
    // The longer bundle as it will be built, rated without scatter.
    const { solver } = point
    solver.load(kase)
    solver.set('bundle.length', needed.length)
    if (solver.solve() !== 0) return null
    solver.keyResults(key, 0, 1)
    return {
      objective: key[column],
      excess: problem.constraints.map(({ side, bound, column: c }) =>
        side === 'max'
          ? limitExcess(key[c], Number.NEGATIVE_INFINITY, bound * (1 + WIDEST))
          : limitExcess(key[c], bound * (1 - WIDEST), Number.POSITIVE_INFINITY),
      ),
    }
  }
  const { falling } = problem.open(combination)
  const best = bestOfCombination({ trial, falling }, problem.axes, QUICK)
  if (best.status !== 'feasible') return null
  const needed = found.get(best.x.join(' '))
  return needed ? { combination, x: best.x, objective: best.objective, ...needed } : null
}

/** Of the best few combinations of a finished search the one with the least objective at the length asked for. */
export function robustOptimum(
  optimiser: Optimiser,
  searched: SearchState,
  options: RobustOptions,
): RobustOptimum | null {
  const candidates = searched.leaders.map(({ combination }) =>
    robustCandidate(optimiser, combination, options),
  )
  return joinRobust(optimiser, candidates, options)
}

/** The answer from its parts. */
export function joinRobust(
  { problem }: Optimiser,
  candidates: readonly (RobustCandidate | null)[],
  { probability, samples = SCREENING, seed = 1 }: RobustOptions,
): RobustOptimum | null {
  const known = candidates.filter((candidate) => candidate !== null)
  known.sort((a, b) => a.objective - b.objective || a.combination - b.combination)
  const [best] = known
  if (!best) return null
  const { duty: _, ...open } = problem.caseAt(best.combination, best.x)
  const share = Number((probability * 100).toPrecision(4))
  return {
    ...best,
    probability,
    samples,
    seed,
    inputs: inputsOf(problem, best),
    case: withPath(open as Case, 'bundle.length', best.length),
    compared: candidates.length,
    statement: `The least that meets the duty in ${share} % of ${samples} samples, among the best ${candidates.length} combinations: ${(best.margin * 100).toFixed(1)} % more length than without scatter.`,
  }
}
