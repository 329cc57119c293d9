// POST /api/v1/evaluate: one case in, its result out; the same as the command line gives.
import { parseCase } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import type { Route } from './+types/evaluate'
import { invalid } from './invalid.ts'
import { readJson } from './read-json.ts'

export async function action({ request }: Route.ActionArgs) {
  const parsed = parseCase(await readJson(request))
  return parsed.ok ? Response.json(evaluate(parsed.case)) : invalid('The case', parsed.faults)
}
