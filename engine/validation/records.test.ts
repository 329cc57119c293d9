import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { cards, findCard } from '#engine/correlations/registry.ts'
import { validationRecords, validationReport } from './records.ts'
import { reportText } from './report.ts'

describe('the validation report', () => {
  it.each(validationReport())(
    '$title: $expected against $obtained ($source)',
    ({ within, deviation, tolerance }) => {
      expect(within, `deviation ${deviation}, allowed ${tolerance}`).toBe(true)
    },
  )

  it('names cards that exist, and each record once', () => {
    for (const record of validationRecords)
      for (const id of record.cards) expect(findCard(id), id).toBeDefined()
    expect(new Set(validationRecords.map(({ id }) => id)).size).toBe(validationRecords.length)
  })

  it('speaks for every default method that claims a printed value', () => {
    const spoken = new Set(validationRecords.flatMap(({ cards }) => cards))
    for (const card of cards.filter((card) => card.default && card.evidence === 'printed value checked'))
      expect(spoken.has(card.id), card.id).toBe(true)
  })

  it('stands in the repository as it is now (npm run validation)', () => {
    // Obtained values may move in their last digits between processors; what is said of them may not.
    const said = (text: string) => text.replace(/\| -?[\d.e+-]+ % \|/g, '| |')
    expect(said(readFileSync(new URL('./REPORT.md', import.meta.url), 'utf8'))).toBe(said(reportText()))
  })
})
