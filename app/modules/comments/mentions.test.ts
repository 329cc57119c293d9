import { expect, it } from 'vitest'
import { mentionsIn } from './mentions.ts'

const PEOPLE = [
  { id: 'a', name: 'Ann', email: 'ann@example.com' },
  { id: 'b', name: 'Ann Bell', email: 'bell@example.com' },
]
const met = (text: string) => mentionsIn(text, PEOPLE).flatMap(({ person }) => person ?? [])

it.each([
  ['@Ann look', ['a']],
  ['@Ann Bell look', ['b']],
  ['@ann bell and @ANN', ['b', 'a']],
  ['(@bell@example.com)', ['b']],
  ['write to ann@example.com', []],
  ['@Anna is nobody here', []],
  ['@', []],
  ['50 kPa @ 40 °C', []],
])('in "%s" finds %j', (text, people) => {
  expect(met(text)).toEqual(people)
})

it('keeps every character', () => {
  const text = 'a @Ann, b @Ann Bell! @nobody @'
  expect(
    mentionsIn(text, PEOPLE)
      .map((piece) => piece.text)
      .join(''),
  ).toBe(text)
})
