// A point by other methods: how far they spread, and what each changes in area, notes and rows.
import { CHOICE_LABELS } from '#app/components/library/words.ts'
import { Quantity } from '#app/components/ui/number.tsx'
import { significant } from '#app/components/ui/number-format.ts'
import { Scroll, Sheet } from '#app/components/ui/page.tsx'
import type { Alternatives, ByOtherMethods } from '#app/modules/explore/alternatives.ts'

export function OtherMethods({ by }: { by: ByOtherMethods }) {
  const dimension = by.quantity === 'outsideArea' ? 'area' : 'power'
  const what = by.quantity === 'outsideArea' ? 'Outside area' : 'Duty'
  return (
    <Sheet title="By other methods">
      <p className="mb-3 max-w-[70ch] text-soft">
        The same point with one method changed at a time, by the same engine. How far the methods of a choice
        spread says more about the number than its last digits.
      </p>
      <div className="grid gap-5">
        {by.choices.map((choice) => (
          <Choice key={choice.choice} choice={choice} dimension={dimension} what={what} value={by.value} />
        ))}
      </div>
    </Sheet>
  )
}

const percent = (change: number) =>
  Math.abs(change) < 5e-5
    ? 'the same'
    : `${change > 0 ? '+' : '−'}${significant(Math.abs(change) * 100, Math.abs(change) < 0.1 ? 2 : 3)} %`

function Choice({
  choice: { choice, chosen, others, spread },
  dimension,
  what,
  value,
}: {
  choice: Alternatives
  dimension: 'area' | 'power'
  what: string
  value: number
}) {
  const label = CHOICE_LABELS[choice] ?? choice
  return (
    <section aria-label={label} className="min-w-0 break-inside-avoid">
      <h3 className="mb-1 text-note font-bold">
        {label}
        {spread && spread.greatest > spread.least * 1.00005 ? (
          <span className="font-normal text-soft">
            : <Quantity value={spread.least} dimension={dimension} unit={false} digits={3} /> to{' '}
            <Quantity value={spread.greatest} dimension={dimension} digits={3} />, a spread of{' '}
            {significant((spread.greatest / spread.least - 1) * 100, 2)} %
          </span>
        ) : null}
      </h3>
      <Scroll label={`${label}: other methods`}>
        <table className="data-table">
          <thead>
            <tr>
              <th scope="col">Method</th>
              <th scope="col" className="numeric">
                {what}
              </th>
              <th scope="col" className="numeric">
                Change
              </th>
              <th scope="col" className="numeric">
                Mean outside coefficient
              </th>
              <th scope="col">Notes</th>
              <th scope="col">Rows</th>
            </tr>
          </thead>
          <tbody>
            <tr data-selected="true">
              <th scope="row">{chosen.name}</th>
              <td className="numeric">
                <Quantity value={value} dimension={dimension} digits={4} />
              </td>
              <td className="numeric">chosen</td>
              <td />
              <td />
              <td />
            </tr>
            {others.map((other) => (
              <tr key={other.id}>
                <th scope="row" className="font-normal">
                  {other.name}
                </th>
                {other.refused !== null ? (
                  <td colSpan={5} className="text-copper-ink">
                    {other.refused}
                  </td>
                ) : (
                  <>
                    <td className="numeric">
                      <Quantity value={other.value} dimension={dimension} digits={4} />
                    </td>
                    <td className="numeric">{percent(other.change ?? 0)}</td>
                    <td className="numeric">
                      <Quantity
                        value={other.meanCoefficient}
                        dimension="heatTransferCoefficient"
                        digits={4}
                      />
                    </td>
                    <td className="text-note">
                      {other.appear.map((note) => (
                        <span key={note} className="block">
                          + {note}
                        </span>
                      ))}
                      {other.vanish.map((note) => (
                        <span key={note} className="block text-soft">
                          − {note}
                        </span>
                      ))}
                    </td>
                    <td className="text-note">
                      <Rows rows={other.rows} />
                    </td>
                  </>
                )}
              </tr>
            ))}
          </tbody>
        </table>
      </Scroll>
    </section>
  )
}

function Rows({ rows }: { rows: Alternatives['others'][number]['rows'] }) {
  if (rows.length === 0) return <span className="text-soft">none</span>
  const most = rows.reduce((a, b) =>
    Math.abs(b.after / b.before - 1) > Math.abs(a.after / a.before - 1) ? b : a,
  )
  return (
    <details>
      <summary>
        {rows.length} changed, most row {most.row}: {percent(most.after / most.before - 1)}
      </summary>
      <ul className="mt-1">
        {rows.map(({ row, before, after }) => (
          <li key={row} className="whitespace-nowrap">
            Row {row}: <Quantity value={before} dimension="heatTransferCoefficient" unit={false} digits={4} />{' '}
            → <Quantity value={after} dimension="heatTransferCoefficient" digits={4} />
          </li>
        ))}
      </ul>
    </details>
  )
}
