// The picture of a run's points: scatter, map, distribution or parallel coordinates, all under the same filters.
import { memo, useCallback, useMemo } from 'react'
import { Link } from 'react-router'
import { toneOf } from '#app/components/bundle-drawing/layout.ts'
import { HeatMap } from '#app/components/charts/heat-map.tsx'
import { Histogram } from '#app/components/charts/histogram.tsx'
import { Parallel, type ParallelAxis } from '#app/components/charts/parallel.tsx'
import type { Mark } from '#app/components/charts/scatter.ts'
import { ScatterPlot } from '#app/components/charts/scatter-plot.tsx'
import { AxesForm, type AxisOption } from '#app/components/explore/axes-form.tsx'
import { FilterBar, type FilterField } from '#app/components/explore/filter-bar.tsx'
import { Digits, useUnits } from '#app/components/ui/number.tsx'
import { Sheet } from '#app/components/ui/page.tsx'
import { type PointColumn, shown, unitOf } from '#app/modules/explore/columns.ts'
import type { ExploreRun } from '#app/modules/explore/explore.server.ts'
import type { Picture } from '#app/modules/explore/picture.server.ts'
import { boundsOf, type PlotInput, placedMarks, plotSpec } from '#app/modules/explore/plot.ts'
import type { GridAxis } from '#app/modules/explore/summaries.ts'
import {
  boundToSi,
  changed,
  type changed as changedSearch,
  type ExploreView,
  filterWords,
  type PictureKind,
  said,
  unfiltered,
  valueText,
} from '#app/modules/explore/view.ts'
import { KEY_RESULT_INDEX } from '#engine/bundle/key-results.ts'
import type { UnitSystem } from '#engine/units.ts'
import { pointName } from './point-margin.tsx'
import { useSteady } from './use-steady.ts'

type Of<Kind extends PictureKind> = Extract<Picture, { kind: Kind }>
type To = (change: Parameters<typeof changedSearch>[1]) => void

type Shared = {
  page: ExploreRun
  columns: readonly PointColumn[]
  search: URLSearchParams
  selected: number | null
  to: To
}

const NAMES: Record<PictureKind, string> = {
  scatter: 'Scatter',
  map: 'Map',
  distribution: 'Distribution',
  parallel: 'Parallel axes',
}

/** Drawn anew only when its points or the address change, not while an answer is awaited. */
export const PictureSheet = memo(function PictureSheet({ view, ...shared }: Shared & { view: ExploreView }) {
  const { page, columns, search, to } = shared
  const units = useUnits()
  const { picture } = page
  const filters = filterWords(view, columns, units, page.names).map(({ text, without }) => ({
    text,
    href: changed(search, without),
  }))
  return (
    <Sheet title={titleOf(picture, columns)} acts={<PictureChoice kind={picture.kind} search={search} />}>
      <div className="grid gap-3">
        <PictureAxes {...shared} />
        <FilterBar
          filters={filters}
          clearHref={unfiltered(search, columns)}
          fields={filterFields(page, columns, units)}
          onValue={(id, value) => to({ [id]: value })}
          onBounds={(id, min, max) => {
            const column = find(columns, id)
            const low = boundToSi(min, column, units)
            const high = boundToSi(max, column, units)
            if ((min.trim() !== '' && low === null) || (max.trim() !== '' && high === null))
              return `Give numbers in ${unitOf(column, units) || 'plain digits'}, or leave one side empty.`
            if (low === null && high === null) return 'Give a number at one side at least.'
            if (low !== null && high !== null && low > high) return 'The lower bound is above the upper one.'
            to({ [`min.${id}`]: low, [`max.${id}`]: high })
            return null
          }}
        />
        <PictureBody {...shared} filtered={filters.length > 0} view={view} />
      </div>
    </Sheet>
  )
})

const find = (columns: readonly PointColumn[], id: string) =>
  columns.find((column) => column.id === id) as PointColumn

function titleOf(picture: Picture, columns: readonly PointColumn[]): string {
  const label = (id: string) => find(columns, id).label
  const low = (id: string) => label(id).toLowerCase()
  switch (picture.kind) {
    case 'scatter':
      return `${label(picture.y)} against ${low(picture.x)}`
    case 'map':
      return `Least ${low(picture.z)} over ${low(picture.x)} and ${low(picture.y)}`
    case 'distribution':
      return `How ${low(picture.x)} is distributed`
    case 'parallel':
      return 'Points across what was swept and found'
  }
}

