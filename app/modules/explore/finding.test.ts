import { expect, test } from 'vitest'
import { type FindingInput, finding, withinClause } from './finding.ts'

const input = (given: Partial<FindingInput> = {}): FindingInput => ({
  state: 'done',
  paused: false,
  waitingForWorker: false,
  done: 48000,
  points: 48000,
  evaluated: 47990,
  meetingLimits: 31204,
  objective: 'outsideArea',
  limits: { coolantPressureDrop: { max: 60000 } },
  best: { objective: 41.82, described: '19.05 mm tubes in 14 rows' },
  limitEffects: [{ limit: 'coolantPressureDrop', side: 'max', bound: 60000, without: 38.1, nearest: 900 }],
  limitsNotMet: { coolantPressureDrop: 16786 },
  failures: [],
  fault: null,
  pointsPerSecond: null,
  secondsLeft: null,
  ...given,
})
const plain = (text: string) => text.replaceAll('\u00a0', ' ')
const headline = (given: Partial<FindingInput> = {}) => plain(finding(input(given), 'si').headline)
const reason = (given: Partial<FindingInput> = {}) => plain(finding(input(given), 'si').reason.join(' '))
const none = { best: null, meetingLimits: 0 }

test('a finished sweep claims the least of its points, not the least there is', () => {
  expect(headline()).toBe('Least of 48000 points within 60 kPa: 41.8 m², 19.05 mm tubes in 14 rows')
  expect(reason()).toBe(
    '31204 of 48000 points meet every limit. The coolant pressure drop is the limit that binds: without it the least would be 38.1 m².',
  )
  expect(plain(finding(input(), 'us').headline)).toContain('within 8.702 psi: 450 ft²')
})

test('another objective is named', () => {
  expect(headline({ objective: 'tubeMass', best: { objective: 1234, described: '' } })).toBe(
    'Least tube mass of 48000 points within 60 kPa: 1230 kg',
  )
  expect(headline({ objective: 'yearlyCost', best: { objective: 10230, described: '' } })).toContain(
    'Least yearly cost of 48000 points within 60 kPa: 10200 a year',
  )
})

test('a run under way says how far it is and claims only the best so far', () => {
  const running = { state: 'running', done: 12400, limitEffects: null } as const
  expect(headline(running)).toBe('12400 of 48000 points done, best so far 41.8 m²')
  expect(headline({ ...running, ...none })).toBe('12400 of 48000 points done, none within 60 kPa so far')
  expect(reason({ ...running, pointsPerSecond: 8123.4 })).toContain('8123 points a second.')
  expect(reason({ ...running, paused: true })).toMatch(/^The run is paused/)
  expect(headline({ state: 'queued', done: 0 })).toBe('Waiting to start on 48000 points')
  expect(reason({ state: 'queued', done: 0, waitingForWorker: true })).toContain('No worker serves the queue')
})

test('a run that ended early says so before its finding', () => {
  expect(headline({ state: 'cancelled', done: 12400 })).toBe(
    'Cancelled at 12400 of 48000 points: least of 12400 points within 60 kPa: 41.8 m², 19.05 mm tubes in 14 rows',
  )
  const failed = { state: 'failed', done: 0, best: null, fault: 'The database was away' } as const
  expect(headline(failed)).toBe('The run failed at 0 of 48000 points')
  expect(reason(failed)).toBe('The database was away. No point was done before that.')
})

test('when nothing meets the limit, the closest point says what it needs', () => {
  const limits = { coolantPressureDrop: { max: 20000 } }
  const effect = {
    limit: 'coolantPressureDrop',
    side: 'max',
    bound: 20000,
    without: 40,
    nearest: 26010,
  } as const
  expect(headline({ ...none, limits, limitEffects: [effect] })).toBe(
    'No point meets 20 kPa; the closest needs 26.0 kPa',
  )
  expect(
    headline({
      ...none,
      limits: { ...limits, length: { max: 3 } },
      limitEffects: [effect, { limit: 'length', side: 'max', bound: 3, without: 40, nearest: 3.2 }],
    }),
  ).toBe('No point meets every limit; the closest needs 3.20 m tube length where 3 m is allowed')
  expect(headline({ ...none, limits: { ...limits, length: { max: 3 } }, limitEffects: [] })).toBe(
    'No point meets every limit, nor all but one of them',
  )
  expect(
    headline({
      ...none,
      limits: { duty: { min: 5e5 } },
      limitEffects: [{ limit: 'duty', side: 'min', bound: 5e5, without: 40, nearest: 4.8e5 }],
    }),
  ).toBe('No point reaches 500 kW duty; the closest gives 480 kW')
  expect(
    reason({ ...none, limits, limitEffects: [effect], limitsNotMet: { coolantPressureDrop: 47990 } }),
  ).toBe(
    '47990 of 48000 points could be evaluated; the limits stop of these: the coolant pressure drop 47990.',
  )
})

test('when nothing could be evaluated, the commonest reason stands beside it', () => {
  const given = { ...none, evaluated: 0, failures: [{ text: 'the coolant enters too warm', count: 48000 }] }
  expect(headline(given)).toBe('None of 48000 points could be evaluated')
  expect(reason(given)).toBe('Commonest reason, 48000 points: the coolant enters too warm.')
})

test('which limits bind is found by lifting each', () => {
  const limits = { coolantPressureDrop: { max: 60000 }, length: { max: 6 } }
  const drop = { limit: 'coolantPressureDrop', side: 'max', bound: 60000, nearest: null } as const
  const length = { limit: 'length', side: 'max', bound: 6, nearest: null } as const
  const reasons = (a: number, b: number) =>
    reason({
      limits,
      limitEffects: [
        { ...drop, without: a },
        { ...length, without: b },
      ],
    })
  expect(reasons(41.82, 41.82)).toContain('No limit binds by itself.')
  expect(reasons(40, 39)).toContain(
    'The tube length binds most: without it the least would be 39.0 m². The coolant pressure drop binds too.',
  )
  expect(reason({ limits: {}, limitEffects: [] })).toBe(
    'The study sets no limit; 47990 of 48000 points could be evaluated.',
  )
})

test('limits as a clause', () => {
  const clause = (limits: FindingInput['limits']) => plain(withinClause(limits, 'si'))
  expect(clause({})).toBe('')
  expect(clause({ coolantVelocity: { min: 1, max: 2.4 } })).toBe(' within 1 to 2.4 m/s coolant velocity')
  expect(clause({ coolantPressureDrop: { max: 6e4 }, vapourPressureDrop: { max: 500 } })).toBe(
    ' within 60 kPa coolant drop and 500 Pa vapour drop',
  )
  expect(clause({ coolantPressureDrop: { max: 6e4 }, duty: { min: 3e5 } })).toBe(
    ' within 60 kPa coolant drop and with at least 300 kW duty',
  )
  expect(clause({ coolantPressureDrop: { max: 6e4 }, duty: { min: 3e5 }, length: { max: 6 } })).toBe(
    ' within all 3 limits',
  )
})
