// A scatter plot as data, and its translation into what plotly draws. Pure.
import type { Annotation, Data, Layout, Shape } from 'plotly.js'
import { type Axis, axisRange, axisTitle, place, type Range } from './axes.ts'

/** Points of one category, in the axes' units. `met` is false where a point misses a limit: it is faded. */
export type Group = {
  label: string
  x: readonly number[]
  y: readonly number[]
  ids: readonly number[]
  met: readonly boolean[]
  /** Where the points are coloured on the continuous scale instead of by category. */
  value?: readonly number[]
}

export type Mark = {
  kind: 'best' | 'selected' | 'refined' | 'pinned'
  label: string
  x: number
  y: number
  id: number | null
}

export type Scatter = {
  x: Axis
  y: Axis
  /** At most six categories, told apart by colour and shape; more are given as one group with `value`. */
  groups: readonly Group[]
  /** What the categories or the continuous scale stand for. */
  groupTitle?: string
  /** Ends of the continuous scale, as text. */
  scale?: { low: number; high: number; lowText: string; highText: string }
  front?: { x: readonly number[]; y: readonly number[] }
  marks: readonly Mark[]
}

export const SYMBOLS = ['circle', 'square', 'triangle-up', 'diamond', 'cross', 'star'] as const

export type ChartTheme = {
  sheet: string
  ink: string
  soft: string
  line: string
  copper: string
  copperInk: string
  copperWash: string
  verdigris: string
  categories: readonly string[]
  tones: readonly string[]
  font: string
}

const all = (groups: readonly Group[], axis: 'x' | 'y', marks: readonly Mark[]) => [
  ...groups.flatMap((group) => group[axis]),
  ...marks.map((mark) => mark[axis]),
]

export function scatterRanges({ x, y, groups, marks }: Scatter): { x: Range; y: Range } {
  return { x: axisRange(all(groups, 'x', marks), x), y: axisRange(all(groups, 'y', marks), y) }
}

/** Where an axis is beyond its limits, as [from, to] reaching past any zoom. */
export function beyond(axis: Axis, range: Range): [number, number][] {
  const span = range.high - range.low
  const parts: [number, number][] = []
  if (axis.max !== undefined) parts.push([axis.max, axis.max + Math.max(span, Math.abs(axis.max)) * 1000])
  if (axis.min !== undefined)
    parts.push([range.log ? axis.min * 1e-6 : axis.min - Math.max(span, Math.abs(axis.min)) * 1000, axis.min])
  return parts
}

/**
 * The box a hand has drawn, from what plotly says of its axes' new ranges; null when it says nothing of both. On a
 * logarithmic axis ranges are logarithms.
 */
export function drawnBox(
  change: Readonly<Record<string, unknown>>,
  ranges: { x: Range; y: Range },
): { x: [number, number]; y: [number, number] } | null {
  const side = (axis: 'x' | 'y'): [number, number] | null => {
    const ends = [change[`${axis}axis.range[0]`], change[`${axis}axis.range[1]`]]
    if (!ends.every((end) => typeof end === 'number')) return null
    const values = (ends as number[]).map((end) => (ranges[axis].log ? 10 ** end : end))
    return [Math.min(...values), Math.max(...values)]
  }
  const x = side('x')
  const y = side('y')
  if (!x && !y) return null
  const whole = ({ low, high }: Range): [number, number] => [low, high]
  return { x: x ?? whole(ranges.x), y: y ?? whole(ranges.y) }
}

/** "limit 60 kPa" with the axis' unit. */
export function limitText(axis: Axis, side: 'min' | 'max'): string {
  return `${side === 'max' ? 'at most' : 'at least'} ${axis[side]}${axis.unit === '' ? '' : ` ${axis.unit}`}`
}

