// The built application's own request handler on the test file's database, and two projects to ask it about.
import { existsSync } from 'node:fs'
import { fileURLToPath, pathToFileURL } from 'node:url'
import { createRequestHandler, RouterContextProvider, type ServerBuild } from 'react-router'
import { db } from '#app/db.server.ts'
import { addressContext } from '#app/http/context.ts'
import { cookie } from '#app/modules/accounts/cookies.server.ts'
import { beginSession } from '#app/modules/accounts/sessions.server.ts'
import urlMap from '#app/routes.ts'
import {
  person,
  project,
  projectMember,
  ROLES,
  type Role,
  run,
  study,
  studyRevision,
} from '#drizzle/schema/index.ts'
import { seedDemo } from '#drizzle/seed/seed.ts'

const build = fileURLToPath(new URL('../../build/server/index.js', import.meta.url))
const BASE = 'http://127.0.0.1:3000'

type Entry = { path?: string; index?: boolean; children?: Entry[] }

/** The map flattened to URL patterns as the rules spell them. */
function patterns(entries: readonly Entry[], above = ''): string[] {
  return entries.flatMap((entry) => {
    const here = entry.path === undefined ? above : `${above}/${entry.path}`
    // A frame without a page of its own (a layout, or a route whose index is a child) is reached through its children.
    const own = entry.path !== undefined || entry.index ? [here === '' ? '/' : here] : []
    return [...own, ...patterns(entry.children ?? [], here)]
  })
}
export const PATTERNS = [...new Set(patterns(urlMap as Entry[]))]

export type Side = 'own' | 'other'
export type Asking = {
  method?: string
  who?: Role | null
  side?: Side
  headers?: Record<string, string>
  body?: BodyInit
  /** Joined to the path as it is. */
  query?: string
}

export type TestApplication = {
  ids: Record<Side, { projectId: string; studyId: string; runId: string }>
  people: Record<Role, string>
  /** Asks for a URL pattern, its parameters filled in, or for a path that is none. */
  ask: (pattern: string, asking?: Asking) => Promise<Response>
}

/** Everyone is a member of the own project, and nobody of the other. */
export async function testApplication(): Promise<TestApplication> {
  if (!existsSync(build)) throw new Error('The application is not built; npm test builds it first.')
  const server = (await import(pathToFileURL(build).href)) as ServerBuild
  const handle = createRequestHandler(server, 'production')
  await seedDemo(db)
  const [{ definition }] = await db.select().from(studyRevision).limit(1)
  const ids = { own: await makeProject('own', definition), other: await makeProject('other', definition) }
  const people: Partial<Record<Role, string>> = {}
  const cookies: Partial<Record<Role, string>> = {}
  for (const role of ROLES) {
    const [{ id }] = await db
      .insert(person)
      .values({ name: role, email: `${role}@test.example`, role, issuer: 'test', subject: role })
      .returning()
    await db.insert(projectMember).values({ projectId: ids.own.projectId, personId: id })
    people[role] = id
    cookies[role] = cookie('session', await beginSession(id, { userAgent: 'test' }), 60).split(';')[0]
  }

  return {
    ids,
    people: people as Record<Role, string>,
    async ask(pattern, { method = 'GET', who = null, side = 'own', headers = {}, body, query = '' } = {}) {
      const path = Object.entries({
        ...ids[side],
        point: '3',
        fluidId: 'r134a',
        methodId: 'film.nusselt',
        '*': 'nowhere',
      }).reduce((url, [name, value]) => url.replace(name === '*' ? '*' : `:${name}`, value), pattern)
      const context = new RouterContextProvider()
      context.set(addressContext, '127.0.0.1')
      const request = new Request(`${BASE}${path}${query}`, {
        method,
        headers: {
          'Sec-Fetch-Site': 'same-origin',
          ...(who ? { Cookie: cookies[who] as string } : {}),
          ...headers,
        },
        body,
      })
      return handle(request, context)
    },
  }
}

async function makeProject(side: Side, definition: Record<string, unknown>) {
  const [{ id: projectId }] = await db
    .insert(project)
    .values({ name: `Project ${side}` })
    .returning()
  const [{ id: studyId }] = await db
    .insert(study)
    .values({ projectId, name: `Study ${side}` })
    .returning()
  const [{ id: revisionId }] = await db
    .insert(studyRevision)
    .values({ studyId, number: 1, definition })
    .returning()
  const [{ id: runId }] = await db
    .insert(run)
    .values({
      studyId,
      revisionId,
      engineVersion: 'test',
      points: 10,
      chunkPoints: 5,
      state: 'cancelled',
    })
    .returning()
  return { projectId, studyId, runId }
}
