// A point by other methods: the same case with one method changed at a time, and what that changes.
import type { Case } from '#engine/case.ts'
import { parseCase } from '#engine/case.ts'
import type { MethodChoice } from '#engine/correlations/card.ts'
import { METHOD_CHOICES, methodCard, methodIds } from '#engine/correlations/registry.ts'
import { evaluate } from '#engine/evaluate.ts'
import { NOTE_LABELS } from '#engine/notes.ts'
import type { Result } from '#engine/result.ts'

export type Alternative = {
  id: string
  name: string
  /** Null where the method has a result here. */
  refused: string | null
  /** Area where the length follows from a duty, else duty. */
  value: number | null
  change: number | null
  meanCoefficient: number | null
  /** Notes that come and go with it. */
  appear: string[]
  vanish: string[]
  /** Coefficient of each row, where it differs from the chosen method's. */
  rows: { row: number; before: number; after: number }[]
}

export type Alternatives = {
  choice: MethodChoice
  chosen: { id: string; name: string }
  others: Alternative[]
  /** Least and greatest value over all methods of the choice that have one. */
  spread: { least: number; greatest: number } | null
}

export type ByOtherMethods = {
  quantity: 'outsideArea' | 'duty'
  value: number
  choices: Alternatives[]
}

/** Differences under this share are rounding, not method. */
const SAME = 1e-9

/** Every other method of every choice that has one, at the point whose case and result are given. */
export function byOtherMethods(bundle: Case, result: Result): ByOtherMethods | null {
  const quantity = result.question === 'size' ? 'outsideArea' : 'duty'
  const value = result[quantity]
  if (value === null) return null
  const choices = METHOD_CHOICES.flatMap((choice): Alternatives[] => {
    const chosen = result.methods[choice]
    const ids = methodIds(choice).filter((id) => id !== chosen)
    if (ids.length === 0) return []
    const others = ids.map((id) => alternative(bundle, result, choice, id, quantity, value))
    const values = [value, ...others.flatMap((other) => other.value ?? [])]
    // A choice without any part in this case changes nothing: no line for it.
    if (
      others.every(({ refused, change, appear }) => refused === null && change === 0 && appear.length === 0)
    )
      return []
    return [
      {
        choice,
        chosen: { id: chosen, name: methodCard(choice, chosen)?.name ?? chosen },
        others,
        spread: values.length > 1 ? { least: Math.min(...values), greatest: Math.max(...values) } : null,
      },
    ]
  })
  return { quantity, value, choices }
}

function alternative(
  bundle: Case,
  before: Result,
  choice: MethodChoice,
  id: string,
  quantity: ByOtherMethods['quantity'],
  value: number,
): Alternative {
  const name = methodCard(choice, id)?.name ?? id
  const nothing = { value: null, change: null, meanCoefficient: null, appear: [], vanish: [], rows: [] }
  const parsed = parseCase({ ...bundle, methods: { ...bundle.methods, [choice]: id } })
  if (!parsed.ok) {
    const [{ problem, remedy }] = parsed.faults
    return { id, name, refused: remedy ? `${problem}; ${remedy}` : problem, ...nothing }
  }
  const after = evaluate(parsed.case)
  const found = after[quantity]
  if (found === null) {
    const why = after.notes.find(({ severity }) => severity === 'notMet')
    return { id, name, refused: why?.text ?? 'it has no result here', ...nothing }
  }
  const labels = (of: Result) =>
    new Set(of.notes.map(({ code }) => (NOTE_LABELS as Readonly<Record<string, string>>)[code] ?? code))
  const had = labels(before)
  const has = labels(after)
  const change = found / value - 1
  return {
    id,
    name,
    refused: null,
    value: found,
    change: Math.abs(change) < SAME ? 0 : change,
    meanCoefficient: after.meanCoefficient,
    appear: [...has].filter((label) => !had.has(label)),
    vanish: [...had].filter((label) => !has.has(label)),
    rows: after.rows.flatMap(({ row, coefficient }, k) => {
      const was = before.rows[k]?.coefficient
      return was === undefined || Math.abs(coefficient / was - 1) < SAME
        ? []
        : [{ row, before: was, after: coefficient }]
    }),
  }
}
