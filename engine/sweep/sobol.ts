// Sobol sequence by direct indexing: coordinate j of point i, any i, in any order.

// Primitive polynomials (degree s, coefficients a) and initial direction numbers m for dimensions 2 to 21:
// S. Joe, F. Y. Kuo, "Constructing Sobol sequences with better two-dimensional projections",
// SIAM J. Sci. Comput. 30 (2008) 2635-2654, their table "new-joe-kuo-6". Dimension 1 is the van der Corput sequence.
const TABLE: readonly (readonly [s: number, a: number, m: readonly number[]])[] = [
  [1, 0, [1]],
  [2, 1, [1, 3]],
  [3, 1, [1, 3, 1]],
  [3, 2, [1, 1, 1]],
  [4, 1, [1, 1, 3, 3]],
  [4, 4, [1, 3, 5, 13]],
  [5, 2, [1, 1, 5, 5, 17]],
  [5, 4, [1, 1, 5, 5, 5]],
  [5, 7, [1, 1, 7, 11, 19]],
  [5, 11, [1, 1, 5, 1, 1]],
  [5, 13, [1, 1, 1, 3, 11]],
  [5, 14, [1, 3, 5, 5, 31]],
  [6, 1, [1, 3, 3, 9, 7, 49]],
  [6, 13, [1, 1, 1, 15, 21, 21]],
  [6, 16, [1, 3, 1, 13, 27, 49]],
  [6, 19, [1, 1, 1, 15, 7, 5]],
  [6, 22, [1, 3, 1, 15, 13, 25]],
  [6, 25, [1, 1, 5, 5, 19, 61]],
  [7, 1, [1, 3, 7, 11, 23, 15, 103]],
  [7, 4, [1, 3, 7, 13, 13, 15, 69]],
]

const BITS = 32

/** As many variables as the direction numbers above cover. */
export const SOBOL_MAX_VARIABLES = TABLE.length + 1

function directions(dimension: number): Uint32Array {
  const v = new Uint32Array(BITS)
  if (dimension === 0) {
    for (let k = 0; k < BITS; k++) v[k] = 2 ** (31 - k)
    return v
  }
  const [s, a, m] = TABLE[dimension - 1]
  for (let k = 0; k < BITS; k++) {
    if (k < s) {
      v[k] = m[k] * 2 ** (31 - k)
      continue
    }
    let value = v[k - s] ^ (v[k - s] >>> s)
    for (let j = 1; j < s; j++) if ((a >>> (s - 1 - j)) & 1) value ^= v[k - j]
    v[k] = value >>> 0
  }
  return v
}

const cache: Uint32Array[] = []

/** The 32 bits of coordinate `dimension` (from 0) of point `index` (from 0), in the sequence's Gray-code order. */
export function sobolBits(dimension: number, index: number): number {
  if (!(dimension >= 0 && dimension < SOBOL_MAX_VARIABLES))
    throw new RangeError(`Sobol: dimension ${dimension}; 0 to ${SOBOL_MAX_VARIABLES - 1} are covered`)
  cache[dimension] ??= directions(dimension)
  const v = cache[dimension]
  let gray = (index ^ (index >>> 1)) >>> 0
  let bits = 0
  for (let k = 0; gray !== 0; k++, gray >>>= 1) if (gray & 1) bits ^= v[k]
  return bits >>> 0
}
