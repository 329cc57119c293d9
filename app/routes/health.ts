// For load balancers and monitoring: whether this process and its database answer.
import { sql } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { ENGINE_VERSION } from '#engine/version.ts'

export async function loader() {
  try {
    await db.execute(sql`select 1`)
    return Response.json({ status: 'ok', database: 'ok', engine: ENGINE_VERSION })
  } catch {
    return Response.json(
      { status: 'unavailable', database: 'unreachable', engine: ENGINE_VERSION },
      { status: 503 },
    )
  }
}
