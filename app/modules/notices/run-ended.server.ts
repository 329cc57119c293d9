// Tells whoever started a run that it has ended.
import { eq } from 'drizzle-orm'
import type { Queryable } from '#app/db.server.ts'
import { run, study } from '#drizzle/schema/index.ts'
import { tell } from './notices.server.ts'

export async function tellRunEnded(tx: Queryable, runId: string): Promise<void> {
  const [ended] = await tx
    .select({
      state: run.state,
      points: run.points,
      fault: run.fault,
      requestedBy: run.requestedBy,
      startedAt: run.startedAt,
      endedAt: run.endedAt,
      studyId: study.id,
      name: study.name,
      projectId: study.projectId,
    })
    .from(run)
    .innerJoin(study, eq(study.id, run.studyId))
    .where(eq(run.id, runId))
  if (!ended?.requestedBy) return
  const seconds = ended.startedAt && ended.endedAt ? (+ended.endedAt - +ended.startedAt) / 1000 : 0
  const failed = ended.state === 'failed'
  await tell(
    tx,
    {
      kind: 'runEnded',
      key: `run/${runId}/${ended.state}/${ended.endedAt?.toISOString()}`,
      projectId: ended.projectId,
      sentence: failed
        ? `The run of “${ended.name}” failed`
        : `The run of “${ended.name}” has finished: ${ended.points} points`,
      href: `/studies/${ended.studyId}/${failed ? 'run' : 'explore'}?run=${runId}`,
      details: [
        failed
          ? (ended.fault ?? '')
          : `It took ${seconds < 90 ? `${Math.round(seconds)} s` : `${Math.round(seconds / 60)} min`}.`,
      ],
      minutes: seconds / 60,
    },
    [ended.requestedBy],
  )
}
