import { expect, test } from 'vitest'
import { parseJson, readForm } from './body.ts'

const nested = (levels: number) => `${'{"a":['.repeat(levels / 2)}${']}'.repeat(levels / 2)}`

test('JSON is read to a depth that an input can have', () => {
  expect(parseJson('{"a":[1,null,"[[["]}')).toEqual({ a: [1, null, '[[['] })
  expect(() => parseJson(nested(64))).not.toThrow()
  expect(() => parseJson(nested(66))).toThrow('nested deeper than 64 levels')
  expect(() => parseJson(nested(400_000))).toThrow('nested deeper than 64 levels')
  expect(() => parseJson('{')).toThrow(SyntaxError)
})

test('a body that is no form is refused with what to send', async () => {
  const request = (body: BodyInit, type: string) =>
    new Request('http://127.0.0.1/', { method: 'POST', body, headers: { 'Content-Type': type } })
  expect((await readForm(request('a=1', 'application/x-www-form-urlencoded'))).get('a')).toBe('1')
  for (const type of ['application/json', 'multipart/form-data', 'multipart/form-data; boundary=x'])
    await expect(readForm(request('{}', type))).rejects.toMatchObject({ code: 'bad-request' })
})
