// Which column of a file is which quantity, and its rows as measured points of a base case, checked one by one. Pure.
import { KEY_RESULT_INDEX, KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { parseCase } from '#engine/case.ts'
import { findSweepPath } from '#engine/sweep/paths.ts'
import type { MeasuredPoint } from '#engine/uncertainty/measured.ts'
import { acceptedUnits, type Dimension, parseQuantity } from '#engine/units.ts'
import type { Sheet } from './read.ts'

/** A fit evaluates a point some ten times, inside the request: this many take about a second. */
export const MOST_FITTED = 100

export const MEASURED = [
  'duty',
  'overallCoefficient',
  'meanCoefficient',
  'coolantPressureDrop',
  'vapourPressureDrop',
] as const
export type Measured = (typeof MEASURED)[number]
export const isMeasured = (text: string): text is Measured => (MEASURED as readonly string[]).includes(text)

const FIELD_PATHS = [
  'saturationTemperature',
  'saturationPressure',
  'drive.inletTemperature',
  'drive.velocity',
  'drive.massFlow',
  'drive.outletTemperature',
  'drive.foulingResistance',
  'drive.wallSubcooling',
  'bundle.length',
  'tube.outsideDiameter',
  'tube.wallThickness',
] as const

/** What a column may be: a field of the case, a measured result, or the points' name. */
export type Target = { id: string; label: string; dimension: Dimension; kind: 'field' | 'measured' | 'name' }

const WORDS: Record<string, RegExp> = {
  name: /^(name|point|test|no\.?|nr\.?|run|id)$/i,
  saturationTemperature: /sat\w*\s*temp|temp\w*\s*of\s*sat|^t_?s(at)?$|condens\w*\s*temp/i,
  saturationPressure: /sat\w*\s*press|condens\w*\s*press|^p_?s(at)?$/i,
  'drive.inletTemperature':
    /(coolant|water|brine)?.*\b(inlet|in)\b.*temp|temp.*\b(inlet|in)\b|^t_?(c,?)?in$/i,
  'drive.outletTemperature': /(outlet|out)\b.*temp|temp.*\b(outlet|out)\b|^t_?(c,?)?out$/i,
  'drive.velocity': /veloc|speed|^[vw]_?c?$/i,
  'drive.massFlow': /mass\s*flow|flow\s*rate|^m_?c$/i,
  'drive.foulingResistance': /fouling/i,
  'drive.wallSubcooling': /subcool/i,
  'bundle.length': /length/i,
  'tube.outsideDiameter': /outside\s*diam|^d_?o$/i,
  'tube.wallThickness': /wall\s*thick|^t_?w$/i,
  'measured.duty': /duty|heat\s*(flow|rate|load)|capacity|^q$/i,
  'measured.overallCoefficient': /overall|^u$|^k$/i,
  'measured.meanCoefficient': /(mean|outside|condens\w*|film)\s*(heat\s*transfer\s*)?coeff|^h_?o?$|^alpha$/i,
  'measured.coolantPressureDrop': /(coolant|water|tube)?.*(press\w*\s*(drop|loss)|^dp(_?c)?$|Δp)/i,
  'measured.vapourPressureDrop': /(vapou?r|steam|shell).*(press\w*\s*(drop|loss)|dp)/i,
}

export const TARGETS: readonly Target[] = [
  { id: 'name', label: 'Name of the point', dimension: 'none', kind: 'name' },
  ...FIELD_PATHS.map((path): Target => {
    const { label, dimension } = findSweepPath(path) as { label: string; dimension: Dimension }
    return { id: path, label, dimension, kind: 'field' }
  }),
  ...MEASURED.map((id): Target => {
    const { label, dimension } = KEY_RESULTS[KEY_RESULT_INDEX[id]]
    return { id: `measured.${id}`, label: `${label}, measured`, dimension, kind: 'measured' }
  }),
]
const TARGET = new Map(TARGETS.map((target) => [target.id, target]))

/** Units of every dimension a column may have; a unit of several dimensions is listed once. */
export const UNITS: readonly string[] = [
  ...new Set(TARGETS.flatMap(({ dimension, kind }) => (kind === 'name' ? [] : acceptedUnits(dimension)))),
]
/** Each cell has its unit with it: "35 degC". */
export const IN_CELL = 'in each cell'

/** One entry a column of the file: what it is ('' none) and in which unit. */
export type Column = { target: string; unit: string }

/** A first guess from the words of the head, and the unit from its brackets or what follows its last comma. */
export function guessColumns(head: readonly string[]): Column[] {
  const taken = new Set<string>()
  // The particular goes before the general: a vapour pressure drop is a pressure drop too.
  const order = [...TARGETS].sort((a, b) => Number(b.id.includes('vapour')) - Number(a.id.includes('vapour')))
  return head.map((text) => {
    const unit = /[[(]([^\])]*)[\])]\s*$/.exec(text)?.[1] ?? /[,/]\s*([^,]+)$/.exec(text)?.[1] ?? ''
    const words = text
      .replace(/[[(][^\])]*[\])]\s*$/, '')
      .replace(/,[^,]*$/, '')
      .replace(/(?<=[a-z])_(?=[a-z])/gi, ' ')
      .trim()
    const found = order.find(
      ({ id }) => !taken.has(id) && (WORDS[id].test(words) || WORDS[id].test(words.replaceAll(' ', '_'))),
    )
    if (!found) return { target: '', unit: '' }
    taken.add(found.id)
    return { target: found.id, unit: found.kind === 'name' ? '' : unitOf(unit, found.dimension) }
  })
}

