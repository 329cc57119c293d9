// Seeded numbers that depend on nothing but their arguments, so that point i of a design is the same in any chunk, thread or order.

/** Mixes three whole numbers into 32 well spread bits (finaliser of MurmurHash3, public domain). */
export function hash32(seed: number, stream: number, index: number): number {
  let h = (seed | 0) ^ Math.imul(stream + 0x9e3779b9, 0x85ebca6b)
  h = finalise(h)
  h ^= Math.imul(index + 0x7f4a7c15, 0xc2b2ae35)
  return finalise(h)
}

function finalise(h: number): number {
  h ^= h >>> 16
  h = Math.imul(h, 0x85ebca6b)
  h ^= h >>> 13
  h = Math.imul(h, 0xc2b2ae35)
  h ^= h >>> 16
  return h >>> 0
}

/** Uniform in (0, 1): never 0 and never 1, so that a geometric range stays inside its ends. */
export function uniform(seed: number, stream: number, index: number): number {
  return (hash32(seed, stream, index) + 0.5) / 4294967296
}

/**
 * Where `index` lands in a seeded shuffle of 0 … size-1, without storing the shuffle.
 *
 * A four-round Feistel network is a bijection on the next power of four; walking its cycle until the value
 * falls under `size` keeps it a bijection there (at most four steps on average).
 */
export function shuffledIndex(seed: number, stream: number, index: number, size: number): number {
  if (size <= 1) return 0
  let half = 1
  while (2 ** (2 * half) < size) half++
  const mask = 2 ** half - 1
  let value = index
  do {
    let left = Math.floor(value / (mask + 1))
    let right = value & mask
    for (let round = 0; round < 4; round++) {
      const next = left ^ (hash32(seed, stream * 4 + round + 101, right) & mask)
      left = right
      right = next
    }
    value = left * (mask + 1) + right
  } while (value >= size)
  return value
}
