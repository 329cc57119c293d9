// Projects and who belongs to them.
import { sql } from 'drizzle-orm'
import { boolean, index, pgTable, primaryKey, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { id, moment } from './columns.ts'
import { person } from './person.ts'

export const project = pgTable(
  'project',
  {
    id: id(),
    name: text('name').notNull(),
    description: text('description').notNull().default(''),
    // Demo data is labelled as invented wherever it is shown.
    invented: boolean('invented').notNull().default(false),
    createdBy: uuid('created_by').references(() => person.id),
    createdAt: moment('created_at').notNull().defaultNow(),
  },
  (t) => [uniqueIndex('project_name').on(sql`lower(${t.name})`)],
)

export const projectMember = pgTable(
  'project_member',
  {
    projectId: uuid('project_id')
      .notNull()
      .references(() => project.id, { onDelete: 'cascade' }),
    personId: uuid('person_id')
      .notNull()
      .references(() => person.id, { onDelete: 'cascade' }),
    addedBy: uuid('added_by').references(() => person.id),
    addedAt: moment('added_at').notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.projectId, t.personId] }),
    // The projects of one person: the first page and every membership check by person.
    index('project_member_person').on(t.personId),
  ],
)

export type Project = typeof project.$inferSelect
