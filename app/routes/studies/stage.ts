// The bare address of a study leads to the stage it has reached.
import { redirect } from 'react-router'
import { latestRun } from '#app/modules/runs/runs.server.ts'
import type { Route } from './+types/stage'

export async function loader({ params }: Route.LoaderArgs) {
  const run = await latestRun(params.studyId)
  const stage = !run ? 'define' : run.state === 'done' || run.state === 'cancelled' ? 'explore' : 'run'
  return redirect(`/studies/${params.studyId}/${stage}`)
}
