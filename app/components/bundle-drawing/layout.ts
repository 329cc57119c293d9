// Where each tube of a bundle's cross-section stands, and how it is fitted into a picture. Pure; metres until `fit`.
import {
  circularRowTubes,
  isStaggered,
  type Layout,
  rowPitchFactor,
  transversePitchFactor,
} from '#engine/correlations/geometry.ts'

/** What the cross-section needs to know of a case. */
export type BundleGeometry = {
  shape: 'rectangular' | 'circular'
  layout: Layout
  outsideDiameter: number
  pitchRatio: number
  rows: number
  /** Of a rectangular bundle; a circular one follows its chords. `auto` takes the count from the row results. */
  tubesPerRow?: number | 'auto'
  passes: number
  coolantEntry: 'bottom' | 'top'
}

/** Just the fields read here, so that a case being typed serves as well as a checked one. */
type CaseLike = {
  tube: { outsideDiameter: number }
  bundle: Omit<BundleGeometry, 'outsideDiameter' | 'tubesPerRow'> & { tubesPerRow?: number | 'auto' }
}

export function bundleGeometry({ tube, bundle }: CaseLike): BundleGeometry {
  const { shape, layout, pitchRatio, rows, tubesPerRow, passes, coolantEntry } = bundle
  return {
    shape,
    layout,
    outsideDiameter: tube.outsideDiameter,
    pitchRatio,
    rows,
    tubesPerRow,
    passes,
    coolantEntry,
  }
}

export type RowPlace = {
  /** 1 at the top. */
  row: number
  tubes: number
  /** Tubes drawn: fewer than there are where a wide bundle is cut. */
  drawn: number
  /** Centre of the first tube, from the picture's left edge. */
  x: number
  /** Centre height, from the top of the top row's tubes. */
  y: number
  pass: number
}

export type Section = {
  rows: RowPlace[]
  outsideDiameter: number
  transversePitch: number
  rowPitch: number
  /** Rows between a tube and the next one straight below it: 2 where rows stand aside, otherwise 1. */
  fallRows: number
  width: number
  height: number
  /** True where a wide bundle is drawn only as far as it can be read. */
  cut: boolean
}

/** The pass that row `row` of `rows` belongs to: bands are cut at floor(j rows / passes) counted from pass 1's side. */
export function passOfRow(row: number, rows: number, passes: number, entry: 'bottom' | 'top'): number {
  const fromEntry = entry === 'top' ? row - 1 : rows - row
  for (let j = 1; j < passes; j++) if (fromEntry < Math.floor((j * rows) / passes)) return j
  return Math.max(1, passes)
}

/** Tubes of each row, top to bottom; null where they follow from a result that is not there yet. */
export function rowTubes(geometry: BundleGeometry, results?: readonly { tubes: number }[]): number[] | null {
  const { rows, shape, layout, tubesPerRow } = geometry
  if (results && results.length === rows) return results.map((result) => result.tubes)
  if (shape === 'circular')
    return Array.from({ length: rows }, (_, i) => circularRowTubes(layout, rows, i + 1))
  return typeof tubesPerRow === 'number' ? new Array<number>(rows).fill(tubesPerRow) : null
}

/** The cross-section in metres. A rectangular bundle wider than `most` tubes is cut on the right. */
export function section(geometry: BundleGeometry, tubes: readonly number[], most = 40): Section {
  const { layout, outsideDiameter, pitchRatio, rows, shape, passes, coolantEntry } = geometry
  const staggered = isStaggered(layout)
  const pitch = outsideDiameter * pitchRatio
  const transversePitch = pitch * transversePitchFactor(layout)
  const rowPitch = pitch * rowPitchFactor(layout)
  const widest = tubes.reduce((a, b) => Math.max(a, b), 1)
  const cut = shape === 'rectangular' && widest > most
  const round = shape === 'circular'
  const columns = cut ? most : widest
  const width = round
    ? Math.max(...tubes.map((n, i) => halfWidth(n, i, staggered, transversePitch))) * 2 + outsideDiameter
    : (columns - 1 + (staggered && rows > 1 ? 0.5 : 0)) * transversePitch + outsideDiameter
  const places = tubes.map((n, i): RowPlace => {
    const aside = staggered && i % 2 === 1
    const drawn = cut ? Math.min(n, most) : n
    const x = round
      ? width / 2 - (n === 1 && aside ? -0.5 : (n - 1) / 2) * transversePitch
      : outsideDiameter / 2 + (aside ? transversePitch / 2 : 0)
    return {
      row: i + 1,
      tubes: n,
      drawn,
      x,
      y: outsideDiameter / 2 + i * rowPitch,
      pass: passOfRow(i + 1, rows, passes, coolantEntry),
    }
  })
  return {
    rows: places,
    outsideDiameter,
    transversePitch,
    rowPitch,
    fallRows: staggered ? 2 : 1,
    width,
    height: (rows - 1) * rowPitch + outsideDiameter,
    cut,
  }
}

/** A chord row is centred; a lone tube that stands aside stands half a pitch off the middle. */
function halfWidth(tubes: number, index: number, staggered: boolean, transversePitch: number): number {
  const lone = tubes === 1 && staggered && index % 2 === 1
  return (lone ? 0.5 : (tubes - 1) / 2) * transversePitch
}

export type PassBand = { pass: number; firstRow: number; lastRow: number }

/** Passes as bands of rows, top to bottom. */
export function passBands(rows: readonly RowPlace[]): PassBand[] {
  const bands: PassBand[] = []
  for (const { row, pass } of rows) {
    const last = bands[bands.length - 1]
    if (last?.pass === pass) last.lastRow = row
    else bands.push({ pass, firstRow: row, lastRow: row })
  }
  return bands
}

/** A round length of 1, 2 or 5 times a power of ten that is at most `most`. */
export function roundLength(most: number): number {
  const power = 10 ** Math.floor(Math.log10(most))
  const times = most / power
  return (times >= 5 ? 5 : times >= 2 ? 2 : 1) * power
}

/** Place of `value` on the 24-step continuous scale between `low` and `high`; the strong end when they are equal. */
export function toneOf(value: number, low: number, high: number): number {
  if (!(high > low)) return 17
  return Math.round(Math.min(1, Math.max(0, (value - low) / (high - low))) * 23)
}
