// GET /runs/:runId/points.csv: a run's points as a file, all of them or those that the query's filters let pass.
import { csvResponse } from '#app/modules/exports/exports.server.ts'
import { readPageQuery } from '#app/modules/points/point-query.ts'
import type { Route } from './+types/points-csv'
import { asked } from './query.ts'

export async function loader({ params, request }: Route.LoaderArgs) {
  const { filters } = asked(readPageQuery(new URL(request.url).searchParams))
  return csvResponse(params.runId, filters)
}
