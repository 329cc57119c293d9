// The first sheet of a workbook as rows of text. What it would unfold to is measured before anything is unfolded for good.
import { inflateRawSync } from 'node:zlib'
import ExcelJS from 'exceljs'
import { AppError } from '#app/http/errors.ts'
import { MOST_COLUMNS, MOST_ROWS, type Sheet, sheetOf } from './read.ts'

/** 5000 rows of some twenty columns are 4 MB of sheet. */
const LARGEST_UNFOLDED = 24_000_000

const noWorkbook = () =>
  new AppError(
    'invalid',
    'File: it is no workbook that can be read; save it as .xlsx or as CSV and send it again.',
  )

export async function readWorkbook(file: Buffer): Promise<Sheet> {
  checkUnfolded(file)
  const book = new ExcelJS.Workbook()
  try {
    await book.xlsx.load(file as unknown as ArrayBuffer)
  } catch {
    throw noWorkbook()
  }
  const sheet = book.worksheets[0]
  if (!sheet)
    throw new AppError('invalid', 'File: the workbook has no sheet; put head and rows on the first one.')
  const lines: { line: number; cells: string[] }[] = []
  sheet.eachRow((row, line) => {
    if (lines.length > MOST_ROWS + 1) return
    const width = Math.min(row.cellCount, MOST_COLUMNS + 1)
    lines.push({ line, cells: Array.from({ length: width }, (_, i) => cellText(row.getCell(i + 1).value)) })
  })
  return sheetOf(lines, true)
}

/** A formula stands for the value that was saved with it; without one it stays a formula, which no column takes. */
function cellText(value: ExcelJS.CellValue): string {
  if (value === null || value === undefined) return ''
  if (value instanceof Date) return value.toISOString()
  if (typeof value !== 'object') return String(value)
  if ('richText' in value) return value.richText.map(({ text }) => text).join('')
  if ('error' in value) return value.error
  if ('text' in value) return String(value.text)
  if ('formula' in value || 'sharedFormula' in value) {
    const { result } = value
    if (result === null || result === undefined) return `=${'formula' in value ? value.formula : ''}`
    return typeof result === 'object' && 'formula' in result ? '=' : cellText(result as ExcelJS.CellValue)
  }
  return ''
}

const END = 0x06054b50
const ENTRY = 0x02014b50

/** Unfolds every entry of the archive once, never further than the whole may be. */
function checkUnfolded(file: Buffer): void {
  const from = Math.max(0, file.length - 65_557)
  let end = file.length - 22
  while (end >= from && file.readUInt32LE(end) !== END) end--
  if (end < from || end < 0) throw noWorkbook()
  const entries = file.readUInt16LE(end + 10)
  let at = file.readUInt32LE(end + 16)
  let left = LARGEST_UNFOLDED
  for (let k = 0; k < entries; k++) {
    if (at + 46 > file.length || file.readUInt32LE(at) !== ENTRY) throw noWorkbook()
    const method = file.readUInt16LE(at + 10)
    const packed = file.readUInt32LE(at + 20)
    const local = file.readUInt32LE(at + 42)
    if (local + 30 > file.length) throw noWorkbook()
    const start = local + 30 + file.readUInt16LE(local + 26) + file.readUInt16LE(local + 28)
    if (start + packed > file.length) throw noWorkbook()
    left -= method === 0 ? packed : unfoldedSize(file.subarray(start, start + packed), left)
    if (left < 0) throw tooLarge()
    at += 46 + file.readUInt16LE(at + 28) + file.readUInt16LE(at + 30) + file.readUInt16LE(at + 32)
  }
}

const tooLarge = () =>
  new AppError(
    'too-large',
    `File: unfolded the workbook is larger than ${LARGEST_UNFOLDED / 1e6} MB; send the measured rows alone, or a CSV.`,
  )

function unfoldedSize(packed: Buffer, most: number): number {
  try {
    return inflateRawSync(packed, { maxOutputLength: Math.max(1, most) }).length
  } catch (error) {
    throw (error as NodeJS.ErrnoException).code === 'ERR_BUFFER_TOO_LARGE' ? tooLarge() : noWorkbook()
  }
}
