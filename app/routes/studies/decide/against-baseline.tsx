// The candidate held against the project's baseline, the record that was accepted before.
import { Link } from 'react-router'
import { Quantity } from '#app/components/ui/number.tsx'
import { Scroll, Sheet } from '#app/components/ui/page.tsx'
import { resultColumns } from '#app/modules/explore/columns.ts'
import { keyResultOf } from '#app/modules/explore/limits.ts'
import type { Result } from '#engine/result.ts'

const COMPARED = [
  'duty',
  'outsideArea',
  'tubeMass',
  'yearlyCost',
  'pumpingPower',
  'coolantPressureDrop',
  'vapourPressureDrop',
]

export function AgainstBaseline({
  baseline,
  projectId,
  result,
}: {
  baseline: { id: string; number: number; studyName: string; result: Result }
  projectId: string
  result: Result
}) {
  const columns = new Map(resultColumns().map((column) => [column.id, column]))
  const rows = COMPARED.flatMap((id) => {
    const column = columns.get(id)
    const before = keyResultOf(baseline.result, id)
    const now = keyResultOf(result, id)
    return column && before !== null && now !== null ? [{ id, column, before, now }] : []
  })
  const sameDuty = Math.abs((result.duty ?? 0) / (baseline.result.duty ?? 1) - 1) < 0.001
  return (
    <Sheet title="Against the project’s baseline">
      <p className="mb-3 max-w-[70ch] text-soft">
        <Link to={`/projects/${projectId}/records/${baseline.id}`} className="link">
          Record {baseline.number}
        </Link>{' '}
        of “{baseline.studyName}”.{sameDuty ? '' : ' Their duties differ: areas answer different questions.'}
      </p>
      <Scroll label="The candidate against the baseline">
        <table className="data-table">
          <thead>
            <tr>
              <th scope="col">Result</th>
              <th scope="col" className="numeric">
                Baseline
              </th>
              <th scope="col" className="numeric">
                Candidate
              </th>
              <th scope="col" className="numeric">
                Change
              </th>
            </tr>
          </thead>
          <tbody>
            {rows.map(({ id, column, before, now }) => (
              <tr key={id}>
                <th scope="row">{column.label}</th>
                <td className="numeric">
                  <Quantity value={before} dimension={column.dimension} hint={column.hint} digits={4} />
                </td>
                <td className="numeric">
                  <Quantity value={now} dimension={column.dimension} hint={column.hint} digits={4} />
                </td>
                <td className="numeric">{change(before, now)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </Scroll>
    </Sheet>
  )
}

function change(before: number, now: number): string {
  if (before === now) return 'the same'
  if (before === 0) return '–'
  const percent = (now / before - 1) * 100
  if (Math.abs(percent) < 0.05) return 'the same'
  return `${percent > 0 ? '+' : '−'}${Math.abs(percent) >= 10 ? Math.abs(percent).toFixed(0) : Math.abs(percent).toFixed(1)} %`
}
