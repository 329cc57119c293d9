// What the engine is checked against, evaluated now.
import { Link } from 'react-router'
import { FigureStrip } from '#app/components/ui/figure-strip.tsx'
import { Digits } from '#app/components/ui/number.tsx'
import { PageHead, PlainPage, Scroll, Sheet } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import { cards } from '#engine/correlations/registry.ts'
import { formatNumber } from '#engine/units.ts'
import { EVIDENCE, type ValidationRow, validationReport } from '#engine/validation/records.ts'
import { ENGINE_VERSION } from '#engine/version.ts'
import type { Route } from './+types/validation'

export const meta: Route.MetaFunction = () => [{ title: 'Validation · Rowfall' }]

export const handle = {
  crumbs: () => [
    { label: 'Library', to: '/library' },
    { label: 'Validation', to: '/library/validation' },
  ],
}

export function loader() {
  const rows = validationReport()
  const printed = new Set(
    rows.filter(({ evidence }) => evidence.startsWith('printed value')).flatMap((row) => row.cards),
  )
  const unverified = cards
    .filter((card) => card.default && card.methodId !== undefined && !printed.has(card.id))
    .map(({ id, name, evidence }) => ({ id, name, evidence }))
  const byEvidence = EVIDENCE.map((evidence) => ({
    evidence,
    count: rows.filter((row) => row.evidence === evidence).length,
  }))
  return { rows, byEvidence, unverified, engineVersion: ENGINE_VERSION }
}

export default function Validation({ loaderData }: Route.ComponentProps) {
  const { rows, byEvidence, unverified, engineVersion } = loaderData
  const outside = rows.filter(({ within }) => !within)
  const worst = rows.reduce((most, { deviation }) => Math.max(most, Math.abs(deviation)), 0)
  return (
    <PlainPage>
      <PageHead
        title={
          outside.length === 0
            ? `All ${rows.length} checks lie within their tolerance`
            : `${outside.length} of ${rows.length} checks lie outside their tolerance`
        }
        reason={`Evaluated just now by engine ${engineVersion}. A check is worth what its source is worth: the evidence stands beside each.`}
      />
      <FigureStrip
        label="Checks by evidence"
        figures={[
          ...byEvidence.map(({ evidence, count }) => ({ label: evidence, value: <Digits>{count}</Digits> })),
          { label: 'largest deviation', value: `${formatNumber(100 * worst, 2)} %` },
        ]}
      />
      <Parity rows={rows} />
      <Sheet title="Every check" flush>
        <Scroll label="Every check">
          <table className="data-table">
            <thead>
              <tr>
                <th scope="col">Check</th>
                <th scope="col">Source</th>
                <th scope="col">Evidence</th>
                <th scope="col" className="numeric">
                  Expected
                </th>
                <th scope="col" className="numeric">
                  Obtained
                </th>
                <th scope="col" className="numeric">
                  Deviation
                </th>
                <th scope="col" className="numeric">
                  Allowed
                </th>
              </tr>
            </thead>
            <tbody>
              {rows.map((row) => (
                <tr key={row.id}>
                  <th scope="row">{row.title}</th>
                  <td>{row.source}</td>
                  <td>{row.evidence}</td>
                  <td className="numeric">
                    <Digits>{formatNumber(row.expected, 6)}</Digits>
                    <span className="unit">{row.unit}</span>
                  </td>
                  <td className="numeric">
                    <Digits>{formatNumber(row.obtained, 6)}</Digits>
                    <span className="unit">{row.unit}</span>
                  </td>
                  <td className="numeric">
                    <Tag tone={row.within ? 'sound' : 'failed'}>{percent(row.deviation)}</Tag>
                  </td>
                  <td className="numeric" title={row.why}>
                    {percent(row.tolerance)}
                  </td>
                </tr>
              ))}
            </tbody>
          </table>
        </Scroll>
      </Sheet>
      <Sheet title="Default methods without a printed-value check">
        <p className="mb-3 max-w-[70ch] text-soft">
          No value printed in a book or paper stands behind these yet; their cards say what does.
        </p>
        <ul className="grid gap-1.5">
          {unverified.map(({ id, name, evidence }) => (
            <li key={id}>
              <Link to={`/library/methods/${id}`} className="link">
                {name}
              </Link>{' '}
              <span className="text-soft">unverified: {evidence}</span>
            </li>
          ))}
        </ul>
      </Sheet>
    </PlainPage>
  )
}

const percent = (share: number) => `${share < 0 ? '−' : ''}${formatNumber(Math.abs(100 * share), 2)} %`

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹'
const power = (exponent: number) =>
  [...String(exponent)].map((digit) => (digit === '-' ? '⁻' : SUPERSCRIPTS[Number(digit)])).join('')

const SIZE = 320
const EDGE = 34

/** Obtained over expected, each check a mark across the size of its number; the band is ±2 %. */
function Parity({ rows }: { rows: ValidationRow[] }) {
  const logs = rows.map(({ expected }) => Math.log10(Math.abs(expected)))
  const low = Math.floor(Math.min(...logs))
  const high = Math.ceil(Math.max(...logs))
  const x = (value: number) =>
    EDGE + ((Math.log10(Math.abs(value)) - low) / (high - low)) * (2 * SIZE - EDGE - 24)
  const reach = 0.02
  const y = (deviation: number) =>
    SIZE / 2 - (Math.max(-1.2 * reach, Math.min(1.2 * reach, deviation)) / reach) * (SIZE / 2 - 40)
  return (
    <Sheet title="Deviation against the size of the expected number">
      <svg
        role="img"
        aria-label={`Deviations of ${rows.length} checks; the largest is ${percent(rows.reduce((most, row) => (Math.abs(row.deviation) > Math.abs(most) ? row.deviation : most), 0))}. The table below holds every value.`}
        viewBox={`0 0 ${2 * SIZE} ${SIZE}`}
        className="block h-auto w-full max-w-[52rem]"
      >
        {[-reach, 0, reach].map((line) => (
          <g key={line}>
            <line
              x1={EDGE}
              x2={2 * SIZE - 24}
              y1={y(line)}
              y2={y(line)}
              stroke="var(--line-strong)"
              strokeDasharray={line === 0 ? undefined : '4 4'}
            />
            <text x={EDGE - 6} y={y(line) + 4} textAnchor="end" fontSize="11" fill="var(--soft)">
              {percent(line)}
            </text>
          </g>
        ))}
        {Array.from({ length: high - low + 1 }, (_, k) => low + k).map((decade) => (
          <text
            key={decade}
            x={x(10 ** decade)}
            y={SIZE - 8}
            textAnchor="middle"
            fontSize="11"
            fill="var(--soft)"
          >
            10{power(decade)}
          </text>
        ))}
        {rows.map((row) => (
          <circle
            key={row.id}
            cx={x(row.expected)}
            cy={y(row.deviation)}
            r="4"
            fill={row.within ? 'var(--verdigris)' : 'var(--copper)'}
          >
            <title>{`${row.title}: ${percent(row.deviation)}`}</title>
          </circle>
        ))}
      </svg>
    </Sheet>
  )
}