function PictureChoice({ kind, search }: { kind: PictureKind; search: URLSearchParams }) {
  return (
    <nav aria-label="Pictures of the points" className="flex flex-wrap gap-1">
      {(Object.keys(NAMES) as PictureKind[]).map((one) => (
        <Link
          key={one}
          to={changed(search, { show: one === 'scatter' ? null : one, x: null, y: null, colour: null })}
          preventScrollReset
          aria-current={one === kind ? 'true' : undefined}
          className="rounded-full border border-line px-2.5 py-0.5 text-note font-semibold text-soft hover:text-verdigris-ink aria-[current]:border-verdigris aria-[current]:bg-verdigris-wash aria-[current]:text-verdigris-ink"
        >
          {NAMES[one]}
        </Link>
      ))}
    </nav>
  )
}

function PictureAxes({ page, columns, search }: Shared) {
  const { picture } = page
  if (picture.kind === 'parallel') return null
  const numeric = axisOptions(columns, page, false)
  const every = axisOptions(columns, page, true)
  const results = numeric.filter(({ group }) => group === 'Results')
  if (picture.kind === 'distribution')
    return (
      <AxesForm search={search} choices={[{ name: 'x', label: 'Of', value: picture.x, options: numeric }]} />
    )
  if (picture.kind === 'map')
    return (
      <AxesForm
        search={search}
        choices={[
          { name: 'y', label: 'Upward', value: picture.y, options: every },
          { name: 'x', label: 'Across', value: picture.x, options: every },
          { name: 'colour', label: 'Least', value: picture.z, options: results },
        ]}
      />
    )
  return (
    <AxesForm
      search={search}
      choices={[
        { name: 'y', label: 'Upward', value: picture.y, options: numeric },
        { name: 'x', label: 'Across', value: picture.x, options: numeric },
        {
          name: 'colour',
          label: 'Colour',
          value: picture.colour ?? 'none',
          options: [{ id: 'none', label: 'none', group: '' }, ...every],
        },
      ]}
    />
  )
}

function PictureBody(props: Shared & { filtered: boolean; view: ExploreView }) {
  const { picture, aggregates } = props.page
  const count =
    picture.kind === 'scatter'
      ? picture.plot.point.length
      : picture.kind === 'map'
        ? picture.cells.length
        : picture.kind === 'distribution'
          ? picture.edges.length
          : picture.rows.length
  if (count === 0)
    return (
      <p className="py-10 text-center text-soft">
        {aggregates.evaluated === 0
          ? 'No point has a value to draw.'
          : props.filtered
            ? 'No point passes the filter. Lift it, or widen its bounds.'
            : 'No point has values for both.'}
      </p>
    )
  switch (picture.kind) {
    case 'scatter':
      return <ScatterPicture {...props} picture={picture} />
    case 'map':
      return <MapPicture {...props} picture={picture} />
    case 'distribution':
      return <DistributionPicture {...props} picture={picture} />
    case 'parallel':
      return <ParallelPicture {...props} picture={picture} />
  }
}

function ScatterPicture({
  page,
  columns,
  picture: latest,
  view,
  search,
  to,
}: Shared & { picture: Of<'scatter'>; view: ExploreView }) {
  const about = `${page.run.id} ${page.aggregates.stored} ${pictureSearch(search)}`
  const picture = useSteady(latest, about)
  const ranges = useSteady(view.ranges, about)
  const units = useUnits()
  const x = find(columns, picture.x)
  const y = find(columns, picture.y)
  const { limits, names, variables, best, refined } = useSteady(
    page,
    `${page.run.id} ${page.aggregates.stored}`,
  )
  const spec = useMemo(
    () =>
      plotSpec(
        {
          columns: picture.plot,
          x,
          y,
          colour: columns.find(({ id }) => id === picture.colour) ?? null,
          colourValues: variables.find(({ path }) => path === picture.colour)?.values ?? [],
          limits,
          ranges,
          names,
          marks: [
            ...(refined?.improved ? [markOf('refined', refined, x, y)] : []),
            ...(best ? [{ ...markOf('best', best, x, y), label: `Point ${best.point}, least` }] : []),
          ],
        },
        units,
      ),
    [picture, columns, limits, ranges, names, variables, best, refined, units, x, y],
  )
  const { selected, pinned } = page
  const pointers = useMemo(() => {
    const others = pinned.filter(({ point }) => point !== selected?.point && point !== best?.point)
    const marks = [
      ...others.map((one) => markOf('pinned', one, x, y)),
      ...(selected && selected.point !== best?.point ? [markOf('selected', selected, x, y)] : []),
    ]
    return placedMarks(marks, { x, y, ranges }, units)
  }, [pinned, selected, best, x, y, ranges, units])
  const pick = useCallback((id: number) => to({ point: id }), [to])
  const brush = useCallback(
    (area: { x: [number, number]; y: [number, number] }) => {
      // A hand draws to a pixel; more digits than four would only make the filter hard to read.
      const si = (value: number, column: PointColumn) =>
        boundToSi(String(Number(value.toPrecision(4))), column, units)
      to({
        [`min.${x.id}`]: si(area.x[0], x),
        [`max.${x.id}`]: si(area.x[1], x),
        [`min.${y.id}`]: si(area.y[0], y),
        [`max.${y.id}`]: si(area.y[1], y),
      })
    },
    [to, units, x, y],
  )
  const drawn = picture.plot.point.length
  return (
    <ScatterPlot
      name={`${y.label} against ${x.label.toLowerCase()}, ${drawn} points`}
      spec={spec}
      pointers={pointers}
      onPick={pick}
      onBrush={brush}
    >
      <p className="text-note text-soft">
        {picture.plot.matching > drawn ? (
          <>
            <Digits>{drawn}</Digits> of <Digits>{picture.plot.matching}</Digits> points drawn, thinned evenly;
            the front and the least point are always among them.{' '}
          </>
        ) : null}
        <span className="screen-only">
          Choose a point to see it; draw a box over points to keep only those. The table below holds the same
          values.
        </span>
      </p>
    </ScatterPlot>
  )
}

