// The line above every signed-in page: where one is, the unit system, and the person's menu.
import { Fragment } from 'react'
import { Form, Link, NavLink, useFetcher, useLocation } from 'react-router'
import { Disclosure } from '../ui/disclosure.tsx'
import { useUnits } from '../ui/number.tsx'
import { SegmentedButtons } from '../ui/segmented.tsx'
import { Tag } from '../ui/tag.tsx'
import { useCrumbs } from './crumbs.ts'
import { Mark } from './mark.tsx'

export type Theme = 'system' | 'light' | 'dark'

export type HeaderPerson = {
  name: string
  email: string
  role: string
  theme: Theme
  administers: boolean
  /** Notices not read yet. */
  unread: number
  /** A local catcher takes the e-mail. */
  caughtMail: boolean
}

export function Header({ person }: { person: HeaderPerson }) {
  const crumbs = useCrumbs()
  return (
    <header className="screen-only sticky top-0 z-30 border-b border-line bg-ground">
      <div className="flex min-h-14 flex-wrap items-center gap-x-4 px-4 sm:px-7">
        <Link to="/projects" className="flex items-center gap-2.5 text-lead font-extrabold tracking-tight">
          <Mark />
          <span className={crumbs.length > 0 ? 'max-sm:sr-only' : ''}>Rowfall</span>
        </Link>
        <nav aria-label="Breadcrumb" className="min-w-0 grow basis-0 truncate py-3 text-soft">
          {crumbs.map((crumb, i) => (
            <Fragment key={crumb.to}>
              {i > 0 ? <span className="mx-1.5 max-sm:hidden">/</span> : null}
              <Link
                to={crumb.to}
                aria-current={i === crumbs.length - 1 ? 'location' : undefined}
                className="hover:text-verdigris-ink aria-[current]:font-semibold aria-[current]:text-ink not-aria-[current]:max-sm:hidden"
              >
                {crumb.label}
              </Link>
            </Fragment>
          ))}
        </nav>
        <nav aria-label="Main" className="flex items-center gap-1 font-semibold max-sm:hidden">
          <NavLink
            to="/projects"
            end
            className="rounded-md px-2 py-1 hover:text-verdigris-ink aria-[current]:text-verdigris-ink"
          >
            Projects
          </NavLink>
          <NavLink
            to="/library"
            className="rounded-md px-2 py-1 hover:text-verdigris-ink aria-[current]:text-verdigris-ink"
          >
            Library
          </NavLink>
          {person.administers ? (
            <NavLink
              to="/admin/operations"
              className="rounded-md px-2 py-1 hover:text-verdigris-ink aria-[current]:text-verdigris-ink max-lg:hidden"
            >
              Administration
            </NavLink>
          ) : null}
        </nav>
        {person.unread > 0 ? (
          <Link to="/notices" className="link font-semibold max-sm:hidden">
            {person.unread === 1 ? '1 new notice' : `${person.unread} new notices`}
          </Link>
        ) : null}
        <UnitsSwitch />
        <PersonMenu person={person} />
      </div>
    </header>
  )
}

/** Posts to /preferences and comes back to this very address, with or without scripts. */
function PreferenceForm({ children }: { children: React.ReactNode }) {
  const fetcher = useFetcher({ key: 'preferences' })
  const { pathname, search } = useLocation()
  return (
    <fetcher.Form method="post" action="/preferences" className="flex" preventScrollReset>
      <input type="hidden" name="returnTo" value={`${pathname}${search}`} />
      {children}
    </fetcher.Form>
  )
}

function UnitsSwitch() {
  return (
    <PreferenceForm>
      <SegmentedButtons
        name="units"
        label="Units"
        value={useUnits()}
        segments={[
          { value: 'si', label: 'SI', name: 'SI units' },
          { value: 'us', label: 'US', name: 'US customary units' },
        ]}
      />
    </PreferenceForm>
  )
}

const THEMES: { value: Theme; label: string }[] = [
  { value: 'system', label: 'System' },
  { value: 'light', label: 'Light' },
  { value: 'dark', label: 'Dark' },
]

function PersonMenu({ person }: { person: HeaderPerson }) {
  const role = person.role.charAt(0).toUpperCase() + person.role.slice(1)
  return (
    <Disclosure
      look="plain"
      name={`${person.name}, ${person.role}: your menu`}
      className="w-64 p-3"
      label={
        <>
          <span className="max-sm:hidden">{person.name}</span>
          <span className="sm:hidden" aria-hidden="true">
            {initials(person.name)}
          </span>
          {person.name.toLowerCase() === person.role ? null : (
            <span className="max-md:hidden">
              <Tag tone="sound">{role}</Tag>
            </span>
          )}
        </>
      }
    >
      <div className="grid gap-3">
        <div>
          <p className="font-bold">{person.name}</p>
          <p className="text-note text-soft">{person.email}</p>
          <p className="mt-1">
            <Tag tone="sound">{role}</Tag>
          </p>
        </div>
        <div className="grid border-y border-line py-2">
          <Link to="/projects" className="menu-item sm:hidden" data-closes>
            Projects
          </Link>
          <Link to="/library" className="menu-item sm:hidden" data-closes>
            Library
          </Link>
          <Link to="/notices" className="menu-item" data-closes>
            Notices{person.unread > 0 ? ` (${person.unread} new)` : ''}
          </Link>
          <Link to="/account" className="menu-item" data-closes>
            Your account
          </Link>
          {person.administers ? (
            <Link to="/admin/operations" className="menu-item" data-closes>
              Administration
            </Link>
          ) : null}
          {person.caughtMail ? (
            <Link to="/caught-mail" className="menu-item" data-closes>
              Caught e-mail
            </Link>
          ) : null}
        </div>
        <div>
          <p className="mb-1 text-note font-semibold">Theme</p>
          <PreferenceForm>
            <SegmentedButtons name="theme" label="Theme" value={person.theme} segments={THEMES} />
          </PreferenceForm>
        </div>
        <Form method="post" action="/sign-out" reloadDocument>
          <button type="submit" className="button button-plain w-full">
            Sign out
          </button>
        </Form>
      </div>
    </Disclosure>
  )
}

function initials(name: string): string {
  const words = name.split(/\s+/).filter(Boolean)
  return `${words[0]?.[0] ?? ''}${words.length > 1 ? words[words.length - 1][0] : ''}`.toUpperCase()
}
