// GET /runs/:runId/points.csv
import { csvResponse } from '#app/modules/exports/exports.server.ts'
import type { Route } from './+types/points-csv'

export async function loader({ params }: Route.LoaderArgs) {
  return csvResponse(params.runId)
}
