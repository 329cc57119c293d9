// Work beyond a sweep, done by workers: optima, fronts and uncertainty bands; and measured data.
import { sql } from 'drizzle-orm'
import { check, customType, index, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { id, moment } from './columns.ts'
import { person } from './person.ts'
import { project } from './project.ts'
import { run } from './run.ts'
import { study, studyRevision } from './study.ts'

export const ANALYSIS_KINDS = ['optimum', 'front', 'band'] as const
export type AnalysisKind = (typeof ANALYSIS_KINDS)[number]
export const ANALYSIS_STATES = ['queued', 'running', 'done', 'cancelled', 'failed'] as const
export type AnalysisState = (typeof ANALYSIS_STATES)[number]

export type AnalysisProgress = { stage: string; done: number; of: number }

export const analysis = pgTable(
  'analysis',
  {
    id: id(),
    kind: text('kind', { enum: ANALYSIS_KINDS }).notNull(),
    studyId: uuid('study_id')
      .notNull()
      .references(() => study.id),
    revisionId: uuid('revision_id')
      .notNull()
      .references(() => studyRevision.id),
    runId: uuid('run_id').references(() => run.id),
    // What is asked: a point, two results, samples and seed; by kind.
    request: jsonb('request').$type<Record<string, unknown>>().notNull().default({}),
    engineVersion: text('engine_version').notNull(),
    state: text('state', { enum: ANALYSIS_STATES }).notNull().default('queued'),
    // Where it stands, for people, and from where a worker goes on that takes it over.
    progress: jsonb('progress').$type<AnalysisProgress>(),
    checkpoint: jsonb('checkpoint').$type<Record<string, unknown>>(),
    result: jsonb('result').$type<Record<string, unknown>>(),
    fault: text('fault'),
    requestedBy: uuid('requested_by').references(() => person.id),
    askedAt: moment('asked_at').notNull().defaultNow(),
    startedAt: moment('started_at'),
    endedAt: moment('ended_at'),
  },
  (t) => [
    index('analysis_study').on(t.studyId, t.askedAt),
    check('analysis_state', sql`${t.state} in ('queued', 'running', 'done', 'cancelled', 'failed')`),
  ],
)

const bytea = customType<{ data: Buffer }>({ dataType: () => 'bytea' })

/** Measured points of a test, as uploaded and as read. */
export const benchData = pgTable(
  'bench_data',
  {
    id: id(),
    projectId: uuid('project_id')
      .notNull()
      .references(() => project.id, { onDelete: 'cascade' }),
    name: text('name').notNull(),
    fileName: text('file_name').notNull(),
    original: bytea('original').notNull(),
    // Which column is which quantity in which unit, and the case that all points share.
    mapping: jsonb('mapping').$type<Record<string, unknown>>().notNull(),
    points: jsonb('points').$type<Record<string, unknown>[]>().notNull(),
    fit: jsonb('fit').$type<Record<string, unknown>>(),
    uploadedBy: uuid('uploaded_by')
      .notNull()
      .references(() => person.id),
    uploadedAt: moment('uploaded_at').notNull().defaultNow(),
  },
  (t) => [uniqueIndex('bench_data_name').on(t.projectId, sql`lower(${t.name})`)],
)

export type Analysis = typeof analysis.$inferSelect
export type BenchData = typeof benchData.$inferSelect
