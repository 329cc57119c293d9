import { expect, test } from 'vitest'
import { isSameOrigin } from './origin.ts'

const base = 'https://rowfall.example.com'
const from = (headers: Record<string, string>) => isSameOrigin(new Headers(headers), base)

test('our own pages are known by either header', () => {
  expect(from({ 'Sec-Fetch-Site': 'same-origin' })).toBe(true)
  expect(from({ Origin: base })).toBe(true)
})

test.each([
  ['another site', { 'Sec-Fetch-Site': 'cross-site' }],
  ['a sister subdomain', { 'Sec-Fetch-Site': 'same-site' }],
  ['the address bar', { 'Sec-Fetch-Site': 'none' }],
  ['another origin', { Origin: 'https://rowfall.example.com.evil.example' }],
  ['our host over plain http', { Origin: 'http://rowfall.example.com' }],
  ['another port of our host', { Origin: `${base}:8443` }],
  ['a sandboxed frame', { Origin: 'null' }],
  ['a client that says nothing', {}],
  ['one header against the other', { 'Sec-Fetch-Site': 'cross-site', Origin: base }],
])('%s may change nothing', (_, headers) => {
  expect(from(headers as Record<string, string>)).toBe(false)
})
