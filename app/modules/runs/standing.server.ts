// Where the latest runs of many studies stand, for lists: one question for all of them.
import { inArray, sql } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { run, runTally, studyRevision } from '#drizzle/schema/index.ts'
import type { Objective } from '#engine/sweep/objective.ts'

export type RunStanding = { done: number; objective: Objective; best: number | null }

export async function runStandings(runIds: readonly string[]): Promise<Map<string, RunStanding>> {
  if (runIds.length === 0) return new Map()
  const rows = await db
    .select({
      id: run.id,
      objective: sql<Objective>`coalesce(${studyRevision.definition}->>'objective', 'outsideArea')`,
      done: sql<number>`coalesce(${runTally.points}, 0)`,
      best: runTally.bestObjective,
    })
    .from(run)
    .innerJoin(studyRevision, sql`${studyRevision.id} = ${run.revisionId}`)
    .leftJoin(runTally, sql`${runTally.runId} = ${run.id}`)
    .where(inArray(run.id, [...runIds]))
  return new Map(rows.map(({ id, ...standing }) => [id, standing]))
}
