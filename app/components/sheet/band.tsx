// How sure a number is: its 10, 50 and 90 % under the published scatter of the methods, and which part matters most.
import { Quantity } from '#app/components/ui/number.tsx'
import { Scroll } from '#app/components/ui/page.tsx'
import type { Dimension } from '#engine/units.ts'

export type ShownBand = {
  quantity: 'outsideArea' | 'duty'
  samples: number
  seed: number
  nominal: number
  p10: number | null
  p50: number | null
  p90: number | null
  length: number | null
  meets: number | null
  groups: {
    id: string
    label: string
    multiplies: string
    sigma: number
    published: string
    source: string
    elasticity: number | null
    share: number
  }[]
  failures: { text: string; count: number }[]
}

export const bandDimension = ({ quantity }: Pick<ShownBand, 'quantity'>): Dimension =>
  quantity === 'outsideArea' ? 'area' : 'power'

/** "32.1 to 40.9 m² in eight of ten cases" */
export function BandLine({ band }: { band: ShownBand }) {
  if (band.p10 === null || band.p90 === null) return <>no band: too many samples have no result</>
  const dimension = bandDimension(band)
  return (
    <>
      <Quantity value={band.p10} dimension={dimension} unit={false} /> to{' '}
      <Quantity value={band.p90} dimension={dimension} /> in eight of ten cases
    </>
  )
}

const percent = (share: number) => `${Math.round(share * 100)} %`

/** A part that moves the number by less than this says nothing. */
const COUNTS = 0.005

export function BandTable({ band }: { band: ShownBand }) {
  const dimension = bandDimension(band)
  const counts = ({ share, elasticity }: ShownBand['groups'][number]) =>
    share >= COUNTS || Math.abs(elasticity ?? 0) >= COUNTS
  const idle = band.groups.filter((group) => !counts(group))
  const places: [string, number | null][] = [
    ['10 %', band.p10],
    ['50 %', band.p50],
    ['90 %', band.p90],
  ]
  return (
    <div className="grid gap-4">
      <BandBar band={band} />
      <dl className="flex flex-wrap gap-x-8 gap-y-2">
        <div>
          <dt className="text-note text-soft">As calculated</dt>
          <dd className="font-bold">
            <Quantity value={band.nominal} dimension={dimension} digits={4} />
          </dd>
        </div>
        {places.map(([label, value]) => (
          <div key={label}>
            <dt className="text-note text-soft">{label} of cases need at most</dt>
            <dd className="font-bold">
              <Quantity value={value} dimension={dimension} digits={4} />
            </dd>
          </div>
        ))}
        {band.meets === null ? null : (
          <div>
            <dt className="text-note text-soft">
              Chance that <Quantity value={band.length} dimension="length" digits={4} /> meets the duty
            </dt>
            <dd className="font-bold">{percent(band.meets)}</dd>
          </div>
        )}
      </dl>
      <Scroll label="What the band comes from">
        <table className="data-table">
          <thead>
            <tr>
              <th scope="col">Uncertain part</th>
              <th scope="col" className="numeric">
                Share of the variance
              </th>
              <th scope="col" className="numeric">
                1 % more changes it by
              </th>
              <th scope="col">Published scatter, source</th>
            </tr>
          </thead>
          <tbody>
            {band.groups.filter(counts).map((group) => (
              <tr key={group.id}>
                <th scope="row">
                  {group.label}
                  <span className="block text-note font-normal text-soft">{group.multiplies}</span>
                </th>
                <td className="numeric">{percent(group.share)}</td>
                <td className="numeric">
                  {group.elasticity === null ? '–' : `${signed(group.elasticity)} %`}
                </td>
                <td className="text-note">
                  {group.published}. {group.source}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </Scroll>
      <p className="max-w-[75ch] text-note text-soft">
        {band.samples} samples of a Latin hypercube (seed {band.seed}); each uncertain part is multiplied by a
        lognormal factor of median 1, the same in every row, and the bundle is sized again. What the methods
        leave out, and gas or vent losses, are not in it.
        {idle.length > 0
          ? ` Without effect here: ${idle.map(({ label }) => label.toLowerCase()).join(', ')}.`
          : ''}
        {band.failures.length > 0
          ? ` Without a result: ${band.failures.map(({ text, count }) => `${count} (${text})`).join(', ')}.`
          : ''}
      </p>
    </div>
  )
}

const signed = (value: number) =>
  `${value < 0 ? '−' : '+'}${Math.abs(value) < 0.0005 ? '0' : Number(Math.abs(value).toPrecision(2))}`

function BandBar({ band }: { band: ShownBand }) {
  const { p10, p50, p90, nominal } = band
  if (p10 === null || p50 === null || p90 === null) return null
  const low = Math.min(p10, nominal)
  const high = Math.max(p90, nominal)
  const pad = (high - low) * 0.15 || 1
  const x = (value: number) => ((value - low + pad) / (high - low + 2 * pad)) * 600
  return (
    <svg viewBox="0 0 600 34" className="w-full max-w-[42rem]" aria-hidden="true">
      <line x1="0" x2="600" y1="17" y2="17" stroke="var(--line-strong)" />
      <rect
        x={x(p10)}
        width={x(p90) - x(p10)}
        y="9"
        height="16"
        rx="3"
        fill="var(--verdigris)"
        opacity="0.3"
      />
      <line x1={x(p50)} x2={x(p50)} y1="5" y2="29" stroke="var(--verdigris)" strokeWidth="3" />
      <circle cx={x(nominal)} cy="17" r="5" fill="var(--copper)" />
    </svg>
  )
}
