// GET /runs/:runId/points: one page of a run's points, sorted and filtered.
import { readPageQuery } from '#app/modules/points/point-query.ts'
import { pageOfPoints } from '#app/modules/points/points.server.ts'
import type { Route } from './+types/points'
import { asked } from './query.ts'

export async function loader({ params, request }: Route.LoaderArgs) {
  const query = asked(readPageQuery(new URL(request.url).searchParams))
  return Response.json(await pageOfPoints(params.runId, query), { headers: { 'Cache-Control': 'no-store' } })
}
