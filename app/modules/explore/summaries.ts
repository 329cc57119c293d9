// Many points as few numbers: a histogram, and the least of a result over a grid of two variables.

export type Histogram = {
  /** One more than there are bins. */
  edges: number[]
  met: number[]
  missed: number[]
}

/** Counts between the least and the greatest value; points without a value are left out. */
export function histogram(
  values: ArrayLike<number>,
  points: ArrayLike<number>,
  meets: (point: number) => boolean,
  bins: number,
): Histogram {
  let low = Number.POSITIVE_INFINITY
  let high = Number.NEGATIVE_INFINITY
  for (let k = 0; k < points.length; k++) {
    const value = values[points[k]]
    if (value < low) low = value
    if (value > high) high = value
  }
  if (!(low <= high)) return { edges: [], met: [], missed: [] }
  const count = low === high ? 1 : bins
  const width = (high - low) / count
  const met = new Array<number>(count).fill(0)
  const missed = new Array<number>(count).fill(0)
  for (let k = 0; k < points.length; k++) {
    const value = values[points[k]]
    if (Number.isNaN(value)) continue
    const bin = width === 0 ? 0 : Math.min(count - 1, Math.floor((value - low) / width))
    if (meets(points[k])) met[bin]++
    else missed[bin]++
  }
  const edges = Array.from({ length: count + 1 }, (_, i) => (i === count ? high : low + i * width))
  return { edges, met, missed }
}

/** The intervals or values a grid's axis is made of. */
export type GridAxis = { kind: 'values'; values: number[] } | { kind: 'edges'; edges: number[] }

/** A variable's own values where they are few, otherwise `cells` equal intervals over what the points span. */
export function gridAxis(
  column: ArrayLike<number>,
  points: ArrayLike<number>,
  own: readonly number[] | null,
  cells: number,
): GridAxis | null {
  if (own && own.length > 0 && own.length <= 40) return { kind: 'values', values: [...own] }
  let low = Number.POSITIVE_INFINITY
  let high = Number.NEGATIVE_INFINITY
  for (let k = 0; k < points.length; k++) {
    const value = column[points[k]]
    if (value < low) low = value
    if (value > high) high = value
  }
  if (!(low < high)) return low === high ? { kind: 'values', values: [low] } : null
  const edges = Array.from({ length: cells + 1 }, (_, i) => low + ((high - low) * i) / cells)
  return { kind: 'edges', edges }
}

export const axisCells = (axis: GridAxis): number =>
  axis.kind === 'values' ? axis.values.length : axis.edges.length - 1

function cellFinder(axis: GridAxis): (value: number) => number {
  if (axis.kind === 'values') {
    const places = new Map(axis.values.map((value, i) => [value, i]))
    return (value) => places.get(value) ?? -1
  }
  const { edges } = axis
  const [low] = edges
  const width = (edges[edges.length - 1] - low) / (edges.length - 1)
  return (value) =>
    value >= low && value <= edges[edges.length - 1]
      ? Math.min(edges.length - 2, Math.floor((value - low) / width))
      : -1
}

export type GridCell = {
  column: number
  row: number
  /** Least among those that meet every limit, or, where none does, among all evaluated. */
  least: number
  point: number
  meets: boolean
}

/** For each cell of a grid the point with the least `z`; cells without a value are left out. */
export function leastOverGrid(
  points: ArrayLike<number>,
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  z: ArrayLike<number>,
  meets: (point: number) => boolean,
  across: GridAxis,
  up: GridAxis,
): GridCell[] {
  const columns = axisCells(across)
  const cells: (GridCell | undefined)[] = new Array(columns * axisCells(up))
  const findColumn = cellFinder(across)
  const findRow = cellFinder(up)
  for (let k = 0; k < points.length; k++) {
    const point = points[k]
    const value = z[point]
    if (Number.isNaN(value)) continue
    const column = findColumn(x[point])
    const row = findRow(y[point])
    if (column < 0 || row < 0) continue
    const at = row * columns + column
    const known = cells[at]
    const met = meets(point)
    if (!known) cells[at] = { column, row, least: value, point, meets: met }
    else if (met === known.meets ? value < known.least : met) {
      known.least = value
      known.point = point
      known.meets = met
    }
  }
  return cells.filter((cell) => cell !== undefined)
}
