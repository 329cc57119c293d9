// The gate in front of every loader and action: who asks, what the URL's rule says, and what every answer carries.
import { randomBytes } from 'node:crypto'
import { and, eq, getTableColumns, sql } from 'drizzle-orm'
import type { MiddlewareFunction } from 'react-router'
import { redirect } from 'react-router'
import { db } from '#app/db.server.ts'
import { env } from '#app/env.server.ts'
import { readCookie } from '#app/modules/accounts/cookies.server.ts'
import { viewerOfSession } from '#app/modules/accounts/sessions.server.ts'
import { project, projectMember, run, study } from '#drizzle/schema/index.ts'
import {
  failureContext,
  nonceContext,
  type ProjectScope,
  projectContext,
  type Viewer,
  viewerContext,
  visitorContext,
} from './context.ts'
import { AppError, failureOf, toJsonResponse } from './errors.ts'
import { isId } from './ids.ts'
import { isSameOrigin } from './origin.ts'
import { can } from './permissions.ts'
import { type Rule, rules, type Scope, type UrlRules } from './rules.ts'
import { setSecurityHeaders } from './security-headers.ts'

/** Bodies above this are refused before they are read; uploads fit into it. */
const LARGEST_BODY = 8 * 1024 * 1024

const development = process.env.NODE_ENV === 'development'

/** Every response: nonce, strict headers, and nothing kept by shared caches. */
const headers: MiddlewareFunction<Response> = async ({ request, context }, next) => {
  const nonce = randomBytes(18).toString('base64')
  context.set(nonceContext, nonce)
  const response = await next()
  setSecurityHeaders(response.headers, {
    nonce,
    secure: env.SECURE_COOKIES,
    formOrigins: [new URL(env.OIDC_ISSUER).origin],
    development,
  })
  if (!response.headers.has('cache-control')) response.headers.set('Cache-Control', 'private, no-store')
  const noContent = request.method === 'HEAD'
  return noContent ? new Response(null, response) : response
}

/** Rules: refuses before any loader or action runs. */
const gate: MiddlewareFunction<Response> = async ({ request, context, params, pattern }, next) => {
  const reading = request.method === 'GET' || request.method === 'HEAD'
  const rule: UrlRules | undefined = rules[normal(pattern)]
  try {
    const visitor = await visitorOf(request)
    context.set(visitorContext, visitor)
    if (visitor) context.set(viewerContext, visitor)
    if (!reading) refuseForeign(request)
    const access = reading ? rule?.loader : rule?.action
    if (!access)
      throw new AppError(
        rule ? 'method-not-allowed' : 'not-found',
        rule ? 'This address does not take that.' : 'There is no such page.',
      )
    const scope = await admit(access, visitor, params)
    if (scope) context.set(projectContext, scope)
  } catch (error) {
    const failure = failureOf(error)
    const page = !rule?.resource
    if (failure?.code === 'not-signed-in' && reading && page) return toSignIn(request)
    if (failure && !page) return toJsonResponse(failure)
    throw error
  }
  const response = await next()
  // A resource route's refusal, thrown inside its loader, answers as JSON with its own status.
  if (rule?.resource) {
    const failure = failureOf(context.get(failureContext))
    if (failure) return toJsonResponse(failure)
  }
  return response
}

export const middleware: MiddlewareFunction<Response>[] = [headers, gate]

/** React Router names an index route's pattern with or without a trailing slash. */
function normal(pattern: string): string {
  const path = pattern.startsWith('/') ? pattern : `/${pattern}`
  return path.length > 1 && path.endsWith('/') ? path.slice(0, -1) : path
}

async function visitorOf(request: Request): Promise<Viewer | null> {
  const token = readCookie(request, 'session')
  if (token === null) return null
  try {
    return await viewerOfSession(token)
  } catch (error) {
    console.error(error)
    throw new AppError(
      'unavailable',
      'The database does not answer. Nothing that was saved is lost; try again in a moment.',
    )
  }
}

function refuseForeign(request: Request): void {
  if (!isSameOrigin(request.headers, env.BASE_URL))
    throw new AppError(
      'forbidden',
      'The request came from another site and was not carried out. Open Rowfall and try again there.',
    )
  if (request.headers.has('transfer-encoding'))
    throw new AppError('length-required', 'The body’s length is not given; send it with Content-Length.')
  const length = Number(request.headers.get('content-length') ?? 0)
  if (length > LARGEST_BODY) throw new AppError('too-large', 'That is more than 8 MB; send a smaller file.')
}

function toSignIn(request: Request): Response {
  const url = new URL(request.url)
  const path =
    `${url.pathname.replace(/(?:\/_root)?\.data$/, '')}${url.search.replace(/[?&]_routes=[^&]*/, '')}` || '/'
  return redirect(path === '/' ? '/sign-in' : `/sign-in?returnTo=${encodeURIComponent(path)}`)
}

async function admit(
  rule: Rule,
  visitor: Viewer | null,
  params: Readonly<Record<string, string | undefined>>,
): Promise<ProjectScope | null> {
  if (rule === 'anyone') return null
  if (!visitor) throw new AppError('not-signed-in', 'Sign in to go on; nothing is lost.')
  if ('signedIn' in rule) return null
  const scope = rule.scope ? await scopeOf(rule.scope, params, visitor.personId) : null
  if (!can(visitor.role, rule.can))
    throw new AppError(
      'forbidden',
      `Your role, ${visitor.role}, does not include this. A lead or an administrator can do it or change your role.`,
    )
  return scope
}

/** The project of the URL's id, if the person is a member of it; a stranger's id and no id look the same. */
async function scopeOf(
  scope: Scope,
  params: Readonly<Record<string, string | undefined>>,
  personId: string,
): Promise<ProjectScope> {
  const id = params[`${scope}Id`]
  const found = isId(id) ? await find(scope, id, personId) : undefined
  if (!found)
    throw new AppError('not-found', `There is no such ${scope}, or you are not a member of its project.`)
  return found
}

const { id: projectId, name: projectName } = getTableColumns(project)
const wanted = sql.placeholder('id')
const member = and(
  eq(projectMember.projectId, projectId),
  eq(projectMember.personId, sql.placeholder('personId')),
)

/** Asked at every request for something of a project: parsed and planned once a connection. */
const owners = {
  project: db
    .select({ projectId, projectName })
    .from(project)
    .innerJoin(projectMember, member)
    .where(eq(projectId, wanted))
    .prepare('scope_of_project'),
  study: db
    .select({ projectId, projectName, studyId: study.id })
    .from(study)
    .innerJoin(project, eq(projectId, study.projectId))
    .innerJoin(projectMember, member)
    .where(eq(study.id, wanted))
    .prepare('scope_of_study'),
  run: db
    .select({ projectId, projectName, studyId: study.id, runId: run.id })
    .from(run)
    .innerJoin(study, eq(study.id, run.studyId))
    .innerJoin(project, eq(projectId, study.projectId))
    .innerJoin(projectMember, member)
    .where(eq(run.id, wanted))
    .prepare('scope_of_run'),
} satisfies Record<Scope, unknown>

async function find(scope: Scope, id: string, personId: string): Promise<ProjectScope | undefined> {
  const [row] = await owners[scope].execute({ id, personId })
  return row && { studyId: null, runId: null, ...row }
}
