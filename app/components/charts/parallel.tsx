// Parallel coordinates: one upright axis for each quantity, one line for each point. Drawn on the server; dragging
// along an axis keeps the points between.
import { type PointerEvent, useRef, useState } from 'react'
import './charts.css'

export type ParallelAxis = {
  id: string
  label: string
  unit: string
  /** Ends of the axis with their text; for a choice, the names from bottom to top. */
  low: number
  high: number
  lowText: string
  highText: string
  names?: readonly string[]
  /** A filter on the axis, in its own numbers. */
  from?: number
  to?: number
}

export type ParallelLine = { point: number; values: readonly (number | null)[]; meets: boolean; tone: number }

export function Parallel({
  name,
  axes,
  lines,
  selected,
  onBrush,
  height = 380,
}: {
  name: string
  axes: readonly ParallelAxis[]
  lines: readonly ParallelLine[]
  selected: number | null
  onBrush: (id: string, from: number, to: number) => void
  height?: number
}) {
  const share = (axis: ParallelAxis, value: number) =>
    axis.high > axis.low ? (value - axis.low) / (axis.high - axis.low) : 0.5
  const across = (i: number) => (axes.length === 1 ? 500 : (i * 1000) / (axes.length - 1))
  const path = ({ values }: ParallelLine) => {
    let pen = 'M'
    return values
      .map((value, i) => {
        if (value === null) {
          pen = 'M'
          return ''
        }
        const step = `${pen}${Math.round(across(i))} ${Math.round((1 - share(axes[i], value)) * 1000)}`
        pen = 'L'
        return step
      })
      .join('')
  }
  const chosen = lines.find(({ point }) => point === selected)
  return (
    <figure aria-label={name} className="grid gap-2">
      <div className="parallel" style={{ height }}>
        <div className="chart-area parallel-area">
          <svg viewBox="0 0 1000 1000" preserveAspectRatio="none" aria-hidden="true">
            {[...lines].reverse().map((line) => (
              <path
                key={line.point}
                d={path(line)}
                fill="none"
                stroke={line.meets ? `var(--tone-${line.tone})` : 'var(--copper)'}
                strokeDasharray={line.meets ? undefined : '3 4'}
                strokeOpacity={line.meets ? 0.75 : 0.35}
                strokeWidth="1.2"
              />
            ))}
            {chosen ? <path d={path(chosen)} fill="none" stroke="var(--copper)" strokeWidth="3" /> : null}
          </svg>
          {axes.map((axis, i) => (
            <AxisBar key={axis.id} axis={axis} left={across(i) / 10} onBrush={onBrush} share={share} />
          ))}
        </div>
      </div>
    </figure>
  )
}

function AxisBar({
  axis,
  left,
  onBrush,
  share,
}: {
  axis: ParallelAxis
  left: number
  onBrush: (id: string, from: number, to: number) => void
  share: (axis: ParallelAxis, value: number) => number
}) {
  const [drag, setDrag] = useState<{ from: number; to: number } | null>(null)
  const bar = useRef<HTMLDivElement>(null)
  const at = (event: PointerEvent) => {
    const box = bar.current?.getBoundingClientRect()
    return box ? Math.min(1, Math.max(0, 1 - (event.clientY - box.top) / box.height)) : 0
  }
  const shown =
    drag ??
    (axis.from === undefined && axis.to === undefined
      ? null
      : { from: share(axis, axis.from ?? axis.low), to: share(axis, axis.to ?? axis.high) })
  const [low, high] = shown
    ? [Math.max(0, Math.min(shown.from, shown.to)), Math.min(1, Math.max(shown.from, shown.to))]
    : [0, 0]
  return (
    <div className="parallel-axis" style={{ left: `${left}%` }}>
      <span className="parallel-label">
        {axis.label}
        {axis.unit ? `, ${axis.unit}` : ''}
      </span>
      <span className="parallel-high">{axis.names ? axis.names[axis.names.length - 1] : axis.highText}</span>
      <div
        ref={bar}
        className="parallel-bar"
        onPointerDown={(event) => {
          if (event.pointerType === 'touch') return
          event.currentTarget.setPointerCapture(event.pointerId)
          setDrag({ from: at(event), to: at(event) })
        }}
        onPointerMove={(event) => {
          if (drag) setDrag({ ...drag, to: at(event) })
        }}
        onPointerUp={() => {
          if (drag && Math.abs(drag.to - drag.from) > 0.01) {
            const value = (part: number) => axis.low + part * (axis.high - axis.low)
            onBrush(axis.id, value(Math.min(drag.from, drag.to)), value(Math.max(drag.from, drag.to)))
          }
          setDrag(null)
        }}
        onPointerCancel={() => setDrag(null)}
      >
        {shown ? (
          <span
            className="parallel-brush"
            style={{ bottom: `${low * 100}%`, height: `${Math.max(0.5, (high - low) * 100)}%` }}
          />
        ) : null}
      </div>
      <span className="parallel-low">{axis.names ? axis.names[0] : axis.lowText}</span>
    </div>
  )
}
