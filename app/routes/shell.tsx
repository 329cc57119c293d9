// The frame of every signed-in page.
import { useEffect, useRef } from 'react'
import { Outlet, useLocation } from 'react-router'
import { ErrorPage, explain } from '#app/components/shell/error-page.tsx'
import { Header } from '#app/components/shell/header.tsx'
import { env } from '#app/env.server.ts'
import { viewerContext } from '#app/http/context.ts'
import { can } from '#app/http/permissions.ts'
import { unreadNotices } from '#app/modules/notices/notices.server.ts'
import type { Route } from './+types/shell'

export const meta: Route.MetaFunction = ({ error }) => [
  { title: error ? `${explain(error).title} · Rowfall` : 'Rowfall' },
]

export async function loader({ context }: Route.LoaderArgs) {
  const { personId, name, email, role, theme } = context.get(viewerContext)
  return {
    person: {
      name,
      email,
      role,
      theme,
      administers: can(role, 'admin'),
      unread: await unreadNotices(personId),
      caughtMail: env.MAIL_CATCHER_FOLDER !== undefined,
    },
  }
}

/** After moving to another page the reader starts at its headline, as after a full load. */
function useHeadlineFocus() {
  const { pathname } = useLocation()
  const shown = useRef(pathname)
  useEffect(() => {
    if (shown.current === pathname) return
    shown.current = pathname
    document.getElementById('page-title')?.focus({ preventScroll: true })
  }, [pathname])
}

export default function Shell({ loaderData }: Route.ComponentProps) {
  useHeadlineFocus()
  return (
    <div className="flex min-h-dvh flex-col">
      <Header person={loaderData.person} />
      <main id="main" className="flex grow flex-col">
        <Outlet />
      </main>
      <footer className="screen-only border-t border-line px-4 py-3 text-note text-soft sm:px-7">
        Screening results, not a certified design: pressure equipment, refrigerant charge and ventilation
        follow local codes and licensed practice.
      </footer>
    </div>
  )
}

/** Refusals and defects of a page leave the frame standing, so that one can go elsewhere. */
export function ErrorBoundary({ error, loaderData }: Route.ErrorBoundaryProps) {
  return (
    <div className="flex min-h-dvh flex-col">
      {loaderData ? <Header person={loaderData.person} /> : null}
      <main id="main">
        <ErrorPage error={error} />
      </main>
    </div>
  )
}
