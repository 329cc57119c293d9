// A bundle's cross-section to scale: each tube shaded by its row, what falls between the rows, passes and scale.
//
// A row of any number of tubes is one stroked line: round caps on dashes of no length, one pitch apart. That
// keeps a bundle of 60 rows and 100 tubes at a few hundred elements.
import { memo, useId, useMemo, useState } from 'react'
import { useUnits } from '#app/components/ui/number.tsx'
import type { DrainageMode, RowResult } from '#engine/result.ts'
import { formatNumber, formatQuantity, fromDisplay, toDisplay, type UnitSystem } from '#engine/units.ts'
import {
  type BundleGeometry,
  passBands,
  type RowPlace,
  roundLength,
  rowTubes,
  type Section,
  section,
  toneOf,
} from './layout.ts'
import {
  DRAINAGE_MODES,
  DRAINAGE_NAMES,
  drainageSentence,
  geometrySentence,
  idleSentence,
  rowSentence,
  SHADES,
  type Shade,
  shadeSentence,
  shadeValue,
} from './words.ts'

export type BundleDrawingProps = {
  /** `bundleGeometry(case)`; also of a case being typed, as long as its numbers are above zero. */
  geometry: BundleGeometry
  /** The result's rows; without them only the geometry is drawn. */
  rows?: readonly RowResult[]
  /** What the tubes are shaded by; the reader may change it unless `fixed`. */
  shade?: Shade
  fixed?: boolean
  /** Names the picture for assistive technology, for example "Point 17402". */
  name?: string
  /** The rows as a table under the picture, folded. Leave out where the page has such a table already. */
  table?: boolean
  /** The row pointed at, when a chart or table beside the picture shares it. */
  activeRow?: number | null
  onActiveRow?: (row: number | null) => void
}

/** The units of the picture's own coordinates; it scales with its column and keeps its lettering readable there. */
const VIEW = 360
const LEFT = 22
const RIGHT = 66
const TOP = 30
const TALLEST = 430
/** A bundle of few tubes does not fill the picture with them. */
const LARGEST_TUBE = 44

export function BundleDrawing(props: BundleDrawingProps) {
  const { geometry, rows, fixed, name, table = true } = props
  const units = useUnits()
  const [chosen, setChosen] = useState<Shade>(props.shade ?? 'coefficient')
  const [own, setOwn] = useState<number | null>(null)
  const shade = fixed ? (props.shade ?? 'coefficient') : chosen
  const active = props.activeRow === undefined ? own : props.activeRow
  const point = props.onActiveRow ?? setOwn
  const tubes = useMemo(() => rowTubes(geometry, rows), [geometry, rows])
  const shape = useMemo(() => (tubes ? section(geometry, tubes) : null), [geometry, tubes])
  if (!shape || !tubes)
    return <p className="text-note text-soft">The tubes per row follow from the coolant, with the result.</p>
  const summary = geometrySentence(geometry, tubes, units)
  const said = rows?.length ? shadeSentence(rows, shade, units) : ''
  const place = active === null ? undefined : shape.rows[active - 1]
  const dropped = (tubes[0] ?? 0) - shape.rows[0].drawn
  return (
    <figure className="grid gap-2" aria-label={name ? `Bundle of ${name}` : 'Bundle'}>
      <Picture
        {...{ geometry, rows, shade, shape, units, active, point }}
        label={`${summary} ${said} ${shade === 'drainageMode' || !rows ? '' : drainageSentence(rows)}`.trim()}
      />
      <figcaption className="grid gap-1.5 text-note text-soft">
        {rows?.length ? (
          <>
            <Scale rows={rows} shade={shade} units={units} />
            {fixed ? null : <ShadeChoice shade={shade} onChoose={setChosen} />}
          </>
        ) : null}
        {shape.cut ? (
          <span>
            The first {shape.rows[0].drawn} tubes of each row are drawn; {dropped} more stand to the right.
          </span>
        ) : null}
        {rows ? <span>{idleSentence(rows)}</span> : null}
        <span className="screen-only min-h-[3lh]" aria-hidden="true">
          {place
            ? rowSentence(place, rows?.[place.row - 1], geometry.passes, units)
            : rows?.length
              ? said
              : summary}
        </span>
      </figcaption>
      {table && rows?.length ? <RowTable rows={rows} shape={shape} units={units} /> : null}
    </figure>
  )
}

