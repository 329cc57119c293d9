// Fewer points for a plot, with the cloud's shape kept: crowded places lose points, sparse ones none.

/**
 * At most `max` of `found`, in point order. The plot's area is divided into cells, and each keeps at most so many that
 * all together fit; `always` are kept whatever happens. Points without x or y are left out.
 */
export function thin(
  found: Int32Array,
  x: Float64Array,
  y: Float64Array,
  max: number,
  always: Iterable<number> = [],
): Int32Array {
  const plotted = found.filter((point) => Number.isFinite(x[point]) && Number.isFinite(y[point]))
  if (plotted.length <= max) return plotted
  // So few cells that each can keep a point.
  const side = Math.max(1, Math.floor(Math.sqrt(max / 2)))
  const cell = cellsOf(plotted, x, y, side)
  const counts = new Int32Array(side * side)
  for (const at of cell) counts[at]++

  const kept = new Set<number>()
  for (const point of always) if (kept.size < max) kept.add(point)
  const share = greatestShare(counts, max - kept.size)
  const taken = new Int32Array(side * side)
  const shown: number[] = []
  for (let k = 0; k < plotted.length; k++) {
    const point = plotted[k]
    // Spread over the cell's points, not the first of them.
    const at = cell[k]
    const seen = taken[at]++
    const wanted = Math.min(share, counts[at])
    const turn = Math.floor(((seen + 1) * wanted) / counts[at]) > Math.floor((seen * wanted) / counts[at])
    if (turn || kept.has(point)) shown.push(point)
  }
  return Int32Array.from(shown)
}

function cellsOf(points: Int32Array, x: Float64Array, y: Float64Array, side: number): Int32Array {
  const [left, across] = extent(points, x, side)
  const [bottom, up] = extent(points, y, side)
  return Int32Array.from(
    points,
    (point) => Math.floor((x[point] - left) * across) * side + Math.floor((y[point] - bottom) * up),
  )
}

/** Least value, and the factor that takes a distance from it to a cell's number. */
function extent(points: Int32Array, values: Float64Array, side: number): [number, number] {
  let low = Number.POSITIVE_INFINITY
  let high = Number.NEGATIVE_INFINITY
  for (const point of points) {
    const value = values[point]
    if (value < low) low = value
    if (value > high) high = value
  }
  return [low, high > low ? (side * (1 - 1e-12)) / (high - low) : 0]
}

/** The largest number of points a cell may keep so that no more than `budget` are kept in all. */
function greatestShare(counts: Int32Array, budget: number): number {
  const total = (share: number) => counts.reduce((sum, count) => sum + Math.min(count, share), 0)
  let low = 0
  let high = Math.max(1, budget)
  while (low < high) {
    const middle = Math.ceil((low + high) / 2)
    if (total(middle) <= budget) low = middle
    else high = middle - 1
  }
  return low
}
