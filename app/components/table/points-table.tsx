// Points as a table: sorted, filtered and paged by the server; its state is the URL's, so every head and page is a link.
import { createColumnHelper, tableFeatures, useTable } from '@tanstack/react-table'
import { type KeyboardEvent, useEffect, useMemo, useState } from 'react'
import { Link } from 'react-router'
import { Button, LinkButton } from '#app/components/ui/button.tsx'
import { Digits, useUnits } from '#app/components/ui/number.tsx'
import { Tag, type Tone } from '#app/components/ui/tag.tsx'
import { formatNumber } from '#engine/units.ts'
import './table.css'

export type TableColumn = {
  id: string
  label: string
  /** Stands in the head, after the label. */
  unit: string
  numeric: boolean
  /** Values a person gave are shown as given; results with four digits. */
  given: boolean
}

export type TableRow = {
  point: number
  /** In the order of the columns, in the heads' units; text for choices, null for no value. */
  cells: readonly (number | string | null)[]
  /** Says in words whether the point may be chosen. */
  state: { tone: Tone; label: string }
}

export type PointsTableProps = {
  caption: string
  columns: readonly TableColumn[]
  rows: readonly TableRow[]
  sort: { id: string; descending: boolean }
  sortHref: (id: string) => string
  pointHref: (point: number) => string
  selected: number | null
  /** Points that pass the filters, and where this page begins among them. */
  matching: number
  offset: number
  pageSize: number
  pageHref: (page: number) => string
  /** An earlier page is being replaced. */
  busy?: boolean
}

const features = tableFeatures({})
const helper = createColumnHelper<typeof features, TableRow>()

export function PointsTable(props: PointsTableProps) {
  const { caption, columns, rows, sort, sortHref, pointHref, selected } = props
  // Until scripts run every point is a tab stop; then the arrow keys move between them.
  const [live, setLive] = useState(false)
  useEffect(() => setLive(true), [])
  const model = useMemo(
    () =>
      helper.columns([
        helper.accessor('point', { id: 'point', header: 'Point' }),
        ...columns.map((column, i) =>
          helper.accessor((row: TableRow) => row.cells[i], { id: column.id, header: column.label }),
        ),
        helper.accessor((row: TableRow) => row.state.label, { id: 'state', header: 'Limits' }),
      ]),
    [columns],
  )
  const data = useMemo(() => [...rows], [rows])
  const table = useTable({ features, columns: model, data })
  const byId = new Map(columns.map((column) => [column.id, column]))
  const stop = rows.some((row) => row.point === selected) ? selected : rows[0]?.point
  return (
    <div>
      <div
        className={`scroll-thin relative overflow-x-auto ${props.busy ? 'opacity-60' : ''}`}
        aria-busy={props.busy}
      >
        <table className="data-table points-table">
          <caption className="visually-hidden">{caption}</caption>
          <thead>
            {table.getHeaderGroups().map((group) => (
              <tr key={group.id}>
                {group.headers.map(({ id, column }) => {
                  const own = byId.get(id)
                  const sorted = sort.id === id
                  const label = String(column.columnDef.header)
                  const name = own?.unit ? `${label}, ${own.unit}` : label
                  return (
                    <th
                      key={id}
                      scope="col"
                      className={id === 'state' || own?.numeric || id === 'point' ? 'numeric' : undefined}
                      aria-sort={sorted ? (sort.descending ? 'descending' : 'ascending') : undefined}
                    >
                      {id === 'state' ? (
                        label
                      ) : (
                        <Link to={sortHref(id)} replace preventScrollReset className="sort-button">
                          {name}
                          {sorted ? <span aria-hidden="true">{sort.descending ? ' ↓' : ' ↑'}</span> : null}
                        </Link>
                      )}
                    </th>
                  )
                })}
              </tr>
            ))}
          </thead>
          <tbody onKeyDown={moveBetweenRows}>
            {table.getRowModel().rows.map((line) => {
              const row = line.original
              const chosen = row.point === selected
              return (
                <tr
                  key={row.point}
                  data-link="true"
                  data-selected={chosen || undefined}
                  data-faded={row.state.tone !== 'sound' || undefined}
                  onClick={(event) => {
                    if (event.target instanceof Element && event.target.closest('a')) return
                    if (getSelection()?.isCollapsed === false) return
                    event.currentTarget.querySelector('a')?.click()
                  }}
                >
                  {line.getAllCells().map((cell) => {
                    const own = byId.get(cell.column.id)
                    if (cell.column.id === 'point')
                      return (
                        <th key={cell.id} scope="row" className="numeric font-semibold">
                          <Link
                            to={pointHref(row.point)}
                            replace
                            preventScrollReset
                            aria-current={chosen || undefined}
                            tabIndex={live && row.point !== stop ? -1 : undefined}
                          >
                            <Digits>{row.point}</Digits>
                          </Link>
                        </th>
                      )
                    if (cell.column.id === 'state')
                      return (
                        <td key={cell.id} className="numeric">
                          <Tag tone={row.state.tone}>{row.state.label}</Tag>
                        </td>
                      )
                    return (
                      <td key={cell.id} className={own?.numeric ? 'numeric' : undefined}>
                        <Value
                          value={cell.getValue() as number | string | null}
                          given={own?.given ?? false}
                        />
                      </td>
                    )
                  })}
                </tr>
              )
            })}
          </tbody>
        </table>
      </div>
      <Pages {...props} />
    </div>
  )
}

