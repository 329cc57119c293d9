// The live scatter plot. Loaded after hydration, and only where a plot is: plotly is larger than the rest together.
import Plotly from 'plotly.js'
import { memo, useMemo } from 'react'
import createPlotlyComponent from 'react-plotly.js/factory'
import {
  type ChartTheme,
  drawnBox,
  type Mark,
  pointerShapes,
  type Scatter,
  scatterFigure,
  scatterRanges,
} from './scatter.ts'

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
      dragmode: onBrush && !coarse ? 'zoom' : false,
    } as const
  }, [figure, pointers, theme, onBrush])
  const style = useMemo(() => ({ width: '100%', height }), [height])
  return (
    <Plot
      data={figure.data}
      layout={layout}
      config={CONFIG}
      style={style}
      onClick={(event) => {
        const id = event.points[0]?.customdata
        if (typeof id === 'number') onPick?.(id)
      }}
      onRelayout={(change) => {
        const box = drawnBox(change as Record<string, unknown>, scatterRanges(spec))
        if (box) onBrush?.(box)
      }}
    />
  )
})
