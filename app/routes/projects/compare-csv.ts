// GET /projects/:projectId/compare.csv?study=…: a comparison as a file, one column a study, SI units.

import { comparisonTable } from '#app/modules/comparisons/table.server.ts'
import { csvCell } from '#app/modules/exports/csv.ts'
import type { Route } from './+types/compare-csv'

export async function loader({ params, request }: Route.LoaderArgs) {
  const rows = await comparisonTable(params.projectId, new URL(request.url).searchParams.getAll('study'))
  const text = rows.map((cells) => `${cells.map(csvCell).join(',')}\r\n`).join('')
  return new Response(text, {
    headers: {
      'Content-Type': 'text/csv; charset=utf-8',
      'Content-Disposition': 'attachment; filename="rowfall-comparison.csv"',
    },
  })
}
