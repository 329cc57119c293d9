import { readFileSync } from 'node:fs'
import { PassThrough } from 'node:stream'
import { buffer } from 'node:stream/consumers'
import ExcelJS from 'exceljs'
import { describe, expect, it } from 'vitest'
import { KEY_RESULT_INDEX, KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { evaluate } from '#engine/evaluate.ts'
import { evaluateRange } from '#engine/sweep/evaluate-range.ts'
import { planSweep, pointCase } from '#engine/sweep/plan.ts'
import { parseStudy } from '#engine/sweep/study.ts'
import { csvCell, csvLines } from './csv.ts'
import type { StudyReport } from './report.ts'
import { writeWorkbook } from './workbook.ts'

const raw = JSON.parse(
  readFileSync(new URL('../../../studies/ammonia-condenser.json', import.meta.url), 'utf8'),
)
raw.name = '=HYPERLINK("http://example.com")'
raw.sweep.variables = [
  { path: 'bundle.rows', values: [8, 12] },
  { path: 'drive.velocity', from: 1, to: 3, count: 5 },
]
const parsed = parseStudy(raw)
if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
const plan = planSweep(parsed.study)
const whole = new Float64Array(plan.points * KEY_RESULTS.length)
evaluateRange(plan, 0, plan.points, whole)
const areaAt = (i: number) => whole[KEY_RESULT_INDEX.outsideArea * plan.points + i]
const report: StudyReport = {
  plan,
  invented: true,
  origin: [['Run', 'a test']],
  points: plan.points,
  table: async (first, count) => {
    const out = new Float64Array(count * KEY_RESULTS.length)
    evaluateRange(plan, first, count, out)
    return out
  },
  best: [{ label: 'Best point', point: 3, case: pointCase(plan, 3), result: evaluate(pointCase(plan, 3)) }],
}

describe('the workbook', async () => {
  const stream = new PassThrough()
  const [bytes] = await Promise.all([buffer(stream), writeWorkbook(stream, report)])
  const book = new ExcelJS.Workbook()
  await book.xlsx.load(bytes as unknown as ArrayBuffer)

  it('holds every point’s numbers unrounded', () => {
    const sheet = book.getWorksheet('Points')
    const heads = sheet?.getRow(1).values as string[]
    expect(sheet?.rowCount).toBe(plan.points + 1)
    for (let i = 0; i < plan.points; i++) {
      const value = sheet?.getRow(i + 2).getCell(heads.indexOf('outside_area_m2')).value
      if (Number.isFinite(areaAt(i))) expect(value).toBe(areaAt(i))
      else expect(value).toBeNull()
    }
  })

  it('gives the best point’s figures as the result has them', () => {
    const rows = new Map<string, unknown>()
    book
      .getWorksheet('Best point')
      ?.eachRow((row) => rows.set(String(row.getCell(1).value), row.getCell(2).value))
    expect(rows.get('outsideArea')).toBe(report.best[0].result.outsideArea)
    expect(rows.get('coolant.pressureDrop')).toBe(report.best[0].result.coolant?.pressureDrop)
  })

  it('carries methods with sources, cautions and the label of invented data', () => {
    const text = (name: string) => {
      const cells: string[] = []
      book.getWorksheet(name)?.eachRow((row) => row.eachCell((cell) => cells.push(String(cell.value))))
      return cells.join('\n')
    }
    expect(text('Methods and sources')).toContain('Nusselt 1916')
    expect(text('Summary')).toContain('Invented demo data')
    expect(text('Summary')).toContain('licensed practice')
    expect(text('Summary')).toContain('B2L')
    expect(text('Summary')).toMatch(/mmonia: viscosity by .+, conductivity by .+\./)
  })

  it('has no cell that computes', () => {
    book.eachSheet((sheet) =>
      sheet.eachRow((row) => row.eachCell((cell) => expect(cell.type).not.toBe(ExcelJS.ValueType.Formula))),
    )
    expect(book.getWorksheet('Summary')?.getCell('A1').value).toBe(raw.name)
  })
})

describe('the CSV file', () => {
  it('has a line a point with the same numbers', async () => {
    let text = ''
    for await (const part of csvLines(report)) text += part
    const lines = text.trimEnd().split('\r\n')
    expect(lines).toHaveLength(plan.points + 2)
    const column = lines[1].split(',').indexOf('outside_area_m2')
    expect(Number(lines[5].split(',')[column])).toBe(areaAt(3))
  })

  it.each([
    ['=1+1', "'=1+1"],
    ['+49', "'+49"],
    ['-cmd', "'-cmd"],
    ['@sum', "'@sum"],
    ['a,"b"', '"a,""b"""'],
    [-1.5, '-1.5'],
    [null, ''],
  ])('writes %s so that no spreadsheet computes it', (cell, text) => expect(csvCell(cell)).toBe(text))
})
