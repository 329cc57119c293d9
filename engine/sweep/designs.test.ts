import { describe, expect, it } from 'vitest'
import { editDistance, nearest } from './nearest.ts'
import { hash32, shuffledIndex, uniform } from './random.ts'
import { SOBOL_MAX_VARIABLES, sobolBits } from './sobol.ts'

describe('seeded numbers', () => {
  it('depend on seed, stream and index, and on nothing else', () => {
    expect(hash32(1, 2, 3)).toBe(hash32(1, 2, 3))
    const seen = new Set([hash32(1, 2, 3), hash32(2, 2, 3), hash32(1, 3, 3), hash32(1, 2, 4)])
    expect(seen.size).toBe(4)
  })

  it('are uniform: mean 1/2 and variance 1/12 within three standard errors', () => {
    const n = 20_000
    let sum = 0
    let square = 0
    for (let i = 0; i < n; i++) {
      const u = uniform(7, 3, i)
      expect(u > 0 && u < 1).toBe(true)
      sum += u
      square += u * u
    }
    expect(Math.abs(sum / n - 1 / 2)).toBeLessThan(3 * Math.sqrt(1 / 12 / n))
    expect(Math.abs(square / n - 1 / 3)).toBeLessThan(3 * Math.sqrt(4 / 45 / n))
  })

  it.each([1, 2, 3, 4, 5, 16, 17, 1000, 4097])('shuffle 0 … n-1 without loss, n = %i', (size) => {
    const seen = new Uint8Array(size)
    let moved = 0
    for (let i = 0; i < size; i++) {
      const to = shuffledIndex(11, 2, i, size)
      seen[to]++
      if (to !== i) moved++
    }
    expect(seen.every((count) => count === 1)).toBe(true)
    if (size > 100) expect(moved).toBeGreaterThan(size * 0.9)
  })

  it('shuffle a million without loss', () => {
    const size = 1_000_000
    const seen = new Uint8Array(size)
    for (let i = 0; i < size; i++) seen[shuffledIndex(5, 0, i, size)]++
    expect(seen.every((count) => count === 1)).toBe(true)
  })
})

describe('Sobol sequence', () => {
  it('begins as printed by Bratley and Fox (ACM TOMS 14, 1988): 0, 1/2, 3/4, 1/4, 3/8, 7/8, 5/8, 1/8', () => {
    const shares = Array.from({ length: 8 }, (_, i) => sobolBits(0, i) / 2 ** 32)
    expect(shares).toEqual([0, 0.5, 0.75, 0.25, 0.375, 0.875, 0.625, 0.125])
  })

  // As scipy.stats.qmc.Sobol(d=2, scramble=False) prints them, which uses the same table.
  it('second dimension begins 0, 1/2, 1/4, 3/4, 3/8, 7/8, 1/8, 5/8', () => {
    const shares = Array.from({ length: 8 }, (_, i) => sobolBits(1, i) / 2 ** 32)
    expect(shares).toEqual([0, 0.5, 0.25, 0.75, 0.375, 0.875, 0.125, 0.625])
  })

  it('agrees with scipy 1.17.1 (qmc.Sobol(d=21, scramble=False)) at point 1000 in every dimension', () => {
    const printed = [
      225, 99, 531, 693, 287, 929, 47, 921, 513, 71, 87, 261, 165, 393, 147, 379, 737, 353, 1015, 743, 535,
    ]
    expect(printed.map((_, d) => sobolBits(d, 1000) / 2 ** 22)).toEqual(printed)
  })

  it('puts one of its first 2^k points in each of 2^k equal parts, in every dimension', () => {
    for (let dimension = 0; dimension < SOBOL_MAX_VARIABLES; dimension++)
      for (const k of [1, 4, 7, 12]) {
        const cells = new Uint8Array(2 ** k)
        for (let i = 0; i < 2 ** k; i++) cells[sobolBits(dimension, i) >>> (32 - k)]++
        expect(cells.every((count) => count === 1)).toBe(true)
      }
  })

  it('has Sobol’s property A in two dimensions: one of 4 points in each quarter, for every aligned block of 4', () => {
    for (let block = 0; block < 64; block++) {
      const cells = new Uint8Array(4)
      for (let i = 4 * block; i < 4 * block + 4; i++)
        cells[(sobolBits(0, i) >>> 31) * 2 + (sobolBits(1, i) >>> 31)]++
      expect([...cells]).toEqual([1, 1, 1, 1])
    }
  })

  it('no two dimensions are the same', () => {
    const heads = new Set<string>()
    for (let d = 0; d < SOBOL_MAX_VARIABLES; d++)
      heads.add(Array.from({ length: 64 }, (_, i) => sobolBits(d, i)).join())
    expect(heads.size).toBe(SOBOL_MAX_VARIABLES)
  })

  it('refuses a dimension its numbers do not cover', () => {
    expect(() => sobolBits(SOBOL_MAX_VARIABLES, 0)).toThrow(/0 to 20/)
  })
})

describe('nearest name', () => {
  it('counts edits, neighbours swapped as one', () => {
    expect(editDistance('kitten', 'sitting')).toBe(3)
    expect(editDistance('rwos', 'rows')).toBe(1)
  })

  it('finds what was meant and keeps quiet when nothing is near', () => {
    const known = ['bundle.rows', 'bundle.passes', 'tube.outsideDiameter']
    expect(nearest('bundle.row', known)).toBe('bundle.rows')
    expect(nearest('tube.diameter', known)).toBe(null)
    expect(nearest('rows', known)).toBe('bundle.rows')
    expect(nearest('tube.outsidediameter', known)).toBe('tube.outsideDiameter')
    expect(nearest('colour', known)).toBe(null)
  })
})
