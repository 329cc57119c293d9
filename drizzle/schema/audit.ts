// The audit trail, and settings of the installation.
import { bigint, index, jsonb, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { moment } from './columns.ts'

/**
 * Append-only by trigger. No foreign keys: an entry outlives whatever it speaks of, and names the person as they
 * were called at the time.
 */
export const auditEntry = pgTable(
  'audit_entry',
  {
    id: bigint('id', { mode: 'number' }).primaryKey().generatedAlwaysAsIdentity(),
    at: moment('at').notNull().defaultNow(),
    personId: uuid('person_id'),
    personName: text('person_name').notNull(),
    // Remote address as the server saw it; empty for acts of the server itself.
    address: text('address').notNull().default(''),
    act: text('act').notNull(),
    subject: text('subject').notNull(),
    subjectId: text('subject_id').notNull(),
    projectId: uuid('project_id'),
    before: jsonb('before').$type<Record<string, unknown>>(),
    after: jsonb('after').$type<Record<string, unknown>>(),
  },
  (t) => [
    index('audit_entry_project').on(t.projectId, t.id),
    index('audit_entry_subject').on(t.subject, t.subjectId),
  ],
)

export const appSetting = pgTable('app_setting', {
  key: text('key').primaryKey(),
  value: jsonb('value').$type<unknown>().notNull(),
  changedAt: moment('changed_at').notNull().defaultNow(),
})

export type AuditEntry = typeof auditEntry.$inferSelect
