// The parts of an analysis that a thread of the pool computes. All of it is plain data, in and out.

import type { Case } from '#engine/case.ts'
import { type Certificate, certify, type Swept } from '#engine/optimise/certificate.ts'
import { explainInfeasible, type Infeasibility } from '#engine/optimise/feasibility.ts'
import {
  type FrontAxes,
  type FrontEnds,
  type FrontPoint,
  frontEnds,
  frontPointAt,
} from '#engine/optimise/front.ts'
import { createOptimiser, type Optimiser } from '#engine/optimise/optimise.ts'
import type { SearchState, Task, TaskResult } from '#engine/optimise/search.ts'
import { type Why, whyOptimum } from '#engine/optimise/why.ts'
import type { Study } from '#engine/sweep/study.ts'
import { type Band, type BandOptions, bandOf } from '#engine/uncertainty/bands.ts'
import { type RobustCandidate, type RobustOptions, robustCandidate } from '#engine/uncertainty/robust.ts'

/** What each part is asked and what it answers. */
export type Parts = {
  search: { ask: { among: number[] | null; tasks: Task[] }; answer: TaskResult[] }
  certificate: { ask: { state: SearchState; swept?: Swept }; answer: Certificate }
  why: { ask: { state: SearchState }; answer: Why }
  infeasible: { ask: object; answer: Infeasibility }
  frontEnds: { ask: { axes: FrontAxes }; answer: FrontEnds | null }
  frontPoint: { ask: { axes: FrontAxes; bound: number }; answer: FrontPoint | null }
  robust: { ask: { combination: number; options: RobustOptions }; answer: RobustCandidate | null }
  band: { ask: { case: Case; options: BandOptions }; answer: Band | null }
}
export type Part = keyof Parts

export type PartAsked = { [part in Part]: { part: part; study: string } & Parts[part]['ask'] }[Part]

let kept: { study: string; optimiser: Optimiser } | null = null

/** The optimiser of a study, kept between the parts of one analysis. */
function optimiserOf(study: string): Optimiser {
  if (kept?.study !== study) kept = { study, optimiser: createOptimiser(JSON.parse(study) as Study) }
  return kept.optimiser
}

export function computePart(asked: PartAsked): Parts[Part]['answer'] {
  switch (asked.part) {
    case 'search': {
      const optimiser = optimiserOf(asked.study)
      return asked.tasks.map((task) => optimiser.run(asked, task))
    }
    case 'certificate':
      return certify(optimiserOf(asked.study), asked.state, asked.swept)
    case 'why':
      return whyOptimum(optimiserOf(asked.study), asked.state)
    case 'infeasible':
      return explainInfeasible(JSON.parse(asked.study) as Study)
    case 'frontEnds':
      return frontEnds(JSON.parse(asked.study) as Study, asked.axes)
    case 'frontPoint':
      return frontPointAt(JSON.parse(asked.study) as Study, asked.axes, asked.bound)
    case 'robust':
      return robustCandidate(optimiserOf(asked.study), asked.combination, asked.options)
    case 'band':
      return bandOf(asked.case, asked.options)
  }
}
