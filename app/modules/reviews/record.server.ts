// What an accepted record holds: everything a reader needs, as values, so that nothing that changes later changes it.
import { createHash } from 'node:crypto'
import type { CaseNames } from '#app/modules/explore/case-words.ts'
import type { LimitStanding } from '#app/modules/explore/limits.ts'
import type { SheetCard } from '#app/modules/explore/method-cards.server.ts'
import type { Case } from '#engine/case.ts'
import type { Result } from '#engine/result.ts'
import type { Objective } from '#engine/sweep/objective.ts'
import type { Band } from '#engine/uncertainty/bands.ts'

export type Signed = { personId: string; name: string; email: string; at: string }

export type RecordContent = {
  number: number
  project: { id: string; name: string; invented: boolean }
  study: { id: string; name: string; revision: number; definition: Record<string, unknown> }
  run: {
    id: string
    points: number
    plannedAt: string
    endedAt: string | null
    engineVersion: string
    contentHash: string | null
    startedBy: string | null
  }
  /** Null: the refined point. */
  point: number | null
  isBest: boolean
  objective: Objective
  case: Case
  names: CaseNames
  result: Result
  /** How sure the area was said to be; null where it was not found out. */
  band: Band | null
  standings: LimitStanding[]
  methods: SheetCard[]
  asked: Signed & { note: string }
  accepted: Signed & { reason: string }
}

/** JSON with its keys in order: the same text for the same content, whoever wrote it. */
export function canonicalJson(value: unknown): string {
  return JSON.stringify(value, (_, inner) =>
    typeof inner === 'object' && inner !== null && !Array.isArray(inner)
      ? Object.fromEntries(Object.entries(inner).sort(([a], [b]) => (a < b ? -1 : 1)))
      : inner,
  )
}

export const hashOfContent = (content: unknown): string =>
  createHash('sha256').update(canonicalJson(content)).digest('hex')
