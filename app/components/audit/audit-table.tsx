// The audit trail as a table: who did what to what, when, from where, and what it was before and after.
import { Link } from 'react-router'
import { Button, LinkButton } from '../ui/button.tsx'
import { TextField } from '../ui/field.tsx'
import { EmptyState, Scroll } from '../ui/page.tsx'
import { actWords } from './act-words.ts'

export type AuditEntry = {
  id: number
  at: string
  personName: string
  address: string
  act: string
  subject: string
  subjectId: string
  before: Record<string, unknown> | null
  after: Record<string, unknown> | null
}

export function AuditFilters({
  person,
  act,
  from,
  to,
}: Record<'person' | 'act' | 'from' | 'to', string | undefined>) {
  return (
    <form method="get" className="screen-only flex flex-wrap items-end gap-3">
      <TextField label="Who" name="person" type="search" defaultValue={person} className="w-40" />
      <TextField label="Act" name="act" type="search" defaultValue={act} className="w-40" />
      <TextField label="From" name="from" type="date" defaultValue={from} className="w-40" />
      <TextField label="To" name="to" type="date" defaultValue={to} className="w-40" />
      <Button type="submit">Show</Button>
      {person || act || from || to ? (
        <Link to="?" className="link py-1.5">
          Show all
        </Link>
      ) : null}
    </form>
  )
}

export function AuditTable({ entries, older }: { entries: AuditEntry[]; older: string | null }) {
  const placed = entries.some(({ address }) => address !== '')
  if (entries.length === 0)
    return <EmptyState title="No act matches">Widen the days, or leave a field empty.</EmptyState>
  return (
    <>
      <Scroll label="Audit trail" className="sheet">
        <table className="data-table">
          <thead>
            <tr>
              <th scope="col">When (UTC)</th>
              <th scope="col">Who</th>
              <th scope="col">Did what</th>
              <th scope="col">Before and after</th>
              {placed ? <th scope="col">From</th> : null}
            </tr>
          </thead>
          <tbody>
            {entries.map((entry) => (
              <tr key={entry.id}>
                <td className="align-top whitespace-nowrap">{entry.at.slice(0, 19).replace('T', ' ')}</td>
                <td className="align-top">{entry.personName}</td>
                <td className="align-top">
                  {actWords(entry.act)}
                  <span className="block text-note text-soft" title={`${entry.subject} ${entry.subjectId}`}>
                    {entry.subject} {entry.subjectId.slice(0, 8)}
                  </span>
                </td>
                <td className="max-w-96 align-top text-note [overflow-wrap:anywhere]">
                  <Values label="before" values={entry.before} />
                  <Values label="after" values={entry.after} />
                </td>
                {placed ? <td className="align-top text-note">{entry.address}</td> : null}
              </tr>
            ))}
          </tbody>
        </table>
      </Scroll>
      {older ? (
        <LinkButton to={older} className="justify-self-start">
          Earlier acts
        </LinkButton>
      ) : null}
    </>
  )
}

function Values({ label, values }: { label: string; values: Record<string, unknown> | null }) {
  if (values === null) return null
  const words = Object.entries(values)
    .map(([name, value]) => `${name} ${typeof value === 'string' ? `“${value}”` : JSON.stringify(value)}`)
    .join(', ')
  return (
    <span className="block">
      <span className="text-soft">{label}:</span> {words}
    </span>
  )
}
