// What the gate hands to loaders and actions through React Router's context.
import { createContext } from 'react-router'
import type { Role, Theme, Units } from '#drizzle/schema/person.ts'

export type Viewer = {
  personId: string
  name: string
  email: string
  role: Role
  units: Units
  theme: Theme
  /** Names the session in lists; cannot be used to sign in. */
  sessionId: string
}

/** The project that the URL's :projectId, :studyId or :runId belongs to; the viewer is a member of it. */
export type ProjectScope = {
  projectId: string
  projectName: string
  studyId: string | null
  runId: string | null
}

/** The person of the request. Reading it throws under a URL that anyone may open; use `visitorContext` there. */
export const viewerContext = createContext<Viewer>()
/** The person of the request, or null. */
export const visitorContext = createContext<Viewer | null>(null)
/** Set under URLs whose rule has a scope; reading it elsewhere throws. */
export const projectContext = createContext<ProjectScope>()
/** The content security policy's nonce for this response; scripts that carry it run. */
export const nonceContext = createContext<string>()
/** The refusal or defect that ended a resource route, so that its answer can say so. */
export const failureContext = createContext<unknown>(null)
/** Where the request came from, for the audit trail. */
export const addressContext = createContext<string>('')
