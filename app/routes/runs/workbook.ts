// GET /runs/:runId/workbook.xlsx
import { workbookResponse } from '#app/modules/exports/exports.server.ts'
import type { Route } from './+types/workbook'

export async function loader({ params }: Route.LoaderArgs) {
  return workbookResponse(params.runId)
}
