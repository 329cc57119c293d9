// Notes in the margin: one bold clause, one line with the source. Verdigris for what is sound, copper for attention.
import type { ReactNode } from 'react'

export type NoteTone = 'sound' | 'attention' | 'failed'

export function MarginNote({
  tone = 'sound',
  title,
  children,
  source,
}: {
  tone?: NoteTone
  title: ReactNode
  children?: ReactNode
  source?: ReactNode
}) {
  return (
    <div className="margin-note" data-tone={tone}>
      <p className="font-bold leading-snug">{title}</p>
      {children ? <div className="mt-0.5 text-note text-soft">{children}</div> : null}
      {source ? <p className="mt-0.5 text-note text-soft">Source: {source}</p> : null}
    </div>
  )
}

export type EngineNote = {
  code: string
  severity: 'info' | 'caution' | 'outOfRange' | 'notMet'
  text: string
  source: string
}

const TONE: Record<EngineNote['severity'], NoteTone> = {
  info: 'sound',
  caution: 'attention',
  outOfRange: 'attention',
  notMet: 'failed',
}
const RANK: Record<EngineNote['severity'], number> = { notMet: 0, outOfRange: 1, caution: 2, info: 3 }

/** The first sentence is the bold clause; the rest follows it. A full stop inside a number or abbreviation does not end it. */
function clauses(text: string): [string, string] {
  const cut = /[.;:](?=\s)/.exec(text)
  if (!cut || cut.index > 110) return [text, '']
  const mark = text[cut.index] === '.' ? 1 : 0
  return [text.slice(0, cut.index + mark), text.slice(cut.index + 1).trim()]
}

/** The notes of a result, gravest first; beyond `first`, the rest are folded away, not missing. */
export function NoteList({
  notes,
  labels,
  first,
}: {
  notes: EngineNote[]
  labels?: Record<string, string>
  first?: number
}) {
  const sorted = notes
    .map((note, i) => ({ note, i }))
    .sort((a, b) => RANK[a.note.severity] - RANK[b.note.severity] || a.i - b.i)
  const shown = first === undefined ? sorted : sorted.slice(0, first)
  const rest = sorted.slice(shown.length)
  const item = ({ note, i }: (typeof sorted)[number]) => {
    const label = labels?.[note.code]
    const [head, tail] = label ? [`${label}.`, note.text] : clauses(note.text)
    return (
      <li key={`${note.code}-${i}`}>
        <MarginNote tone={TONE[note.severity]} title={head} source={note.source || undefined}>
          {tail}
        </MarginNote>
      </li>
    )
  }
  return (
    <div className="grid gap-3.5">
      <ul className="grid gap-3.5">{shown.map(item)}</ul>
      {rest.length > 0 ? (
        <details>
          <summary className="text-note font-semibold text-verdigris-ink">
            {rest.length} more {rest.length === 1 ? 'note' : 'notes'}
          </summary>
          <ul className="mt-3.5 grid gap-3.5">{rest.map(item)}</ul>
        </details>
      ) : null}
    </div>
  )
}
