// A study as a workbook: what was found, what was put in, every point, the best point's calculation, methods and sources.
// Written as a stream, so that its size does not matter to memory.
import type { Writable } from 'node:stream'
import ExcelJS from 'exceljs'
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { type Card, RANGE_QUANTITIES } from '#engine/correlations/card.ts'
import { findCard } from '#engine/correlations/registry.ts'
import { findFluid } from '#engine/fluids/index.ts'
import type { Result } from '#engine/result.ts'
import { LIMITS } from '#engine/sweep/limits.ts'
import { OBJECTIVE_LABELS } from '#engine/sweep/objective.ts'
import type { Band } from '#engine/uncertainty/bands.ts'
import {
  CAUTIONS,
  type Cell,
  pointHeads,
  pointRow,
  type ReportedPoint,
  SLICE,
  type StudyReport,
} from './report.ts'

/** Beyond this many points the rows no longer fit what people open; CSV takes any number. */
export const WORKBOOK_POINTS = 300_000

type Sheet = ExcelJS.Worksheet

export async function writeWorkbook(stream: Writable, report: StudyReport): Promise<void> {
  const book = new ExcelJS.stream.xlsx.WorkbookWriter({ stream, useStyles: true, useSharedStrings: false })
  book.creator = 'Rowfall'
  summary(book, report)
  inputs(book, report)
  await points(book, report, stream)
  for (const point of report.best) bestPoint(book, point)
  methods(book, report)
  await book.commit()
}

const bold = { bold: true }

function add(sheet: Sheet, cells: Cell[], font?: Partial<ExcelJS.Font>): void {
  const row = sheet.addRow(cells)
  if (font) row.font = font
  row.commit()
}

function sheetOf(
  book: ExcelJS.stream.xlsx.WorkbookWriter,
  name: string,
  widths: number[],
  frozen = 0,
): Sheet {
  const sheet = book.addWorksheet(name, frozen ? { views: [{ state: 'frozen', ySplit: frozen }] } : {})
  sheet.columns = widths.map((width) => ({ width }))
  return sheet
}

function summary(book: ExcelJS.stream.xlsx.WorkbookWriter, report: StudyReport): void {
  const { plan, best } = report
  const sheet = sheetOf(book, 'Summary', [34, 60])
  add(sheet, [plan.study.name], { bold: true, size: 14 })
  if (report.invented) add(sheet, ['Invented demo data'], bold)
  if (plan.study.description) add(sheet, [plan.study.description])
  add(sheet, [])
  for (const [label, text] of report.origin) add(sheet, [label, text])
  add(sheet, ['Points', report.points])
  add(sheet, ['Least wanted', OBJECTIVE_LABELS[plan.study.objective]])
  if (best.length === 0) add(sheet, ['Best point', 'No point meets every limit.'])
  for (const { label, point, result, statement, band } of best) {
    add(sheet, [])
    add(sheet, [label, point === null ? '' : `point ${point}`], bold)
    if (statement) add(sheet, ['', statement])
    for (const [name, value] of headline(result)) add(sheet, [name, value])
    if (band) for (const [name, value] of bandCells(band)) add(sheet, [name, value])
  }
  add(sheet, [])
  add(sheet, ['Cautions'], bold)
  for (const caution of [...CAUTIONS, ...fluidCautions(report)]) add(sheet, ['', caution])
  sheet.commit()
}

function headline(result: Result): [string, Cell][] {
  return [
    ['outside_area_m2', result.outsideArea],
    ['tube_length_m', result.tubeLength],
    ['duty_w', result.duty],
    ['overall_coefficient_w_m2k', result.overallCoefficient],
    ['coolant_velocity_m_s', result.coolant?.velocity ?? null],
    ['coolant_pressure_drop_pa', result.coolant?.pressureDrop ?? null],
    ['vapour_pressure_drop_pa', result.vapour.pressureDrop],
    ['tube_count', result.tubeCount],
  ]
}

/** Quantiles under the published scatter of the methods. */
function bandCells(band: Band): [string, Cell][] {
  const name = band.quantity === 'outsideArea' ? 'outside_area_m2' : 'duty_w'
  return [
    [`${name}_p10`, band.p10],
    [`${name}_p50`, band.p50],
    [`${name}_p90`, band.p90],
    ['chance_that_length_meets_duty', band.meets],
    ['band_samples', band.samples],
    ['band_seed', band.seed],
  ]
}

/** Of each fluid that one of the study's points holds: how well its properties are known, and its safety class. */
function fluidCautions({ plan }: StudyReport): string[] {
  const swept = plan.variables.find(({ path }) => path === 'fluid')?.values ?? []
  const ids = new Set([plan.study.case.fluid, ...swept].filter((id): id is string => typeof id === 'string'))
  return [...ids].flatMap((id) => {
    const card = findFluid(id)
    if (!card) return []
    const { viscosity, conductivity } = card.grades
    const grades = `${card.name}: viscosity by ${viscosity}, conductivity by ${conductivity}.`
    const safety = card.safetyClass?.value
    return safety && safety !== 'A1'
      ? [
          grades,
          `${card.name}: safety class ${safety}; charge, ventilation and detection follow local codes and licensed practice.`,
        ]
      : [grades]
  })
}

