import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { cards, findCard } from '#engine/correlations/registry.ts'
import { validationRecords, validationReport } from './records.ts'
import { reportText, unverifiedDefaults } from './report.ts'

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

  it('calls a default method unverified exactly where no printed value stands behind it', () => {
    const listed = reportText().split('## Default methods')[1].split('## ')[0]
    for (const card of cards.filter((card) => card.default && card.methodId !== undefined)) {
      const printed = validationRecords.some(
        ({ cards, evidence }) => cards.includes(card.id) && evidence.startsWith('printed value'),
      )
      expect(listed.includes(`- ${card.name}: `), card.id).toBe(!printed)
      // The card itself may claim no more than the records show.
      if (!printed) expect(card.evidence, card.id).not.toBe('printed value checked')
    }
    expect(unverifiedDefaults().length).toBeGreaterThan(0)
  })

  it('has a source for every record, and no tolerance wider than its evidence bears', () => {
    for (const { id, source, evidence, tolerance, why } of validationRecords) {
      expect(source.length > 0 && why.length > 0, id).toBe(true)
      // Bands are as wide as the measurements, charts and joints of a fit as they say.
      if (evidence.includes('value computed') && !why.includes('jump'))
        expect(tolerance, id).toBeLessThanOrEqual(0.01)
    }
  })

  it('stands in the repository as it is now (npm run validation)', () => {
    // Obtained values may move in their last digits between processors; what is said of them may not.
    const said = (text: string) => text.replace(/-?[\d.e+-]+ %(?= \|)/g, '')
    expect(said(readFileSync(new URL('./REPORT.md', import.meta.url), 'utf8'))).toBe(said(reportText()))
  })
})