/** The small version for comparisons: no lettering, no pointing, one name. */
export function BundleThumbnail({
  geometry,
  rows,
  shade = 'coefficient',
  name,
  width = 120,
  height = 96,
}: Pick<BundleDrawingProps, 'geometry' | 'rows' | 'shade' | 'name'> & { width?: number; height?: number }) {
  const units = useUnits()
  const tubes = rowTubes(geometry, rows)
  if (!tubes) return null
  const shape = section(geometry, tubes, 40)
  const scale = Math.min(width / shape.width, height / shape.height, 24 / shape.outsideDiameter)
  const tones = rowTones(rows, shade)
  const label = `${name ? `${name}: ` : ''}${geometrySentence(geometry, tubes, units)} ${rows ? shadeSentence(rows, shade, units) : ''}`
  return (
    <svg
      role="img"
      aria-label={label.trim()}
      viewBox={`0 0 ${width} ${height}`}
      width={width}
      height={height}
      className="block h-auto max-w-full"
    >
      <g transform={`translate(${fixed2((width - shape.width * scale) / 2)} 0)`}>
        {shape.rows.map((place, i) => (
          <Tubes key={place.row} place={place} shape={shape} scale={scale} tone={tones[i]} />
        ))}
      </g>
    </svg>
  )
}

const fixed2 = (value: number) => Number(value.toFixed(2))

/** The tone of each row; null for a row without a value. */
function rowTones(rows: readonly RowResult[] | undefined, shade: Shade): (string | null)[] {
  if (!rows) return []
  const values = rows.map((row) => shadeValue(row, shade))
  const [low, high] = bounds(values, shade)
  return values.map((value) => (value === null ? null : `var(--tone-${toneOf(value, low, high)})`))
}

function bounds(values: readonly (number | null)[], shade: Shade): [number, number] {
  if (shade === 'drainageMode') return [0, DRAINAGE_MODES.length - 1]
  const known = values.filter((value) => value !== null)
  return known.length ? [Math.min(...known), Math.max(...known)] : [0, 0]
}

/** A row's tubes: outline under filling. Without results the filling is the sheet's own. */
function Tubes({
  place,
  shape,
  scale,
  tone,
}: {
  place: RowPlace
  shape: Section
  scale: number
  tone: string | null | undefined
}) {
  const D = shape.outsideDiameter * scale
  const pitch = shape.transversePitch * scale
  const x1 = fixed2(place.x * scale)
  const line = {
    x1,
    // Half a pitch past the last centre, so that rounding cannot lose its dash.
    x2: fixed2(x1 + (place.drawn - 0.5) * pitch),
    y1: fixed2(place.y * scale),
    y2: fixed2(place.y * scale),
    strokeLinecap: 'round',
    strokeDasharray: `0 ${Number(pitch.toFixed(4))}`,
  } as const
  return (
    <>
      <line
        {...line}
        stroke={tone === null ? 'var(--line-strong)' : 'var(--verdigris)'}
        strokeWidth={fixed2(D)}
      />
      <line
        {...line}
        stroke={tone ?? 'var(--sheet)'}
        strokeWidth={fixed2(D - Math.min(1.6, Math.max(0.4, D * 0.12)))}
      />
    </>
  )
}

/** What falls from a row to the next tube straight below, one mark under each tube. */
function Fall({
  place,
  shape,
  scale,
  mode,
}: {
  place: RowPlace
  shape: Section
  scale: number
  mode: DrainageMode
}) {
  const D = shape.outsideDiameter * scale
  const pitch = shape.transversePitch * scale
  const gap = shape.fallRows * shape.rowPitch * scale - D
  const inside = place.row + shape.fallRows <= shape.rows.length
  const height = inside ? gap : Math.min(gap, D) * 0.7
  const from = place.y * scale + D / 2
  const x = place.x * scale
  const end = x + (place.drawn - 0.5) * pitch
  const stream = (width: number, top: number, tall: number, opacity = 1) => (
    <line
      x1={fixed2(x - width / 2)}
      x2={fixed2(end)}
      y1={fixed2(from + top + tall / 2)}
      y2={fixed2(from + top + tall / 2)}
      strokeWidth={fixed2(tall)}
      strokeDasharray={`${Number(width.toFixed(4))} ${Number((pitch - width).toFixed(4))}`}
      strokeOpacity={opacity}
    />
  )
  const drop = (at: number) => {
    const size = Math.min(Math.max(0.17 * D, 1.1), 0.75 * gap)
    return (
      <line
        x1={fixed2(x)}
        x2={fixed2(end)}
        y1={fixed2(from + at)}
        y2={fixed2(from + at)}
        strokeWidth={fixed2(size)}
        strokeLinecap="round"
        strokeDasharray={`0 ${Number(pitch.toFixed(4))}`}
      />
    )
  }
  const thread = Math.max(0.07 * D, 0.7)
  // Between staggered tubes a sheet has no more room than the gap it falls through.
  const room = shape.fallRows === 2 ? Math.max(pitch - D, thread) : pitch
  const sheet = Math.min(0.34 * D, 0.8 * room)
  return (
    <g stroke="var(--copper)">
      {mode === 'droplet' ? (
        <>
          {drop(height * (gap > D * 0.6 ? 0.28 : 0.5))}
          {gap > D * 0.6 ? drop(height * 0.72) : null}
        </>
      ) : null}
      {mode === 'dropletColumn' ? (
        <>
          {stream(thread, 0, height * 0.5)}
          {drop(height * 0.78)}
        </>
      ) : null}
      {mode === 'column' || mode === 'columnSheet' ? stream(thread, 0, height) : null}
      {mode === 'columnSheet' ? stream(sheet, 0, height, 0.35) : null}
      {mode === 'sheet' ? stream(sheet, 0, height, 0.75) : null}
    </g>
  )
}

