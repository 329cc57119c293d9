// A point's limits as margin notes: met or not, and by how much.
import { MarginNote } from '#app/components/ui/margin-note.tsx'
import { Quantity } from '#app/components/ui/number.tsx'
import type { Dimension, DisplayHint } from '#engine/units.ts'
import { Given } from './entries.tsx'

export type Standing = {
  id: string
  label: string
  dimension: Dimension
  hint?: DisplayHint
  value: number | null
  min?: number
  max?: number
  met: boolean | null
  margin: number | null
}

const percent = (share: number) => {
  const value = Math.abs(share) * 100
  return `${value >= 10 ? Math.round(value) : Number(value.toPrecision(2))} %`
}

/** "within 60 kPa", "between 1 and 2.4 m/s", "at least 500 kW" */
export function LimitBounds({ min, max, dimension, hint }: Standing) {
  if (min !== undefined && max !== undefined)
    return (
      <>
        between <Given value={min} dimension={dimension} hint={hint} /> and{' '}
        <Given value={max} dimension={dimension} hint={hint} />
      </>
    )
  return (
    <>
      {max !== undefined ? 'at most ' : 'at least '}
      <Given value={(max ?? min) as number} dimension={dimension} hint={hint} />
    </>
  )
}

export function marginText({ met, margin }: Standing): string {
  if (met === null || margin === null) return 'no value, counts as not met'
  if (met) return margin < 0.0005 ? 'at the limit' : `${percent(margin)} to spare`
  return `${percent(margin)} beyond`
}

export function LimitNotes({ standings }: { standings: readonly Standing[] }) {
  if (standings.length === 0) return null
  return (
    <ul className="grid gap-3.5" aria-label="Limits">
      {standings.map((standing) => (
        <li key={standing.id}>
          <MarginNote
            tone={standing.met ? 'sound' : 'failed'}
            title={
              <>
                {standing.label}{' '}
                <Quantity value={standing.value} dimension={standing.dimension} hint={standing.hint} />
                {standing.met ? '.' : ' misses its limit.'}
              </>
            }
          >
            Limit: <LimitBounds {...standing} />, {marginText(standing)}.
          </MarginNote>
        </li>
      ))}
    </ul>
  )
}
