import { expect, test } from 'vitest'
import { KEY_RESULT_INDEX, KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { chunkCount, chunkPointsFor, chunkRange, slicePointsFor, summarise } from './chunks.ts'

test('a chunk holds 0.15 s of one core, within bounds', () => {
  expect(chunkPointsFor(65e-6, 1_000_000)).toBe(2308)
  expect(chunkPointsFor(5e-6, 1_000_000)).toBe(5000)
  expect(chunkPointsFor(1, 20_000)).toBe(50)
  expect(chunkPointsFor(1, 1_000_000)).toBe(1000)
  expect(chunkPointsFor(65e-6, 12)).toBe(12)
})

test('a slice holds 10 ms of one core', () => {
  expect(slicePointsFor(65e-6)).toBe(154)
  expect(slicePointsFor(1)).toBe(8)
})

test('chunks cover every point once', () => {
  const run = { points: 1003, chunkPoints: 100 }
  expect(chunkCount(run)).toBe(11)
  let next = 0
  for (let chunk = 0; chunk < chunkCount(run); chunk++) {
    const { first, count } = chunkRange(run, chunk)
    expect(first).toBe(next)
    next += count
  }
  expect(next).toBe(run.points)
})

test('a summary counts outcomes and finds the first least objective among points that meet every limit', () => {
  const rows = [
    { outcome: 0, limitsNotMet: 0, outsideArea: 30 },
    { outcome: 0, limitsNotMet: 2, outsideArea: 10 },
    { outcome: 6, limitsNotMet: 0, outsideArea: Number.NaN },
    { outcome: 0, limitsNotMet: 0, outsideArea: 20 },
    { outcome: 0, limitsNotMet: 0, outsideArea: 20 },
  ]
  const table = new Float64Array(KEY_RESULTS.length * rows.length).fill(Number.NaN)
  rows.forEach((row, k) => {
    for (const [id, value] of Object.entries(row)) table[KEY_RESULT_INDEX[id] * rows.length + k] = value
  })
  const summary = summarise(table, 500, rows.length, KEY_RESULT_INDEX.outsideArea)
  expect(summary).toMatchObject({
    outcomes: [4, 0, 0, 0, 0, 0, 1],
    meetingLimits: 3,
    limitsNotMet: [0, 1],
    bestPoint: 503,
    bestObjective: 20,
  })
  expect(summary.bestResults?.[KEY_RESULT_INDEX.outsideArea]).toBe(20)
  expect(summary.leastResults[KEY_RESULT_INDEX.outsideArea]).toBe(10)
  expect(summary.greatestResults[KEY_RESULT_INDEX.outsideArea]).toBe(30)
  expect(summary.leastResults[KEY_RESULT_INDEX.duty]).toBeNaN()
  expect(summarise(table.slice(), 0, 0, 2)).toMatchObject({ bestPoint: null, bestResults: null })
})