/** The part of the address that the picture hangs on. */
function pictureSearch(search: URLSearchParams): string {
  const apart = new Set(['point', 'pin', 'page', 'sort', 'dir', 'column', 'all'])
  return new URLSearchParams([...search].filter(([key]) => !apart.has(key))).toString()
}

function markOf(kind: Mark['kind'], one: Placed, x: PointColumn, y: PointColumn): PlotInput['marks'][number] {
  return {
    kind,
    label: pointName(one.point),
    id: typeof one.point === 'number' ? one.point : null,
    x: valueOn(x, one),
    y: valueOn(y, one),
  }
}

type Placed = {
  point: number | 'refined'
  inputs: readonly unknown[]
  keyResults: Readonly<Record<string, number | null>>
}

/** A point's value on an axis; a choice has no place on one. */
function valueOn(column: PointColumn, one: Pick<Placed, 'inputs' | 'keyResults'>): number | null {
  const value = column.kind === 'input' ? one.inputs[column.index] : one.keyResults[column.id]
  return typeof value === 'number' ? value : null
}

function MapPicture({ page, columns, picture, search, selected }: Shared & { picture: Of<'map'> }) {
  const units = useUnits()
  const [x, y, z] = [picture.x, picture.y, picture.z].map((id) => find(columns, id))
  if (!picture.across || !picture.up) return null
  const names = (axis: GridAxis, column: PointColumn) =>
    axis.kind === 'values'
      ? axis.values.map((value) => choiceOrNumber(value, column, page, units))
      : axis.edges.slice(1).map((edge, i) => {
          const middle = (edge + axis.edges[i]) / 2
          return String(Number(shown(middle, column, units).toPrecision(3)))
        })
  const met = picture.cells.filter(({ meets }) => meets)
  const values = (met.length > 0 ? met : picture.cells).map(({ least }) => least)
  const low = Math.min(...values)
  const high = Math.max(...values)
  return (
    <HeatMap
      name={`Least ${z.label.toLowerCase()} over ${x.label.toLowerCase()} and ${y.label.toLowerCase()}`}
      value={z.label.toLowerCase()}
      x={{
        label: x.label.toLowerCase(),
        unit: x.choice ? '' : unitOf(x, units),
        names: names(picture.across, x),
      }}
      y={{
        label: y.label.toLowerCase(),
        unit: y.choice ? '' : unitOf(y, units),
        names: names(picture.up, y),
      }}
      cells={picture.cells.map((cell) => ({
        ...cell,
        tone: toneOf(cell.least, low, high),
        text: said(cell.least, z, units),
      }))}
      selected={selected}
      href={(point) => changed(search, { point })}
      lowText={said(low, z, units)}
      highText={said(high, z, units)}
    />
  )
}

/** A column's number as a tick: a choice by its name, a number in the reader's unit without it. */
function choiceOrNumber(value: number, column: PointColumn, page: ExploreRun, units: UnitSystem): string {
  if (!column.choice) return String(Number(shown(value, column, units).toPrecision(5)))
  const id = page.variables.find(({ path }) => path === column.id)?.values[value]
  return id === undefined ? String(value) : valueText(id, column, units, page.names)
}

