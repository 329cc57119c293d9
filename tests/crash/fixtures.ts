// A study to run, without the pages that people would make it with.
import { eq } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { startRun } from '#app/modules/runs/runs.server.ts'
import {
  person,
  pointColumn,
  project,
  type Run,
  run,
  runChunk,
  study,
  studyRevision,
} from '#drizzle/schema/index.ts'

/** R134a on water-cooled copper tubes; some cannot reach the duty, some miss the pressure-drop limit. */
export function definition(points: { velocities: number; inlets: number; rows?: number[] }) {
  const rows = points.rows ?? [8, 10, 12, 14]
  return {
    name: 'Crash bench',
    case: {
      fluid: 'r134a',
      saturationTemperature: 313.15,
      duty: 300_000,
      drive: {
        kind: 'coolant',
        coolant: 'water',
        inletTemperature: 302.15,
        velocity: 2,
        foulingResistance: 1e-4,
      },
      tube: {
        outsideDiameter: 0.01905,
        wallThickness: 0.00165,
        material: 'copper',
        surface: { kind: 'plain' },
      },
      bundle: { layout: 'triangular30', pitchRatio: 1.25, rows: 14, tubesPerRow: 17, passes: 2 },
    },
    sweep: {
      design: 'factorial',
      variables: [
        { path: 'bundle.rows', values: rows },
        { path: 'drive.inletTemperature', from: 298.15, to: 312.65, count: points.inlets },
        { path: 'drive.velocity', from: 1, to: 3, count: points.velocities },
      ],
    },
    objective: 'outsideArea',
    limits: { coolantPressureDrop: { max: 40_000 } },
  }
}

export const acting = { personId: null, name: 'Test', address: '' }

export type Planted = { projectId: string; studyId: string; revisionId: string }

let planted = 0

export async function plantStudy(given: Record<string, unknown>): Promise<Planted> {
  planted += 1
  const name = `Bench ${process.pid} ${planted}`
  const [owner] = await db
    .insert(person)
    .values({ name, email: `${planted}@example.com` })
    .returning()
  const [home] = await db.insert(project).values({ name, createdBy: owner.id }).returning()
  const [made] = await db.insert(study).values({ projectId: home.id, name, createdBy: owner.id }).returning()
  const [revision] = await db
    .insert(studyRevision)
    .values({ studyId: made.id, number: 1, definition: given, createdBy: owner.id })
    .returning()
  return { projectId: home.id, studyId: made.id, revisionId: revision.id }
}

export async function plantRun(given: Record<string, unknown>, chunkPoints?: number): Promise<Run> {
  const { studyId, revisionId } = await plantStudy(given)
  return startRun(studyId, revisionId, acting, { chunkPoints })
}

export async function until<T>(what: string, look: () => Promise<T | false | null | undefined>, ms = 60_000) {
  const end = Date.now() + ms
  while (Date.now() < end) {
    const seen = await look().catch(() => null)
    if (seen) return seen
    await new Promise((resolve) => setTimeout(resolve, 50))
  }
  throw new Error(`${what}: not within ${ms / 1000} s`)
}

export const ended = (runId: string, ms = 60_000): Promise<Run> =>
  until(
    'the run ends',
    async () => {
      const [seen] = await db.select().from(run).where(eq(run.id, runId))
      return ['done', 'failed', 'cancelled'].includes(seen.state) ? seen : null
    },
    ms,
  )

/** Each point stored once: chunks lie end to end, and every column has one array of the right length for each. */
export async function storedOnce(of: Run): Promise<boolean> {
  const chunks = await db.select().from(runChunk).where(eq(runChunk.runId, of.id)).orderBy(runChunk.chunk)
  let next = 0
  for (const chunk of chunks) {
    if (chunk.firstPoint !== next) return false
    next += chunk.points
  }
  if (next !== of.points) return false
  const columns = await db.select().from(pointColumn).where(eq(pointColumn.runId, of.id))
  const lengths = new Map(chunks.map(({ chunk, points }) => [chunk, points]))
  const names = new Set(columns.map(({ column }) => column))
  return (
    columns.length === chunks.length * names.size &&
    columns.every(({ chunk, vals }) => vals.length === lengths.get(chunk))
  )
}
