// The body of a calculation sheet: inputs, bundle, results with equation and source, limits, rows, passes, notes, methods.
import { BundleDrawing } from '#app/components/bundle-drawing/bundle-drawing.tsx'
import { bundleGeometry, passOfRow } from '#app/components/bundle-drawing/layout.ts'
import { Entries, Formula } from '#app/components/sheet/entries.tsx'
import { LimitBounds, marginText } from '#app/components/sheet/limit-notes.tsx'
import { MethodList } from '#app/components/sheet/method-list.tsx'
import { PassesTable, RowsTable } from '#app/components/sheet/rows-table.tsx'
import { MarginNote, NoteList } from '#app/components/ui/margin-note.tsx'
import { Quantity, useUnits } from '#app/components/ui/number.tsx'
import { Sheet } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import type { CaseNames } from '#app/modules/explore/case-words.ts'
import type { LimitStanding } from '#app/modules/explore/limits.ts'
import type { SheetCard } from '#app/modules/explore/method-cards.server.ts'
import { rowHeat, sheetChecks, sheetInputs, sheetResults } from '#app/modules/explore/sheet.ts'
import type { Case } from '#engine/case.ts'
import { NOTE_LABELS } from '#engine/notes.ts'
import type { Result } from '#engine/result.ts'
import { SafetyNote } from './explore/point-margin.tsx'

export function SheetBody({
  bundle,
  result,
  names,
  standings,
  cards,
  name,
}: {
  bundle: Case
  result: Result
  names: CaseNames
  standings: readonly LimitStanding[]
  cards: readonly SheetCard[]
  /** What the sheet is of. */
  name: string
}) {
  const units = useUnits()
  const entry = bundle.bundle.coolantEntry
  return (
    <>
      <div className="grid items-start gap-5 lg:grid-cols-[minmax(0,1fr)_24.5rem] print:block print:*:mb-4">
        <Sheet title="Inputs">
          <div className="grid gap-x-8 gap-y-4 md:grid-cols-2 print:grid-cols-3">
            {sheetInputs(bundle, names, units).map(({ title, entries }) => (
              <div key={title} className="break-inside-avoid">
                <h3 className="mb-1 text-note font-bold">{title}</h3>
                <Entries title={title} entries={entries} />
              </div>
            ))}
          </div>
        </Sheet>
        <Sheet title="Bundle, to scale">
          <div className="print:mx-auto print:max-w-[20rem]">
            <BundleDrawing geometry={bundleGeometry(bundle)} rows={result.rows} name={name} table={false} />
          </div>
        </Sheet>
      </div>
      <Sheet title="Results">
        <div className="grid gap-5 print:block print:*:mb-3">
          {sheetResults(bundle, result).map(({ title, entries, choices }) => {
            const behind = cards.filter(({ choice }) => choices.includes(choice))
            return (
              <div key={title} className="break-inside-avoid">
                <h3 className="mb-1 text-note font-bold">{title}</h3>
                <Entries title={title} entries={entries} digits={5} from />
                {behind.length > 0 ? (
                  <p className="mt-1 text-note text-soft">By {behind.map(({ name }) => name).join('; ')}.</p>
                ) : null}
              </div>
            )
          })}
          <Checks bundle={bundle} result={result} />
        </div>
      </Sheet>
      {standings.length > 0 ? <LimitsTable standings={standings} /> : null}
      <Sheet flush title="Rows, from the top">
        <RowsTable
          rows={result.rows}
          heat={result.rows.map((row) => rowHeat(row, bundle, result.tubeLength))}
          passOf={(row) => passOfRow(row, bundle.bundle.rows, bundle.bundle.passes, entry)}
        />
      </Sheet>
      {result.passes.length > 0 ? (
        <Sheet flush title="Passes, in the coolant’s order">
          <PassesTable passes={result.passes} />
        </Sheet>
      ) : null}
      <Sheet title="Validity and cautions">
        <div className="grid gap-3.5">
          <SafetyNote names={names} />
          <NoteList notes={result.notes} labels={NOTE_LABELS} />
          <MarginNote tone="attention" title="Screening results, not a certified design.">
            Pressure equipment, refrigerant charge and ventilation follow local codes and licensed practice.
            Tube vibration and supports are not covered.
          </MarginNote>
        </div>
      </Sheet>
      <Sheet title="Methods and sources">
        <MethodList methods={cards} />
      </Sheet>
    </>
  )
}

/** Sums that a reader can do again by calculator. */
function Checks({ bundle, result }: { bundle: Case; result: Result }) {
  const units = useUnits()
  const checks = sheetChecks(bundle, result, units)
  if (checks.length === 0) return null
  return (
    <div className="break-inside-avoid">
      <h3 className="mb-1 text-note font-bold">Checks</h3>
      <ul className="grid gap-1">
        {checks.map(({ left, right, differs }) => (
          <li key={left}>
            <Formula text={`${left}, against ${right}: ${agreement(differs)}.`} />
          </li>
        ))}
      </ul>
    </div>
  )
}

function agreement(differs: number): string {
  const size = Math.abs(differs)
  if (size < 1e-9) return 'equal within 1 part in 10⁹'
  return `differs by ${Number((size * 100).toPrecision(2))} %`
}

function LimitsTable({ standings }: { standings: readonly LimitStanding[] }) {
  return (
    <Sheet flush title="Limits">
      <div className="scroll-thin relative overflow-x-auto">
        <table className="data-table">
          <caption className="visually-hidden">Limits with their margins</caption>
          <thead>
            <tr>
              <th scope="col">Limit</th>
              <th scope="col" className="numeric">
                Value
              </th>
              <th scope="col">Allowed</th>
              <th scope="col">Margin</th>
              <th scope="col" className="numeric">
                Standing
              </th>
            </tr>
          </thead>
          <tbody>
            {standings.map((standing) => (
              <tr key={standing.id}>
                <th scope="row">{standing.label}</th>
                <td className="numeric">
                  <Quantity
                    value={standing.value}
                    dimension={standing.dimension}
                    hint={standing.hint}
                    digits={4}
                  />
                </td>
                <td>
                  <LimitBounds {...standing} />
                </td>
                <td>{marginText(standing)}</td>
                <td className="numeric">
                  <Tag tone={standing.met ? 'sound' : 'failed'}>{standing.met ? 'met' : 'not met'}</Tag>
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </Sheet>
  )
}
