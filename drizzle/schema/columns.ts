// Column helpers shared by every table.
import { sql } from 'drizzle-orm'
import { customType, timestamp, uuid } from 'drizzle-orm/pg-core'

export const id = () => uuid('id').primaryKey().default(sql`gen_random_uuid()`)
export const moment = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' })

const FLOAT8_OID = 701

/** PostgreSQL's binary form of a one-dimensional float8[] without nulls; node-postgres sends a Buffer unchanged. */
export function encodeFloat8Array(values: Float64Array): Buffer {
  const bytes = Buffer.allocUnsafe(values.length === 0 ? 12 : 20 + values.length * 12)
  // A view writes several times faster than the buffer's own methods.
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength)
  view.setInt32(0, values.length === 0 ? 0 : 1)
  view.setInt32(4, 0)
  view.setInt32(8, FLOAT8_OID)
  if (values.length === 0) return bytes
  view.setInt32(12, values.length)
  view.setInt32(16, 1)
  for (let i = 0, at = 20; i < values.length; i++, at += 12) {
    view.setInt32(at, 8)
    view.setFloat64(at + 4, values[i])
  }
  return bytes
}

/** float8[] written in binary. Reading goes through the driver's text form, which round-trips every double. */
export const float8Array = customType<{ data: Float64Array; driverData: Buffer | number[] }>({
  dataType: () => 'double precision[]',
  toDriver: (values) => encodeFloat8Array(values),
  fromDriver: (values) => Float64Array.from(values as number[]),
})
