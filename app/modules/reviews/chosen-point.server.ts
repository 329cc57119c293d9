import { AppError } from '#app/http/errors.ts'
import { pointSheet, refinedBest } from '#app/modules/points/points.server.ts'

/** Case and full result of a point of a finished run, as stored with it where they are. */
export async function chosenPoint(runId: string, point: number | null) {
  if (point !== null) return pointSheet(runId, point)
  const refined = await refinedBest(runId)
  if (!refined)
    throw new AppError('invalid', 'Point: the run has no refined point; choose one of its points.')
  return refined
}
