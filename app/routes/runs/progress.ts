// GET /runs/:runId/progress: how far a run is, for polling.
import { runProgress } from '#app/modules/runs/progress.server.ts'
import type { Route } from './+types/progress'

export async function loader({ params }: Route.LoaderArgs) {
  return Response.json(await runProgress(params.runId), {
    // Asked every second and short: packing it would cost more than it saves.
    headers: { 'Cache-Control': 'no-store, no-transform' },
  })
}
