import { describe, expect, it } from 'vitest'
import { digitGroups, duration, groupedText, significant } from './number-format.ts'

describe('significant', () => {
  it('keeps the digits asked for and no exponent', () => {
    expect(significant(41.76, 3)).toBe('41.8')
    expect(significant(1142.4, 3)).toBe('1140')
    expect(significant(0.04213, 3)).toBe('0.0421')
    expect(significant(-6.1, 4)).toBe('-6.100')
    expect(significant(0, 3)).toBe('0')
  })
  it('carries a rounding into the next power of ten', () => {
    expect(significant(9.996, 3)).toBe('10.0')
    expect(significant(99.96, 3)).toBe('100')
  })
  it('shows a dash for what is not a number', () => {
    expect(significant(Number.NaN, 3)).toBe('–')
  })
})

describe('digitGroups', () => {
  it('groups whole digits only, and the text put together is unchanged', () => {
    for (const text of ['1', '12', '123', '1234', '48000', '1000000', '-12345.678', '0.04213', '–']) {
      expect(digitGroups(text).join('')).toBe(text)
    }
    expect(digitGroups('-12345.678')).toEqual(['-12', '345.678'])
    expect(digitGroups('1000000')).toEqual(['1', '000', '000'])
  })
  it('groups plain text by a narrow space', () => {
    expect(groupedText(48000)).toBe('48\u202f000')
  })
})

describe('duration', () => {
  it('names two units at most', () => {
    expect(duration(40)).toBe('40 s')
    expect(duration(200)).toBe('3 min 20 s')
    expect(duration(7500)).toBe('2 h 5 min')
    expect(duration(3600)).toBe('1 h')
  })
})
