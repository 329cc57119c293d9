// A file of measured points as a head and rows of text. Pure; every cell is data, whatever it looks like.
import { AppError } from '#app/http/errors.ts'

export const MOST_ROWS = 5000
export const MOST_COLUMNS = 100
export const LARGEST_FILE = 8_000_000
const LONGEST_CELL = 500

export type Sheet = {
  head: string[]
  rows: { line: number; cells: string[] }[]
  /** The file writes 1,25 for 1.25. */
  decimalComma: boolean
}

/** Comma-, semicolon- or tab-separated text (RFC 4180). */
export function readCsv(text: string): Sheet {
  const plain = text.replace(/^\uFEFF/, '')
  const separator = separatorOf(plain)
  return sheetOf(cut(plain, separator), separator !== ',')
}

/** Lines of cells as a sheet: the first line that is not empty is the head. */
export function sheetOf(lines: Iterable<{ line: number; cells: string[] }>, mayHaveComma: boolean): Sheet {
  let head: string[] | null = null
  const rows: Sheet['rows'] = []
  for (const { line, cells } of lines) {
    const tidy = cells.map((cell) => cleaned(cell))
    if (tidy.every((cell) => cell === '')) continue
    if (head === null) {
      while (tidy.at(-1) === '') tidy.pop()
      if (tidy.length > MOST_COLUMNS)
        throw new AppError(
          'invalid',
          `File: it has ${tidy.length} columns; at most ${MOST_COLUMNS} are read.`,
        )
      head = tidy
      continue
    }
    if (rows.length === MOST_ROWS)
      throw new AppError(
        'too-large',
        `File: it has more than ${MOST_ROWS} rows; average the readings of each steady state, or send a part.`,
      )
    rows.push({ line, cells: head.map((_, i) => tidy[i] ?? '') })
  }
  if (head === null)
    throw new AppError(
      'invalid',
      'File: it is empty; the first row names the columns, each further row is a point.',
    )
  if (rows.length === 0)
    throw new AppError(
      'invalid',
      'File: it has a head but no rows; each row below the head is a measured point.',
    )
  const cells = rows.flatMap((row) => row.cells)
  return {
    head,
    rows,
    decimalComma:
      mayHaveComma &&
      cells.some((cell) => /\d,\d/.test(cell)) &&
      !cells.some((cell) => /^\S*\d\.\d/.test(cell)),
  }
}

/** What PostgreSQL cannot keep and no page can show is left out. */
const cleaned = (cell: string) =>
  cell
    .slice(0, LONGEST_CELL)
    .replace(/[\p{Cc}\p{Cs}]/gu, ' ')
    .trim()

/** The separator that the head has most of, outside quotes. */
function separatorOf(text: string): ',' | ';' | '\t' {
  const end = /\r|\n/.exec(text.slice(0, 100_000))?.index ?? text.length
  const head = text.slice(0, Math.min(end, 100_000)).replace(/"[^"]*"/g, '')
  const count = (sign: string) => head.split(sign).length
  if (count('\t') > 1) return '\t'
  return count(';') > 1 ? ';' : ','
}

function* cut(text: string, separator: string): Generator<{ line: number; cells: string[] }> {
  let line = 1
  let first = 1
  let cells: string[] = []
  let cell = ''
  let quoted = false
  for (let i = 0; i < text.length; i++) {
    const sign = text[i]
    if (quoted) {
      if (sign === '\n') line++
      if (sign !== '"') cell += sign
      else if (text[i + 1] === '"') {
        cell += '"'
        i++
      } else quoted = false
    } else if (sign === '"' && cell.trim() === '') {
      quoted = true
      cell = ''
    } else if (sign === separator) {
      cells.push(cell)
      cell = ''
    } else if (sign === '\n' || sign === '\r') {
      if (sign === '\r' && text[i + 1] === '\n') i++
      cells.push(cell)
      yield { line: first, cells }
      line++
      first = line
      cells = []
      cell = ''
    } else cell += sign
  }
  if (quoted)
    throw new AppError(
      'invalid',
      `File: a quotation mark opened in line ${first} is never closed; close or drop it.`,
    )
  if (cell !== '' || cells.length > 0) yield { line: first, cells: [...cells, cell] }
}
