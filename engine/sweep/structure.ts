// Turns what zod finds wrong with the shape of a file into faults that name the field, the problem and the remedy.
import type { z } from 'zod'
import type { Fault } from '#engine/case.ts'
import { nearest } from './nearest.ts'

/** "sweep.variables.2.values.0" from zod's list of keys. */
export const pathText = (path: readonly PropertyKey[]): string => path.map(String).join('.')

function typeText(value: unknown): string {
  if (value === null) return 'null'
  if (Array.isArray(value)) return 'a list'
  if (typeof value === 'object') return 'an object'
  if (typeof value === 'string') return `"${value.length > 40 ? `${value.slice(0, 40)}…` : value}"`
  return String(value)
}

function valueAt(input: unknown, path: readonly PropertyKey[]): unknown {
  let value = input
  for (const key of path) value = (value as Record<PropertyKey, unknown> | undefined | null)?.[key]
  return value
}

const EXPECTED: Record<string, string> = {
  string: 'text',
  number: 'a number',
  int: 'a whole number',
  array: 'a list',
  object: 'an object',
  record: 'an object',
  boolean: 'true or false',
}

/** One fault per thing that does not fit `schema`; `known` lists the keys allowed where unknown ones are found. */
export function structureFaults(
  schema: z.ZodType,
  input: unknown,
  at: readonly PropertyKey[],
  known: readonly string[],
): Fault[] {
  const parsed = schema.safeParse(input)
  if (parsed.success) return []
  return parsed.error.issues.flatMap((issue) => issueFaults(issue, input, at, known))
}

function issueFaults(
  issue: z.core.$ZodIssue,
  input: unknown,
  at: readonly PropertyKey[],
  known: readonly string[],
): Fault[] {
  const path = pathText([...at, ...issue.path])
  const where = path || 'study'
  const given = valueAt(input, issue.path)
  switch (issue.code) {
    case 'unrecognized_keys':
      return issue.keys.map((key) => {
        const near = nearest(key, known)
        return {
          path: path ? `${path}.${key}` : key,
          problem: 'is not a field known here',
          remedy: near ? `did you mean "${near}"?` : `known fields: ${known.join(', ')}`,
        }
      })
    case 'invalid_type':
      return [
        given === undefined
          ? {
              path: where,
              problem: 'is missing',
              remedy: `give ${EXPECTED[issue.expected] ?? issue.expected}`,
            }
          : {
              path: where,
              problem: `is ${typeText(given)}`,
              remedy: `give ${EXPECTED[issue.expected] ?? issue.expected}`,
            },
      ]
    case 'invalid_value': {
      const allowed = issue.values.map(String)
      const near = typeof given === 'string' ? nearest(given, allowed) : null
      return [
        {
          path: where,
          problem: given === undefined ? 'is missing' : `is ${typeText(given)}`,
          remedy: `${near ? `did you mean "${near}"? ` : ''}allowed: ${allowed.join(', ')}`,
        },
      ]
    }
    case 'too_small':
      return [
        issue.origin === 'array'
          ? { path: where, problem: 'is empty', remedy: 'give at least one' }
          : issue.origin === 'string'
            ? { path: where, problem: 'is empty', remedy: 'give some text' }
            : { path: where, problem: `is ${typeText(given)}`, remedy: `at least ${issue.minimum}` },
      ]
    case 'too_big':
      return [
        issue.origin === 'string'
          ? { path: where, problem: 'is too long', remedy: `at most ${issue.maximum} characters` }
          : issue.origin === 'array'
            ? { path: where, problem: 'has too many entries', remedy: `at most ${issue.maximum}` }
            : { path: where, problem: `is ${typeText(given)}`, remedy: `at most ${issue.maximum}` },
      ]
    case 'invalid_union':
      return [
        {
          path: where,
          problem: `is ${typeText(given)}`,
          remedy: 'give a number in SI units or text with a unit',
        },
      ]
    default:
      return [{ path: where, problem: `is not usable: ${issue.message}`, remedy: 'see studies/README.md' }]
  }
}
