// How many points have which value: those that meet every limit, and on top of them those that miss one.
import { Digits } from '#app/components/ui/number.tsx'
import { formatNumber } from '#engine/units.ts'
import type { Axis, Range } from './axes.ts'
import { along, down, Frame } from './frame.tsx'

export function Histogram({
  name,
  x,
  edges,
  met,
  missed,
  height = 320,
  href,
}: {
  name: string
  x: Axis
  /** In the axis' unit, one more than there are counts. */
  edges: readonly number[]
  met: readonly number[]
  missed: readonly number[]
  height?: number
  /** The address that keeps only the points of a bin. */
  href: (bin: number) => string
}) {
  const y: Axis = { label: 'points', unit: '', whole: true }
  const most = Math.max(1, ...met.map((count, i) => count + missed[i]))
  const [low, high] = [edges[0], edges[edges.length - 1]]
  const room = (high - low || Math.abs(high) || 1) * 0.02
  const beyond = [x.min, x.max].filter((limit) => limit !== undefined)
  const ranges: { x: Range; y: Range } = {
    x: {
      low: Math.min(low, ...beyond) - room,
      high: Math.max(high, ...beyond) + room,
      log: false,
    },
    y: { low: 0, high: most * 1.05, log: false },
  }
  return (
    <figure aria-label={name} className="grid gap-2">
      <p className="flex flex-wrap gap-x-4 px-1 text-note text-soft">
        <Key fill="var(--verdigris)" label="meet every limit" />
        <Key fill="url(#hatch-key)" label="miss a limit" />
      </p>
      <Frame {...{ x, y, ranges, height }}>
        <Hatch id="hatch-bars" />
        {met.map((count, i) => {
          const left = along(edges[i], ranges.x)
          const right = edges.length === 2 && low === high ? left + 40 : along(edges[i + 1], ranges.x)
          const width = Math.max(1, right - left - 2)
          const top = down(count, ranges.y)
          const over = down(count + missed[i], ranges.y)
          return (
            <g key={edges[i]}>
              <rect x={left + 1} y={top} width={width} height={1000 - top} fill="var(--verdigris)" />
              <rect x={left + 1} y={over} width={width} height={top - over} fill="url(#hatch-bars)" />
            </g>
          )
        })}
      </Frame>
      <details className="text-note">
        <summary className="font-semibold text-verdigris-ink">Counts as a table, each to filter by</summary>
        <div className="scroll-thin mt-2 max-h-72 overflow-auto">
          <table className="data-table">
            <caption className="visually-hidden">{name}</caption>
            <thead>
              <tr>
                <th scope="col">
                  {x.label}
                  {x.unit ? `, ${x.unit}` : ''}
                </th>
                <th scope="col" className="numeric">
                  meet every limit
                </th>
                <th scope="col" className="numeric">
                  miss a limit
                </th>
              </tr>
            </thead>
            <tbody>
              {met.map((count, i) => (
                <tr key={edges[i]}>
                  <th scope="row">
                    <a href={href(i)} className="link">
                      {formatNumber(edges[i], 4)} to {formatNumber(edges[i + 1], 4)}
                    </a>
                  </th>
                  <td className="numeric">
                    <Digits>{count}</Digits>
                  </td>
                  <td className="numeric">
                    <Digits>{missed[i]}</Digits>
                  </td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      </details>
    </figure>
  )
}

/** Copper lines on the sheet: what misses a limit is told from what meets it without colour. */
export function Hatch({ id }: { id: string }) {
  return (
    <defs>
      <pattern id={id} width="7" height="7" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
        <rect width="7" height="7" fill="var(--copper-wash)" />
        <rect width="2" height="7" fill="var(--copper)" fillOpacity="0.6" />
      </pattern>
    </defs>
  )
}

function Key({ fill, label }: { fill: string; label: string }) {
  return (
    <span className="inline-flex items-center gap-1.5">
      <svg width="12" height="12" aria-hidden="true">
        <Hatch id="hatch-key" />
        <rect width="12" height="12" rx="2" fill={fill} />
      </svg>
      {label}
    </span>
  )
}
