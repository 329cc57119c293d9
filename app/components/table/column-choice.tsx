// Which columns a table shows, and in which order: a folded list of links, because the URL keeps the choice.
import { Link } from 'react-router'

export type ColumnOption = { id: string; label: string }

export function ColumnChoice({
  shown,
  hidden,
  href,
}: {
  shown: readonly ColumnOption[]
  hidden: readonly ColumnOption[]
  /** The address with these columns, in this order. */
  href: (ids: string[]) => string
}) {
  const ids = shown.map(({ id }) => id)
  const moved = (index: number, by: number) => {
    const next = [...ids]
    ;[next[index], next[index + by]] = [next[index + by], next[index]]
    return next
  }
  const act = (to: string[], text: string, name: string) => (
    <Link to={href(to)} replace preventScrollReset className="link" aria-label={name}>
      {text}
    </Link>
  )
  return (
    <details className="relative text-note">
      <summary className="button button-plain button-small">Columns</summary>
      <div className="absolute end-0 z-20 mt-1 max-h-96 w-80 max-w-[86vw] overflow-auto rounded-md border border-line bg-sheet p-3 shadow-float">
        <p className="mb-1 font-bold">Shown</p>
        <ul className="grid gap-1">
          {shown.map(({ id, label }, i) => (
            <li key={id} className="flex items-baseline justify-between gap-3">
              <span>{label}</span>
              <span className="flex shrink-0 gap-2.5">
                {i > 0 ? act(moved(i, -1), 'earlier', `Move ${label} earlier`) : null}
                {i < shown.length - 1 ? act(moved(i, 1), 'later', `Move ${label} later`) : null}
                {shown.length > 1
                  ? act(
                      ids.filter((other) => other !== id),
                      'hide',
                      `Hide ${label}`,
                    )
                  : null}
              </span>
            </li>
          ))}
        </ul>
        {hidden.length > 0 ? (
          <>
            <p className="mt-3 mb-1 font-bold">Hidden</p>
            <ul className="grid gap-1">
              {hidden.map(({ id, label }) => (
                <li key={id} className="flex items-baseline justify-between gap-3">
                  <span>{label}</span>
                  {act([...ids, id], 'show', `Show ${label}`)}
                </li>
              ))}
            </ul>
          </>
        ) : null}
      </div>
    </details>
  )
}
