// What a person reads when a page cannot be shown: what happened, and what to do about it.
import { isRouteErrorResponse, Link, useLocation } from 'react-router'
import { failureOf } from '#app/http/errors.ts'
import { buttonClass } from '../ui/button.tsx'
import { PageHead, PlainPage } from '../ui/page.tsx'

type Explanation = { title: string; reason: string; signIn?: true }

const BY_STATUS: Record<number, Explanation> = {
  401: {
    title: 'You are signed out',
    reason: 'Sign in again; what you had typed is kept as a draft.',
    signIn: true,
  },
  403: {
    title: 'Your role does not allow this',
    reason: 'Ask a lead of the project, or an administrator, if it should.',
  },
  404: {
    title: 'There is nothing at this address',
    reason: 'It may have been mistyped, or belong to a project that you are not a member of.',
  },
  503: { title: 'Rowfall is not ready', reason: 'The database does not answer. Try again in a moment.' },
}

const DEFECT: Explanation = {
  title: 'Something went wrong on our side',
  reason:
    'Nothing that was saved is lost. Try again; if it happens twice, tell your administrator what you did.',
}

/** What browsers say of a script that is not there any more: the page is older than the server. */
const GONE = /dynamically imported module|importing a module script|error loading route module/i

const OUTDATED: Explanation = {
  title: 'Rowfall has been updated',
  reason: 'This page is of the version before. Reload it to go on; drafts and runs are kept.',
}

export function explain(error: unknown): Explanation & { status: number } {
  if (error instanceof Error && GONE.test(error.message)) return { ...OUTDATED, status: 503 }
  const status = isRouteErrorResponse(error) ? error.status : 500
  const failure = failureOf(error)
  const known = BY_STATUS[status] ?? (failure ? { title: 'This cannot be done', reason: '' } : DEFECT)
  return { ...known, status, reason: failure?.message ?? known.reason }
}

export function ErrorPage({ error }: { error: unknown }) {
  const { title, reason, signIn, status } = explain(error)
  const { pathname, search } = useLocation()
  const here = `${pathname}${search}`
  return (
    <PlainPage>
      <PageHead
        over={title === OUTDATED.title ? undefined : `Error ${status}`}
        title={title}
        reason={reason}
      />
      <div className="flex flex-wrap gap-2">
        {signIn ? (
          <Link className={buttonClass('main')} to={`/sign-in?returnTo=${encodeURIComponent(here)}`}>
            Sign in
          </Link>
        ) : (
          <Link className={buttonClass('main')} to="/projects">
            All projects
          </Link>
        )}
        {status >= 500 ? (
          <a className={buttonClass()} href={here}>
            {title === OUTDATED.title ? 'Reload' : 'Try again'}
          </a>
        ) : null}
      </div>
      {import.meta.env.DEV && error instanceof Error ? (
        <pre className="sheet scroll-thin overflow-auto p-4 text-note">{error.stack}</pre>
      ) : null}
    </PlainPage>
  )
}
