// What happened in a project, for its members.
import { AuditFilters, AuditTable } from '#app/components/audit/audit-table.tsx'
import { PageHead, PlainPage } from '#app/components/ui/page.tsx'
import { projectContext } from '#app/http/context.ts'
import { AUDIT_PAGE, listAudit, readAuditQuery } from '#app/modules/audit/audit.server.ts'
import type { Route } from './+types/history'

export const meta: Route.MetaFunction = () => [{ title: 'History · Rowfall' }]

export const handle = {
  crumbs: ({ project }: Route.ComponentProps['loaderData']) => [
    { label: project.name, to: `/projects/${project.id}` },
    { label: 'History', to: `/projects/${project.id}/history` },
  ],
}

export async function loader({ request, params, context }: Route.LoaderArgs) {
  const { projectName } = context.get(projectContext)
  const search = new URL(request.url).searchParams
  const query = readAuditQuery(search)
  const entries = await listAudit({ ...query, projectId: params.projectId })
  const shown = entries.slice(0, AUDIT_PAGE)
  const more = entries.length > AUDIT_PAGE
  if (more) search.set('before', String(shown[shown.length - 1].id))
  return {
    project: { id: params.projectId, name: projectName },
    // Where an act came from is for administrators.
    entries: shown.map((entry) => ({ ...entry, address: '' })),
    filters: query,
    older: more ? `?${search}` : null,
  }
}

export default function History({ loaderData }: Route.ComponentProps) {
  const { entries, filters, older, project } = loaderData
  return (
    <PlainPage>
      <PageHead
        title={`What happened in ${project.name}`}
        reason="Who did what and when; entries cannot be changed."
      />
      <AuditFilters person={filters.person} act={filters.act} from={filters.from} to={filters.to} />
      <AuditTable entries={entries} older={older} />
    </PlainPage>
  )
}
