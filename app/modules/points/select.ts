// Choosing and ordering points by columns of numbers: a million of them in some hundredths of a second.

/** One condition on a point; every one given must hold. Comparisons with NaN hold for none. */
export type Condition =
  | { kind: 'range'; values: Float64Array; min: number; max: number }
  | { kind: 'equals'; values: Float64Array; to: number }
  | { kind: 'test'; test: (point: number) => boolean }

/** Points that are stored and meet every condition, in point order. */
export function matchingPoints(
  points: number,
  stored: Uint8Array | null,
  conditions: readonly Condition[],
): Int32Array {
  let found = new Int32Array(points)
  let n = 0
  for (let i = 0; i < points; i++) if (stored === null || stored[i] === 1) found[n++] = i
  // Condition by condition over the survivors: each loop sees one kind of test and stays fast.
  for (const condition of conditions) {
    let kept = 0
    if (condition.kind === 'range') {
      const { values, min, max } = condition
      for (let k = 0; k < n; k++) {
        const value = values[found[k]]
        if (value >= min && value <= max) found[kept++] = found[k]
      }
    } else if (condition.kind === 'equals') {
      const { values, to } = condition
      for (let k = 0; k < n; k++) if (values[found[k]] === to) found[kept++] = found[k]
    } else {
      for (let k = 0; k < n; k++) if (condition.test(found[k])) found[kept++] = found[k]
    }
    n = kept
  }
  if (n < found.length) found = found.subarray(0, n)
  return found
}

/**
 * Of `found`, the `limit` points from place `offset` on when sorted by `keys` (null: by point number). Points without
 * a value come last either way, equals in point order. Reorders `found`.
 */
export function sortedSlice(
  found: Int32Array,
  keys: Float64Array | null,
  descending: boolean,
  offset: number,
  limit: number,
): Int32Array {
  const n = found.length
  const end = Math.min(n, offset + limit)
  if (offset >= end) return new Int32Array(0)
  if (keys === null) {
    if (!descending) return found.slice(offset, end)
    return found.slice(n - end, n - offset).reverse()
  }
  const sign = descending ? -1 : 1
  // Sorting by rank puts NaN last without a test in every comparison.
  const ranks = new Float64Array(n)
  for (let k = 0; k < n; k++) {
    const key = sign * keys[found[k]]
    ranks[k] = Number.isNaN(key) ? Number.POSITIVE_INFINITY : key
  }
  partition(found, ranks, 0, n - 1, offset)
  partition(found, ranks, offset, n - 1, end - 1)
  const order = Array.from({ length: end - offset }, (_, k) => offset + k)
  order.sort((a, b) => ranks[a] - ranks[b] || found[a] - found[b])
  return Int32Array.from(order, (k) => found[k])
}

/** Quickselect: afterwards place `at` holds what sorting would put there, with nothing greater before it. */
function partition(found: Int32Array, ranks: Float64Array, low: number, high: number, at: number): void {
  while (low < high) {
    const middle = (low + high) >> 1
    if (after(found, ranks, low, middle)) swap(found, ranks, low, middle)
    if (after(found, ranks, low, high)) swap(found, ranks, low, high)
    if (after(found, ranks, middle, high)) swap(found, ranks, middle, high)
    const pivot = ranks[middle]
    const pivotPoint = found[middle]
    let i = low
    let j = high
    while (i <= j) {
      while (ranks[i] < pivot || (ranks[i] === pivot && found[i] < pivotPoint)) i++
      while (ranks[j] > pivot || (ranks[j] === pivot && found[j] > pivotPoint)) j--
      if (i > j) break
      swap(found, ranks, i, j)
      i++
      j--
    }
    if (at <= j) high = j
    else if (at >= i) low = i
    else return
  }
}

const after = (found: Int32Array, ranks: Float64Array, a: number, b: number): boolean =>
  ranks[a] > ranks[b] || (ranks[a] === ranks[b] && found[a] > found[b])

function swap(found: Int32Array, ranks: Float64Array, a: number, b: number): void {
  const point = found[a]
  found[a] = found[b]
  found[b] = point
  const rank = ranks[a]
  ranks[a] = ranks[b]
  ranks[b] = rank
}
