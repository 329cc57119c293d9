import { expect, it } from 'vitest'
import { ago } from './when.tsx'

it('tells how long ago in the largest fitting unit, and leaves what is far to the date', () => {
  expect(ago(3)).toBe('just now')
  expect(ago(45)).toBe('45 seconds ago')
  expect(ago(60 * 50)).toBe('50 minutes ago')
  expect(ago(3600 * 20)).toBe('20 hours ago')
  expect(ago(86_400 * 3)).toBe('3 days ago')
  expect(ago(86_400 * 30)).toBeNull()
})
