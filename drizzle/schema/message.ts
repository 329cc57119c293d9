// What people are told: notices in the application, and e-mail on its way out.
import { sql } from 'drizzle-orm'
import { index, integer, jsonb, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { id, moment } from './columns.ts'
import { person } from './person.ts'
import { project } from './project.ts'

export const NOTICE_KINDS = ['runEnded', 'reviewAsked', 'reviewAnswered', 'mention'] as const
export type NoticeKind = (typeof NOTICE_KINDS)[number]

export const notice = pgTable(
  'notice',
  {
    id: id(),
    personId: uuid('person_id')
      .notNull()
      .references(() => person.id, { onDelete: 'cascade' }),
    projectId: uuid('project_id').references(() => project.id, { onDelete: 'cascade' }),
    kind: text('kind', { enum: NOTICE_KINDS }).notNull(),
    sentence: text('sentence').notNull(),
    href: text('href').notNull(),
    // The same happening is told to the same person once.
    happening: text('happening').notNull().unique(),
    at: moment('at').notNull().defaultNow(),
    readAt: moment('read_at'),
  },
  (t) => [index('notice_person').on(t.personId, t.at)],
)

export type Letter = { subject: string; paragraphs: string[]; href: string }

/** Written in the transaction of what it tells of; sent afterwards, with retries, by whichever web process claims it. */
export const mailOutbox = pgTable(
  'mail_outbox',
  {
    id: id(),
    happening: text('happening').notNull().unique(),
    personId: uuid('person_id')
      .notNull()
      .references(() => person.id, { onDelete: 'cascade' }),
    kind: text('kind', { enum: NOTICE_KINDS }).notNull(),
    letter: jsonb('letter').$type<Letter>().notNull(),
    queuedAt: moment('queued_at').notNull().defaultNow(),
    dueAt: moment('due_at').notNull().defaultNow(),
    attempts: integer('attempts').notNull().default(0),
    sentAt: moment('sent_at'),
    givenUpAt: moment('given_up_at'),
    fault: text('fault'),
  },
  (t) => [index('mail_outbox_due').on(t.dueAt).where(sql`${t.sentAt} is null and ${t.givenUpAt} is null`)],
)

export type Notice = typeof notice.$inferSelect
export type OutgoingMail = typeof mailOutbox.$inferSelect