function DistributionPicture({ page, columns, picture, search }: Shared & { picture: Of<'distribution'> }) {
  const units = useUnits()
  const x = find(columns, picture.x)
  return (
    <Histogram
      name={`How ${x.label.toLowerCase()} is distributed over ${picture.matching} points`}
      x={{ label: x.label.toLowerCase(), unit: unitOf(x, units), ...boundsOf(x, page.limits, units) }}
      edges={picture.edges.map((edge) => shown(edge, x, units))}
      met={picture.met}
      missed={picture.missed}
      href={(bin) =>
        changed(search, { [`min.${x.id}`]: picture.edges[bin], [`max.${x.id}`]: picture.edges[bin + 1] })
      }
    />
  )
}

function ParallelPicture({
  page,
  columns,
  picture,
  selected,
  view,
  to,
}: Shared & { picture: Of<'parallel'>; view: ExploreView }) {
  const units = useUnits()
  const own = picture.ids.flatMap((id) => columns.filter((column) => column.id === id))
  const number = (column: PointColumn, row: (typeof picture.rows)[number]): number | null => {
    const value = column.kind === 'input' ? row.inputs[column.index] : row.results[column.index]
    if (typeof value !== 'string') return value
    const place = page.variables.find(({ path }) => path === column.id)?.values.indexOf(value) ?? -1
    return place < 0 ? null : place
  }
  const axes = own.map((column): ParallelAxis => {
    const values = picture.rows.flatMap((row) => number(column, row) ?? [])
    const names = column.choice
      ? page.variables
          .find(({ path }) => path === column.id)
          ?.values.map((value) => valueText(value, column, units, page.names))
      : undefined
    const range = view.ranges[column.id]
    const [low, high] = names
      ? [0, names.length - 1]
      : [
          Math.min(...values, range?.min ?? Number.POSITIVE_INFINITY),
          Math.max(...values, range?.max ?? Number.NEGATIVE_INFINITY),
        ]
    const text = (value: number) => String(Number(shown(value, column, units).toPrecision(4)))
    return {
      id: column.id,
      label: column.label,
      unit: column.choice ? '' : unitOf(column, units),
      low,
      high,
      lowText: text(low),
      highText: text(high),
      names,
      from: range?.min,
      to: range?.max,
    }
  })
  const objective = picture.rows.flatMap((row) => row.results[KEY_RESULT_INDEX[page.objective]] ?? [])
  const least = Math.min(...objective)
  const most = Math.max(...objective)
  return (
    <>
      <Parallel
        name={`Parallel axes, the ${picture.rows.length} least points`}
        axes={axes}
        lines={picture.rows.map((row) => ({
          point: row.point,
          values: own.map((column) => number(column, row)),
          meets: row.results[KEY_RESULT_INDEX.limitsNotMet] === 0,
          // The least are drawn strongest.
          tone: 23 - toneOf(row.results[KEY_RESULT_INDEX[page.objective]] ?? most, least, most),
        }))}
        selected={selected}
        onBrush={(id, from, upTo) => {
          const column = find(columns, id)
          if (!column.choice) {
            to({ [`min.${id}`]: from, [`max.${id}`]: upTo })
            return
          }
          const values = page.variables.find(({ path }) => path === id)?.values ?? []
          const kept = values.filter((_, place) => place >= from && place <= upTo)
          if (kept.length === 1) to({ [id]: kept[0] })
        }}
      />
      <p className="text-note text-soft">
        {picture.matching > picture.rows.length ? (
          <>
            The <Digits>{picture.rows.length}</Digits> least of <Digits>{picture.matching}</Digits> points are
            drawn, the least strongest.{' '}
          </>
        ) : null}
        <span className="screen-only">
          Draw along an axis to keep the points between, or add a filter. The axes are the table’s columns.
        </span>
      </p>
    </>
  )
}

function axisOptions(columns: readonly PointColumn[], page: ExploreRun, choices: boolean): AxisOption[] {
  return columns.flatMap(({ id, label, kind, choice }) => {
    if (choice && !choices) return []
    if (kind === 'result' && page.aggregates.ranges[id] === undefined) return []
    return [{ id, label, group: kind === 'input' ? 'Swept' : 'Results' }]
  })
}

function filterFields(page: ExploreRun, columns: readonly PointColumn[], units: UnitSystem): FilterField[] {
  return columns.flatMap((column): FilterField[] => {
    const { id, label, kind } = column
    if (kind === 'result')
      return page.aggregates.ranges[id] === undefined ? [] : [{ id, label, unit: unitOf(column, units) }]
    const values = page.variables.find(({ path }) => path === id)?.values ?? []
    if (values.length === 0 && column.choice) return []
    const options = values.map((value) => ({
      value: String(value),
      label: valueText(value, column, units, page.names),
    }))
    return [{ id, label, unit: unitOf(column, units), values: options.length > 0 ? options : undefined }]
  })
}