function inputs(book: ExcelJS.stream.xlsx.WorkbookWriter, { plan }: StudyReport): void {
  const sheet = sheetOf(book, 'Inputs', [36, 24, 24, 24])
  add(sheet, ['Base case, SI units (K, Pa, W, m, kg, s)'], bold)
  for (const [path, value] of flat(plan.study.case)) add(sheet, [path, value])
  add(sheet, [])
  add(sheet, ['Varied', 'values', 'from', 'to'], bold)
  for (const { path, values, between } of plan.variables) {
    const numbers = values.every((value) => typeof value === 'number') ? (values as readonly number[]) : null
    add(sheet, [
      path,
      between ? 'sampled' : values.length,
      numbers ? Math.min(...ends(numbers)) : null,
      numbers ? Math.max(...ends(numbers)) : null,
    ])
    if (!numbers) add(sheet, ['', values.join(', ')])
  }
  add(sheet, ['Design', plan.study.sweep.design])
  add(sheet, [])
  add(sheet, ['Limits, SI units', 'at least', 'at most'], bold)
  for (const { id, label } of LIMITS) {
    const limit = plan.study.limits[id]
    if (limit) add(sheet, [label, limit.min ?? null, limit.max ?? null])
  }
  sheet.commit()
}

const ends = (values: readonly number[]): number[] =>
  values.length < 1000 ? [...values] : [values[0], values[values.length - 1]]

/** "tube.outsideDiameter" and its value, for every leaf. */
function flat(value: unknown, under = ''): [string, Cell][] {
  if (typeof value !== 'object' || value === null)
    return [[under, typeof value === 'number' ? value : String(value)]]
  return Object.entries(value).flatMap(([key, inner]) =>
    inner === undefined ? [] : flat(inner, under === '' ? key : `${under}.${key}`),
  )
}

async function points(
  book: ExcelJS.stream.xlsx.WorkbookWriter,
  report: StudyReport,
  stream: Writable,
): Promise<void> {
  const { plan } = report
  const heads = pointHeads(plan)
  const sheet = sheetOf(
    book,
    'Points',
    heads.map((head) => Math.max(12, Math.min(30, head.length + 2))),
    1,
  )
  add(sheet, heads, bold)
  for (let first = 0; first < report.points; first += SLICE) {
    const count = Math.min(SLICE, report.points - first)
    const table = await report.table(first, count)
    for (let k = 0; k < count; k++) sheet.addRow(pointRow(plan, first + k, table, k, count)).commit()
    // The writer takes no notice of a full stream: waiting here is what keeps memory flat.
    if (stream.writableNeedDrain) await drained(stream)
    else await new Promise(setImmediate)
    if (stream.destroyed) throw new Error('the download was stopped')
  }
  sheet.commit()
}

const drained = (stream: Writable): Promise<void> =>
  new Promise((resolve) => {
    const done = () => {
      stream.off('drain', done).off('close', done)
      resolve()
    }
    stream.on('drain', done).on('close', done)
  })

function bestPoint(
  book: ExcelJS.stream.xlsx.WorkbookWriter,
  { label, point, case: kase, result }: ReportedPoint,
): void {
  const sheet = sheetOf(book, label, [36, 24, 24, 24, 24, 24, 24, 24, 24, 24, 24, 24])
  add(sheet, [`${label}${point === null ? '' : `: point ${point}`}`], { bold: true, size: 13 })
  add(sheet, ['Results, SI units'], bold)
  const { rows, passes, notes, methods: used, ...rest } = result
  for (const [path, value] of flat(rest)) add(sheet, [path, value === 'null' ? null : value])
  add(sheet, [])
  add(sheet, ['Inputs'], bold)
  for (const [path, value] of flat(kase)) add(sheet, [path, value])
  table(sheet, 'Rows, from the top', rows as unknown as Record<string, unknown>[])
  table(sheet, 'Passes, from the coolant inlet', passes as unknown as Record<string, unknown>[])
  add(sheet, [])
  add(sheet, ['Notes', 'severity', 'text', 'source'], bold)
  for (const note of notes) add(sheet, [note.code, note.severity, note.text, note.source])
  add(sheet, [])
  add(sheet, ['Methods used'], bold)
  for (const [choice, id] of Object.entries(used)) add(sheet, [choice, id])
  sheet.commit()
}

function table(sheet: Sheet, title: string, records: readonly Record<string, unknown>[]): void {
  if (records.length === 0) return
  const leaves = records.map((record) => flat(record))
  add(sheet, [])
  add(sheet, [title], bold)
  add(
    sheet,
    leaves[0].map(([path]) => path),
    bold,
  )
  for (const row of leaves)
    add(
      sheet,
      row.map(([, value]) => (value === 'null' ? null : value)),
    )
}

function methods(book: ExcelJS.stream.xlsx.WorkbookWriter, { plan }: StudyReport): void {
  const sheet = sheetOf(book, 'Methods and sources', [26, 40, 70, 60, 50, 40, 30], 1)
  add(sheet, ['choice', 'method', 'equation', 'source', 'range', 'scatter', 'evidence'], bold)
  for (const [choice, id] of Object.entries(plan.study.case.methods)) {
    const card = findCard(`${choice}.${id}`)
    if (card)
      add(sheet, [
        choice,
        card.name,
        card.equation,
        card.source.join('; '),
        rangeText(card),
        card.scatter,
        card.evidence,
      ])
  }
  add(sheet, [])
  add(sheet, ['Columns of Points', 'meaning', 'symbol'], bold)
  for (const { column, label, symbol } of KEY_RESULTS) add(sheet, [column, label, symbol])
  sheet.commit()
}

function rangeText(card: Card): string {
  const parts = Object.entries(card.range).map(([quantity, range]) => {
    const { label, unit } = RANGE_QUANTITIES[quantity as keyof typeof RANGE_QUANTITIES]
    if (range === 'not stated' || range === undefined) return `${label}: not stated`
    const high = range[1] === Number.MAX_VALUE ? '' : ` to ${range[1]}`
    return `${label} ${high === '' ? 'from ' : ''}${range[0]}${high}${unit ? ` ${unit}` : ''}`
  })
  return [...parts, card.rangeText ?? ''].filter(Boolean).join('; ')
}