/** The unit as it is printed in the list of choices; '' where it is none of this dimension. */
function unitOf(text: string, dimension: Dimension): string {
  const trimmed = text.trim()
  if (trimmed === '') return ''
  const read = parseQuantity(`1 ${trimmed}`, dimension)
  if (!read.ok) return ''
  return (
    acceptedUnits(dimension).find((unit) => unit === trimmed) ??
    acceptedUnits(dimension).find((unit) => {
      const same = [1, 2].map((n) => [
        parseQuantity(`${n} ${unit}`, dimension),
        parseQuantity(`${n} ${trimmed}`, dimension),
      ])
      return same.every(([a, b]) => a.ok && b.ok && Math.abs(a.value - b.value) <= 1e-12 * Math.abs(b.value))
    }) ??
    ''
  )
}

/** What is wrong with a choice of columns as a whole. */
export function columnFaults(head: readonly string[], columns: readonly Column[]): string[] {
  const faults: string[] = []
  const seen = new Set<string>()
  columns.forEach(({ target, unit }, i) => {
    const name = `Column “${head[i]}”`
    if (target === '') return
    const found = TARGET.get(target)
    if (!found) {
      faults.push(`${name}: there is no such quantity; choose one of the list.`)
      return
    }
    if (seen.has(target)) faults.push(`${name}: ${found.label} is chosen twice; choose it for one column.`)
    seen.add(target)
    if (found.kind === 'name' || unit === IN_CELL) return
    if (unit === '')
      faults.push(`${name}: its unit is missing; choose one of ${acceptedUnits(found.dimension).join(', ')}.`)
    else if (!acceptedUnits(found.dimension).includes(unit))
      faults.push(
        `${name}: ${unit} is no unit of it; choose one of ${acceptedUnits(found.dimension).join(', ')}.`,
      )
  })
  for (const [a, b] of EXCLUSIVE)
    if (seen.has(a) && seen.has(b))
      faults.push(
        `${TARGET.get(a)?.label} and ${TARGET.get(b)?.label}: only one of them fixes the case; leave the other column out.`,
      )
  if (![...seen].some((id) => TARGET.get(id)?.kind === 'measured'))
    faults.push('No column is a measured result; choose for one column what was measured, such as the duty.')
  return faults
}

/** Fields of which a case has only one. */
const EXCLUSIVE: readonly (readonly [string, string])[] = FIELD_PATHS.flatMap((path) =>
  (findSweepPath(path)?.insteadOf ?? [])
    .filter((other) => path < other)
    .map((other) => [path, other] as const),
)

export type RowFault = { line: number; column: string; problem: string; remedy: string }
export type StoredPoint = {
  line: number
  name: string
  /** Fields of the case that the row gives [SI]. */
  given: Record<string, number>
  measured: Partial<Record<Measured, number>>
}

type Raw = Record<string, unknown>

