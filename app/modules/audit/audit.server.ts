// The audit trail: who did what, from where, what it was before and after. Written in the act's own transaction.
import { and, desc, eq, gte, ilike, lt, sql } from 'drizzle-orm'
import { db, type Queryable } from '#app/db.server.ts'
import { csvCell } from '#app/modules/exports/csv.ts'
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

export type AuditQuery = {
  projectId?: string
  person?: string
  act?: string
  /** Days as YYYY-MM-DD, both included. */
  from?: string
  to?: string
  /** Entries before this one: the next page. */
  before?: number
}

export const AUDIT_PAGE = 100

/** Entries of the trail, the latest first; one more than a page where there are more. */
export async function listAudit(query: AuditQuery, limit = AUDIT_PAGE + 1) {
  const { projectId, person, act, from, to, before } = query
  const rows = await db
    .select()
    .from(auditEntry)
    .where(
      and(
        projectId === undefined ? undefined : eq(auditEntry.projectId, projectId),
        person ? ilike(auditEntry.personName, `%${escapeLike(person)}%`) : undefined,
        act ? ilike(auditEntry.act, `%${escapeLike(act)}%`) : undefined,
        from ? gte(auditEntry.at, sql`${from}::date`) : undefined,
        to ? lt(auditEntry.at, sql`${to}::date + 1`) : undefined,
        before === undefined ? undefined : lt(auditEntry.id, before),
      ),
    )
    .orderBy(desc(auditEntry.id))
    .limit(limit)
  return rows.map(({ at, ...row }) => ({ ...row, at: at.toISOString() }))
}

export type AuditRow = Awaited<ReturnType<typeof listAudit>>[number]

const escapeLike = (text: string) => text.replace(/[\\%_]/g, '\\$&')

/** A day of the calendar, or nothing. */
function day(text: string | null): string | undefined {
  const at = text && /^\d{4}-\d{2}-\d{2}$/.test(text) ? new Date(`${text}T00:00:00Z`) : null
  return at && !Number.isNaN(+at) && at.toISOString().startsWith(text as string)
    ? (text as string)
    : undefined
}

/** The trail's filters as a page's query carries them; what does not read as one is left out. */
export function readAuditQuery(search: URLSearchParams): AuditQuery {
  const text = (name: string) => search.get(name)?.replace(/\0/g, '').trim().slice(0, 100) || undefined
  const before = search.get('before')
  return {
    person: text('person'),
    act: text('act'),
    from: day(search.get('from')),
    to: day(search.get('to')),
    before: before && /^\d{1,15}$/.test(before) ? Number(before) : undefined,
  }
}

const SLICE = 1000
const HEADS = [
  'id',
  'at',
  'person',
  'address',
  'act',
  'subject',
  'subject_id',
  'project_id',
  'before',
  'after',
]

/** The entries as comma-separated lines, the latest first. */
export async function* auditCsv(query: AuditQuery): AsyncGenerator<string> {
  const line = (cells: (string | number | null)[]) => `${cells.map(csvCell).join(',')}\r\n`
  yield line(HEADS)
  for (let { before } = query; ; ) {
    const rows = await listAudit({ ...query, before }, SLICE)
    for (const row of rows)
      yield line([
        row.id,
        row.at,
        row.personName,
        row.address,
        row.act,
        row.subject,
        row.subjectId,
        row.projectId,
        row.before && JSON.stringify(row.before),
        row.after && JSON.stringify(row.after),
      ])
    if (rows.length < SLICE) return
    before = rows[rows.length - 1].id
  }
}
