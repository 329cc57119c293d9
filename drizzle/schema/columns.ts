// Column helpers shared by every table.
import { sql } from 'drizzle-orm'
import { customType, timestamp, uuid } from 'drizzle-orm/pg-core'

export const id = () => uuid('id').primaryKey().default(sql`gen_random_uuid()`)
export const moment = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' })

const FLOAT8_OID = 701

/** PostgreSQL's binary form of a one-dimensional float8[] without nulls; node-postgres sends a Buffer unchanged. */
export function encodeFloat8Array(values: Float64Array): Buffer {
  const bytes = Buffer.allocUnsafe(20 + values.length * 12)
  bytes.writeInt32BE(values.length === 0 ? 0 : 1, 0)
  bytes.writeInt32BE(0, 4)
  bytes.writeInt32BE(FLOAT8_OID, 8)
  if (values.length === 0) return bytes.subarray(0, 12)
  bytes.writeInt32BE(values.length, 12)
  bytes.writeInt32BE(1, 16)
  let at = 20
  for (let i = 0; i < values.length; i++) {
    bytes.writeInt32BE(8, at)
    bytes.writeDoubleBE(values[i], at + 4)
    at += 12
  }
  return bytes
}

/** float8[] written in binary. Reading goes through the driver's text form, which round-trips every double. */
export const float8Array = customType<{ data: Float64Array; driverData: Buffer | number[] }>({
  dataType: () => 'double precision[]',
  toDriver: (values) => encodeFloat8Array(values),
  fromDriver: (values) => Float64Array.from(values as number[]),
})
