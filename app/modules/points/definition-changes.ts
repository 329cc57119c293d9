// What two definitions of a study say differently, place by place.

export type DefinitionChange = { path: string; before: string | null; after: string | null }

/** Every leaf that differs, in the order of the later definition; null where one of them has none. */
export function definitionChanges(before: unknown, after: unknown): DefinitionChange[] {
  const had = leaves(before)
  const has = leaves(after)
  return [...new Set([...has.keys(), ...had.keys()])]
    .filter((path) => had.get(path) !== has.get(path))
    .map((path) => ({ path, before: had.get(path) ?? null, after: has.get(path) ?? null }))
}

/** "case.bundle.rows" and its value; a list of plain values is one leaf, swept variables go by their path. */
function leaves(value: unknown, under = '', into = new Map<string, string>()): Map<string, string> {
  if (Array.isArray(value)) {
    if (value.every((item) => typeof item !== 'object' || item === null)) into.set(under, value.join(', '))
    else
      value.forEach((item, k) => {
        const named = (item as { path?: unknown } | null)?.path
        leaves(item, `${under}[${typeof named === 'string' ? named : k}]`, into)
      })
  } else if (typeof value === 'object' && value !== null)
    for (const [key, inner] of Object.entries(value))
      leaves(inner, under === '' ? key : `${under}.${key}`, into)
  else if (value !== undefined) into.set(under, String(value))
  return into
}
