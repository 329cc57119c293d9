// Who may use which URL: one line per URL of app/routes.ts, for reading (loader) and for acting (action).
//
// The gate looks a request up by the URL pattern that matched. What has no line, or no entry for the request's
// method, is refused; the route test fails on a URL of the map without a line here.
import type { Permission } from './permissions.ts'

/** The part of the URL that names the project, directly or through a study or run. */
export type Scope = 'project' | 'study' | 'run'

export type Rule = 'anyone' | { signedIn: true } | { can: Permission; scope?: Scope }

export type UrlRules = {
  loader?: Rule
  action?: Rule
  /** Answers are data or files, not pages: nobody is told 401 instead of being sent to sign in. */
  resource?: true
}

const signedIn: Rule = { signedIn: true }
const readProject: Rule = { can: 'study.read', scope: 'project' }
const readStudy: Rule = { can: 'study.read', scope: 'study' }
const editStudy: Rule = { can: 'study.edit', scope: 'study' }
const runStudy: Rule = { can: 'study.run', scope: 'study' }
const administer: Rule = { can: 'admin' }
const readRun: Rule = { can: 'study.read', scope: 'run' }

export const rules: Record<string, UrlRules> = {
  '/': { loader: 'anyone' },
  '/sign-in': { loader: 'anyone' },
  '/auth/start': { action: 'anyone', resource: true },
  '/auth/callback': { loader: 'anyone' },
  '/sign-out': { action: 'anyone', resource: true },
  '/preferences': { action: signedIn, resource: true },
  '/health': { loader: 'anyone', resource: true },

  '/projects': { loader: signedIn, action: { can: 'project.manage' } },
  '/projects/:projectId': { loader: readProject, action: { can: 'study.edit', scope: 'project' } },
  // Whoever may read may also save comparisons and views, and comment; decisions are checked act by act.
  '/projects/:projectId/compare': { loader: readProject, action: readProject },
  '/projects/:projectId/compare.csv': { loader: readProject, resource: true },
  '/projects/:projectId/bench-data': { loader: readProject, action: { can: 'study.edit', scope: 'project' } },
  '/projects/:projectId/records/:recordId': {
    loader: readProject,
    action: { can: 'study.accept', scope: 'project' },
  },
  '/projects/:projectId/history': { loader: readProject },

  '/studies/:studyId': { loader: readStudy },
  '/studies/:studyId/define': { loader: readStudy, action: editStudy },
  '/studies/:studyId/run': { loader: readStudy, action: runStudy },
  '/studies/:studyId/explore': { loader: readStudy },
  '/studies/:studyId/decide': { loader: readStudy, action: readStudy },
  '/studies/:studyId/changes': { loader: readStudy },
  '/studies/:studyId/optimum': { loader: readStudy, action: runStudy },
  '/studies/:studyId/views': { action: readStudy, resource: true },
  '/studies/:studyId/points/:point': { loader: readStudy },
  '/studies/:studyId/preview': { action: editStudy, resource: true },
  '/studies/:studyId/study.json': { loader: readStudy, resource: true },

  '/runs/:runId/progress': { loader: readRun, resource: true },
  '/runs/:runId/points': { loader: readRun, resource: true },
  '/runs/:runId/plot': { loader: readRun, resource: true },
  '/runs/:runId/workbook.xlsx': { loader: readRun, resource: true },
  '/runs/:runId/points.csv': { loader: readRun, resource: true },

  '/library': { loader: signedIn },
  '/library/fluids/:fluidId': { loader: signedIn },
  '/library/methods/:methodId': { loader: signedIn },
  '/library/validation': { loader: signedIn },

  '/account': { loader: signedIn, action: signedIn },
  '/notices': { loader: signedIn, action: signedIn },
  '/caught-mail': { loader: signedIn },
  // The link in an e-mail carries its own right, for one kind of e-mail of one person.
  '/mail/stop/:token': { loader: 'anyone', action: 'anyone' },

  '/admin/operations': { loader: administer, action: administer },
  '/admin/people': { loader: administer, action: administer },
  '/admin/audit': { loader: administer },
  '/admin/audit.csv': { loader: administer, resource: true },

  '/api/v1/evaluate': { action: signedIn, resource: true },
  '/api/v1/studies/check': { action: signedIn, resource: true },

  // Anything else, so that an unknown URL gets the 404 page whoever asks.
  '/*': { loader: 'anyone' },
}
