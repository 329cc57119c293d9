// The margin of Explore: the selected point's picture, its few facts, limits and notes.
import { useState } from 'react'
import { Link } from 'react-router'
import { BundleDrawing } from '#app/components/bundle-drawing/bundle-drawing.tsx'
import { bundleGeometry } from '#app/components/bundle-drawing/layout.ts'
import { LAYOUT_NAMES } from '#app/components/bundle-drawing/words.ts'
import { LineChart } from '#app/components/charts/line-chart.tsx'
import { LimitNotes } from '#app/components/sheet/limit-notes.tsx'
import { LinkButton } from '#app/components/ui/button.tsx'
import { MarginNote, NoteList } from '#app/components/ui/margin-note.tsx'
import { Digits, Quantity, useUnits } from '#app/components/ui/number.tsx'
import { type CaseNames, surfaceText, tubeText } from '#app/modules/explore/case-words.ts'
import { keyResultOf, limitStandings } from '#app/modules/explore/limits.ts'
import type { Case } from '#engine/case.ts'
import { NOTE_LABELS } from '#engine/notes.ts'
import type { Result, RowResult } from '#engine/result.ts'
import type { Limits } from '#engine/sweep/limits.ts'
import { type Dimension, displayUnit, toDisplay } from '#engine/units.ts'

export type ShownPoint = {
  point: number | 'refined'
  case: Case
  result: Result
  names: CaseNames
  differences: readonly unknown[]
  storedEngineVersion: string
  engineVersion: string
}

export const pointName = (point: number | 'refined') =>
  point === 'refined' ? 'Refined point' : `Point ${point}`

export function PointMargin({
  shown,
  limits,
  sheetHref,
  pinHref,
  pinned,
}: {
  shown: ShownPoint
  limits: Limits
  sheetHref: string
  pinHref: string | null
  pinned: boolean
}) {
  const [row, setRow] = useState<number | null>(null)
  const { result, names } = shown
  const bundle = shown.case
  const standings = limitStandings(limits, (id) => keyResultOf(result, id))
  return (
    <>
      <section aria-labelledby="selected-point" className="grid gap-4">
        <div className="flex flex-wrap items-baseline justify-between gap-2">
          <h2 id="selected-point" className="text-body font-bold">
            {shown.point === 'refined' ? (
              'Refined point'
            ) : (
              <>
                Point <Digits>{shown.point}</Digits>
              </>
            )}
          </h2>
          <span className="screen-only flex gap-2">
            {pinHref ? (
              <Link to={pinHref} replace preventScrollReset className="link text-note font-semibold">
                {pinned ? 'Unpin' : 'Pin'}
              </Link>
            ) : null}
            <Link to={sheetHref} className="link text-note font-semibold">
              Calculation sheet
            </Link>
          </span>
        </div>
        <BundleDrawing
          geometry={bundleGeometry(bundle)}
          rows={result.rows}
          name={pointName(shown.point)}
          activeRow={row}
          onActiveRow={setRow}
        />
        <PointFacts bundle={bundle} result={result} names={names} />
      </section>
      {result.rows.length > 1 ? <RowProfile rows={result.rows} active={row} /> : null}
      <section aria-label="Limits, validity and cautions" className="grid gap-3.5">
        <LimitNotes standings={standings} />
        <SafetyNote names={names} />
        {shown.differences.length > 0 ? (
          <MarginNote tone="attention" title={`Computed by engine ${shown.engineVersion}.`}>
            The run was made by {shown.storedEngineVersion}, which found other values; the sheet lists both.
          </MarginNote>
        ) : null}
        <NoteList
          notes={result.notes.filter(({ code }) => code !== 'fluidSafety' || names.safetyClass === null)}
          labels={NOTE_LABELS}
          first={5}
        />
      </section>
      <div className="screen-only">
        <LinkButton to={sheetHref} small>
          Open the calculation sheet
        </LinkButton>
      </div>
    </>
  )
}

