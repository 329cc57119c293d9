// The demo: invented people, projects and studies, all labelled so. Seeding again adds only what is missing.
import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { and, eq, isNull, sql } from 'drizzle-orm'
import type { Database } from '#app/db.server.ts'
import { DEMO_GROUPS, DEMO_PEOPLE } from '#app/start/demo-people.ts'
import { person, project, projectMember, study, studyRevision } from '#drizzle/schema/index.ts'
import { faultLine } from '#engine/case.ts'
import { parseStudy } from '#engine/sweep/study.ts'

const PROJECTS = [
  {
    name: 'Chiller line K4',
    description: 'Invented demo project: water-cooled condensers for a chiller line.',
    studies: ['chiller-condenser'],
  },
  {
    name: 'Binary plant Hollin',
    description: 'Invented demo project: condensers of a small geothermal binary plant.',
    studies: ['ammonia-condenser'],
  },
  {
    name: 'Test stand B',
    description: 'Invented demo project: low-pressure steam on the test stand.',
    studies: ['low-pressure-steam-condenser'],
  },
] as const

function shipped(id: string): { name: string; definition: Record<string, unknown> } {
  const file = fileURLToPath(new URL(`../../studies/${id}.json`, import.meta.url))
  const definition = JSON.parse(readFileSync(file, 'utf8'))
  const parsed = parseStudy(definition)
  if (!parsed.ok) throw new Error(`studies/${id}.json: ${parsed.faults.map(faultLine).join('; ')}`)
  return { name: parsed.study.name, definition }
}

export async function seedDemo(db: Database): Promise<void> {
  await db.transaction(async (tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(hashtext('rowfall demo'))`)
    const people: string[] = []
    for (const { name, email, groups } of DEMO_PEOPLE) {
      const [known] = await tx
        .select({ id: person.id })
        .from(person)
        .where(eq(sql`lower(${person.email})`, email))
        .limit(1)
      const role = DEMO_GROUPS[groups[0]]
      people.push(
        known?.id ??
          (await tx.insert(person).values({ name, email, role }).returning({ id: person.id }))[0].id,
      )
    }
    for (const { name, description, studies } of PROJECTS) {
      const [known] = await tx
        .select({ id: project.id })
        .from(project)
        .where(eq(sql`lower(${project.name})`, name.toLowerCase()))
      if (known) continue
      const [made] = await tx
        .insert(project)
        .values({ name, description, invented: true, createdBy: people[1] })
        .returning({ id: project.id })
      await tx
        .insert(projectMember)
        .values(people.map((personId) => ({ projectId: made.id, personId, addedBy: people[1] })))
      for (const seedKey of studies) {
        const { name: title, definition } = shipped(seedKey)
        const [row] = await tx
          .insert(study)
          .values({
            projectId: made.id,
            name: title,
            origin: `example ${seedKey}`,
            invented: true,
            seedKey,
            createdBy: people[0],
          })
          .returning({ id: study.id })
        await tx
          .insert(studyRevision)
          .values({ studyId: row.id, number: 1, definition, createdBy: people[0] })
      }
    }
  })
}

/** The shipped study of this key with its first revision, while nobody has archived it. */
export async function seededStudy(
  db: Database,
  seedKey: string,
): Promise<{ studyId: string; revisionId: string } | null> {
  const [found] = await db
    .select({ studyId: study.id, revisionId: studyRevision.id })
    .from(study)
    .innerJoin(studyRevision, and(eq(studyRevision.studyId, study.id), eq(studyRevision.number, 1)))
    .where(and(eq(study.seedKey, seedKey), isNull(study.archivedAt)))
    .limit(1)
  return found ?? null
}
