// The axes of a chart drawn on the server: grid and marks in a stretched SVG, lettering in HTML around it.
import type { ReactNode } from 'react'
import { Digits } from '#app/components/ui/number.tsx'
import { type Axis, axisTitle, place, type Range, ticks, tickText } from './axes.ts'
import { limitText } from './scatter.ts'
import './charts.css'

const SIZE = 1000
/** Place in the stretched picture's own coordinates, y counted downward. */
export const along = (value: number, range: Range) => Math.round(place(value, range) * SIZE * 10) / 10
export const down = (value: number, range: Range) => Math.round((1 - place(value, range)) * SIZE * 10) / 10

const percent = (share: number) => `${Math.round(share * 1e4) / 100}%`

export function Frame({
  x,
  y,
  ranges,
  height,
  children,
}: {
  x: Axis
  y: Axis
  ranges: { x: Range; y: Range }
  height: number
  children: ReactNode
}) {
  const xTicks = ticks(ranges.x, 6).filter((value) => !x.whole || Number.isInteger(value))
  const yTicks = ticks(ranges.y, 5).filter((value) => !y.whole || Number.isInteger(value))
  return (
    <div className="chart" style={{ height }}>
      <div className="chart-area">
        <svg viewBox={`0 0 ${SIZE} ${SIZE}`} preserveAspectRatio="none" aria-hidden="true">
          {yTicks.map((value) => (
            <path key={value} d={`M0 ${down(value, ranges.y)}H${SIZE}`} stroke="var(--line)" />
          ))}
          <Beyond axis={x} range={ranges.x} along />
          <Beyond axis={y} range={ranges.y} />
          {children}
        </svg>
        {yTicks.map((value) => (
          <span key={value} className="chart-tick-y" style={{ top: percent(1 - place(value, ranges.y)) }}>
            <Digits>{tickText(value)}</Digits>
          </span>
        ))}
        {xTicks.map((value) => (
          <span key={value} className="chart-tick-x" style={{ left: percent(place(value, ranges.x)) }}>
            <Digits>{tickText(value)}</Digits>
          </span>
        ))}
        <span className="chart-title-x">{axisTitle(x)}</span>
        <span className="chart-title-y">
          <span>{axisTitle(y)}</span>
        </span>
        {(['max', 'min'] as const).map((side) =>
          x[side] === undefined ? null : (
            <span
              key={side}
              className="chart-limit"
              style={{ left: percent(place(x[side], ranges.x)), top: 0, paddingInlineStart: 6 }}
            >
              {limitText(x, side)}
            </span>
          ),
        )}
        {(['max', 'min'] as const).map((side) =>
          y[side] === undefined ? null : (
            <span
              key={side}
              className="chart-limit"
              style={{ right: 4, bottom: percent(place(y[side], ranges.y)) }}
            >
              {limitText(y, side)}
            </span>
          ),
        )}
      </div>
    </div>
  )
}

/** The tinted region beyond a limit, and the limit itself. */
function Beyond({ axis, range, along: across }: { axis: Axis; range: Range; along?: boolean }) {
  const tint = { fill: 'var(--copper-wash)', fillOpacity: 0.55 }
  const at = (value: number) => (across ? along(value, range) : down(value, range))
  return (
    <>
      {(['min', 'max'] as const).map((side) => {
        const limit = axis[side]
        if (limit === undefined) return null
        const edge = at(limit)
        const from = (side === 'max') === (across ?? false) ? edge : 0
        const to = (side === 'max') === (across ?? false) ? SIZE : edge
        return (
          <g key={side}>
            {across ? (
              <rect x={from} width={Math.max(0, to - from)} height={SIZE} {...tint} />
            ) : (
              <rect y={from} height={Math.max(0, to - from)} width={SIZE} {...tint} />
            )}
            <path
              d={across ? `M${edge} 0V${SIZE}` : `M0 ${edge}H${SIZE}`}
              stroke="var(--copper)"
              strokeWidth="1.6"
              strokeDasharray="6 4"
            />
          </g>
        )
      })}
    </>
  )
}
