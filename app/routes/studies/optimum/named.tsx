import { Quantity } from '#app/components/ui/number.tsx'
import type { NamedValue } from '#app/modules/analyses/optimum-page.server.ts'
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import type { Objective } from '#engine/sweep/objective.ts'

/** A swept value as it is read: a choice by its name, a number with its unit. */
export function Named({ shown }: { shown: NamedValue }) {
  return 'text' in shown ? (
    shown.text
  ) : (
    <Quantity value={shown.value} dimension={shown.dimension} digits={4} />
  )
}

export const objectiveDimension = (objective: Objective) =>
  KEY_RESULTS.find(({ id }) => id === objective)?.dimension ?? 'none'
