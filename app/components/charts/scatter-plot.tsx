// A scatter plot that is there at once, drawn by the server, and comes alive when plotly has been loaded.
import { type ComponentType, memo, type ReactNode, useEffect, useState } from 'react'
import { along, down, Frame } from './frame.tsx'
import type { LiveScatterProps } from './plotly.client.tsx'
import { type Mark, type Scatter, SYMBOLS, scatterRanges } from './scatter.ts'
import { useChartTheme } from './theme.ts'

/** More marks than this would weigh down the page's first answer; the live plot draws all it is given. */
const FIRST_MARKS = 1200

export function ScatterPlot({
  name,
  spec,
  pointers = [],
  height = 380,
  onPick,
  onBrush,
  children,
}: {
  /** What the plot is called for those who do not see it. */
  name: string
  spec: Scatter
  /** Points looked at: selected, pinned. */
  pointers?: readonly Mark[]
  height?: number
  onPick?: LiveScatterProps['onPick']
  /** A box drawn over the points, in the axes' units. */
  onBrush?: LiveScatterProps['onBrush']
  /** The same values as text: a table, or where to find it. */
  children?: ReactNode
}) {
  const theme = useChartTheme()
  const [Live, setLive] = useState<ComponentType<LiveScatterProps> | null>(null)
  const [failed, setFailed] = useState(false)
  useEffect(() => {
    let wanted = true
    keepStylesOut()
    import('./plotly.client.tsx').then(
      (module) => wanted && setLive(() => module.LiveScatter),
      () => wanted && setFailed(true),
    )
    return () => {
      wanted = false
    }
  }, [])
  return (
    <figure aria-label={name} className="grid gap-2">
      <Legend spec={spec} pointers={pointers} />
      <div style={{ minHeight: height }}>
        {Live && theme ? (
          <Live {...{ spec, pointers, theme, height, onPick, onBrush }} />
        ) : (
          <FirstScatter {...{ spec, pointers, height }} />
        )}
      </div>
      {failed ? (
        <p className="text-note text-soft" role="status">
          Pointing at the plot needs a part of the page that could not be loaded; reload to try again.
        </p>
      ) : null}
      {children}
    </figure>
  )
}

/**
 * As it loads, plotly 4.1.2 writes style elements into the page, which the content security policy refuses. It writes
 * none where one of the same id stands: the rules that matter here are in charts.css, the others are for maps.
 */
function keepStylesOut(): void {
  const ids = ['plotly.js-style-global', 'ce8d464691048653ffe3a57c6c18ab566e8366f186677868cf724621a857b4fe']
  for (const id of ids) {
    if (document.getElementById(id)) continue
    const holder = document.createElement('meta')
    holder.id = id
    holder.className = 'no-inline-styles'
    document.head.append(holder)
  }
}

const FirstScatter = memo(function FirstScatter({
  spec,
  pointers,
  height,
}: {
  spec: Scatter
  pointers: readonly Mark[]
  height: number
}) {
  const ranges = scatterRanges(spec)
  const total = spec.groups.reduce((sum, group) => sum + group.x.length, 0)
  const every = Math.max(1, Math.ceil(total / FIRST_MARKS))
  const dot = (x: number, y: number) =>
    Number.isFinite(x) && Number.isFinite(y) ? `M${along(x, ranges.x)} ${down(y, ranges.y)}h0` : ''
  return (
    <Frame x={spec.x} y={spec.y} ranges={ranges} height={height}>
      {spec.groups.map((group, i) =>
        [false, true].map((met) => (
          <path
            key={`${group.label} ${met}`}
            d={group.x
              .map((x, k) => (group.met[k] === met && k % every === 0 ? dot(x, group.y[k]) : ''))
              .join('')}
            stroke={group.value ? 'var(--tone-14)' : `var(--category-${i % 6})`}
            strokeOpacity={met ? 0.85 : 0.25}
            strokeWidth="6"
            strokeLinecap={i % 2 === 0 ? 'round' : 'square'}
          />
        )),
      )}
      {spec.front ? (
        <path
          d={spec.front.x
            .map((x, k) => {
              const y = down(spec.front?.y[k] ?? Number.NaN, ranges.y)
              return k === 0 ? `M${along(x, ranges.x)} ${y}` : `H${along(x, ranges.x)}V${y}`
            })
            .join('')}
          fill="none"
          stroke="var(--ink)"
          strokeWidth="1.6"
        />
      ) : null}
      {[...pointers, ...spec.marks].map((mark) => (
        <g key={mark.kind + mark.label}>
          <path
            d={dot(mark.x, mark.y)}
            stroke={mark.kind === 'selected' ? 'var(--copper)' : 'var(--ink)'}
            strokeWidth="15"
            strokeLinecap="round"
          />
          <path d={dot(mark.x, mark.y)} stroke="var(--sheet)" strokeWidth="10" strokeLinecap="round" />
          <path d={dot(mark.x, mark.y)} stroke="var(--ink)" strokeWidth="5" strokeLinecap="round" />
        </g>
      ))}
    </Frame>
  )
})

