// A small line chart drawn on the server: no script, named, with its values as a table.
import { Digits } from '#app/components/ui/number.tsx'
import { formatNumber } from '#engine/units.ts'
import { type Axis, axisRange, axisTitle } from './axes.ts'
import { along, down, Frame } from './frame.tsx'

export type Line = { label: string; x: readonly number[]; y: readonly (number | null)[] }

/** Colour and dash together, so that lines can be told apart without colour. */
const DASHES = [undefined, '7 4', '2 4', '9 3 2 3', '12 4', '4 3']
const MOST_ROWS = 200

export function LineChart({
  name,
  x,
  y,
  lines,
  height = 240,
  dots = false,
  active,
  table = true,
}: {
  name: string
  x: Axis
  y: Axis
  lines: readonly Line[]
  height?: number
  /** Marks the values themselves, where they are few. */
  dots?: boolean
  /** A place on the x axis pointed at elsewhere: the row under the pointer. */
  active?: number | null
  table?: boolean
}) {
  const ranges = {
    x: axisRange(
      lines.flatMap((line) => line.x),
      x,
    ),
    y: axisRange(
      lines.flatMap((line) => line.y.filter((value) => value !== null)),
      y,
    ),
  }
  return (
    <figure aria-label={name} className="grid gap-2">
      {lines.length > 1 ? (
        <div className="flex flex-wrap gap-x-4 gap-y-1 px-1 text-note text-soft">
          {lines.map((line, i) => (
            <span key={line.label} className="inline-flex items-center gap-1.5">
              <svg width="26" height="8" aria-hidden="true">
                <path
                  d="M0 4h26"
                  stroke={`var(--category-${i % 6})`}
                  strokeWidth="2"
                  strokeDasharray={DASHES[i % 6]}
                />
              </svg>
              {line.label}
            </span>
          ))}
        </div>
      ) : null}
      <Frame {...{ x, y, ranges, height }}>
        {active !== null && active !== undefined ? (
          <path d={`M${along(active, ranges.x)} 0V1000`} stroke="var(--copper)" strokeWidth="1.5" />
        ) : null}
        {lines.map((line, i) => {
          let pen = 'M'
          const path = line.x
            .map((at, k) => {
              const value = line.y[k]
              if (value === null || !Number.isFinite(value)) {
                pen = 'M'
                return ''
              }
              const step = `${pen}${along(at, ranges.x)} ${down(value, ranges.y)}`
              pen = 'L'
              return step
            })
            .join('')
          const colour = `var(--category-${i % 6})`
          return (
            <g key={line.label}>
              <path d={path} fill="none" stroke={colour} strokeWidth="2" strokeDasharray={DASHES[i % 6]} />
              {dots ? (
                <path
                  d={line.x
                    .map((at, k) => {
                      const value = line.y[k]
                      return value === null ? '' : `M${along(at, ranges.x)} ${down(value, ranges.y)}h0`
                    })
                    .join('')}
                  stroke={colour}
                  strokeWidth="7"
                  strokeLinecap="round"
                />
              ) : null}
            </g>
          )
        })}
      </Frame>
      {table ? <Values {...{ name, x, y, lines }} /> : null}
    </figure>
  )
}

function Values({ name, x, y, lines }: { name: string; x: Axis; y: Axis; lines: readonly Line[] }) {
  const places = [...new Set(lines.flatMap((line) => line.x))].sort((a, b) => a - b)
  const lookups = lines.map((line) => new Map(line.x.map((at, i) => [at, line.y[i]])))
  const shown = places.slice(0, MOST_ROWS)
  return (
    <details className="screen-only text-note">
      <summary className="font-semibold text-verdigris-ink">Values as a table</summary>
      <div className="scroll-thin mt-2 max-h-72 overflow-auto">
        <table className="data-table">
          <caption className="visually-hidden">{name}</caption>
          <thead>
            <tr>
              <th scope="col" className="numeric">
                {axisTitle(x)}
              </th>
              {lines.map((line) => (
                <th key={line.label} scope="col" className="numeric">
                  {lines.length > 1 ? `${line.label}${y.unit === '' ? '' : `, ${y.unit}`}` : axisTitle(y)}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {shown.map((at) => (
              <tr key={at}>
                <th scope="row" className="numeric">
                  <Digits>{formatNumber(at, 6).replace(/\.?0+$/, '')}</Digits>
                </th>
                {lookups.map((lookup, i) => (
                  <td key={lines[i].label} className="numeric">
                    <Digits>{formatNumber(lookup.get(at), 4)}</Digits>
                  </td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      {places.length > shown.length ? (
        <p>
          The first {shown.length} of {places.length} values.
        </p>
      ) : null}
    </details>
  )
}