const Row = memo(function Row({
  place,
  shape,
  scale,
  tone,
}: {
  place: RowPlace
  shape: Section
  scale: number
  tone: string | null | undefined
}) {
  return <Tubes {...{ place, shape, scale, tone }} />
})
const MemoFall = memo(Fall)

function Picture({
  geometry,
  rows,
  shade,
  shape,
  units,
  active,
  point,
  label,
}: {
  geometry: BundleGeometry
  rows: readonly RowResult[] | undefined
  shade: Shade
  shape: Section
  units: UnitSystem
  active: number | null
  point: (row: number | null) => void
  label: string
}) {
  const id = useId()
  const [stop, setStop] = useState(1)
  const tones = useMemo(() => rowTones(rows, shade), [rows, shade])
  const room = VIEW - LEFT - RIGHT
  const scale = Math.min(room / shape.width, TALLEST / shape.height, LARGEST_TUBE / shape.outsideDiameter)
  const width = shape.width * scale
  const left = LEFT + (room - width) / 2
  const body = shape.height * scale
  const height = TOP + body + 34
  const bands = passBands(shape.rows)
  const D = shape.outsideDiameter * scale
  const bandHeight = shape.rowPitch * scale
  const everyRow = Math.max(1, Math.ceil(13 / bandHeight))
  const tabStop = Math.min(stop, shape.rows.length)
  const go = (row: number, target: EventTarget & Element) => {
    const next = Math.min(shape.rows.length, Math.max(1, row))
    setStop(next)
    target.closest('svg')?.querySelector<SVGGElement>(`[data-row="${next}"]`)?.focus()
  }
  return (
    // biome-ignore lint/a11y/useSemanticElements: inside a picture a group is a group, not a form's fieldset
    <svg
      viewBox={`0 0 ${VIEW} ${fixed2(height)}`}
      className="mx-auto block h-auto w-full max-w-[30rem]"
      role="group"
      aria-label={label}
      onPointerLeave={() => point(null)}
    >
      <g transform={`translate(${fixed2(left)} ${TOP})`}>
        <Vapour width={width} />
        {rows
          ? shape.rows.map((place, i) => {
              const mode = rows[i]?.heatFlux ? rows[i].drainageMode : null
              return mode ? <MemoFall key={place.row} {...{ place, shape, scale, mode }} /> : null
            })
          : null}
        <g role="listbox" aria-label="Rows, from the top" aria-orientation="vertical">
          {shape.rows.map((place, i) => (
            <g
              key={place.row}
              id={`${id}-${place.row}`}
              role="option"
              aria-selected={active === place.row}
              aria-label={rowSentence(place, rows?.[i], geometry.passes, units)}
              tabIndex={place.row === tabStop ? 0 : -1}
              className="bundle-row"
              data-row={place.row}
              data-active={active === place.row}
              onPointerEnter={() => point(place.row)}
              onFocus={() => {
                setStop(place.row)
                point(place.row)
              }}
              onBlur={() => point(null)}
              onKeyDown={(event) => {
                const step = {
                  ArrowDown: 1,
                  ArrowUp: -1,
                  PageDown: 10,
                  PageUp: -10,
                  Home: -1e4,
                  End: 1e4,
                }[event.key]
                if (step === undefined) return
                event.preventDefault()
                go(place.row + step, event.currentTarget)
              }}
            >
              <rect
                className="bundle-band"
                x={fixed2(-left + 2)}
                width={fixed2(left + width + 6)}
                y={fixed2(place.y * scale - bandHeight / 2)}
                height={fixed2(bandHeight)}
                rx="3"
                fill="transparent"
              />
              <Row {...{ place, shape, scale }} tone={rows ? tones[i] : undefined} />
              {place.row === 1 || place.row % everyRow === 0 ? (
                <text
                  x={-5}
                  y={fixed2(place.y * scale + 3)}
                  textAnchor="end"
                  fontSize="8.5"
                  fill="var(--soft)"
                >
                  {place.row}
                </text>
              ) : null}
            </g>
          ))}
        </g>
        {shape.cut ? (
          <line
            x1={fixed2(width + 5)}
            x2={fixed2(width + 5)}
            y1={-2}
            y2={fixed2(body + 2)}
            stroke="var(--line-strong)"
            strokeWidth="1.5"
            strokeDasharray="4 3"
          />
        ) : null}
        <Passes {...{ bands, shape, scale, width }} passes={geometry.passes} entry={geometry.coolantEntry} />
        <ScaleBar y={body + 18} scale={scale} width={Math.max(width, D)} units={units} />
      </g>
    </svg>
  )
}

