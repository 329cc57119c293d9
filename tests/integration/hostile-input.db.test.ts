// Forms, bodies and queries that no page of ours would send: each is answered, none fails, none shows our insides.
import { afterEach, beforeAll, beforeEach, describe, expect, it, type MockInstance, vi } from 'vitest'
import { rules } from '#app/http/rules.ts'
import { PATTERNS, type TestApplication, testApplication } from '#tests/setup/request-handler.ts'

let application: TestApplication
beforeAll(async () => {
  application = await testApplication()
}, 60_000)

let logged: MockInstance
beforeEach(() => {
  logged = vi.spyOn(console, 'error').mockImplementation(() => {})
})
afterEach(() => logged.mockRestore())

async function survives(said: string, answer: Promise<Response>) {
  const response = await answer
  const text = await response.text()
  const why = () => `${said}: ${response.status} ${logged.mock.calls.map(String).join(' | ').slice(0, 500)}`
  expect(response.status, why()).not.toBe(500)
  expect(response.status, why()).toBeLessThan(504)
  expect(text, said).not.toMatch(/\bat \w+ \(|node_modules|\.tsx?:\d+|select "|insert into/i)
}

const ACTIONS = PATTERNS.filter((pattern) => rules[pattern]?.action && pattern !== '/sign-out')
const LOADERS = PATTERNS.filter((pattern) => rules[pattern]?.loader)

/** What each page's forms do; the rest do one thing. */
const INTENTS: Record<string, string[]> = {
  '/projects/:projectId': [
    ...['example', 'blank', 'upload', 'rename', 'copy', 'archive', 'restore', 'addMember', 'removeMember'],
  ],
  '/studies/:studyId/define': ['save', 'keep', 'run', 'discard', 'upload'],
  '/studies/:studyId/run': ['start', 'cancel', 'pause', 'resume'],
  '/studies/:studyId/decide': ['ask', 'withdraw', 'return', 'accept', 'comment', 'withdrawComment'],
  '/studies/:studyId/views': ['save', 'delete'],
  '/studies/:studyId/optimum': ['optimum', 'front', 'cancel'],
  '/projects/:projectId/compare': ['save', 'delete', 'comment', 'withdrawComment'],
  '/projects/:projectId/bench-data': ['upload', 'columns', 'fit', 'apply', 'unapply', 'delete'],
  '/projects/:projectId/records/:recordId': ['baseline'],
  '/account': ['mail', 'revoke', 'revokeOthers'],
  '/notices': ['open', 'readAll'],
  '/admin/operations': ['drain', 'retry', 'pause', 'resume', 'cancel', 'keep'],
  '/admin/people': ['map', 'unmap', 'remove', 'restore'],
}
const intentsOf = (pattern: string) => [...(INTENTS[pattern] ?? []), 'constructor']

const FIELDS = [
  ...[
    'name',
    'description',
    'email',
    'studyId',
    'personId',
    'example',
    'file',
    'run',
    'version',
    'definition',
    'point',
    'note',
    'reason',
    'body',
    'comment',
    'query',
    'comparison',
    'view',
    'runMinutes',
    'analysis',
    'worker',
    'months',
    'x',
    'session',
    'notice',
    'group',
    'role',
    'person',
    'target.0',
    'unit.0',
    'length',
    'result',
    'correction',
    'study',
  ],
  ...[
    'scripted',
    'units',
    'theme',
    'returnTo',
    'loginHint',
    'state',
    'case.fluid',
    'sweep.variables',
    '__proto__',
  ],
]
const VALUES: Record<string, string> = {
  nothing: '',
  'a NUL': 'a\0b',
  'an object': '{"__proto__":{"x":1},"case":[],"sweep":7,"name":{}}',
  'an array': '[[[[]]]]',
  'deep nesting': `${'['.repeat(5000)}${']'.repeat(5000)}`,
  'a stored escape': '{"name":"\\u0000","case":{"fluid":"\\ud800"}}',
  SQL: "'; drop table study; --",
  markup: '"><script>alert(1)</script>',
  'every script': '冷凝器 مكثف 🧊\u202e',
  'half a character': '\ud83d',
  dashes: '-'.repeat(36),
  'no end': 'x'.repeat(300_000),
  numbers: '-1e999',
}

const BODIES = [
  ['text/plain', 'no form'],
  ['application/json', '{'],
  ['application/json', 'null'],
  ['application/json', VALUES['deep nesting']],
  ['application/json', `{"case":${'['.repeat(900_000)}${']'.repeat(900_000)}}`],
  ['application/json', VALUES['a stored escape']],
  ['multipart/form-data', 'without a boundary'],
  ['multipart/form-data; boundary=x', '--x\r\nContent-Disposition: form-data; name="intent"\r\n\r\nsa'],
  ['application/x-www-form-urlencoded', '%%%=%ff&&&='],
  ['', ''],
]

describe.each(ACTIONS)('POST %s', (pattern) => {
  const post = (body: BodyInit, headers: Record<string, string> = {}) =>
    application.ask(pattern, { method: 'POST', who: 'administrator', body, headers })

  it.each(Object.keys(VALUES))('survives %s in every field', async (what) => {
    for (const intent of intentsOf(pattern)) {
      const form = new URLSearchParams({ intent })
      for (const field of FIELDS) form.append(field, VALUES[what])
      await survives(`${intent} with ${what}`, post(form))
    }
  })

  it('survives its fields given twice, as files, or not at all', async () => {
    for (const intent of intentsOf(pattern)) {
      const twice = new FormData()
      const files = new FormData()
      for (const field of ['intent', ...FIELDS]) {
        twice.append(field, intent)
        twice.append(field, 'again')
        files.append(field, new File([VALUES['an object']], 'a\0"\r\n.json'))
      }
      files.set('intent', intent)
      await survives(`${intent} twice`, post(twice))
      await survives(`${intent} as files`, post(files))
      await survives(`${intent} alone`, post(new URLSearchParams({ intent })))
    }
  })

  it('survives bodies that are not what their type says', async () => {
    for (const [type, body] of BODIES)
      await survives(`${type} ${body.slice(0, 30)}`, post(body, type === '' ? {} : { 'Content-Type': type }))
  })
})

const QUERIES = [
  'run=x&study=x&revision=x&q=%00&archived=&point=x&page=x&sort=x&dir=x',
  `run=${'-'.repeat(36)}&study=${'-'.repeat(36)}&revision=${'-'.repeat(36)}`,
  'study=00000000-0000-4000-8000-000000000000&run=00000000-0000-4000-8000-000000000000',
  'point=-1&page=-1&limit=-1&offset=-1&max=-1',
  'point=1e99&page=1e99&limit=1e99&offset=1e99&max=1e99',
  'point=1000000&page=1000000&pinned=1,2,x,99999999',
  'x=constructor&y=__proto__&colour=toString&sort=constructor&show=constructor',
  'min.outsideArea=NaN&max.outsideArea=Infinity&min.__proto__=1&max.=1&outcome=constructor',
  'x=outsideArea&x=duty&y=outsideArea&y=&sort=outsideArea&sort=duty',
  `q=${'%F0%9F%A7%8A'.repeat(1000)}&x=${'x'.repeat(5000)}`,
  'code=x&state=x&error=x&iss=x&data=%00&result=constructor',
  'returnTo=%00&returnTo=//evil.example&signedOut=%00',
  '%ff=%ff&%00=%00&=&&&',
]

it.each(LOADERS)('GET %s survives every query', async (pattern) => {
  for (const query of QUERIES)
    await survives(query, application.ask(pattern, { who: 'lead', query: `?${query}` }))
})

describe.each(['/studies/:studyId/points/', '/library/fluids/', '/library/methods/'])('GET %s…', (path) => {
  it.each(['constructor', '__proto__', '-1', '1e3', '3.5', '99999999999', '%00', 'refined', 'NaN'])(
    'survives %s',
    async (name) => {
      await survives(name, application.ask(`${path}${name}`, { who: 'lead' }))
    },
  )
})
