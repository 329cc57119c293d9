import ExcelJS from 'exceljs'
import { afterAll, beforeAll, expect, test } from 'vitest'
import { db, pool } from '#app/db.server.ts'
import { queue } from '#app/jobs/queue.server.ts'
import { JobWorker } from '#app/jobs/worker.server.ts'
import { pauseRun } from '#app/modules/runs/runs.server.ts'
import type { Run } from '#drizzle/schema/run.ts'
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { acting, definition, ended, plantRun } from '#tests/crash/fixtures.ts'
import { csvResponse, workbookResponse } from './exports.server.ts'

/** Codes and masks stand in files as words. */
const NUMBERS = KEY_RESULTS.filter(({ id }) => !['outcome', 'limitsNotMet', 'notes'].includes(id))

let done: Run
let stored: Record<string, number | null>[]

beforeAll(async () => {
  const worker = new JobWorker({ threads: 1 })
  const work = worker.work()
  // Chunks that no file's slices fit.
  done = await ended((await plantRun(definition({ velocities: 31, inlets: 23 }), 333)).id)
  worker.drain()
  await work
  const { rows } = await db.execute<Record<string, number | null>>(
    `select * from run_point where run_id = '${done.id}' order by point`,
  )
  stored = rows
})
afterAll(async () => {
  await (await queue()).stop({ close: false, graceful: false })
  await pool.end()
})

test('the CSV file’s numbers are the stored ones, every point, in order', async () => {
  const response = await csvResponse(done.id)
  expect(response.headers.get('Content-Disposition')).toMatch(/^attachment; filename="[A-Za-z0-9.-]+\.csv"$/)
  const [head, ...lines] = (await response.text()).trimEnd().split('\r\n')
  const heads = head.split(',')
  expect(lines).toHaveLength(done.points)
  lines.forEach((line, i) => {
    const cells = line.split(',')
    expect(Number(cells[heads.indexOf('point')])).toBe(i)
    for (const { column } of NUMBERS) {
      const cell = cells[heads.indexOf(column)]
      expect(cell === '' ? null : Number(cell)).toBe(stored[i][column])
    }
  })
})

test('a filtered CSV file has the points that pass, and no other', async () => {
  const max = 60_000
  const response = await csvResponse(done.id, {
    outcome: 'evaluated',
    ranges: { coolantPressureDrop: { max } },
  })
  const [head, ...lines] = (await response.text()).trimEnd().split('\r\n')
  const at = head.split(',').indexOf('point')
  const expected = stored.flatMap(({ point, outcome, coolant_pressure_drop_pa: drop }) =>
    outcome === 0 && drop !== null && drop <= max ? Number(point) : [],
  )
  expect(expected.length).toBeGreaterThan(0)
  expect(expected.length).toBeLessThan(done.points)
  expect(lines.map((line) => Number(line.split(',')[at]))).toEqual(expected)
})

test('the workbook’s numbers are the stored ones, every point, in order', async () => {
  const response = await workbookResponse(done.id)
  const book = new ExcelJS.Workbook()
  await book.xlsx.load(await response.arrayBuffer())
  const sheet = book.getWorksheet('Points')
  if (!sheet) throw new Error('no sheet of points')
  const headRow = Array.from({ length: 10 }, (_, k) => k + 1).find((row) =>
    (sheet.getRow(row).values as unknown[]).includes('outside_area_m2'),
  ) as number
  const heads = sheet.getRow(headRow).values as unknown[]
  for (let i = 0; i < done.points; i++) {
    const row = sheet.getRow(headRow + 1 + i)
    expect(row.getCell(heads.indexOf('point')).value).toBe(i)
    for (const { column } of NUMBERS)
      expect(row.getCell(heads.indexOf(column)).value ?? null).toBe(stored[i][column])
  }
  expect(sheet.rowCount).toBe(headRow + done.points)
})

test('a run under way gives its stored points, and says so for the others', async () => {
  const planned = await plantRun(definition({ velocities: 5, inlets: 5 }), 20)
  await pauseRun(planned.id, acting)
  const lines = (await (await csvResponse(planned.id)).text()).trimEnd().split('\r\n')
  expect(lines).toHaveLength(planned.points + 1)
  expect(lines[1]).toContain('notComputed')
})