export function scatterFigure(spec: Scatter, theme: ChartTheme): { data: Data[]; layout: Partial<Layout> } {
  const ranges = scatterRanges(spec)
  const { shapes, annotations } = limitMarks(spec, ranges, theme)
  const axis = (of: Axis, range: Range): Partial<Layout['xaxis']> => ({
    title: { text: axisTitle(of), standoff: 8, font: { size: 12.5, color: theme.soft } },
    type: range.log ? 'log' : 'linear',
    range: range.log ? [Math.log10(range.low), Math.log10(range.high)] : [range.low, range.high],
    gridcolor: theme.line,
    zeroline: false,
    linecolor: theme.line,
    tickfont: { size: 12.5, color: theme.soft },
    ticks: '',
    automargin: true,
    // Grouped by a narrow space (see separators), never by an SI prefix.
    tickformat: ',~r',
    ...(range.log ? { dtick: range.high / range.low > 1000 ? 1 : 'D2' } : {}),
  })
  const hover = (head: string) =>
    `${head}<br>${axisTitle(spec.y)}: <b>%{y:,.4~r}</b><br>${axisTitle(spec.x)}: <b>%{x:,.4~r}</b><extra></extra>`
  return {
    data: [
      ...spec.groups.flatMap((group, i) =>
        [false, true].map((met) => groupTrace(spec, group, i, met, theme, hover)),
      ),
      ...(spec.front ? [frontTrace(spec.front, theme)] : []),
      ...spec.marks.flatMap((mark) => markTraces(mark, theme, hover)),
    ],
    layout: {
      xaxis: axis(spec.x, ranges.x),
      yaxis: axis(spec.y, ranges.y),
      shapes,
      annotations,
      separators: '.\u202f',
      showlegend: false,
      paper_bgcolor: 'transparent',
      plot_bgcolor: 'transparent',
      margin: { l: 8, r: 8, t: 10, b: 8, pad: 0 },
      font: { family: theme.font, size: 12.5, color: theme.ink },
      hovermode: 'closest',
      hoverdistance: 12,
      hoverlabel: {
        bgcolor: theme.ink,
        bordercolor: theme.ink,
        font: { family: theme.font, size: 12.5, color: theme.sheet },
        align: 'left',
      },
      dragmode: 'zoom',
    } as Partial<Layout>,
  }
}

function groupTrace(
  spec: Scatter,
  group: Group,
  index: number,
  met: boolean,
  theme: ChartTheme,
  hover: (head: string) => string,
): Data {
  const kept = group.met.flatMap((is, i) => (is === met ? [i] : []))
  const pick = (values: readonly number[]) => kept.map((i) => values[i])
  const crowd = spec.groups.reduce((sum, one) => sum + one.x.length, 0)
  const colour = group.value
    ? {
        color: pick(group.value),
        colorscale: theme.tones.map((tone, i): [number, string] => [i / (theme.tones.length - 1), tone]),
        cmin: spec.scale?.low,
        cmax: spec.scale?.high,
      }
    : { color: theme.categories[index % theme.categories.length] }
  const name = group.label === '' ? '' : `, ${group.label}`
  return {
    type: 'scatter',
    mode: 'markers',
    name: group.label,
    x: pick(group.x),
    y: pick(group.y),
    customdata: pick(group.ids),
    opacity: met ? 0.85 : 0.25,
    marker: {
      size: crowd > 6000 ? 4.5 : crowd > 1500 ? 5.5 : 6.5,
      symbol: SYMBOLS[index % SYMBOLS.length],
      line: { width: group.value ? 0.5 : 0, color: theme.verdigris },
      ...colour,
    },
    hovertemplate: hover(`Point %{customdata}${name}${met ? '' : ' (misses a limit)'}`),
  } as Data
}

function frontTrace(front: { x: readonly number[]; y: readonly number[] }, theme: ChartTheme): Data {
  return {
    type: 'scatter',
    mode: 'lines',
    name: 'front',
    x: [...front.x],
    y: [...front.y],
    line: { color: theme.ink, width: 1.6, shape: 'hv' },
    hoverinfo: 'skip',
  } as Data
}

/** A ring on a halo of the ground, so that it stands out of a crowd of points. */
function markTraces(mark: Mark, theme: ChartTheme, hover: (head: string) => string): Data[] {
  const symbol = mark.kind === 'refined' ? 'diamond-open-dot' : 'circle-open-dot'
  const ring = (color: string, width: number, shape: string) => ({
    type: 'scatter',
    mode: 'markers',
    name: mark.label,
    x: [mark.x],
    y: [mark.y],
    customdata: [mark.id],
    marker: { symbol: shape, size: 16, color, line: { width, color } },
  })
  return [
    { ...ring(theme.sheet, 7, symbol.replace('-dot', '')), hoverinfo: 'skip' } as Data,
    { ...ring(theme.ink, 2.5, symbol), hovertemplate: hover(mark.label) } as Data,
  ]
}

