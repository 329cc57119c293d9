// What the optimum's page shows, with the names that ids go by.

import { keyResultOf, limitStandings } from '#app/modules/explore/limits.ts'
import { caseNames, choiceName } from '#app/modules/explore/names.server.ts'
import { planOfRevision } from '#app/modules/runs/run-plan.server.ts'
import { latestRevision } from '#app/modules/studies/studies.server.ts'
import type { OptimumInput } from '#engine/optimise/optimise.ts'
import { findSweepPath } from '#engine/sweep/paths.ts'
import type { SweptValue } from '#engine/sweep/study.ts'
import type { Dimension } from '#engine/units.ts'
import { isOpen, latestAnalysis } from './analyses.server.ts'

export type NamedValue = { text: string } | { value: number; dimension: Dimension }

/** A swept value as it is read: a choice by its name, a number with its dimension. */
export const named = (path: string, value: SweptValue): NamedValue =>
  typeof value === 'string'
    ? { text: choiceName(path, value) }
    : { value, dimension: findSweepPath(path)?.dimension ?? 'none' }

const inputsNamed = (inputs: readonly OptimumInput[]) =>
  inputs.map(({ path, label, value, atEnd }) => ({ path, label, atEnd, shown: named(path, value) }))

export async function optimumPage(studyId: string) {
  const [revision, optimum, front] = await Promise.all([
    latestRevision(studyId),
    latestAnalysis(studyId, 'optimum'),
    latestAnalysis(studyId, 'front'),
  ])
  if (!revision) return { kind: 'undefined' as const }
  const { study } = await planOfRevision(revision.id)
  const about = { revision: revision.number, objective: study.objective, limits: study.limits }
  const base = {
    kind: 'study' as const,
    ...about,
    analysis: optimum && {
      id: optimum.id,
      state: optimum.state,
      open: isOpen(optimum),
      revision: optimum.revision,
      progress: optimum.progress,
      fault: optimum.fault,
      engineVersion: optimum.engineVersion,
      askedBy: optimum.askedBy,
      endedAt: optimum.endedAt,
    },
    front: front && {
      id: front.id,
      state: front.state,
      open: isOpen(front),
      revision: front.revision,
      progress: front.progress,
      fault: front.fault,
      points: (front.result?.front ?? []).map(({ x, y, inputs, band }) => ({
        x,
        y,
        inputs: inputsNamed(inputs),
        band: band && { quantity: band.quantity, p10: band.p10, p90: band.p90 },
      })),
    },
  }
  const { result } = optimum ?? {}
  if (!result) return { ...base, found: null, infeasibility: null }
  if (!result.found) return { ...base, found: null, infeasibility: result.infeasibility }
  const { optimum: best, certificate, why, band, robust } = result
  return {
    ...base,
    infeasibility: null,
    found: {
      objective: best.objective,
      case: best.case,
      result: best.result,
      names: caseNames(best.case),
      inputs: inputsNamed(best.inputs),
      standings: limitStandings(study.limits, (id) => keyResultOf(best.result, id)),
      binding: best.binding,
      rerated: best.rerated,
      searched: best.searched,
      trace: best.trace.map(({ objective, evaluations }) => ({ objective, evaluations })),
      certificate,
      band,
      robust: robust && {
        objective: robust.objective,
        length: robust.length,
        margin: robust.margin,
        statement: robust.statement,
        inputs: inputsNamed(robust.inputs),
      },
      worth: why.worth,
      neighbours: why.neighbours.map(({ path, label, from, to, best: near, breaks, reason }) => ({
        path,
        label,
        from: named(path, from),
        to: named(path, to),
        objective: near?.objective ?? null,
        change: near?.change ?? null,
        breaks: breaks.map(({ id, excess }) => ({ id, excess })),
        reason,
      })),
      best: why.best.map(({ path, label, value, best: with_, isOptimum }) => ({
        path,
        label,
        value: named(path, value),
        isOptimum,
        objective: with_?.objective ?? null,
        change: with_?.change ?? null,
        inputs: with_ ? inputsNamed(with_.inputs).filter((input) => input.path !== path) : [],
      })),
    },
  }
}

export type OptimumPage = Extract<Awaited<ReturnType<typeof optimumPage>>, { kind: 'study' }>