/** Vapour enters over the top row. */
function Vapour({ width }: { width: number }) {
  const count = Math.max(2, Math.min(5, Math.floor(width / 50)))
  return (
    <g stroke="var(--line-strong)" fill="none" strokeWidth="1.2">
      {Array.from({ length: count }, (_, i) => {
        const x = fixed2(((i + 0.5) * width) / count)
        return <path key={x} d={`M${x} -18v11m-3 -4l3 4l3 -4`} />
      })}
      <text x={fixed2(width + 10)} y="-9" fontSize="10" fill="var(--soft)" stroke="none">
        vapour
      </text>
    </g>
  )
}

/** A bracket beside each pass's rows: into the page where the coolant enters, and alternately back out of it. */
function Passes({
  bands,
  shape,
  scale,
  width,
  passes,
  entry,
}: {
  bands: ReturnType<typeof passBands>
  shape: Section
  scale: number
  width: number
  passes: number
  entry: 'bottom' | 'top'
}) {
  const D = shape.outsideDiameter * scale
  const x = fixed2(width + 10)
  return (
    <g fontSize="10" fill="var(--soft)">
      {bands.map((band) => {
        const top = shape.rows[band.firstRow - 1].y * scale - D / 2
        const bottom = shape.rows[band.lastRow - 1].y * scale + D / 2
        const middle = (top + bottom) / 2
        const words =
          passes === 1
            ? ['coolant']
            : band.pass === 1
              ? ['pass 1', 'coolant in']
              : [`pass ${band.pass}`, ...(band.pass === passes ? ['out'] : [])]
        // Two lines need room: a band thinner than that keeps the first.
        const shown = bottom - top < 24 ? words.slice(0, 1) : words
        return bottom - top < 9 && band.pass !== 1 && band.pass !== passes ? null : (
          <g key={band.pass}>
            <path
              d={`M${x} ${fixed2(top + 1)}h3V${fixed2(bottom - 1)}h-3`}
              fill="none"
              stroke={
                band.pass === 1 && (passes > 1 || entry === 'bottom')
                  ? 'var(--verdigris)'
                  : 'var(--line-strong)'
              }
              strokeWidth="1.4"
            />
            {shown.map((word, i) => (
              <text key={word} x={x + 7} y={fixed2(middle + 3.5 + (i - (shown.length - 1) / 2) * 11.5)}>
                {word}
              </text>
            ))}
          </g>
        )
      })}
    </g>
  )
}

/** A round length in the reader's unit. */
function ScaleBar({
  y,
  scale,
  width,
  units,
}: {
  y: number
  scale: number
  width: number
  units: UnitSystem
}) {
  const most = (Math.max(width, 40) * 0.45) / scale
  const { value, unit } = toDisplay(most, 'length', units, 'tube')
  const shown = roundLength(value)
  const long = fromDisplay(shown, 'length', units, 'tube') * scale
  return (
    <g fontSize="9.5" fill="var(--soft)">
      <path d={`M0 ${fixed2(y - 3)}v6m0 -3h${fixed2(long)}m0 -3v6`} fill="none" stroke="var(--soft)" />
      <text x={fixed2(long + 5)} y={fixed2(y + 3.5)}>
        {shown} {unit}
      </text>
    </g>
  )
}

