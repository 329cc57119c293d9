// A comparison as rows of cells: what a spreadsheet gets.
import { type Entry, sheetInputs, sheetResults } from '#app/modules/explore/sheet.ts'
import { displayUnit, toDisplay } from '#engine/units.ts'
import { chosenOf } from './chosen.ts'
import { comparedStudies, type RunCandidate } from './comparison.server.ts'
import { comparedRows, drivesAsOne } from './differences.ts'

type Cell = string | number | null

/** A head, then one row a quantity: group, label, unit, and a value for each study. */
export async function comparisonTable(projectId: string, studyIds: readonly string[]): Promise<Cell[][]> {
  const studies = (await comparedStudies(projectId, studyIds)).filter(
    (study): study is typeof study & RunCandidate => study.run !== null,
  )
  const points = studies.map(chosenOf)
  const inputs = comparedRows(
    points.map((point) => (point ? drivesAsOne(sheetInputs(point.case, point.names, 'si')) : [])),
  )
  const results = comparedRows(points.map((point) => (point ? sheetResults(point.case, point.result) : [])))
  return [
    ['group', 'quantity', 'unit', ...studies.map(({ name }) => name)],
    ['Finding', 'run', '', ...studies.map(({ run }) => run?.id ?? null)],
    ['Finding', 'revision', '', ...studies.map(({ run }) => run?.revision ?? null)],
    ['Finding', 'engine', '', ...studies.map(({ run }) => run?.engineVersion ?? null)],
    ['Finding', 'point', '', ...points.map((point) => point?.point ?? null)],
    ...[...inputs, ...results].map(({ group, label, cells }): Cell[] => [
      group,
      label,
      cells.map((cell) => (cell ? unitOf(cell) : '')).find((unit) => unit !== '') ?? '',
      ...cells.map((cell) => (cell === null ? null : cellOf(cell))),
    ]),
  ]
}

const unitOf = (entry: Entry) => ('text' in entry ? '' : displayUnit(entry.dimension, 'si', entry.hint))

function cellOf(entry: Entry): Cell {
  if ('text' in entry) return entry.text
  return entry.value === null ? null : toDisplay(entry.value, entry.dimension, 'si', entry.hint).value
}
