// The live scatter plot. Loaded after hydration, and only where a plot is: plotly is larger than the rest together.
import Plotly from 'plotly.js'
import { memo, useMemo, useRef } from 'react'
import createPlotlyComponent from 'react-plotly.js/factory'
import { type ChartTheme, type Mark, pointerShapes, type Scatter, scatterFigure } from './scatter.ts'

const Plot = createPlotlyComponent(Plotly)

export type LiveScatterProps = {
  spec: Scatter
  /** Points looked at, which may change without the plot being drawn anew. */
  pointers: readonly Mark[]
  theme: ChartTheme
  height: number
  onPick?: (id: number) => void
  onBrush?: (area: { x: [number, number]; y: [number, number] }) => void
}

// Constant, because the plot is drawn anew whenever one of its objects is another.
const CONFIG = { displayModeBar: false, responsive: true, doubleClick: false, showTips: false } as const

export const LiveScatter = memo(function LiveScatter({
  spec,
  pointers,
  theme,
  height,
  onPick,
  onBrush,
}: LiveScatterProps) {
  const figure = useMemo(() => scatterFigure(spec, theme), [spec, theme])
  const layout = useMemo(() => {
    // A finger that drags means to scroll the page.
    const coarse = matchMedia('(pointer: coarse)').matches
    return {
      ...figure.layout,
      shapes: [...(figure.layout.shapes ?? []), ...pointerShapes(pointers, theme)],
      dragmode: onBrush && !coarse ? 'select' : false,
    } as const
  }, [figure, pointers, theme, onBrush])
  const style = useMemo(() => ({ width: '100%', height }), [height])
  // Plotly tells of a selection again when the plot is redrawn; only what a hand has drawn since is meant.
  const drawn = useRef(false)
  return (
    <div
      onPointerDownCapture={() => {
        drawn.current = true
      }}
    >
      <Plot
        data={figure.data}
        layout={layout}
        config={CONFIG}
        style={style}
        onClick={(event) => {
          const id = event.points[0]?.customdata
          if (typeof id === 'number') onPick?.(id)
        }}
        onSelected={(event) => {
          const range = event?.range as { x?: number[]; y?: number[] } | undefined
          if (!range?.x || !range.y || !drawn.current) return
          drawn.current = false
          const sorted = (values: number[]) => [...values].sort((a, b) => a - b) as [number, number]
          onBrush?.({ x: sorted(range.x), y: sorted(range.y) })
        }}
      />
    </div>
  )
})
