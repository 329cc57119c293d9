// The demo's content, and the first run of its chiller study. DATABASE_URL must be set before this is imported.
import { desc, eq } from 'drizzle-orm'
import { db, pool } from '#app/db.server.ts'
import { SERVER } from '#app/modules/audit/audit.server.ts'
import { startRun } from '#app/modules/runs/runs.server.ts'
import { run } from '#drizzle/schema/index.ts'
import { seedDemo, seededStudy } from '#drizzle/seed/seed.ts'

/** Puts the demo people, projects and studies into the database; what is there already stays. */
export const seedDatabase = (): Promise<void> => seedDemo(db)

export const closeDatabase = (): Promise<void> => pool.end()

/**
 * Queues the shipped chiller study if it has never run, and says when it is done. A worker computes it; this only asks
 * and waits.
 */
export async function runShippedStudy(say: (line: string) => void, ending: () => boolean): Promise<void> {
  const seeded = await seededStudy(db, 'chiller-condenser')
  if (!seeded) return
  const latest = async () =>
    (
      await db.select().from(run).where(eq(run.studyId, seeded.studyId)).orderBy(desc(run.plannedAt)).limit(1)
    )[0]
  let current = await latest()
  if (!current) current = await startRun(seeded.studyId, seeded.revisionId, SERVER)
  else if (current.state !== 'queued' && current.state !== 'running') {
    say(`The chiller study under "Chiller line K4" has been run: ${current.points} points.`)
    return
  }
  say(`Running the shipped chiller study, ${current.points} points …`)
  while (!ending() && (current.state === 'queued' || current.state === 'running')) {
    await new Promise((resolve) => setTimeout(resolve, 500))
    if (ending()) return
    try {
      current = (await latest()) ?? current
    } catch (error) {
      // The database may be restarting; the run only waits for it.
      if (ending()) return
      console.error(`Waiting for the chiller study: ${error instanceof Error ? error.message : error}`)
    }
  }
  if (!ending())
    say(
      current.state === 'done'
        ? 'The chiller study is finished.'
        : `The chiller study ended as ${current.state}.`,
    )
}
