// The points of a study as comma-separated text (RFC 4180), SI units, full precision.
import { type Cell, pointHeads, pointRow, SLICE, type StudyReport } from './report.ts'

/** The file's lines, each ending in CRLF, a slice of points at a time. */
export async function* csvLines(report: StudyReport): AsyncGenerator<string> {
  const { plan, points, only } = report
  if (report.invented) yield `${csvCell('Invented demo data')}\r\n`
  yield `${pointHeads(plan).map(csvCell).join(',')}\r\n`
  for (let first = 0; first < points; first += SLICE) {
    const count = Math.min(SLICE, points - first)
    if (only && !only.subarray(first, first + count).includes(1)) continue
    const table = await report.table(first, count)
    let text = ''
    for (let k = 0; k < count; k++)
      if (!only || only[first + k] === 1)
        text += `${pointRow(plan, first + k, table, k, count)
          .map(csvCell)
          .join(',')}\r\n`
    yield text
  }
}

/** A cell that no spreadsheet takes for a formula. */
export function csvCell(value: Cell): string {
  if (value === null) return ''
  if (typeof value === 'number') return String(value)
  const plain = /^[=+\-@\t\r]/.test(value) ? `'${value}` : value
  return /[",\r\n]/.test(plain) ? `"${plain.replaceAll('"', '""')}"` : plain
}
