// The audit trail: who did what, from where, what it was before and after. Written in the act's own transaction.
import type { Queryable } from '#app/db.server.ts'
import { auditEntry } from '#drizzle/schema/index.ts'

/** Whoever acts: a signed-in person, or the server itself (personId null). */
export type Acting = { personId: string | null; name: string; address: string }

export const SERVER: Acting = { personId: null, name: 'Rowfall', address: '' }

export type Act = {
  /** "study.rename": the noun, then what was done to it. */
  act: string
  subject: string
  subjectId: string
  projectId: string | null
  before?: Record<string, unknown>
  after?: Record<string, unknown>
}

export async function recordAct(tx: Queryable, acting: Acting, entry: Act): Promise<void> {
  await tx.insert(auditEntry).values({
    personId: acting.personId,
    personName: acting.name,
    address: acting.address,
    ...entry,
  })
}
