import { expect, it } from 'vitest'
import { readQuantity } from './quantity-input.ts'

it('reads a bare number in the unit shown, and any unit that is typed', () => {
  expect(readQuantity('40', 'temperature', 'si')).toEqual({ ok: true, value: 313.15 })
  expect(readQuantity('104', 'temperature', 'us')).toMatchObject({
    ok: true,
    value: expect.closeTo(313.15, 9),
  })
  expect(readQuantity('0,5 bar', 'pressure', 'si')).toEqual({ ok: true, value: 50_000 })
  expect(readQuantity('60', 'pressure', 'si')).toEqual({ ok: true, value: 60_000 })
})

it('says what is wrong with what is no quantity', () => {
  expect(readQuantity('warm', 'temperature', 'si')).toMatchObject({ ok: false })
  expect(readQuantity('40 kg', 'temperature', 'si')).toMatchObject({ ok: false })
})
