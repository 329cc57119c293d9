// The few distributions that bands and fits need.

const ratio = (a: readonly number[], b: readonly number[], r: number): number => {
  let top = a[7]
  let bottom = b[7]
  for (let k = 6; k >= 0; k--) {
    top = top * r + a[k]
    bottom = bottom * r + b[k]
  }
  return top / bottom
}
const CENTRE = [
  [
    3.3871328727963665, 133.14166789178438, 1971.5909503065513, 13731.69376550946, 45921.95393154987,
    67265.7709270087, 33430.57558358813, 2509.0809287301227,
  ],
  [
    1, 42.31333070160091, 687.1870074920579, 5394.196021424751, 21213.794301586597, 39307.89580009271,
    28729.085735721943, 5226.495278852854,
  ],
]
const NEAR = [
  [
    1.4234371107496835, 4.630337846156546, 5.769497221460691, 3.6478483247632045, 1.2704582524523684,
    0.2417807251774506, 0.022723844989269184, 0.0007745450142783414,
  ],
  [
    1, 2.053191626637759, 1.6763848301838038, 0.6897673349851, 0.14810397642748008, 0.015198666563616457,
    0.0005475938084995345, 1.0507500716444169e-9,
  ],
]
const FAR = [
  [
    6.657904643501103, 5.463784911164114, 1.7848265399172913, 0.29656057182850487, 0.026532189526576124,
    0.0012426609473880784, 0.000027115555687434876, 2.0103343992922881e-7,
  ],
  [
    1, 0.599832206555888, 0.1369298809227358, 0.014875361290850615, 0.0007868691311456133,
    0.000018463183175100548, 1.421511758316446e-7, 2.0442631033899397e-15,
  ],
]

/** The standard normal deviate with probability p below it: M. J. Wichura, AS 241, Appl. Stat. 37 (1988) 477-484. */
export function normalQuantile(p: number): number {
  if (!(p > 0 && p < 1)) throw new RangeError(`probability ${p}; above 0 and under 1`)
  const q = p - 0.5
  if (Math.abs(q) <= 0.425) return q * ratio(CENTRE[0], CENTRE[1], 0.180625 - q * q)
  const r = Math.sqrt(-Math.log(q < 0 ? p : 1 - p))
  const z = r <= 5 ? ratio(NEAR[0], NEAR[1], r - 1.6) : ratio(FAR[0], FAR[1], r - 5)
  return q < 0 ? -z : z
}

/** ln Γ(x), x > 0: Stirling's series after shifting x above 9. */
function logGamma(x: number): number {
  let shift = 0
  let y = x
  while (y < 9) shift -= Math.log(y++)
  const w = 1 / (y * y)
  const series = (1 / 12 - w * (1 / 360 - w * (1 / 1260 - w * (1 / 1680 - w / 1188)))) / y
  return shift + (y - 0.5) * Math.log(y) - y + 0.5 * Math.log(2 * Math.PI) + series
}

/** Regularised incomplete beta by its continued fraction (Lentz). */
function incompleteBeta(x: number, a: number, b: number): number {
  if (x <= 0) return 0
  if (x >= 1) return 1
  if (x > (a + 1) / (a + b + 2)) return 1 - incompleteBeta(1 - x, b, a)
  const front =
    Math.exp(logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log1p(-x)) / a
  let c = 1
  let d = 1 / (1 - ((a + b) * x) / (a + 1))
  let h = d
  for (let m = 1; m <= 500; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m))
    d = 1 / (1 + even * d)
    c = 1 + even / c
    h *= d * c
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1))
    d = 1 / (1 + odd * d)
    c = 1 + odd / c
    const step = d * c
    h *= step
    if (Math.abs(step - 1) < 1e-15) break
  }
  return front * h
}

/** Student's t with probability p below it, by halving on its distribution. */
export function studentQuantile(p: number, freedom: number): number {
  if (!(p > 0 && p < 1)) throw new RangeError(`probability ${p}; above 0 and under 1`)
  if (!(freedom >= 1)) throw new RangeError(`${freedom} degrees of freedom; at least 1`)
  if (p < 0.5) return -studentQuantile(1 - p, freedom)
  const above = (t: number) => 0.5 * incompleteBeta(freedom / (freedom + t * t), freedom / 2, 0.5)
  let low = 0
  let high = 1
  while (above(high) > 1 - p) high *= 2
  for (let n = 0; n < 200 && high - low > 1e-13 * high; n++) {
    const middle = 0.5 * (low + high)
    if (above(middle) > 1 - p) low = middle
    else high = middle
  }
  return 0.5 * (low + high)
}

/** The value with a share p of the sorted values below it, straight between neighbours. */
export function quantile(sorted: ArrayLike<number>, p: number): number {
  if (sorted.length === 0) return Number.NaN
  const at = p * (sorted.length - 1)
  const k = Math.min(sorted.length - 2, Math.floor(at))
  if (k < 0) return sorted[0]
  const low = sorted[k]
  const high = sorted[k + 1]
  return low === high || at === k ? low : low + (at - k) * (high - low)
}

export function median(values: readonly number[]): number {
  return quantile(Float64Array.from(values).sort(), 0.5)
}
