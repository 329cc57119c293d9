// Predicted against measured, drawn on the server, with the bands of ±10 and 20 % and the points as a table.
import type { ReactNode } from 'react'
import { Digits } from '#app/components/ui/number.tsx'
import { formatNumber } from '#engine/units.ts'
import { type Axis, axisRange, axisTitle } from './axes.ts'
import { along, down, Frame } from './frame.tsx'

export type ParityMark = {
  name: string
  measured: number
  predicted: number | null
  reason: string | null
  outlier: boolean
}

const BANDS = [0.2, 0.1] as const

export function ParityPlot({
  name,
  quantity,
  unit,
  points,
}: {
  name: string
  quantity: string
  unit: string
  points: readonly ParityMark[]
}) {
  const known = points.filter(
    (point): point is ParityMark & { predicted: number } => point.predicted !== null,
  )
  const range = axisRange(known.flatMap(({ measured, predicted }) => [measured, predicted]))
  const ranges = { x: range, y: range }
  const x: Axis = { label: `measured ${quantity}`, unit }
  const y: Axis = { label: `predicted ${quantity}`, unit }
  return (
    <figure aria-label={name} className="grid gap-2">
      <div className="flex flex-wrap gap-x-4 gap-y-1 px-1 text-note text-soft">
        <Key label="measured point">
          <Mark at="13 5" />
        </Key>
        <Key label="outlier">
          <Cross x={13} y={5} size={4} />
        </Key>
        <Key label="±10 %">
          <path d="M0 5h26" stroke="var(--verdigris)" strokeWidth="1.5" strokeDasharray="7 4" />
        </Key>
        <Key label="±20 %">
          <path d="M0 5h26" stroke="var(--soft)" strokeWidth="1.5" strokeDasharray="2 4" />
        </Key>
      </div>
      <div className="max-w-2xl">
        <Frame {...{ x, y, ranges }} height={380}>
          {BANDS.flatMap((share) =>
            [1 - share, 1 + share].map((times) => (
              <Ray
                key={times}
                times={times}
                range={range}
                stroke={share === 0.1 ? 'var(--verdigris)' : 'var(--soft)'}
                dashes={share === 0.1 ? '7 4' : '2 4'}
              />
            )),
          )}
          <Ray times={1} range={range} stroke="var(--ink)" />
          {known.map(({ measured, predicted, outlier }, i) => {
            const left = along(measured, range)
            const top = down(predicted, range)
            return (
              // biome-ignore lint/suspicious/noArrayIndexKey: points keep their place in the file
              <g key={i}>{outlier ? <Cross x={left} y={top} size={9} /> : <Mark at={`${left} ${top}`} />}</g>
            )
          })}
        </Frame>
      </div>
      <details className="text-note">
        <summary className="list-inside font-semibold text-verdigris-ink">Points as a table</summary>
        <div className="scroll-thin mt-2 max-h-96 overflow-auto">
          <table className="data-table">
            <caption className="visually-hidden">{name}</caption>
            <thead>
              <tr>
                <th scope="col">Point</th>
                <th scope="col" className="numeric">
                  {axisTitle(x)}
                </th>
                <th scope="col" className="numeric">
                  {axisTitle(y)}
                </th>
                <th scope="col" className="numeric">
                  measured over predicted
                </th>
                <th scope="col">Remark</th>
              </tr>
            </thead>
            <tbody>
              {points.map((point, i) => (
                // biome-ignore lint/suspicious/noArrayIndexKey: points keep their place in the file
                <tr key={i}>
                  <th scope="row">{point.name}</th>
                  <td className="numeric">
                    <Digits>{formatNumber(point.measured, 4)}</Digits>
                  </td>
                  <td className="numeric">
                    <Digits>{formatNumber(point.predicted, 4)}</Digits>
                  </td>
                  <td className="numeric">
                    {point.predicted === null ? '–' : formatNumber(point.measured / point.predicted, 3)}
                  </td>
                  <td>{point.reason ?? (point.outlier ? 'outlier' : '')}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      </details>
    </figure>
  )
}

function Key({ label, children }: { label: string; children: ReactNode }) {
  return (
    <span className="inline-flex items-center gap-1.5">
      <svg width="26" height="10" aria-hidden="true">
        {children}
      </svg>
      {label}
    </span>
  )
}

const Mark = ({ at }: { at: string }) => (
  <path d={`M${at}h0`} stroke="var(--verdigris)" strokeWidth="8" strokeLinecap="round" />
)

const Cross = ({ x, y, size }: { x: number; y: number; size: number }) => (
  <path
    d={`M${x - size} ${y - size}L${x + size} ${y + size}M${x - size} ${y + size}L${x + size} ${y - size}`}
    stroke="var(--copper)"
    strokeWidth="2.5"
  />
)

/** The line predicted = times · measured as far as it lies in the picture. */
function Ray({
  times,
  range,
  stroke,
  dashes,
}: {
  times: number
  range: { low: number; high: number; log: boolean }
  stroke: string
  dashes?: string
}) {
  const from = Math.max(range.low, range.low / times)
  const to = Math.min(range.high, range.high / times)
  return (
    <path
      d={`M${along(from, range)} ${down(from * times, range)}L${along(to, range)} ${down(to * times, range)}`}
      stroke={stroke}
      strokeWidth="1.5"
      strokeDasharray={dashes}
      fill="none"
    />
  )
}