function Value({ value, given }: { value: number | string | null; given: boolean }) {
  const units = useUnits()
  if (value === null) return <span title="no value">–</span>
  if (typeof value === 'string') return value
  return (
    <Digits>
      {given ? String(Number(value.toPrecision(units === 'si' ? 6 : 4))) : formatNumber(value, 4)}
    </Digits>
  )
}

/** Arrow keys, Home and End move between the points' links; Enter follows one as any link. */
function moveBetweenRows(event: KeyboardEvent<HTMLTableSectionElement>) {
  const row = event.target instanceof Element ? event.target.closest('tr') : null
  if (!row) return
  const target = {
    ArrowDown: row.nextElementSibling,
    ArrowUp: row.previousElementSibling,
    Home: row.parentElement?.firstElementChild,
    End: row.parentElement?.lastElementChild,
  }[event.key]
  if (!target) return
  event.preventDefault()
  target.querySelector('a')?.focus()
}

function Pages({ columns, rows, matching, offset, pageSize, pageHref }: PointsTableProps) {
  const [said, setSaid] = useState('')
  const page = Math.floor(offset / pageSize)
  const last = Math.max(0, Math.ceil(matching / pageSize) - 1)
  const copy = async () => {
    await navigator.clipboard.writeText(toTabbed(columns, rows))
    setSaid(`Copied ${rows.length} ${rows.length === 1 ? 'row' : 'rows'} with all digits.`)
  }
  return (
    <div className="flex flex-wrap items-center justify-between gap-x-4 gap-y-2 border-t border-line px-4 py-2.5 text-note text-soft">
      <p>
        {rows.length === 0 ? (
          'No point'
        ) : (
          <>
            <Digits>{offset + 1}</Digits> to <Digits>{offset + rows.length}</Digits> of{' '}
            <Digits>{matching}</Digits>
          </>
        )}
        <span className="ms-3" role="status">
          {said}
        </span>
      </p>
      <div className="screen-only flex flex-wrap gap-2">
        {rows.length > 0 ? (
          <Button look="quiet" small onClick={copy}>
            Copy these rows
          </Button>
        ) : null}
        {page > 0 ? (
          <LinkButton to={pageHref(page - 1)} replace preventScrollReset small>
            Earlier
          </LinkButton>
        ) : null}
        {page < last ? (
          <LinkButton to={pageHref(page + 1)} replace preventScrollReset small>
            Next
          </LinkButton>
        ) : null}
      </div>
    </div>
  )
}

/** The page as a spreadsheet takes it: tabs between cells, plain numbers, every digit. */
export function toTabbed(columns: readonly TableColumn[], rows: readonly TableRow[]): string {
  const head = [
    'Point',
    ...columns.map(({ label, unit }) => (unit === '' ? label : `${label}, ${unit}`)),
    'Limits',
  ]
  const lines = rows.map((row) => [row.point, ...row.cells.map((cell) => cell ?? ''), row.state.label])
  return [head, ...lines].map((line) => line.join('\t')).join('\n')
}