const GLYPHS: Record<(typeof SYMBOLS)[number], string> = {
  circle: 'M6 2a4 4 0 1 1 0 8a4 4 0 1 1 0-8z',
  square: 'M2.5 2.5h7v7h-7z',
  'triangle-up': 'M6 1.5L10.5 9.5h-9z',
  diamond: 'M6 1l5 5l-5 5l-5-5z',
  cross: 'M4.6 1.5h2.8v3.1h3.1v2.8H7.4v3.1H4.6V7.4H1.5V4.6h3.1z',
  star: 'M6 1l1.5 3.3l3.5.4l-2.6 2.4l.7 3.6L6 8.9l-3.1 1.8l.7-3.6L1 4.7l3.5-.4z',
}

/** What colours and shapes stand for, in HTML so that it wraps and is read. */
function Legend({ spec, pointers }: { spec: Scatter; pointers: readonly Mark[] }) {
  const marks = [...new Map([...pointers, ...spec.marks].map((mark) => [mark.kind, mark])).values()]
  return (
    <div className="flex flex-wrap items-center gap-x-4 gap-y-1 px-1 text-note text-soft">
      {spec.groupTitle ? <span className="font-semibold">{spec.groupTitle}</span> : null}
      {spec.scale ? (
        <span className="inline-flex items-center gap-2">
          {spec.scale.lowText}
          <svg
            width="72"
            height="10"
            viewBox="0 0 24 10"
            preserveAspectRatio="none"
            role="img"
            aria-label="to"
            className="rounded-sm"
          >
            {Array.from({ length: 24 }, (_, i) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: the steps of a scale are their places
              <rect key={i} x={i} width="1.05" height="10" fill={`var(--tone-${i})`} />
            ))}
          </svg>
          {spec.scale.highText}
        </span>
      ) : spec.groups.length > 1 ? (
        spec.groups.map((group, i) => (
          <span key={group.label} className="inline-flex items-center gap-1.5">
            <svg width="12" height="12" viewBox="0 0 12 12" aria-hidden="true">
              <path d={GLYPHS[SYMBOLS[i % SYMBOLS.length]]} fill={`var(--category-${i % 6})`} />
            </svg>
            {group.label}
          </span>
        ))
      ) : null}
      {marks.map((mark) => (
        <span key={mark.kind} className="inline-flex items-center gap-1.5">
          <svg width="14" height="14" viewBox="0 0 14 14" aria-hidden="true" fill="none">
            {mark.kind === 'refined' ? (
              <path d="M7 1.5L12.5 7L7 12.5L1.5 7z" stroke="var(--ink)" strokeWidth="2" />
            ) : mark.kind === 'pinned' ? (
              <path d="M2 2h10v10h-10z" stroke="var(--verdigris)" strokeWidth="2" />
            ) : (
              <circle
                cx="7"
                cy="7"
                r="5.2"
                stroke={mark.kind === 'selected' ? 'var(--copper)' : 'var(--ink)'}
                strokeWidth="2"
              />
            )}
            {mark.kind === 'best' ? <circle cx="7" cy="7" r="2" fill="var(--ink)" /> : null}
          </svg>
          {{ best: 'least', selected: 'selected', refined: 'refined', pinned: 'pinned' }[mark.kind]}
        </span>
      ))}
      {spec.front ? (
        <span className="inline-flex items-center gap-1.5">
          <svg width="22" height="8" aria-hidden="true">
            <path d="M0 4h22" stroke="var(--ink)" strokeWidth="1.6" />
          </svg>
          front
        </span>
      ) : null}
    </div>
  )
}
