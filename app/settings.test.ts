import { describe, expect, it } from 'vitest'
import { isLoopback, readSettings } from './settings.ts'

const PROVIDER = {
  OIDC_ISSUER: 'https://id.example.com',
  OIDC_CLIENT_ID: 'rowfall',
  OIDC_CLIENT_SECRET: 'secret',
  ROLE_GROUPS: 'condenser-engineers=engineer, condenser-leads=lead',
  BASE_URL: 'https://rowfall.example.com/',
  SESSION_SECRET: 'x'.repeat(40),
}
const faults = (environment: Record<string, string>, purpose: 'start' | 'web' | 'worker' = 'start') => {
  const reading = readSettings(environment, purpose)
  return reading.ok ? [] : reading.faults
}

describe('settings', () => {
  it('need none at all for npm start, which then offers the demo on loopback', () => {
    const reading = readSettings({}, 'start')
    expect(reading).toMatchObject({ ok: true, settings: { HOST: '127.0.0.1', LOCAL_DEMO: true } })
  })

  it('take a provider as a group, and then there is no demo', () => {
    const reading = readSettings({ ...PROVIDER, HOST: '0.0.0.0' }, 'start')
    expect(reading).toMatchObject({
      ok: true,
      settings: {
        LOCAL_DEMO: false,
        BASE_URL: 'https://rowfall.example.com',
        ROLE_GROUPS: { 'condenser-leads': 'lead' },
      },
    })
  })

  it.each([
    [{ DATABASE_URL: 'mysql://x' }, /^DATABASE_URL: is not a PostgreSQL address; write postgres:/],
    [{ PORT: '70000' }, /^PORT: is not a whole number from 1 to 65535/],
    [{ WORKER_THREADS: 'many' }, /^WORKER_THREADS: is not a whole number/],
    [{ ...PROVIDER, ROLE_GROUPS: 'x=king' }, /^ROLE_GROUPS: "x=king" is not group=role/],
    [{ SMTP_URL: 'smtp://mail.example.com' }, /^MAIL_FROM: is missing while SMTP_URL is given/],
    [
      { HOST: '0.0.0.0' },
      /^HOST: 0\.0\.0\.0 is not a loopback address, and without an identity provider anyone/,
    ],
    [{ BASE_URL: 'https://rowfall.example.com' }, /^BASE_URL: .* is not a loopback address, and the demo/],
    [{ SESSION_SECRET: 'short' }, /^SESSION_SECRET: is shorter than 32 characters; make one with/],
  ])('%o is refused in one line with the remedy', (environment, line) => {
    expect(faults(environment as unknown as Record<string, string>)).toEqual([expect.stringMatching(line)])
  })

  it('name every fault at once', () => {
    expect(faults({ PORT: '0', DATABASE_URL: 'x', WORKER_THREADS: '-1' })).toHaveLength(3)
  })

  it('ask a worker for its database and a web process for all it needs', () => {
    expect(faults({}, 'worker')).toEqual([expect.stringMatching(/^DATABASE_URL: is not given/)])
    expect(
      faults({}, 'web')
        .map((line) => line.split(':')[0])
        .sort(),
    ).toEqual(['BASE_URL', 'DATABASE_URL', 'OIDC_ISSUER', 'PORT', 'SESSION_SECRET'])
  })

  it.each([
    ['127.0.0.1', true],
    ['localhost', true],
    ['::1', true],
    ['[::1]', true],
    ['127.0.0.1.evil.example', false],
    ['0.0.0.0', false],
  ])('%s is loopback: %s', (host, expected) => {
    expect(isLoopback(host)).toBe(expected)
  })
})
