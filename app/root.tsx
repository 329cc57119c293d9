// The document around every page: head, theme, units, skip link, waiting bar, and the page shown when all else fails.
import type { ReactNode } from 'react'
import {
  Links,
  Meta,
  Outlet,
  Scripts,
  ScrollRestoration,
  useFetchers,
  useNavigation,
  useRouteLoaderData,
} from 'react-router'
import type { Theme, Units } from '#drizzle/schema/person.ts'
import type { Route } from './+types/root'
import { ErrorPage, explain } from './components/shell/error-page.tsx'
import { Mark } from './components/shell/mark.tsx'
import { useSettled } from './components/ui/button.tsx'
import { UnitsProvider } from './components/ui/number.tsx'
import { Toaster } from './components/ui/toast.tsx'
import { visitorContext } from './http/context.ts'
import './app.css'

export { middleware } from '#app/http/gate.server.ts'

export const links: Route.LinksFunction = () => [{ rel: 'icon', href: '/favicon.svg', type: 'image/svg+xml' }]

export const meta: Route.MetaFunction = ({ error }) => [
  { title: error ? `${explain(error).title} · Rowfall` : 'Rowfall' },
]

export function loader({ context }: Route.LoaderArgs) {
  const visitor = context.get(visitorContext)
  return { theme: visitor?.theme ?? 'system', units: visitor?.units ?? 'si' }
}

/** What was just chosen stands at once; the server's answer confirms it. */
function usePreferences(): { theme: Theme; units: Units } {
  const loaded = useRouteLoaderData<typeof loader>('root')
  const sent = useFetchers().find((fetcher) => fetcher.formAction === '/preferences')?.formData
  return {
    theme: (sent?.get('theme') as Theme | null | undefined) ?? loaded?.theme ?? 'system',
    units: (sent?.get('units') as Units | null | undefined) ?? loaded?.units ?? 'si',
  }
}

export function Layout({ children }: { children: ReactNode }) {
  const { theme, units } = usePreferences()
  return (
    <html lang="en" data-theme={theme === 'system' ? undefined : theme}>
      <head>
        <meta charSet="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <meta name="color-scheme" content={theme === 'system' ? 'light dark' : theme} />
        <Meta />
        <Links />
      </head>
      <body>
        <a
          href="#main"
          className="screen-only sr-only z-50 focus:not-sr-only focus:absolute focus:start-4 focus:top-2 focus:rounded-md focus:bg-sheet focus:px-4 focus:py-2 focus:font-semibold"
        >
          Skip to the page
        </a>
        <WaitingBar />
        <UnitsProvider units={units}>{children}</UnitsProvider>
        <Toaster />
        <ScrollRestoration />
        <Scripts />
      </body>
    </html>
  )
}

function WaitingBar() {
  const waiting = useSettled(useNavigation().state !== 'idle', 300)
  return waiting ? (
    <div className="navigation-bar" role="status">
      <span />
      <span className="visually-hidden">Loading</span>
    </div>
  ) : null
}

export default function Root() {
  return <Outlet />
}

export function ErrorBoundary({ error }: Route.ErrorBoundaryProps) {
  return (
    <>
      <header className="flex h-14 items-center border-b border-line px-4 sm:px-7">
        <a href="/" className="flex items-center gap-2.5 text-lead font-extrabold">
          <Mark />
          Rowfall
        </a>
      </header>
      <main id="main">
        <ErrorPage error={error} />
      </main>
    </>
  )
}
