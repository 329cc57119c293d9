// Pinned points side by side, with what differs between them marked.
import { Link } from 'react-router'
import { BundleThumbnail } from '#app/components/bundle-drawing/bundle-drawing.tsx'
import { bundleGeometry } from '#app/components/bundle-drawing/layout.ts'
import { LAYOUT_NAMES } from '#app/components/bundle-drawing/words.ts'
import { Digits, Quantity, useUnits } from '#app/components/ui/number.tsx'
import { Sheet } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import { surfaceText, tubeText } from '#app/modules/explore/case-words.ts'
import { resultColumns } from '#app/modules/explore/columns.ts'
import { keyResultOf, limitStandings } from '#app/modules/explore/limits.ts'
import type { Limits } from '#engine/sweep/limits.ts'
import type { UnitSystem } from '#engine/units.ts'
import { pointName, type ShownPoint } from './point-margin.tsx'

const INPUTS: { label: string; text: (point: ShownPoint, units: UnitSystem) => string }[] = [
  { label: 'Fluid', text: ({ names }) => names.fluid },
  { label: 'Tube', text: (point, units) => tubeText(point.case, units) },
  { label: 'Material', text: ({ names }) => names.material ?? '–' },
  { label: 'Surface', text: (point, units) => surfaceText(point.case, units) },
  { label: 'Layout', text: (point) => LAYOUT_NAMES[point.case.bundle.layout] },
  { label: 'Pitch ratio', text: (point) => String(Number(point.case.bundle.pitchRatio.toPrecision(4))) },
  { label: 'Rows', text: (point) => String(point.case.bundle.rows) },
  { label: 'Tubes per row', text: ({ result }) => String(result.rows[0]?.tubes ?? '–') },
  { label: 'Passes', text: (point) => String(point.case.bundle.passes) },
]
const RESULTS = new Set([
  'outsideArea',
  'tubeLength',
  'duty',
  'overallCoefficient',
  'meanCoefficient',
  'coolantPressureDrop',
  'vapourPressureDrop',
  'coolantVelocity',
  'tubeMass',
  'yearlyCost',
])

export function PinnedPoints({
  points,
  limits,
  href,
  unpinHref,
}: {
  points: readonly ShownPoint[]
  limits: Limits
  href: (point: number) => string
  unpinHref: (point: number) => string
}) {
  const units = useUnits()
  if (points.length === 0) return null
  const inputs = INPUTS.map(({ label, text }) => ({
    label,
    texts: points.map((point) => text(point, units)),
  }))
  const results = resultColumns().filter(({ id }) => RESULTS.has(id))
  return (
    <Sheet flush title={points.length === 1 ? 'Pinned point' : `${points.length} pinned points side by side`}>
      <div className="scroll-thin relative overflow-x-auto">
        <table className="data-table">
          <caption className="visually-hidden">Pinned points side by side</caption>
          <thead>
            <tr>
              <th scope="col">What</th>
              {points.map((point) => (
                <th key={point.point} scope="col" className="numeric">
                  <span className="mb-1 flex justify-end">
                    <BundleThumbnail
                      geometry={bundleGeometry(point.case)}
                      rows={point.result.rows}
                      name={pointName(point.point)}
                      width={84}
                      height={64}
                    />
                  </span>
                  {typeof point.point === 'number' ? (
                    <>
                      <Link to={href(point.point)} replace preventScrollReset className="link">
                        Point <Digits>{point.point}</Digits>
                      </Link>{' '}
                      <Link
                        to={unpinHref(point.point)}
                        replace
                        preventScrollReset
                        className="screen-only"
                        aria-label={`Unpin point ${point.point}`}
                      >
                        ×
                      </Link>
                    </>
                  ) : (
                    pointName(point.point)
                  )}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {inputs.map(({ label, texts }) => {
              const differs = texts.some((text) => text !== texts[0])
              if (!differs && points.length > 1 && label !== 'Tube') return null
              return (
                <tr key={label}>
                  <th scope="row">{label}</th>
                  {texts.map((text, i) => (
                    <td key={points[i].point} className="numeric">
                      {differs ? <mark className="differs">{text}</mark> : text}
                    </td>
                  ))}
                </tr>
              )
            })}
            {results.map(({ id, label, dimension, hint }) => {
              const values = points.map(({ result }) => keyResultOf(result, id))
              if (values.every((value) => value === null)) return null
              return (
                <tr key={id}>
                  <th scope="row">{label}</th>
                  {values.map((value, i) => (
                    <td key={points[i].point} className="numeric">
                      <Quantity value={value} dimension={dimension} hint={hint} digits={4} />
                    </td>
                  ))}
                </tr>
              )
            })}
            <tr>
              <th scope="row">Limits</th>
              {points.map((point) => {
                const missed = limitStandings(limits, (id) => keyResultOf(point.result, id)).filter(
                  ({ met }) => !met,
                )
                return (
                  <td key={point.point} className="numeric">
                    <Tag tone={missed.length === 0 ? 'sound' : 'attention'}>
                      {missed.length === 0
                        ? 'meets all'
                        : missed.map(({ label }) => label.toLowerCase()).join(', ')}
                    </Tag>
                  </td>
                )
              })}
            </tr>
          </tbody>
        </table>
      </div>
    </Sheet>
  )
}