/** The continuous scale with its ends, or the drainage modes that occur. */
function Scale({ rows, shade, units }: { rows: readonly RowResult[]; shade: Shade; units: UnitSystem }) {
  if (shade === 'drainageMode') {
    const present = DRAINAGE_MODES.filter((mode) => rows.some((row) => row.drainageMode === mode))
    return (
      <span className="flex flex-wrap gap-x-3 gap-y-1">
        {present.map((mode) => (
          <span key={mode} className="inline-flex items-center gap-1.5">
            <svg width="12" height="12" viewBox="0 0 12 12" aria-hidden="true">
              <circle
                cx="6"
                cy="6"
                r="5"
                fill={`var(--tone-${toneOf(DRAINAGE_MODES.indexOf(mode), 0, DRAINAGE_MODES.length - 1)})`}
                stroke="var(--verdigris)"
              />
            </svg>
            {DRAINAGE_NAMES[mode]}
          </span>
        ))}
      </span>
    )
  }
  const values = rows.map((row) => shadeValue(row, shade))
  const [low, high] = bounds(values, shade)
  const { label, dimension } = SHADES[shade]
  const text = (value: number, unit: boolean) => formatQuantity(value, dimension, units, { digits: 3, unit })
  return (
    <span className="flex flex-wrap items-center gap-x-2">
      <span>{label}</span>
      {high > low ? (
        <>
          <span className="number">{text(low, false)}</span>
          <svg
            width="72"
            height="10"
            viewBox="0 0 24 10"
            preserveAspectRatio="none"
            aria-hidden="true"
            className="rounded-sm"
          >
            {Array.from({ length: 24 }, (_, i) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: the steps of a scale are their places
              <rect key={i} x={i} width="1.05" height="10" fill={`var(--tone-${i})`} />
            ))}
          </svg>
          <span className="visually-hidden">to</span>
        </>
      ) : null}
      <span className="number">{text(high, true)}</span>
    </span>
  )
}

function ShadeChoice({ shade, onChoose }: { shade: Shade; onChoose: (shade: Shade) => void }) {
  return (
    // biome-ignore lint/a11y/useSemanticElements: a fieldset's legend has no place in a caption line
    <span role="group" aria-label="Shade the tubes by" className="screen-only flex flex-wrap gap-1">
      {(Object.keys(SHADES) as Shade[]).map((key) => (
        <button
          key={key}
          type="button"
          aria-pressed={key === shade}
          onClick={() => onChoose(key)}
          className="rounded-full border border-line px-2.5 py-0.5 font-semibold text-soft hover:text-verdigris-ink aria-pressed:border-verdigris aria-pressed:bg-verdigris-wash aria-pressed:text-verdigris-ink"
        >
          {SHADES[key].short}
        </button>
      ))}
    </span>
  )
}

function RowTable({ rows, shape, units }: { rows: readonly RowResult[]; shape: Section; units: UnitSystem }) {
  const number = (value: number | null, digits = 4) => formatNumber(value, digits)
  const unit = (dimension: Parameters<typeof toDisplay>[1]) => {
    const shown = toDisplay(1, dimension, units).unit
    return shown ? `, ${shown}` : ''
  }
  return (
    <details className="screen-only text-note">
      <summary className="font-semibold text-verdigris-ink">Row by row as a table</summary>
      <div className="scroll-thin relative mt-2 overflow-x-auto">
        <table className="data-table">
          <caption className="visually-hidden">Results of each row, from the top</caption>
          <thead>
            <tr>
              <th scope="col">Row</th>
              <th scope="col" className="numeric">
                Pass
              </th>
              <th scope="col" className="numeric">
                Tubes
              </th>
              <th scope="col" className="numeric">
                Coefficient{unit('heatTransferCoefficient')}
              </th>
              <th scope="col" className="numeric">
                Flux{unit('heatFlux')}
              </th>
              <th scope="col" className="numeric">
                Film Re
              </th>
              <th scope="col">Drains in</th>
            </tr>
          </thead>
          <tbody>
            {rows.map((row, i) => (
              <tr key={row.row}>
                <th scope="row">{row.row}</th>
                <td className="numeric">{shape.rows[i]?.pass}</td>
                <td className="numeric">{row.tubes}</td>
                <td className="numeric">
                  {number(toDisplay(row.coefficient, 'heatTransferCoefficient', units).value)}
                </td>
                <td className="numeric">{number(toDisplay(row.heatFlux, 'heatFlux', units).value)}</td>
                <td className="numeric">{number(row.filmReynolds, 3)}</td>
                <td>{row.drainageMode ? DRAINAGE_NAMES[row.drainageMode] : '–'}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </details>
  )
}
