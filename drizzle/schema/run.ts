// Runs of a study revision, and the results of their points.
import { sql } from 'drizzle-orm'
import {
  check,
  date,
  doublePrecision,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  uuid,
} from 'drizzle-orm/pg-core'
import { float8Array, id, moment } from './columns.ts'
import { person } from './person.ts'
import { study, studyRevision } from './study.ts'

export const RUN_STATES = ['queued', 'running', 'done', 'cancelled', 'failed'] as const
export type RunState = (typeof RUN_STATES)[number]

export const run = pgTable(
  'run',
  {
    id: id(),
    studyId: uuid('study_id')
      .notNull()
      .references(() => study.id),
    revisionId: uuid('revision_id')
      .notNull()
      .references(() => studyRevision.id),
    engineVersion: text('engine_version').notNull(),
    points: integer('points').notNull(),
    chunkPoints: integer('chunk_points').notNull(),
    state: text('state', { enum: RUN_STATES }).notNull().default('queued'),
    requestedBy: uuid('requested_by').references(() => person.id),
    plannedAt: moment('planned_at').notNull().defaultNow(),
    // The partition of point_column that holds this run's results.
    plannedOn: date('planned_on', { mode: 'string' })
      .notNull()
      .default(sql`(now() at time zone 'utc')::date`),
    startedAt: moment('started_at'),
    endedAt: moment('ended_at'),
    // Set while the run is held: its chunks leave the queue until it is resumed.
    pausedAt: moment('paused_at'),
    // Set when its points have left by the retention policy; counts, best point and full results stay.
    pointsDroppedAt: moment('points_dropped_at'),
    // SHA-256 over the stored results in point order: the same for any number of workers, order or interruption.
    contentHash: text('content_hash'),
    bestPoint: integer('best_point'),
    refined: jsonb('refined').$type<Record<string, unknown>>(),
    // Why a failed run failed, for people.
    fault: text('fault'),
  },
  (t) => [
    index('run_study_planned').on(t.studyId, t.plannedAt),
    check('run_state', sql`${t.state} in ('queued', 'running', 'done', 'cancelled', 'failed')`),
    check('run_points', sql`${t.points} between 1 and 1000000`),
    check('run_chunk_points', sql`${t.chunkPoints} >= 1`),
  ],
)

/** One row per stored chunk; its existence is what makes the chunk done, whoever computed it. It sums up its points. */
export const runChunk = pgTable(
  'run_chunk',
  {
    runId: uuid('run_id')
      .notNull()
      .references(() => run.id, { onDelete: 'cascade' }),
    chunk: integer('chunk').notNull(),
    firstPoint: integer('first_point').notNull(),
    points: integer('points').notNull(),
    // How many of its points came to each outcome, by the outcome's number.
    outcomes: integer('outcomes').array().notNull(),
    meetingLimits: integer('meeting_limits').notNull(),
    // How many evaluated points each limit stops, by the limit's bit.
    limitsNotMet: integer('limits_not_met').array().notNull().default([]),
    // Each key result's range over evaluated points, in storage order; NaN where none has a value.
    leastResults: float8Array('least_results').notNull(),
    greatestResults: float8Array('greatest_results').notNull(),
    bestPoint: integer('best_point'),
    bestObjective: doublePrecision('best_objective'),
    // The best point's key results, in storage order.
    bestResults: float8Array('best_results'),
    // Summed over the threads that shared it.
    computeSeconds: doublePrecision('compute_seconds').notNull(),
    workerId: uuid('worker_id'),
    storedAt: moment('stored_at').notNull().defaultNow(),
  },
  (t) => [primaryKey({ columns: [t.runId, t.chunk] })],
)

/**
 * What the stored chunks of a run come to, kept in the transaction that stores each: how far a run is costs one row to
 * know, however many chunks it has.
 */
export const runTally = pgTable('run_tally', {
  runId: uuid('run_id')
    .primaryKey()
    .references(() => run.id, { onDelete: 'cascade' }),
  points: integer('points').notNull().default(0),
  meetingLimits: integer('meeting_limits').notNull().default(0),
  // By the outcome's number; shorter where the last ones did not occur.
  outcomes: integer('outcomes').array().notNull().default([]),
  bestPoint: integer('best_point'),
  bestObjective: doublePrecision('best_objective'),
  bestResults: float8Array('best_results'),
})

/** Partitioned by range of planned_on, one month a partition (SQL in the migration): old runs leave by DROP TABLE. */
export const pointColumn = pgTable(
  'point_column',
  {
    plannedOn: date('planned_on', { mode: 'string' }).notNull(),
    runId: uuid('run_id').notNull(),
    column: text('column').notNull(),
    chunk: integer('chunk').notNull(),
    vals: float8Array('vals').notNull(),
  },
  (t) => [primaryKey({ columns: [t.runId, t.column, t.chunk, t.plannedOn] })],
)

export const POINT_RESULT_KINDS = ['best', 'refined', 'pinned', 'submitted'] as const

/** Full results kept with the record, so that no later engine can change what was shown. */
export const pointResult = pgTable(
  'point_result',
  {
    runId: uuid('run_id')
      .notNull()
      .references(() => run.id, { onDelete: 'cascade' }),
    kind: text('kind', { enum: POINT_RESULT_KINDS }).notNull(),
    point: integer('point').notNull(),
    engineVersion: text('engine_version').notNull(),
    case: jsonb('case').$type<Record<string, unknown>>().notNull(),
    result: jsonb('result').$type<Record<string, unknown>>().notNull(),
    // How sure it is: the band of its area or duty under the published scatter of its methods.
    band: jsonb('band').$type<Record<string, unknown>>(),
    storedAt: moment('stored_at').notNull().defaultNow(),
  },
  (t) => [primaryKey({ columns: [t.runId, t.kind, t.point] })],
)

/** A worker process that serves this database: says every second that it lives and what it holds. */
export const worker = pgTable('worker', {
  id: id(),
  host: text('host').notNull(),
  processId: integer('process_id').notNull(),
  threads: integer('threads').notNull(),
  engineVersion: text('engine_version').notNull(),
  startedAt: moment('started_at').notNull().defaultNow(),
  seenAt: moment('seen_at').notNull().defaultNow(),
  // Set from the administrator's page; the worker finishes what it holds, takes nothing more and ends.
  drainRequestedAt: moment('drain_requested_at'),
  holding: jsonb('holding').$type<WorkerHolding[]>().notNull().default([]),
})

export type WorkerHolding = { job: string; runId: string; chunk: number | null; since: string }

export type Run = typeof run.$inferSelect
export type RunChunk = typeof runChunk.$inferSelect
export type Worker = typeof worker.$inferSelect
export type PointResult = typeof pointResult.$inferSelect
