// A study's way to a decision: comments, reviews, what was accepted, and comparisons that people keep.
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
import { run } from './run.ts'
import { study, studyRevision } from './study.ts'

export const REVIEW_STATES = ['asked', 'accepted', 'returned', 'withdrawn'] as const
export type ReviewState = (typeof REVIEW_STATES)[number]

/** A finished run with one chosen point, put before the leads of its project. */
export const review = pgTable(
  'review',
  {
    id: id(),
    projectId: uuid('project_id')
      .notNull()
      .references(() => project.id),
    studyId: uuid('study_id')
      .notNull()
      .references(() => study.id),
    runId: uuid('run_id')
      .notNull()
      .references(() => run.id),
    // Null: the refined point.
    point: integer('point'),
    note: text('note').notNull().default(''),
    state: text('state', { enum: REVIEW_STATES }).notNull().default('asked'),
    askedBy: uuid('asked_by')
      .notNull()
      .references(() => person.id),
    askedAt: moment('asked_at').notNull().defaultNow(),
    answeredBy: uuid('answered_by').references(() => person.id),
    answeredAt: moment('answered_at'),
    reason: text('reason').notNull().default(''),
  },
  (t) => [
    index('review_project').on(t.projectId, t.askedAt),
    index('review_study').on(t.studyId, t.askedAt),
    uniqueIndex('review_open').on(t.studyId).where(sql`${t.state} = 'asked'`),
    check('review_state', sql`${t.state} in ('asked', 'accepted', 'returned', 'withdrawn')`),
    check('review_answered', sql`(${t.state} = 'asked') = (${t.answeredAt} is null)`),
  ],
)

/**
 * What was accepted, whole: append-only by trigger. It names people and the study as they were called, and keeps
 * inputs, results and methods as values, so that nothing that changes later changes it.
 */
export const acceptedRecord = pgTable(
  'accepted_record',
  {
    id: id(),
    // Counts within the project; what people call it by.
    number: integer('number').notNull(),
    projectId: uuid('project_id')
      .notNull()
      .references(() => project.id),
    studyId: uuid('study_id')
      .notNull()
      .references(() => study.id),
    revisionId: uuid('revision_id')
      .notNull()
      .references(() => studyRevision.id),
    runId: uuid('run_id')
      .notNull()
      .references(() => run.id),
    reviewId: uuid('review_id')
      .notNull()
      .references(() => review.id),
    content: jsonb('content').$type<Record<string, unknown>>().notNull(),
    // SHA-256 over the content's canonical JSON.
    contentHash: text('content_hash').notNull(),
    acceptedBy: uuid('accepted_by')
      .notNull()
      .references(() => person.id),
    acceptedAt: moment('accepted_at').notNull().defaultNow(),
  },
  (t) => [
    uniqueIndex('accepted_record_number').on(t.projectId, t.number),
    uniqueIndex('accepted_record_review').on(t.reviewId),
    index('accepted_record_study').on(t.studyId),
  ],
)

/** A project's baseline over time: the latest row counts; append-only by trigger. */
export const baseline = pgTable(
  'baseline',
  {
    projectId: uuid('project_id')
      .notNull()
      .references(() => project.id),
    number: integer('number').notNull(),
    recordId: uuid('record_id')
      .notNull()
      .references(() => acceptedRecord.id),
    setBy: uuid('set_by').references(() => person.id),
    setAt: moment('set_at').notNull().defaultNow(),
  },
  (t) => [primaryKey({ columns: [t.projectId, t.number] })],
)

export const comparison = pgTable(
  'comparison',
  {
    id: id(),
    projectId: uuid('project_id')
      .notNull()
      .references(() => project.id, { onDelete: 'cascade' }),
    name: text('name').notNull(),
    // The comparison page's query: what is compared and how it is shown.
    query: text('query').notNull(),
    createdBy: uuid('created_by')
      .notNull()
      .references(() => person.id),
    createdAt: moment('created_at').notNull().defaultNow(),
  },
  (t) => [uniqueIndex('comparison_name').on(t.projectId, sql`lower(${t.name})`)],
)

/** A way of looking at a study's results, by name; the page's query is all of it. */
export const savedView = pgTable(
  'saved_view',
  {
    id: id(),
    studyId: uuid('study_id')
      .notNull()
      .references(() => study.id, { onDelete: 'cascade' }),
    name: text('name').notNull(),
    query: text('query').notNull(),
    // Seen by all members of the project; else by its maker alone.
    shared: boolean('shared').notNull().default(true),
    createdBy: uuid('created_by')
      .notNull()
      .references(() => person.id),
    createdAt: moment('created_at').notNull().defaultNow(),
  },
  (t) => [uniqueIndex('saved_view_name').on(t.studyId, sql`lower(${t.name})`)],
)

/** Said about a study or about a saved comparison; a withdrawn one keeps its place without its words. */
export const comment = pgTable(
  'comment',
  {
    id: id(),
    projectId: uuid('project_id')
      .notNull()
      .references(() => project.id, { onDelete: 'cascade' }),
    studyId: uuid('study_id').references(() => study.id, { onDelete: 'cascade' }),
    comparisonId: uuid('comparison_id').references(() => comparison.id, { onDelete: 'cascade' }),
    body: text('body').notNull(),
    writtenBy: uuid('written_by')
      .notNull()
      .references(() => person.id),
    writtenAt: moment('written_at').notNull().defaultNow(),
    withdrawnAt: moment('withdrawn_at'),
  },
  (t) => [
    index('comment_study').on(t.studyId, t.writtenAt),
    index('comment_comparison').on(t.comparisonId, t.writtenAt),
    check('comment_subject', sql`num_nonnulls(${t.studyId}, ${t.comparisonId}) = 1`),
  ],
)

export type Review = typeof review.$inferSelect
export type AcceptedRecord = typeof acceptedRecord.$inferSelect
export type Comparison = typeof comparison.$inferSelect
export type SavedView = typeof savedView.$inferSelect
export type Comment = typeof comment.$inferSelect
