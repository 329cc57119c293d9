// What administrators look after: the frame and its pages.
import { NavLink, Outlet } from 'react-router'

const PAGES = [
  { to: '/admin/operations', label: 'Operations' },
  { to: '/admin/people', label: 'People' },
  { to: '/admin/audit', label: 'Audit trail' },
]

export const handle = { crumbs: () => [{ label: 'Administration', to: '/admin/operations' }] }

/** The breadcrumb needs data on both sides. */
export const loader = () => ({})

export default function AdministrationLayout() {
  return (
    <>
      <nav
        aria-label="Administration"
        className="screen-only flex flex-wrap gap-x-5 border-b border-line px-4 font-semibold sm:px-7"
      >
        {PAGES.map(({ to, label }) => (
          <NavLink
            key={to}
            to={to}
            className="border-b-2 border-transparent py-2 hover:text-verdigris-ink aria-[current]:border-verdigris aria-[current]:text-verdigris-ink"
          >
            {label}
          </NavLink>
        ))}
      </nav>
      <Outlet />
    </>
  )
}
