import { describe, expect, it } from 'vitest'
import { uniform } from '#engine/sweep/random.ts'
import { paretoFront } from './front.ts'
import { readPageQuery, readPlotQuery } from './point-query.ts'
import { matchingPoints, sortedSlice } from './select.ts'
import { thin } from './thin.ts'

const numbers = (count: number, stream: number) =>
  Float64Array.from({ length: count }, (_, i) => uniform(1, stream, i))
const all = (count: number) => Int32Array.from({ length: count }, (_, i) => i)

describe('matching points', () => {
  it('meet every condition; a point without a value meets none', () => {
    const values = Float64Array.of(1, Number.NaN, 3, 2, 2)
    const stored = Uint8Array.of(1, 1, 1, 1, 0)
    const range = { kind: 'range', values, min: 2, max: Number.POSITIVE_INFINITY } as const
    expect([...matchingPoints(5, stored, [range])]).toEqual([2, 3])
    expect([...matchingPoints(5, null, [range])]).toEqual([2, 3, 4])
    expect([...matchingPoints(5, null, [{ kind: 'equals', values, to: 2 }])]).toEqual([3, 4])
  })
})

describe('a sorted slice', () => {
  const count = 5000
  const keys = numbers(count, 2)
  for (let i = 0; i < count; i += 7) keys[i] = Number.NaN
  for (let i = 0; i < count; i += 3) keys[i] = Math.floor(keys[i] * 20)

  it.each([
    [false, 0, 100],
    [true, 0, 100],
    [false, 2000, 50],
    [true, 4990, 100],
    [false, 5000, 10],
  ])('is what a full sort has there, descending %s, from %i', (descending, offset, limit) => {
    const sign = descending ? -1 : 1
    const rank = (point: number) =>
      Number.isNaN(keys[point]) ? Number.POSITIVE_INFINITY : sign * keys[point]
    const order = [...all(count)].sort((a, b) => {
      const [p, q] = [rank(a), rank(b)]
      return p === q ? a - b : p - q
    })
    expect([...sortedSlice(all(count), keys, descending, offset, limit)]).toEqual(
      order.slice(offset, offset + limit),
    )
  })

  it('without keys is in point order, or its reverse', () => {
    expect([...sortedSlice(all(5), null, false, 1, 2)]).toEqual([1, 2])
    expect([...sortedSlice(all(5), null, true, 1, 2)]).toEqual([3, 2])
  })

  it('of equal keys is in point order', () => {
    expect([...sortedSlice(all(1000), new Float64Array(1000), true, 500, 3)]).toEqual([500, 501, 502])
  })
})

describe('the front', () => {
  it('is the set that nothing beats in both, found by comparing all with all', () => {
    const count = 800
    const x = Float64Array.from(numbers(count, 3), (u) => Math.round(u * 100))
    const y = Float64Array.from(numbers(count, 4), (u) => Math.round(u * 100))
    x[5] = Number.NaN
    y[6] = Number.NaN
    const beaten = (i: number) =>
      x.some(
        (_, j) =>
          x[j] <= x[i] &&
          y[j] <= y[i] &&
          (x[j] < x[i] || y[j] < y[i] || (x[j] === x[i] && y[j] === y[i] && j < i)),
      )
    const expected = [...all(count)].filter(
      (i) => Number.isFinite(x[i]) && Number.isFinite(y[i]) && !beaten(i),
    )
    const front = [...paretoFront(all(count), x, y)]
    expect([...front].sort((a, b) => a - b)).toEqual(expected)
    expect(front.map((i) => x[i])).toEqual(front.map((i) => x[i]).sort((a, b) => a - b))
  })

  it('of one column of equal values is a point', () => {
    expect([...paretoFront(all(3), Float64Array.of(1, 1, 1), Float64Array.of(3, 2, 2))]).toEqual([1])
    expect([...paretoFront(all(0), new Float64Array(0), new Float64Array(0))]).toEqual([])
  })
})

describe('thinning', () => {
  const count = 50_000
  // A dense blob and a sparse line.
  const x = Float64Array.from(numbers(count, 5), (u, i) => (i < 100 ? i / 100 : 0.5 + u * 0.01))
  const y = Float64Array.from(numbers(count, 6), (u, i) => (i < 100 ? 1 : u * 0.01))

  it('keeps at most what is asked, in order, with what must stay', () => {
    const shown = thin(all(count), x, y, 2000, [33_333])
    expect(shown.length).toBeLessThanOrEqual(2000)
    expect(shown.length).toBeGreaterThan(500)
    expect([...shown]).toEqual([...shown].sort((a, b) => a - b))
    expect(shown).toContain(33_333)
  })

  it('loses nothing where points are sparse', () => {
    const shown = new Set(thin(all(count), x, y, 2000))
    expect([...all(100)].every((point) => shown.has(point))).toBe(true)
  })

  it('keeps all when they fit, but those without a place', () => {
    expect([...thin(all(3), Float64Array.of(1, Number.NaN, 2), Float64Array.of(1, 1, 1), 10)]).toEqual([0, 2])
  })
})

describe('a question in an address', () => {
  it('reads order, page and filters', () => {
    const search = new URLSearchParams(
      'sort=duty&dir=down&limit=10&min.outsideArea=3.5&max.outsideArea=9&meets=1&tube.outsideDiameter=0.01905&fluid=water',
    )
    expect(readPageQuery(search)).toEqual({
      ok: true,
      query: {
        sort: 'duty',
        descending: true,
        limit: 10,
        offset: undefined,
        filters: {
          ranges: { outsideArea: { min: 3.5, max: 9 } },
          inputs: { 'tube.outsideDiameter': 0.01905, fluid: 'water' },
          outcome: undefined,
          meetingLimits: true,
        },
      },
    })
  })

  it('lists every fault', () => {
    const reading = readPlotQuery(new URLSearchParams('x=duty&max=1e9&min.duty=big&outcome=fine'))
    expect(reading.ok).toBe(false)
    if (reading.ok) return
    expect(reading.faults.join('\n')).toMatch(/y: is missing/)
    expect(reading.faults.join('\n')).toMatch(/max: is above 20000/)
    expect(reading.faults.join('\n')).toMatch(/min\.duty: is not a number/)
    expect(reading.faults.join('\n')).toMatch(/outcome: is no outcome; outcomes: evaluated/)
  })
})
