import { describe, expect, it } from 'vitest'
import { readCsv } from './read.ts'

const cells = (text: string) => readCsv(text).rows.map((row) => row.cells)

describe('separated text', () => {
  it.each([
    ['commas', 'a,b\r\n1,2\r\n'],
    ['semicolons', 'a;b\n1;2'],
    ['tabs', '\uFEFFa\tb\r1\t2'],
  ])('is read with %s and any end of line', (_, text) => {
    expect(readCsv(text)).toMatchObject({ head: ['a', 'b'], rows: [{ line: 2, cells: ['1', '2'] }] })
  })

  it('keeps quoted separators, marks and lines, and counts lines as the file does', () => {
    expect(readCsv('a,b\n"x, ""y""\nz",1\n\n2,3').rows).toEqual([
      { line: 2, cells: ['x, "y" z', '1'] },
      { line: 5, cells: ['2', '3'] },
    ])
  })

  it('knows the decimal comma where commas separate nothing', () => {
    expect(readCsv('a;b\n1,25;3').decimalComma).toBe(true)
    expect(readCsv('a;b\n1,250.5;3').decimalComma).toBe(false)
    expect(readCsv('a,b\n"1,25",3').decimalComma).toBe(false)
  })

  it('takes hostile cells for data', () => {
    expect(cells('a,b\n=cmd|x,__proto__\n"a\0b",\ud83d')).toEqual([
      ['=cmd|x', '__proto__'],
      ['a b', ''],
    ])
  })

  it.each([
    ['', /it is empty/],
    ['a,b\n', /no rows/],
    ['a\n"x', /never closed/],
    [`a\n${'1\n'.repeat(50_000)}`, /more than 5000 rows/],
    [`${'a,'.repeat(200)}a\n1`, /201 columns/],
  ])('refuses %#', (text, why) => {
    expect(() => readCsv(text)).toThrow(why)
  })
})
