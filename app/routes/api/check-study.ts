// POST /api/v1/studies/check: whether a study file runs, how many points it has, and what there is to say about it.
import { planSweep } from '#engine/sweep/plan.ts'
import { parseStudy } from '#engine/sweep/study.ts'
import type { Route } from './+types/check-study'
import { invalid } from './invalid.ts'
import { readJson } from './read-json.ts'

export async function action({ request }: Route.ActionArgs) {
  const parsed = parseStudy(await readJson(request))
  if (!parsed.ok) return invalid('The study', parsed.faults)
  const { points, variables } = planSweep(parsed.study)
  return Response.json({
    points,
    variables: variables.map(({ path, label, values }) => ({ path, label, values: values.length })),
    notes: parsed.notes,
  })
}
