// How long points are kept: a month of them leaves with its partition, in one statement.
import { and, eq, gte, inArray, isNull, lt, sql } from 'drizzle-orm'
import { z } from 'zod'
import { db } from '#app/db.server.ts'
import { AppError } from '#app/http/errors.ts'
import { type Acting, recordAct, SERVER } from '#app/modules/audit/audit.server.ts'
import { appSetting, run } from '#drizzle/schema/index.ts'

/** The setting that an administrator gives: whole months that points are kept; absent: for ever. */
export const RETENTION_SETTING = 'points.keptMonths'
const keptMonthsShape = z.int().min(1).max(1200)

/** Months that points are kept; null: for ever. */
export async function keptMonths(): Promise<number | null> {
  const [setting] = await db.select().from(appSetting).where(eq(appSetting.key, RETENTION_SETTING))
  return keptMonthsShape.safeParse(setting?.value).data ?? null
}

/** Sets for how many months points are kept; empty text: for ever. */
export async function keepMonths(typed: string, acting: Acting): Promise<void> {
  const value = typed.trim() === '' ? null : Number(typed)
  if (value !== null && !keptMonthsShape.safeParse(value).success)
    throw new AppError(
      'invalid',
      'Months: give a whole number from 1 to 1200, or nothing to keep points for ever.',
    )
  await db.transaction(async (tx) => {
    const before = await keptMonths()
    if (value === null) await tx.delete(appSetting).where(eq(appSetting.key, RETENTION_SETTING))
    else
      await tx
        .insert(appSetting)
        .values({ key: RETENTION_SETTING, value })
        .onConflictDoUpdate({ target: appSetting.key, set: { value, changedAt: sql`now()` } })
    await recordAct(tx, acting, {
      act: RETENTION_SETTING,
      subject: 'setting',
      subjectId: RETENTION_SETTING,
      projectId: null,
      before: { months: before },
      after: { months: value },
    })
  })
}

/** Drops the months of points that the policy no longer keeps; answers how many. A month with an open run stays. */
export async function dropOldPoints(): Promise<number> {
  const months = await keptMonths()
  if (months === null) return 0
  const { rows } = await db.execute<{ name: string; month: string }>(sql`
    select name, month::text from (
      select relid::regclass::text as name, to_date(right(relid::regclass::text, 7), 'YYYY_MM') as month
      from pg_partition_tree('point_column') where isleaf and relid::regclass::text ~ '_\\d{4}_\\d{2}$') months
    where month < date_trunc('month', now() at time zone 'utc') - make_interval(months => ${months})
    order by month`)
  let dropped = 0
  for (const { name, month } of rows) if (await dropMonth(name, month)) dropped++
  return dropped
}

async function dropMonth(partition: string, month: string): Promise<boolean> {
  return db.transaction(async (tx) => {
    const ofMonth = and(
      gte(run.plannedOn, month),
      lt(run.plannedOn, sql`(${month}::date + interval '1 month')::date`),
    )
    const open = await tx
      .select({ id: run.id })
      .from(run)
      .where(and(ofMonth, inArray(run.state, ['queued', 'running'])))
      .limit(1)
    if (open.length > 0) return false
    // Whoever reads the column waits a moment rather than being cut off; a busy table is tried again later.
    await tx.execute(sql`set local lock_timeout = '2s'`)
    await tx.execute(sql`drop table ${sql.identifier(partition)}`)
    const runs = await tx
      .update(run)
      .set({ pointsDroppedAt: sql`now()` })
      .where(and(ofMonth, isNull(run.pointsDroppedAt)))
      .returning({ id: run.id })
    await recordAct(tx, SERVER, {
      act: 'points.drop',
      subject: 'month',
      subjectId: month,
      projectId: null,
      after: { runs: runs.length },
    })
    return true
  })
}