/** Classes A2L, A2, A3 and B of ASHRAE 34 are flagged wherever the fluid is chosen. */
export function SafetyNote({ names }: { names: CaseNames }) {
  const safety = names.safetyClass
  if (!safety || safety.value === 'A1') return null
  const toxic = safety.value.startsWith('B')
  const flammable = /[23]/.test(safety.value)
  const words = [flammable ? 'flammable' : '', toxic ? 'toxic' : ''].filter(Boolean).join(' and ')
  return (
    <MarginNote
      tone="attention"
      title={`${names.fluid} is ${words || 'classed'}, ${safety.value}.`}
      source={`ASHRAE 34 class, ${safety.basis}`}
    >
      Check charge limits, detection and ventilation with your local code before building.
    </MarginNote>
  )
}

function PointFacts({ bundle, result, names }: { bundle: Case; result: Result; names: CaseNames }) {
  const units = useUnits()
  const [first, last] = [result.rows[0], result.rows[result.rows.length - 1]]
  const uniform = first?.wallSubcooling === last?.wallSubcooling
  const even = result.rows.every((row) => row.tubes === first?.tubes)
  return (
    <dl className="facts point-facts">
      <dt>Fluid</dt>
      <dd>
        {names.fluid}
        {first ? (
          <>
            , <Quantity value={first.saturationTemperature} dimension="temperature" />
          </>
        ) : null}
      </dd>
      <dt>Tube</dt>
      <dd>
        {tubeText(bundle, units)}
        {names.material ? `, ${names.material}` : ''}
      </dd>
      {bundle.tube.surface.kind === 'plain' ? null : (
        <>
          <dt>Surface</dt>
          <dd>{surfaceText(bundle, units)}</dd>
        </>
      )}
      <dt>Layout</dt>
      <dd>
        {LAYOUT_NAMES[bundle.bundle.layout]}, pitch ratio {Number(bundle.bundle.pitchRatio.toPrecision(4))}
      </dd>
      <dt>{even ? 'Rows × tubes' : 'Rows, tubes'}</dt>
      <dd>
        {even && first ? (
          `${result.rows.length} × ${first.tubes}`
        ) : (
          <>
            {bundle.bundle.rows}, <Quantity value={result.tubeCount} dimension="count" />
          </>
        )}
      </dd>
      <dt>Length, passes</dt>
      <dd>
        <Quantity value={result.tubeLength} dimension="length" />, {bundle.bundle.passes}
      </dd>
      <Fact label="Duty" value={result.duty} dimension="power" />
      {result.coolant ? (
        <>
          <dt>Coolant</dt>
          <dd>
            {names.coolant}, <Quantity value={result.coolant.velocity} dimension="velocity" />
          </dd>
          <dt>In, out</dt>
          <dd>
            <Quantity value={result.coolant.inletTemperature} dimension="temperature" unit={false} />,{' '}
            <Quantity value={result.coolant.outletTemperature} dimension="temperature" />
          </dd>
        </>
      ) : null}
      {first && last ? (
        <>
          <dt>Subcooling</dt>
          <dd>
            {uniform ? null : (
              <>
                <Quantity value={first.wallSubcooling} dimension="temperatureDifference" unit={false} /> to{' '}
              </>
            )}
            <Quantity value={last.wallSubcooling} dimension="temperatureDifference" />
            {uniform ? '' : `, rows 1 to ${last.row}`}
          </dd>
        </>
      ) : null}
    </dl>
  )
}

function Fact({ label, value, dimension }: { label: string; value: number | null; dimension: Dimension }) {
  return (
    <>
      <dt>{label}</dt>
      <dd>
        <Quantity value={value} dimension={dimension} />
      </dd>
    </>
  )
}

/** The row coefficient down the bundle, tied to the picture: the row pointed at is marked. */
function RowProfile({ rows, active }: { rows: readonly RowResult[]; active: number | null }) {
  const units = useUnits()
  const unit = displayUnit('heatTransferCoefficient', units)
  return (
    <section aria-label="Row profile" className="-mx-2">
      <LineChart
        name="Row coefficient down the bundle"
        x={{ label: 'row', unit: '', whole: true }}
        y={{ label: 'row coefficient', unit }}
        lines={[
          {
            label: 'row coefficient',
            x: rows.map(({ row }) => row),
            y: rows.map(({ coefficient }) => toDisplay(coefficient, 'heatTransferCoefficient', units).value),
          },
        ]}
        height={190}
        dots={rows.length <= 40}
        active={active}
        table={false}
      />
    </section>
  )
}
