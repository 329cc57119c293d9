// The front of two results: the points that nothing beats in both.

/**
 * Of `found`, the points for which no other has both x and y at most as large (and one of them less), by rising x.
 * Of points equal in both, the first stays. Points without one of the values are passed over.
 */
export function paretoFront(found: Int32Array, x: Float64Array, y: Float64Array): Int32Array {
  const candidates = undominatedByBins(found, x, y)
  candidates.sort((a, b) => x[a] - x[b] || y[a] - y[b] || a - b)
  const front: number[] = []
  let least = Number.POSITIVE_INFINITY
  for (const point of candidates) {
    if (y[point] >= least) continue
    least = y[point]
    front.push(point)
  }
  return Int32Array.from(front)
}

const BINS = 2048

/** Drops most points in two passes, so that few are left to sort: a bin's least y rules out what lies right of it. */
function undominatedByBins(found: Int32Array, x: Float64Array, y: Float64Array): number[] {
  let low = Number.POSITIVE_INFINITY
  let high = Number.NEGATIVE_INFINITY
  for (const point of found) {
    const value = x[point]
    if (value < low) low = value
    if (value > high) high = value
  }
  const scale = high > low ? (BINS - 1) / (high - low) : 0
  const least = new Float64Array(BINS).fill(Number.POSITIVE_INFINITY)
  for (const point of found) {
    const bin = Math.floor((x[point] - low) * scale)
    if (y[point] < least[bin]) least[bin] = y[point]
  }
  // least[bin] becomes the least y of all bins before it.
  let before = Number.POSITIVE_INFINITY
  const own = least.slice()
  for (let bin = 0; bin < BINS; bin++) {
    least[bin] = before
    before = Math.min(before, own[bin])
  }
  const candidates: number[] = []
  for (const point of found) {
    const bin = Math.floor((x[point] - low) * scale)
    if (y[point] < least[bin]) candidates.push(point)
  }
  return candidates
}
