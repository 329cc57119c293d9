import { expect, test } from 'vitest'
import { oneLine, trimmedTo, unstorableIn } from './stored-text.ts'

test('a name is one line without anything that cannot be shown', () => {
  expect(oneLine('  Chiller \n K4\t ')).toBe('Chiller K4')
  expect(oneLine('Wärmeübertrager 冷凝器 🧊')).toBe('Wärmeübertrager 冷凝器 🧊')
  expect(oneLine('a\0b')).toBeNull()
  expect(oneLine('a\u001bb')).toBeNull()
  expect(oneLine('a\ud83d')).toBeNull()
})

test('cutting a text leaves no half of a character', () => {
  expect(trimmedTo('ab🧊', 3)).toBe('ab')
  expect(trimmedTo(' a\0b ', 10)).toBe('ab')
})

test('finds what PostgreSQL refuses anywhere in a JSON value, and only that', () => {
  expect(unstorableIn({ a: [{ b: 'x\0y' }] })).toBe('x\0y')
  expect(unstorableIn({ a: { 'k\ud800': 1 } })).toBe('k\ud800')
  expect(unstorableIn({ a: 'line\nline 🧊 \\u0000', b: null, c: [1, true] })).toBeUndefined()
})
