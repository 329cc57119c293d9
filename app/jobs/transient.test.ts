import { expect, test } from 'vitest'
import { isTransient } from './transient.ts'

const withCode = (code: string) => Object.assign(new Error('refused'), { code })

test.each(['ECONNREFUSED', '57P01', '08006', '53100', '25006', '40P01'])('%s passes by itself', (code) => {
  expect(isTransient(withCode(code))).toBe(true)
  expect(isTransient(new Error('query failed', { cause: withCode(code) }))).toBe(true)
})

test.each(['23505', '42P01', '22003'])('%s does not', (code) => {
  expect(isTransient(withCode(code))).toBe(false)
})

test('neither does a fault of ours', () => {
  expect(isTransient(new TypeError('x is undefined'))).toBe(false)
  expect(isTransient('gone')).toBe(false)
})
