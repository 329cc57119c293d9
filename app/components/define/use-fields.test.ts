import { describe, expect, it } from 'vitest'
import { historyAfter } from './use-fields.ts'

const start = { fields: { duty: '300' }, past: [] }
const type = (history: Parameters<typeof historyAfter>[0], name: string, value: string) =>
  historyAfter(history, { kind: 'set', changes: { [name]: value }, by: name })

describe('undo in the Define form', () => {
  it('takes back typing in one field as one step', () => {
    const typed = type(type(type(start, 'duty', '3'), 'duty', '35'), 'duty', '350')
    expect(typed.fields.duty).toBe('350')
    expect(historyAfter(typed, { kind: 'undo' })).toEqual(start)
  })

  it('takes back a choice that filled several fields at once', () => {
    const chosen = historyAfter(start, { kind: 'set', changes: { a: '1', b: '2' }, by: '' })
    const again = historyAfter(chosen, { kind: 'set', changes: { a: '3' }, by: '' })
    expect(historyAfter(again, { kind: 'undo' }).fields).toEqual({ duty: '300', a: '1', b: '2' })
  })

  it('remembers nothing for what changes nothing', () => {
    expect(type(start, 'duty', '300')).toBe(start)
    expect(historyAfter(start, { kind: 'undo' })).toBe(start)
  })

  it('keeps a replaced form within reach', () => {
    const replaced = historyAfter(start, { kind: 'replace', fields: { duty: '1' }, keepHistory: true })
    expect(historyAfter(replaced, { kind: 'undo' }).fields).toEqual({ duty: '300' })
  })
})