/**
 * Rings around points that are looked at. They are shapes, not traces: a shape is drawn without drawing the points
 * anew, so that looking at one point after another stays quick.
 */
export function pointerShapes(pointers: readonly Mark[], theme: ChartTheme): Partial<Shape>[] {
  const ring = (mark: Mark, size: number, color: string, width: number): Partial<Shape> =>
    ({
      type: mark.kind === 'pinned' ? 'rect' : 'circle',
      layer: 'above',
      xref: 'x',
      yref: 'y',
      xsizemode: 'pixel',
      ysizemode: 'pixel',
      xanchor: mark.x,
      yanchor: mark.y,
      x0: -size,
      x1: size,
      y0: -size,
      y1: size,
      line: { color, width },
    }) as Partial<Shape>
  return pointers.flatMap((mark) => {
    const [size, color] = mark.kind === 'pinned' ? [8, theme.verdigris] : [10, theme.copper]
    return [ring(mark, size, theme.sheet, 6), ring(mark, size, color, 2.5)]
  })
}

function limitMarks(spec: Scatter, ranges: { x: Range; y: Range }, theme: ChartTheme) {
  const shapes: Partial<Shape>[] = []
  const annotations: Partial<Annotation>[] = []
  for (const of of ['x', 'y'] as const) {
    const axis = spec[of]
    const range = ranges[of]
    const across = of === 'x' ? { yref: 'paper', y0: 0, y1: 1 } : { xref: 'paper', x0: 0, x1: 1 }
    const span = (from: number, to: number) =>
      of === 'x' ? { xref: 'x', x0: from, x1: to } : { yref: 'y', y0: from, y1: to }
    for (const [from, to] of beyond(axis, range))
      shapes.push({
        type: 'rect',
        layer: 'below',
        line: { width: 0 },
        fillcolor: theme.copperWash,
        opacity: 0.55,
        ...across,
        ...span(from, to),
      } as Partial<Shape>)
    for (const side of ['min', 'max'] as const) {
      const limit = axis[side]
      if (limit === undefined) continue
      shapes.push({
        type: 'line',
        layer: 'above',
        line: { color: theme.copper, width: 1.6, dash: 'dash' },
        ...across,
        ...span(limit, limit),
      } as Partial<Shape>)
      // Annotations on a logarithmic axis stand at the logarithm; shapes do not.
      const at = range.log ? Math.log10(limit) : limit
      annotations.push({
        text: `<b>${limitText(axis, side)}</b>`,
        showarrow: false,
        font: { size: 12.5, color: theme.copperInk },
        ...(of === 'x'
          ? { xref: 'x', x: at, ...beside(place(limit, range)), yref: 'paper', y: 1, yanchor: 'top' }
          : {
              yref: 'y',
              y: at,
              yanchor: side === 'max' ? 'bottom' : 'top',
              xref: 'paper',
              x: 1,
              xanchor: 'right',
            }),
      } as Partial<Annotation>)
    }
  }
  return { shapes, annotations }
}

/** Words to the right of a limit, or to its left where there is no room. */
const beside = (share: number) =>
  share > 0.72 ? { xanchor: 'right', xshift: -6 } : { xanchor: 'left', xshift: 6 }

/**
 * The lower left edge: points that no other point beats on both axes. Where less of both is wanted, this is the front.
 */
export function lowerFront(groups: readonly Group[]): { x: number[]; y: number[] } {
  const points = groups.flatMap((group) =>
    group.x.flatMap((x, i) =>
      Number.isFinite(x) && Number.isFinite(group.y[i]) ? [{ x, y: group.y[i] }] : [],
    ),
  )
  points.sort((a, b) => a.x - b.x || a.y - b.y)
  const front: { x: number[]; y: number[] } = { x: [], y: [] }
  let least = Number.POSITIVE_INFINITY
  for (const point of points)
    if (point.y < least) {
      least = point.y
      front.x.push(point.x)
      front.y.push(point.y)
    }
  return front
}
