// The least of a result over a grid of two variables, with the cells where no point meets the limits hatched.
import { type KeyboardEvent, useState } from 'react'
import { Link } from 'react-router'
import { Hatch } from './histogram.tsx'
import './charts.css'

export type HeatAxis = {
  label: string
  unit: string
  /** What each column or row stands for. */
  names: readonly string[]
}

export type HeatCell = {
  column: number
  row: number
  /** Place on the continuous scale, 0 to 23. */
  tone: number
  /** The value with its unit. */
  text: string
  point: number
  meets: boolean
}

/** What a cell says of itself. */
export function cellText(cell: HeatCell, x: HeatAxis, y: HeatAxis, value: string): string {
  const where = `${x.label} ${x.names[cell.column]}, ${y.label} ${y.names[cell.row]}`
  return `${where}: least ${value} ${cell.text}, point ${cell.point}${cell.meets ? '' : ', misses a limit'}`
}

export function HeatMap({
  name,
  value,
  x,
  y,
  cells,
  selected,
  href,
  lowText,
  highText,
  height = 380,
}: {
  name: string
  /** What is least, in words. */
  value: string
  x: HeatAxis
  y: HeatAxis
  cells: readonly HeatCell[]
  selected: number | null
  href: (point: number) => string
  lowText: string
  highText: string
  height?: number
}) {
  const [active, setActive] = useState<HeatCell | null>(null)
  const columns = x.names.length
  const rows = y.names.length
  const every = (count: number, room: number) => Math.max(1, Math.ceil(count / room))
  const title = ({ label, unit }: HeatAxis) => (unit === '' ? label : `${label}, ${unit}`)
  const begin = cells.some(({ point }) => point === selected) ? selected : cells[0]?.point
  return (
    <figure aria-label={name} className="grid gap-2">
      <p className="flex flex-wrap items-center gap-x-4 px-1 text-note text-soft">
        <span className="inline-flex items-center gap-2">
          least {value}: {lowText}
          <svg
            width="72"
            height="10"
            viewBox="0 0 24 10"
            preserveAspectRatio="none"
            role="img"
            aria-label="to"
          >
            {Array.from({ length: 24 }, (_, i) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: the steps of a scale are their places
              <rect key={i} x={i} width="1.05" height="10" fill={`var(--tone-${i})`} />
            ))}
          </svg>
          {highText}
        </span>
        <span className="inline-flex items-center gap-1.5">
          <svg width="12" height="12" aria-hidden="true">
            <Hatch id="hatch-map-key" />
            <rect width="12" height="12" rx="2" fill="url(#hatch-map-key)" />
          </svg>
          no point here meets every limit
        </span>
      </p>
      <div className="chart" style={{ height }}>
        <div className="chart-area">
          <svg viewBox={`0 0 ${columns} ${rows}`} preserveAspectRatio="none" aria-hidden="true">
            {cells.map((cell) => (
              <rect
                key={cell.point}
                x={cell.column + 0.02}
                y={rows - 1 - cell.row + 0.02}
                width={0.96}
                height={0.96}
                fill={cell.meets ? `var(--tone-${cell.tone})` : 'var(--copper-wash)'}
              />
            ))}
          </svg>
          {/** biome-ignore lint/a11y/useSemanticElements: the cells lie on the picture, not in a table's flow */}
          <div role="group" aria-label={name} onKeyDown={(event) => moveOnGrid(event, columns)}>
            {cells.map((cell) => (
              <Link
                key={cell.point}
                to={href(cell.point)}
                replace
                preventScrollReset
                className={`heat-cell ${cell.meets ? '' : 'heat-cell-missed'}`}
                data-cell={`${cell.column},${cell.row}`}
                aria-label={cellText(cell, x, y, value)}
                aria-current={cell.point === selected || undefined}
                tabIndex={cell.point === begin ? 0 : -1}
                onPointerEnter={() => setActive(cell)}
                onPointerLeave={() => setActive(null)}
                onFocus={() => setActive(cell)}
                onBlur={() => setActive(null)}
                style={{
                  left: `${(cell.column / columns) * 100}%`,
                  bottom: `${(cell.row / rows) * 100}%`,
                  width: `${100 / columns}%`,
                  height: `${100 / rows}%`,
                }}
              />
            ))}
          </div>
          {x.names.map((text, i) =>
            i % every(columns, 9) === 0 ? (
              <span key={text} className="chart-tick-x" style={{ left: `${((i + 0.5) / columns) * 100}%` }}>
                {text}
              </span>
            ) : null,
          )}
          {y.names.map((text, i) =>
            i % every(rows, 12) === 0 ? (
              <span
                key={text}
                className="chart-tick-y"
                style={{ bottom: `${((i + 0.5) / rows) * 100}%`, transform: 'translateY(50%)' }}
              >
                {text}
              </span>
            ) : null,
          )}
          <span className="chart-title-x">{title(x)}</span>
          <span className="chart-title-y">
            <span>{title(y)}</span>
          </span>
        </div>
      </div>
      <p className="min-h-[2lh] text-note text-soft" aria-hidden="true">
        {active
          ? cellText(active, x, y, value)
          : 'Each cell shows the least over all other variables; choose one to see its point.'}
      </p>
    </figure>
  )
}

/** Arrow keys move to the next cell that has a point in that direction. */
function moveOnGrid(event: KeyboardEvent<HTMLDivElement>, columns: number) {
  const step = { ArrowLeft: [-1, 0], ArrowRight: [1, 0], ArrowUp: [0, 1], ArrowDown: [0, -1] }[event.key]
  const place = (event.target as HTMLElement).dataset.cell?.split(',').map(Number)
  if (!step || !place) return
  event.preventDefault()
  let [column, row] = place
  for (let tries = 0; tries < Math.max(columns, 40); tries++) {
    column += step[0]
    row += step[1]
    const next = event.currentTarget.querySelector<HTMLElement>(`[data-cell="${column},${row}"]`)
    if (next) {
      next.focus()
      return
    }
  }
}