/** The rows that make whole points, and what is wrong with the others. */
export function checkRows(
  sheet: Sheet,
  columns: readonly Column[],
  base: Raw,
): { points: StoredPoint[]; faults: RowFault[] } {
  const points: StoredPoint[] = []
  const faults: RowFault[] = []
  for (const { line, cells } of sheet.rows) {
    const point: StoredPoint = { line, name: `Row ${line}`, given: {}, measured: {} }
    const wrong: RowFault[] = []
    columns.forEach(({ target, unit }, i) => {
      const found = TARGET.get(target)
      if (!found) return
      const cell = cells[i]
      if (found.kind === 'name') {
        if (cell !== '') point.name = cell.slice(0, 80)
        return
      }
      const fault = (problem: string, remedy: string) =>
        wrong.push({ line, column: sheet.head[i], problem, remedy })
      if (cell === '') {
        fault('the cell is empty', 'give a value or leave the row out')
        return
      }
      if (cell.startsWith('=')) {
        fault('it is a formula without a saved value', 'paste it as a value')
        return
      }
      const read = parseQuantity(quantityText(cell, unit, sheet.decimalComma), found.dimension)
      if (!read.ok) fault(read.problem, read.remedy)
      else if (found.kind === 'field') point.given[found.id] = read.value
      else if (!(read.value > 0)) fault(`${cell.slice(0, 40)} is not above 0`, 'a measured result is above 0')
      else point.measured[found.id.slice('measured.'.length) as Measured] = read.value
    })
    if (wrong.length === 0) {
      const parsed = caseOf(base, point)
      if (parsed.ok) points.push(point)
      else
        for (const { path, problem, remedy } of parsed.faults.slice(0, 3)) {
          const i = columns.findIndex(({ target }) => target === path)
          wrong.push({
            line,
            column: i < 0 ? (findSweepPath(path)?.label ?? path) : sheet.head[i],
            problem,
            remedy,
          })
        }
    }
    faults.push(...wrong)
  }
  return { points, faults }
}

function quantityText(cell: string, unit: string, decimalComma: boolean): string {
  const plain = decimalComma ? cell.replace(/(\d),(\d)/, '$1.$2') : cell
  return unit === IN_CELL ? plain : `${plain} ${unit}`
}

/** The base case with a row's fields in place of its own; length is given and duty asked for. */
function caseOf(base: Raw, { given }: StoredPoint): ReturnType<typeof parseCase> {
  const kase = structuredClone(base)
  delete kase.duty
  for (const [path, value] of Object.entries(given)) {
    for (const other of findSweepPath(path)?.insteadOf ?? []) remove(kase, other)
    put(kase, path, value)
  }
  const parsed = parseCase(kase)
  if (parsed.ok && parsed.case.bundle.length === undefined)
    return {
      ok: false,
      faults: [
        {
          path: 'bundle.length',
          problem: 'the length of the tubes is not known',
          remedy: 'give it for all rows, or choose a column for it',
        },
      ],
    }
  if (!parsed.ok && !('length' in ((kase.bundle as Raw | undefined) ?? {})))
    return {
      ok: false,
      faults: parsed.faults.map((fault) =>
        fault.path === 'duty' || fault.path === 'bundle.length'
          ? {
              path: 'bundle.length',
              problem: 'the length of the tubes is not known',
              remedy: 'give it for all rows, or choose a column for it',
            }
          : fault,
      ),
    }
  return parsed
}

function put(kase: Raw, path: string, value: number): void {
  const keys = path.split('.')
  let at = kase
  for (const key of keys.slice(0, -1)) {
    if (typeof at[key] !== 'object' || at[key] === null) at[key] = {}
    at = at[key] as Raw
  }
  at[keys[keys.length - 1]] = value
}

function remove(kase: Raw, path: string): void {
  const keys = path.split('.')
  const parent = keys.slice(0, -1).reduce<unknown>((at, key) => (at as Raw | undefined)?.[key], kase)
  if (typeof parent === 'object' && parent !== null) delete (parent as Raw)[keys[keys.length - 1]]
}

/** The base case that every row starts from: a study's, with the length of the tubes where one is given for all. */
export function baseCase(definition: Raw, length: number | null): Raw {
  const base = structuredClone((definition.case ?? {}) as Raw)
  if (length !== null) put(base, 'bundle.length', length)
  return base
}

/** Stored points that have this result, as the engine fits them. */
export function measuredPoints(points: readonly StoredPoint[], base: Raw, result: Measured): MeasuredPoint[] {
  return points.flatMap((point) => {
    const measured = point.measured[result]
    const parsed = measured === undefined ? null : caseOf(base, point)
    return parsed?.ok && measured !== undefined ? [{ name: point.name, case: parsed.case, measured }] : []
  })
}
