// Columns of stored results kept in memory: chunks never change, so what was read once is read for good.
import { eq, sql } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { type Run, runChunk } from '#drizzle/schema/index.ts'
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { readChunks } from './column-copy.server.ts'

/** A million points are 8 MB a column. */
const KEPT_BYTES = 256 * 1024 * 1024

type Entry = { values: Float64Array; chunks: Set<number>; reading: Promise<void> }

const entries = new Map<string, Entry>()
let keptBytes = 0

export type StoredPoints = {
  count: number
  chunks: readonly number[]
  /** 1 where a point is stored; null when all are. */
  mask: Uint8Array | null
}

/** What is stored of a run at this moment. */
export async function storedPoints(run: Run): Promise<StoredPoints> {
  const chunks = await db
    .select({ chunk: runChunk.chunk, first: runChunk.firstPoint, points: runChunk.points })
    .from(runChunk)
    .where(eq(runChunk.runId, run.id))
  const count = chunks.reduce((sum, { points }) => sum + points, 0)
  let mask: Uint8Array | null = null
  if (count < run.points) {
    mask = new Uint8Array(run.points)
    for (const { first, points } of chunks) mask.fill(1, first, first + points)
  }
  return { count, chunks: chunks.map(({ chunk }) => chunk), mask }
}

/** A column with at least the given chunks in it; other places may be NaN. Not to be written to. */
export async function columnOf(run: Run, column: string, chunks: readonly number[]): Promise<Float64Array> {
  const entry = entryOf(`${run.id} ${column}`, () => new Float64Array(run.points).fill(Number.NaN))
  const { values, chunks: known } = entry
  const read = async () => {
    const missing = chunks.filter((chunk) => !known.has(chunk))
    if (missing.length === 0) return
    await readChunks(run, column, known.size === 0 ? null : missing, values)
    for (const chunk of missing) known.add(chunk)
  }
  // One reader a column at a time; a failed one leaves its chunks to the next.
  entry.reading = entry.reading.then(read, read)
  await entry.reading
  return values
}

/** A column that is computed, kept among the others. Not to be written to. */
export const computedColumn = (key: string, compute: () => Float64Array): Float64Array =>
  entryOf(key, compute).values

function entryOf(key: string, begin: () => Float64Array): Entry {
  let entry = entries.get(key)
  if (!entry) {
    entry = { values: begin(), chunks: new Set(), reading: Promise.resolve() }
    keptBytes += entry.values.byteLength
  }
  // Used last, leaves last.
  entries.delete(key)
  entries.set(key, entry)
  evict(key)
  return entry
}

/**
 * Every key result of some points, in storage order; null for a point that is not stored. Columns in memory are used;
 * of the others only these points are read, not the whole column.
 */
export async function valuesAt(run: Run, points: ArrayLike<number>): Promise<(Float64Array | null)[]> {
  const wanted = Array.from(points)
  const chunkOf = (point: number) => Math.floor(point / run.chunkPoints)
  const needed = new Set(wanted.map(chunkOf))
  const found = wanted.map(() => new Float64Array(KEY_RESULTS.length).fill(Number.NaN))
  const missing = new Map<string, number>()
  KEY_RESULTS.forEach(({ column }, c) => {
    const entry = entries.get(`${run.id} ${column}`)
    const known = entry && [...needed].every((chunk) => entry.chunks.has(chunk))
    if (known) for (const [k, point] of wanted.entries()) found[k][c] = entry.values[point]
    else missing.set(column, c)
  })
  if (wanted.length === 0 || missing.size === 0) return found
  const { rows } = await db.execute<{ k: number; column: string; value: number }>(sql`
    select p.k, pc."column", pc.vals[p.place] as value
    from unnest(
        ${sql.param(wanted.map((_, k) => k))}::int[],
        ${sql.param(wanted.map(chunkOf))}::int[],
        ${sql.param(wanted.map((point) => (point % run.chunkPoints) + 1))}::int[]
      ) as p(k, chunk, place)
    join point_column pc on pc.planned_on = ${run.plannedOn} and pc.run_id = ${run.id} and pc.chunk = p.chunk
      and pc."column" = any(${sql.param([...missing.keys()])}::text[])`)
  const stored = new Set<number>()
  for (const { k, column, value } of rows) {
    found[k][missing.get(column) as number] = Number(value)
    stored.add(k)
  }
  return found.map((values, k) => (stored.has(k) ? values : null))
}

function evict(justUsed: string): void {
  for (const [key, { values }] of entries) {
    if (keptBytes <= KEPT_BYTES || key === justUsed) return
    entries.delete(key)
    keptBytes -= values.byteLength
  }
}
