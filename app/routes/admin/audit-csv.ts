// The audit trail as a file, with the page's filters.
import { Readable } from 'node:stream'
import { createReadableStreamFromReadable } from '@react-router/node'
import { auditCsv, readAuditQuery } from '#app/modules/audit/audit.server.ts'
import type { Route } from './+types/audit-csv'

export function loader({ request }: Route.LoaderArgs) {
  const query = readAuditQuery(new URL(request.url).searchParams)
  return new Response(createReadableStreamFromReadable(Readable.from(auditCsv(query))), {
    headers: {
      'Content-Type': 'text/csv; charset=utf-8',
      'Content-Disposition': 'attachment; filename="rowfall-audit-trail.csv"',
    },
  })
}
