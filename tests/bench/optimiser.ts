// What the optimiser spends on the shipped studies, beside every combination at every step of a stated grid and beside
// a general global optimiser.
import { readFileSync } from 'node:fs'
import type { Trial } from '#engine/optimise/line.ts'
import { createOptimiser } from '#engine/optimise/optimise.ts'
import { runSearch } from '#engine/optimise/search.ts'
import { combinationOf } from '#engine/optimise/space.ts'
import { StudyProblem } from '#engine/optimise/study-problem.ts'
import { uniform } from '#engine/sweep/random.ts'
import { parseStudy, type Study } from '#engine/sweep/study.ts'

/** Steps along each continuous variable, even in its logarithm; the first study's are fine enough for 0.05 % of area. */
const GRIDS: Readonly<Record<string, number>> = {
  'ammonia-condenser': 401,
  'chiller-condenser': 41,
  'low-pressure-steam-condenser': 15,
}

/** The figures of the first study, and of each. */
export function benchOptimiser() {
  const studies = Object.entries(GRIDS).map(([name, steps]) => compare(name, steps))
  const [{ rowMarches, exhaustiveRowMarches, gap }] = studies
  return { rowMarches, exhaustiveRowMarches, gap, studies }
}

function compare(name: string, steps: number) {
  console.error(`  ${name}`)
  const parsed = parseStudy(
    JSON.parse(readFileSync(new URL(`../../studies/${name}.json`, import.meta.url), 'utf8')),
  )
  if (!parsed.ok) throw new Error(`${name}: ${JSON.stringify(parsed.faults)}`)
  const optimiser = createOptimiser(parsed.study)
  const { leaders, spent } = runSearch(optimiser.problem, optimiser.begin())
  const least = leaders[0].objective
  const grid = everyStep(parsed.study, steps)
  const evolved = differentialEvolution(parsed.study)
  return {
    study: name,
    combinations: optimiser.space.combinations,
    steps: optimiser.space.axes.map(() => steps),
    evaluations: spent.evaluations,
    rowMarches: spent.rowMarches,
    exhaustiveEvaluations: grid.evaluations,
    exhaustiveRowMarches: grid.rowMarches,
    /** The optimum over the least of the grid, less 1: at or under 0 where the grid has nothing better. */
    gap: least / grid.least - 1,
    differentialEvolution: { ...evolved, gap: evolved.least / least - 1 },
  }
}

const meets = (trial: Trial | null): trial is Trial =>
  trial !== null && Number.isFinite(trial.objective) && trial.excess.every((over) => over <= 0)

function everyStep(study: Study, steps: number) {
  const problem = new StudyProblem(study)
  let places: number[][] = [[]]
  for (const { low, high } of problem.axes)
    places = places.flatMap((x) =>
      Array.from({ length: steps }, (_, k) => [
        ...x,
        k === steps - 1 ? high : low * (high / low) ** (k / (steps - 1)),
      ]),
    )
  let least = Number.POSITIVE_INFINITY
  for (let k = 0; k < problem.combinations; k++) {
    const { trial } = problem.open(k)
    for (const x of places) {
      const found = trial(x)
      if (meets(found)) least = Math.min(least, found.objective)
    }
  }
  return { least, ...problem.spent() }
}

const GENERATIONS = 150
const WEIGHT = 0.6
const CROSSOVER = 0.9

/**
 * R. Storn, K. Price, "Differential evolution", J. Global Optim. 11 (1997) 341-359, rand/1/bin, whole numbers and choices by
 * rounding down, the less infeasible of two before the better (K. Deb, Comput. Methods Appl. Mech. Eng. 186 (2000) 311-338).
 */
function differentialEvolution(study: Study) {
  const problem = new StudyProblem(study)
  const { discrete, axes } = problem.space
  const n = discrete.length + axes.length
  const population = 10 * n
  let drawn = 0
  const random = () => uniform(1, 1, drawn++)
  const judge = (u: readonly number[]): [number, number] => {
    const digits = discrete.map(({ values }, j) =>
      Math.min(values.length - 1, Math.floor(u[j] * values.length)),
    )
    const x = axes.map(({ low, high }, j) => low * (high / low) ** u[discrete.length + j])
    const trial = problem.open(combinationOf(problem.space, digits)).trial(x)
    if (trial === null || !Number.isFinite(trial.objective))
      return [Number.POSITIVE_INFINITY, Number.POSITIVE_INFINITY]
    return [Math.max(0, ...trial.excess), trial.objective]
  }
  const noWorse = (a: [number, number], b: [number, number]) => a[0] < b[0] || (a[0] === b[0] && a[1] <= b[1])
  const members = Array.from({ length: population }, () => {
    const u = Array.from({ length: n }, random)
    return { u, value: judge(u) }
  })
  const other = () => members[Math.floor(random() * population)].u
  for (let generation = 0; generation < GENERATIONS; generation++)
    for (let i = 0; i < population; i++) {
      const [a, b, c] = [other(), other(), other()]
      const forced = Math.floor(random() * n)
      const u = members[i].u.map((kept, j) =>
        j === forced || random() < CROSSOVER ? Math.min(1, Math.max(0, a[j] + WEIGHT * (b[j] - c[j]))) : kept,
      )
      const value = judge(u)
      if (noWorse(value, members[i].value)) members[i] = { u, value }
    }
  const least = Math.min(...members.filter(({ value }) => value[0] === 0).map(({ value }) => value[1]))
  return { least, ...problem.spent() }
}
