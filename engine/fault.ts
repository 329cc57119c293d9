// What is wrong with an input, said so that it can be put right.
import type { z } from 'zod'

export type Fault = { path: string; problem: string; remedy: string }

/** One line for standard error: `path: what is wrong; what is allowed`. */
export const faultLine = (fault: Fault): string =>
  `${fault.path || 'input'}: ${fault.problem}${fault.remedy ? `; ${fault.remedy}` : ''}`

/** Dotted path with indexes as in `sweep.variables.0.path`. */
const dotted = (path: readonly PropertyKey[]): string => path.map(String).join('.')

/** True where a branch of a union failed for more than being the wrong kind of thing altogether. */
const isMeant = (branch: readonly z.core.$ZodIssue[]): boolean =>
  branch.length > 0 &&
  !branch.some(
    (issue) => issue.path.length === 0 && (issue.code === 'invalid_type' || issue.code === 'invalid_value'),
  )

/**
 * Schema issues as faults. Every message in the engine's schemas reads "problem; remedy".
 * An issue about unknown keys gives one fault per key, at that key; of a union, the branch that was meant speaks.
 */
export function faultsFromIssues(
  issues: readonly z.core.$ZodIssue[],
  under: readonly PropertyKey[] = [],
): Fault[] {
  const faults: Fault[] = []
  for (const issue of issues) {
    const path = [...under, ...issue.path]
    const cut = issue.message.indexOf('; ')
    const problem = cut < 0 ? issue.message : issue.message.slice(0, cut)
    const remedy = cut < 0 ? '' : issue.message.slice(cut + 2)
    const meant = issue.code === 'invalid_union' ? issue.errors.find(isMeant) : undefined
    if (meant) faults.push(...faultsFromIssues(meant, path))
    else if (issue.code === 'unrecognized_keys')
      for (const key of issue.keys)
        faults.push({ path: dotted([...path, key]), problem: `there is no field "${key}" here`, remedy })
    else faults.push({ path: dotted(path), problem, remedy })
  }
  return faults
}
