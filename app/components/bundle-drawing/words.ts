// What the bundle picture shows, in words: its name, its caption, and what a row says of itself.
import type { Layout } from '#engine/correlations/geometry.ts'
import type { DrainageMode, RowResult } from '#engine/result.ts'
import { type Dimension, formatQuantity, toDisplay, type UnitSystem } from '#engine/units.ts'
import type { BundleGeometry, RowPlace } from './layout.ts'

export type Shade = 'coefficient' | 'heatFlux' | 'filmReynolds' | 'drainageMode'

export const SHADES: Record<Shade, { label: string; short: string; dimension: Dimension }> = {
  coefficient: { label: 'row coefficient', short: 'Coefficient', dimension: 'heatTransferCoefficient' },
  heatFlux: { label: 'row heat flux', short: 'Heat flux', dimension: 'heatFlux' },
  filmReynolds: { label: 'film Reynolds number', short: 'Film Re', dimension: 'none' },
  drainageMode: { label: 'drainage mode', short: 'Drainage', dimension: 'none' },
}

export const LAYOUT_NAMES: Record<Layout, string> = {
  triangular30: '30° triangular',
  triangular60: '60° triangular',
  square90: '90° square',
  square45: '45° square',
}

/** In the order of growing flow. */
export const DRAINAGE_MODES: readonly DrainageMode[] = [
  'droplet',
  'dropletColumn',
  'column',
  'columnSheet',
  'sheet',
]

export const DRAINAGE_NAMES: Record<DrainageMode, string> = {
  droplet: 'droplets',
  dropletColumn: 'droplets and columns',
  column: 'columns',
  columnSheet: 'columns and sheets',
  sheet: 'sheets',
}

/** The number a row is shaded by; null for a row without one (no drainage mode known, or idle). */
export function shadeValue(row: RowResult, shade: Shade): number | null {
  if (row.heatFlux === 0) return null
  if (shade === 'drainageMode') return row.drainageMode ? DRAINAGE_MODES.indexOf(row.drainageMode) : null
  return row[shade]
}

const rowsText = (first: number, last: number, of: number): string => {
  if (first === 1 && last === of) return of === 1 ? 'The one row' : `All ${of} rows`
  if (first === last) return `Row ${first}`
  return `Rows ${first} ${last === first + 1 ? 'and' : 'to'} ${last}`
}

/** "Rows 1 to 8 drain in droplets, rows 9 to 14 in columns." Empty where no mode is known. */
export function drainageSentence(rows: readonly RowResult[]): string {
  const runs: { mode: DrainageMode; first: number; last: number }[] = []
  for (const { row, drainageMode } of rows) {
    if (!drainageMode) continue
    const last = runs[runs.length - 1]
    if (last?.mode === drainageMode && last.last === row - 1) last.last = row
    else runs.push({ mode: drainageMode, first: row, last: row })
  }
  if (runs.length === 0) return ''
  const said = runs.map(({ mode, first, last }, i) => {
    const subject = rowsText(first, last, rows.length)
    if (i > 0) return `${subject.toLowerCase()} in ${DRAINAGE_NAMES[mode]}`
    return `${subject} ${first === last ? 'drains' : 'drain'} in ${DRAINAGE_NAMES[mode]}`
  })
  return `${said.join(', ')}.`
}

/** Rows that take no part, as a sentence; empty when there are none. */
export function idleSentence(rows: readonly RowResult[]): string {
  const idle = rows.filter((row) => row.heatFlux === 0).map((row) => row.row)
  if (idle.length === 0) return ''
  return idle.length === 1 ? `Row ${idle[0]} is idle.` : `Rows ${idle.join(', ')} are idle.`
}

/** "Row coefficient 1750 W/(m²·K) at the top, 1020 at the bottom." */
export function shadeSentence(rows: readonly RowResult[], shade: Shade, units: UnitSystem): string {
  if (rows.length === 0) return ''
  if (shade === 'drainageMode') return drainageSentence(rows)
  const { label, dimension } = SHADES[shade]
  const [top, bottom] = [rows[0], rows[rows.length - 1]].map((row) => row[shade])
  const name = label.charAt(0).toUpperCase() + label.slice(1)
  const first = formatQuantity(top, dimension, units, { digits: 3 })
  if (rows.length === 1) return `${name} ${first}.`
  return `${name} ${first} at the top, ${formatQuantity(bottom, dimension, units, { digits: 3, unit: false })} at the bottom.`
}

/** The picture's geometry in one sentence. */
export function geometrySentence(
  geometry: BundleGeometry,
  tubes: readonly number[],
  units: UnitSystem,
): string {
  const { rows, shape, layout, pitchRatio, passes, coolantEntry, outsideDiameter } = geometry
  const total = tubes.reduce((a, b) => a + b, 0)
  const even = tubes.every((n) => n === tubes[0])
  const count = even
    ? `${rows} ${rows === 1 ? 'row' : 'rows'} of ${tubes[0]} ${tubes[0] === 1 ? 'tube' : 'tubes'}`
    : `${rows} rows with ${total} tubes, ${Math.min(...tubes)} to ${Math.max(...tubes)} in a row`
  const { value, unit } = toDisplay(outsideDiameter, 'length', units, 'tube')
  const size = `${Number(value.toPrecision(4))}\u00a0${unit}`
  const entry =
    passes > 1 ? `${passes} passes, the first at the ${coolantEntry}` : 'one pass through all rows'
  return `${shape === 'circular' ? 'Round' : 'Rectangular'} bundle of ${count}, ${size} outside diameter, ${LAYOUT_NAMES[layout]} layout at pitch ratio ${Number(pitchRatio.toPrecision(4))}, ${entry}.`
}

/** What one row says of itself when it is pointed at. */
export function rowSentence(
  place: RowPlace,
  result: RowResult | undefined,
  passes: number,
  units: UnitSystem,
): string {
  const where = `Row ${place.row}${passes > 1 ? `, pass ${place.pass}` : ''}: ${place.tubes} ${place.tubes === 1 ? 'tube' : 'tubes'}`
  if (!result) return where
  if (result.heatFlux === 0) return `${where}, idle`
  const said = [
    `coefficient ${formatQuantity(result.coefficient, 'heatTransferCoefficient', units, { digits: 4 })}`,
    `subcooling ${formatQuantity(result.wallSubcooling, 'temperatureDifference', units, { digits: 3 })}`,
    `flux ${formatQuantity(result.heatFlux, 'heatFlux', units, { digits: 4 })}`,
    `film Re ${formatQuantity(result.filmReynolds, 'none', units, { digits: 3 })}`,
    ...(result.drainageMode ? [`drains in ${DRAINAGE_NAMES[result.drainageMode]}`] : []),
  ]
  return `${where}, ${said.join(', ')}`
}
