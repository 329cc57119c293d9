// The whole audit trail, for administrators.
import { AuditFilters, AuditTable } from '#app/components/audit/audit-table.tsx'
import { DownloadLink } from '#app/components/ui/button.tsx'
import { PageHead, PlainPage } from '#app/components/ui/page.tsx'
import { AUDIT_PAGE, listAudit, readAuditQuery } from '#app/modules/audit/audit.server.ts'
import type { Route } from './+types/audit'

export const meta: Route.MetaFunction = () => [{ title: 'Audit trail · Rowfall' }]

export async function loader({ request }: Route.LoaderArgs) {
  const search = new URL(request.url).searchParams
  const query = readAuditQuery(search)
  const entries = await listAudit(query)
  const more = entries.length > AUDIT_PAGE
  const shown = entries.slice(0, AUDIT_PAGE)
  if (more) search.set('before', String(shown[shown.length - 1].id))
  const { before: _, ...filters } = query
  const asked = new URLSearchParams(
    Object.entries(filters).filter((pair): pair is [string, string] => pair[1] !== undefined),
  )
  return { entries: shown, filters, older: more ? `?${search}` : null, file: `/admin/audit.csv?${asked}` }
}

export default function Audit({ loaderData }: Route.ComponentProps) {
  const { entries, filters, older, file } = loaderData
  return (
    <PlainPage>
      <PageHead
        title="Every act, in order"
        reason="The database itself refuses to change or delete an entry."
        acts={
          <DownloadLink href={file} download>
            These as CSV
          </DownloadLink>
        }
      />
      <AuditFilters person={filters.person} act={filters.act} from={filters.from} to={filters.to} />
      <AuditTable entries={entries} older={older} />
    </PlainPage>
  )
}
