// Reads stored columns out of PostgreSQL in its binary form: several times faster than its text form, and exact.
import { to as copyTo } from 'pg-copy-streams'
import { pool } from '#app/db.server.ts'
import type { Run } from '#drizzle/schema/run.ts'
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'

const KNOWN_COLUMNS = new Set(KEY_RESULTS.map(({ column }) => column))
const UUID = /^[0-9a-f-]{36}$/
const DATE = /^\d{4}-\d{2}-\d{2}$/

type Stored = Pick<Run, 'id' | 'plannedOn' | 'points' | 'chunkPoints'>

/** A whole column in point order; NaN where a point is not stored or has no such value. */
export async function readColumn(run: Stored, column: string): Promise<Float64Array> {
  const values = new Float64Array(run.points).fill(Number.NaN)
  await readChunks(run, column, null, values)
  return values
}

/** Reads chunks of a column (all when `chunks` is null) into their places in `values`. */
export async function readChunks(
  run: Stored,
  column: string,
  chunks: readonly number[] | null,
  values: Float64Array,
): Promise<void> {
  if (!KNOWN_COLUMNS.has(column)) throw new RangeError(`no key result is stored as ${column}`)
  if (chunks && !chunks.every(Number.isInteger)) throw new RangeError('not a list of chunks')
  const which = chunks ? `and chunk = any('{${chunks.join(',')}}')` : ''
  await copy(run, 'chunk', `"column" = '${column}' ${which}`, (chunk, array) =>
    decodeFloat8Array(array, values, chunk * run.chunkPoints),
  )
}

/** Reads all key results of chunks that follow each other, column by column as `evaluateRange` writes them. */
export async function readTable(
  run: Stored,
  fromChunk: number,
  toChunk: number,
  first: number,
  count: number,
): Promise<Float64Array> {
  if (![fromChunk, toChunk].every(Number.isInteger)) throw new RangeError('not a range of chunks')
  const table = new Float64Array(KEY_RESULTS.length * count).fill(Number.NaN)
  const columns = KEY_RESULTS.map(({ column }) => `'${column}'`).join(',')
  // Which column and which chunk an array is of, in one number.
  const place = `(array_position(array[${columns}], "column") - 1) * ${CHUNKS_MAX} + chunk`
  await copy(run, place, `chunk between ${fromChunk} and ${toChunk}`, (at, array) => {
    const column = Math.floor(at / CHUNKS_MAX)
    decodeFloat8Array(array, table, column * count + (at % CHUNKS_MAX) * run.chunkPoints - first)
  })
  return table
}

/** No run has as many chunks. */
const CHUNKS_MAX = 10_000_000

/** Streams arrays of a run out of the database, each with the number that `place` makes of its row. */
async function copy(
  run: Stored,
  place: string,
  which: string,
  each: (place: number, array: DataView) => void,
): Promise<void> {
  // COPY takes no parameters: whoever calls checks what goes into its text.
  if (!UUID.test(run.id) || !DATE.test(run.plannedOn)) throw new RangeError('not a run')
  const client = await pool.connect()
  let broken: Error | undefined
  try {
    const stream = client.query(
      copyTo(
        `copy (select (${place})::int, vals from point_column
          where run_id = '${run.id}' and planned_on = '${run.plannedOn}' and ${which}) to stdout (format binary)`,
      ),
    )
    const parts: Buffer[] = []
    for await (const part of stream) parts.push(part as Buffer)
    decode(Buffer.concat(parts), each)
  } catch (error) {
    broken = error as Error
    throw error
  } finally {
    client.release(broken)
  }
}

const SIGNATURE_BYTES = 11

/** Walks the rows (int4, float8[]) of PostgreSQL's binary COPY format. */
function decode(bytes: Buffer, each: (place: number, array: DataView) => void): void {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength)
  let at = SIGNATURE_BYTES + 4
  at += 4 + view.getInt32(at)
  while (view.getInt16(at) !== -1) {
    const place = view.getInt32(at + 6)
    const length = view.getInt32(at + 10)
    each(place, new DataView(bytes.buffer, bytes.byteOffset + at + 14, length))
    at += 14 + length
  }
}

/** A one-dimensional float8[] without nulls: five int4 of head, then each value behind its length. */
function decodeFloat8Array(view: DataView, values: Float64Array, first: number): void {
  if (view.getInt32(0) === 0) return
  const count = view.getInt32(12)
  for (let i = 0, at = 24; i < count; i++, at += 12) values[first + i] = view.getFloat64(at)
}
