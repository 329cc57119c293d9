// Studies, their append-only revisions, and the drafts people have open.
import { sql } from 'drizzle-orm'
import {
  boolean,
  check,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  uniqueIndex,
  uuid,
} from 'drizzle-orm/pg-core'
import { id, moment } from './columns.ts'
import { person } from './person.ts'
import { project } from './project.ts'

export const study = pgTable(
  'study',
  {
    id: id(),
    projectId: uuid('project_id')
      .notNull()
      .references(() => project.id),
    name: text('name').notNull(),
    // What the study began from, in words shown beside it: "example chiller-condenser", "copy of …", "file bundle.json".
    origin: text('origin').notNull().default(''),
    invented: boolean('invented').notNull().default(false),
    // Set for a seeded demo study: the shipped file it came from, so that seeding twice adds nothing.
    seedKey: text('seed_key'),
    createdBy: uuid('created_by').references(() => person.id),
    createdAt: moment('created_at').notNull().defaultNow(),
    // Latest act on the study itself: revision, rename, archive, restore. Orders the list.
    changedAt: moment('changed_at').notNull().defaultNow(),
    archivedAt: moment('archived_at'),
  },
  (t) => [
    index('study_project_changed').on(t.projectId, t.changedAt),
    uniqueIndex('study_seed_key').on(t.projectId, t.seedKey).where(sql`${t.seedKey} is not null`),
  ],
)

/** Triggers refuse UPDATE, DELETE and TRUNCATE: what a run was computed from can always be read again. */
export const studyRevision = pgTable(
  'study_revision',
  {
    id: id(),
    studyId: uuid('study_id')
      .notNull()
      .references(() => study.id),
    number: integer('number').notNull(),
    definition: jsonb('definition').$type<Record<string, unknown>>().notNull(),
    createdBy: uuid('created_by').references(() => person.id),
    createdAt: moment('created_at').notNull().defaultNow(),
  },
  (t) => [
    uniqueIndex('study_revision_number').on(t.studyId, t.number),
    check('study_revision_number_from_one', sql`${t.number} >= 1`),
  ],
)

/** What one person has typed and not yet kept as a revision; may be invalid, is stored as typed. */
export const studyDraft = pgTable(
  'study_draft',
  {
    studyId: uuid('study_id')
      .notNull()
      .references(() => study.id, { onDelete: 'cascade' }),
    personId: uuid('person_id')
      .notNull()
      .references(() => person.id, { onDelete: 'cascade' }),
    definition: jsonb('definition').$type<Record<string, unknown>>().notNull(),
    baseRevision: integer('base_revision').notNull(),
    // Counts saves; a tab that saves on top of a version it has not seen is told so instead of overwriting.
    version: integer('version').notNull().default(1),
    savedAt: moment('saved_at').notNull().defaultNow(),
  },
  (t) => [primaryKey({ columns: [t.studyId, t.personId] })],
)

export type Study = typeof study.$inferSelect
export type StudyRevision = typeof studyRevision.$inferSelect
export type StudyDraft = typeof studyDraft.$inferSelect
