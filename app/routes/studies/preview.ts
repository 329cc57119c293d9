// POST /studies/:studyId/preview: what a definition amounts to before it is kept.
import { previewDefinition } from '#app/components/define/preview.ts'
import { readJson } from '#app/routes/api/read-json.ts'
import type { Route } from './+types/preview'

export async function action({ request }: Route.ActionArgs) {
  return Response.json(previewDefinition(await readJson(request)))
}
