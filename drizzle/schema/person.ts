// People, their sessions, and sign-ins under way. People appear by signing in or by being invited to a project.
import { sql } from 'drizzle-orm'
import { boolean, check, index, integer, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { id, moment } from './columns.ts'

/** Highest first: where groups name several roles, the first of these wins. */
export const ROLES = ['administrator', 'lead', 'engineer', 'analyst'] as const
export type Role = (typeof ROLES)[number]

export const UNIT_SYSTEMS = ['si', 'us'] as const
export type Units = (typeof UNIT_SYSTEMS)[number]

export const THEMES = ['system', 'light', 'dark'] as const
export type Theme = (typeof THEMES)[number]

export const person = pgTable(
  'person',
  {
    id: id(),
    // Null until the person's first sign-in: someone invited to a project by e-mail, or a demo person.
    issuer: text('issuer'),
    subject: text('subject'),
    name: text('name').notNull(),
    email: text('email').notNull(),
    // As of the latest sign-in; null when no group of the person has a role.
    // The provider's groups at the last sign-in: a new mapping of groups changes roles at once.
    groups: text('groups').array().notNull().default([]),
    role: text('role', { enum: ROLES }),
    units: text('units', { enum: UNIT_SYSTEMS }).notNull().default('si'),
    theme: text('theme', { enum: THEMES }).notNull().default('system'),
    // What they are told by e-mail. A run is told of when it took longer than so many minutes; null: never.
    mailRunMinutes: integer('mail_run_minutes').default(5),
    mailReviews: boolean('mail_reviews').notNull().default(true),
    mailMentions: boolean('mail_mentions').notNull().default(true),
    createdAt: moment('created_at').notNull().defaultNow(),
    signedInAt: moment('signed_in_at'),
    // Set by an administrator: the person is refused from the next request on, and at every sign-in.
    removedAt: moment('removed_at'),
  },
  (t) => [
    uniqueIndex('person_issuer_subject').on(t.issuer, t.subject),
    // Two providers may know the same address; before the first sign-in an address stands for one invited person.
    uniqueIndex('person_invited_email').on(sql`lower(${t.email})`).where(sql`${t.subject} is null`),
    index('person_email').on(sql`lower(${t.email})`),
    check('person_role', sql`${t.role} in ('administrator', 'lead', 'engineer', 'analyst')`),
    check('person_units', sql`${t.units} in ('si', 'us')`),
    check('person_theme', sql`${t.theme} in ('system', 'light', 'dark')`),
    check('person_identity', sql`(${t.issuer} is null) = (${t.subject} is null)`),
  ],
)

export const session = pgTable(
  'session',
  {
    // Keyed hash of the cookie's value: a copy of this table signs nobody in.
    idHash: text('id_hash').primaryKey(),
    // Names the session in lists and when revoking one, without being able to use it.
    publicId: uuid('public_id').notNull().unique().default(sql`gen_random_uuid()`),
    personId: uuid('person_id')
      .notNull()
      .references(() => person.id, { onDelete: 'cascade' }),
    createdAt: moment('created_at').notNull().defaultNow(),
    seenAt: moment('seen_at').notNull().defaultNow(),
    expiresAt: moment('expires_at').notNull(),
    revokedAt: moment('revoked_at'),
    userAgent: text('user_agent').notNull().default(''),
    // Handed back to the provider when the person signs out, so that it can end its own session without asking.
    idToken: text('id_token'),
  },
  (t) => [index('session_person').on(t.personId), index('session_expires').on(t.expiresAt)],
)

export const authFlow = pgTable(
  'auth_flow',
  {
    // Hash over the flow cookie's value and the state parameter: only the browser that asked, with the answer to this
    // very question, finds the row. Taking the row deletes it, so an answer counts once.
    idHash: text('id_hash').primaryKey(),
    nonce: text('nonce').notNull(),
    codeVerifier: text('code_verifier').notNull(),
    returnTo: text('return_to').notNull(),
    createdAt: moment('created_at').notNull().defaultNow(),
    expiresAt: moment('expires_at').notNull(),
  },
  (t) => [index('auth_flow_expires').on(t.expiresAt)],
)

/** Which role a group of the identity provider gives. Empty: the settings' map counts. */
export const roleGroup = pgTable(
  'role_group',
  {
    group: text('group').primaryKey(),
    role: text('role', { enum: ROLES }).notNull(),
  },
  (t) => [check('role_group_role', sql`${t.role} in ('administrator', 'lead', 'engineer', 'analyst')`)],
)

export type Person = typeof person.$inferSelect
export type Session = typeof session.$inferSelect
