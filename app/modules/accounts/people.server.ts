// People: they appear by signing in, or by being invited to a project before that.
import { and, eq, isNull, sql } from 'drizzle-orm'
import { db, type Queryable } from '#app/db.server.ts'
import { type Person, person, ROLES, type Role, type Theme, type Units } from '#drizzle/schema/index.ts'

export type Identity = {
  issuer: string
  subject: string
  name: string
  email: string
  /** The provider gives an address and does not say that it is unverified; many say nothing. */
  emailTrusted: boolean
  groups: string[]
}

/** The highest role that a person's groups name; null when none names one. */
export function roleOfGroups(groups: readonly string[], map: Readonly<Record<string, Role>>): Role | null {
  const named = new Set(groups.map((group) => (Object.hasOwn(map, group) ? map[group] : undefined)))
  return ROLES.find((role) => named.has(role)) ?? null
}

/**
 * The person of an identity, made or brought up to date. Someone invited by an address becomes this person at the
 * first sign-in with it, unless the provider says that the address is not verified.
 */
export async function personOfIdentity(
  tx: Queryable,
  identity: Identity,
  role: Role | null,
): Promise<Person> {
  const { issuer, subject, name, email, groups } = identity
  const now = { name, email, groups, role, signedInAt: sql`now()` }
  const [known] = await tx
    .update(person)
    .set(now)
    .where(and(eq(person.issuer, issuer), eq(person.subject, subject)))
    .returning()
  if (known) return known
  if (identity.emailTrusted) {
    const [invited] = await tx
      .update(person)
      .set({ ...now, issuer, subject })
      .where(and(isNull(person.subject), eq(sql`lower(${person.email})`, email.toLowerCase())))
      .returning()
    if (invited) return invited
  }
  // Two tabs may sign the same new person in at once.
  const [made] = await tx
    .insert(person)
    .values({ issuer, subject, ...now })
    .onConflictDoUpdate({ target: [person.issuer, person.subject], set: now })
    .returning()
  return made
}

export async function getPerson(personId: string): Promise<Person> {
  const [found] = await db.select().from(person).where(eq(person.id, personId))
  return found
}

export type Preferences = {
  units?: Units
  theme?: Theme
  mailRunMinutes?: number | null
  mailReviews?: boolean
  mailMentions?: boolean
}

export async function setPreferences(personId: string, choice: Preferences): Promise<void> {
  if (Object.values(choice).every((value) => value === undefined)) return
  await db.update(person).set(choice).where(eq(person.id, personId))
}
