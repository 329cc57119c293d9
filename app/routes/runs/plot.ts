// GET /runs/:runId/plot: two columns of a run's points and a third for colour, thinned to what a plot can show.
import { readPlotQuery } from '#app/modules/points/point-query.ts'
import { plotColumns } from '#app/modules/points/points.server.ts'
import type { Route } from './+types/plot'
import { asked } from './query.ts'

export async function loader({ params, request }: Route.LoaderArgs) {
  const query = asked(readPlotQuery(new URL(request.url).searchParams))
  return Response.json(await plotColumns(params.runId, query), { headers: { 'Cache-Control': 'no-store' } })
}
