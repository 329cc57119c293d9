// One point's calculation sheet: inputs, results with equation and source, rows, passes, limits, notes. Printable.
import { BundleDrawing } from '#app/components/bundle-drawing/bundle-drawing.tsx'
import { bundleGeometry, passOfRow } from '#app/components/bundle-drawing/layout.ts'
import { Entries, Formula } from '#app/components/sheet/entries.tsx'
import { LimitBounds, marginText } from '#app/components/sheet/limit-notes.tsx'
import { MethodList } from '#app/components/sheet/method-list.tsx'
import { PrintButton } from '#app/components/sheet/print-button.tsx'
import { PassesTable, RowsTable } from '#app/components/sheet/rows-table.tsx'
import { Said } from '#app/components/sheet/said.tsx'
import { LinkButton } from '#app/components/ui/button.tsx'
import { MarginNote, NoteList } from '#app/components/ui/margin-note.tsx'
import { Quantity, useUnits } from '#app/components/ui/number.tsx'
import { PageHead, Sheet } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import { describeCase } from '#app/modules/explore/case-words.ts'
import { resultColumns } from '#app/modules/explore/columns.ts'
import { type SheetPage, sheetPage } from '#app/modules/explore/explore.server.ts'
import { keyResultOf, type LimitStanding, limitStandings } from '#app/modules/explore/limits.ts'
import { rowHeat, sheetChecks, sheetInputs, sheetResults } from '#app/modules/explore/sheet.ts'
import { NOTE_LABELS } from '#engine/notes.ts'
import { formatQuantity } from '#engine/units.ts'
import type { Route } from './+types/point'
import { pointName, SafetyNote } from './explore/point-margin.tsx'

export async function loader({ params, request }: Route.LoaderArgs) {
  return sheetPage(params.studyId, params.point, new URL(request.url).searchParams.get('run'))
}

export function meta({ loaderData }: Route.MetaArgs) {
  return [
    {
      title: loaderData
        ? `${pointName(loaderData.sheet.point)} · ${loaderData.studyName} · Rowfall`
        : 'Rowfall',
    },
  ]
}

export default function Point({ loaderData, params }: Route.ComponentProps) {
  return <SheetOfPoint page={loaderData} studyId={params.studyId} />
}

function SheetOfPoint({ page, studyId }: { page: SheetPage; studyId: string }) {
  const units = useUnits()
  const { sheet, run, limits, cards } = page
  const { result, names } = sheet
  const bundle = sheet.case
  const standings = limitStandings(limits, (id) => keyResultOf(result, id))
  const missed = standings.filter(({ met }) => !met)
  const area = result.outsideArea
  const described = describeCase(bundle, names, page.swept, units)
  const entry = bundle.bundle.coolantEntry
  return (
    <div className="mx-auto grid w-full max-w-[84rem] gap-6 px-4 py-6 sm:px-7 sm:py-8 print:block print:p-0 print:*:mb-4">
      <PageHead
        over={`${page.studyName}, revision ${run.revision}, run of ${run.plannedAt.slice(0, 10)}`}
        title={
          <Said>
            {area === null
              ? `${pointName(sheet.point)} has no result: ${described}`
              : `${pointName(sheet.point)}${page.isBest ? ', the least of its run' : ''}: ${formatQuantity(area, 'area', units, { digits: 3 })}, ${described}`}
          </Said>
        }
        reason={
          standings.length === 0
            ? 'The study sets no limit.'
            : missed.length === 0
              ? `Meets ${standings.length === 1 ? 'its limit' : `all ${standings.length} limits`}.`
              : `Misses ${missed.map(({ label }) => label.toLowerCase()).join(' and ')}.`
        }
        acts={
          <>
            <LinkButton to={`/studies/${studyId}/explore?run=${run.id}&point=${sheet.point}`}>
              Back to Explore
            </LinkButton>
            <PrintButton />
          </>
        }
      />
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
            <BundleDrawing
              geometry={bundleGeometry(bundle)}
              rows={result.rows}
              name={pointName(sheet.point)}
              table={false}
            />
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
          <Checks page={page} />
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
      <Differences page={page} />
      <p className="text-note text-soft">
        {pointName(sheet.point)} of run {run.id}, revision {run.revision} of “{page.studyName}”, planned{' '}
        {run.plannedAt.slice(0, 16).replace('T', ' ')} UTC. Engine {sheet.engineVersion}
        {sheet.storedEngineVersion === sheet.engineVersion
          ? ''
          : `; the run was made by ${sheet.storedEngineVersion}`}
        . {sheet.recorded ? 'Recorded with the run.' : 'Computed from the run’s definition when opened.'}
      </p>
    </div>
  )
}

/** Sums that a reader can do again by calculator. */
function Checks({ page }: { page: SheetPage }) {
  const units = useUnits()
  const checks = sheetChecks(page.sheet.case, page.sheet.result, units)
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
      <div className="scroll-thin overflow-x-auto">
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

/** What the present engine finds otherwise than the one that made the run. */
function Differences({ page }: { page: SheetPage }) {
  const { differences, engineVersion, storedEngineVersion } = page.sheet
  if (differences.length === 0) return null
  const columns = new Map(resultColumns().map((column) => [column.id, column]))
  const listed = differences.flatMap((each) => {
    const column = columns.get(each.id)
    return column ? [{ ...each, column }] : []
  })
  return (
    <Sheet flush title={`Stored by engine ${storedEngineVersion}, and now by ${engineVersion}`}>
      <table className="data-table">
        <thead>
          <tr>
            <th scope="col">Result</th>
            <th scope="col" className="numeric">
              Stored
            </th>
            <th scope="col" className="numeric">
              Now
            </th>
          </tr>
        </thead>
        <tbody>
          {listed.map(({ id, stored, now, column }) => (
            <tr key={id}>
              <th scope="row">{column.label}</th>
              <td className="numeric">
                <Quantity value={stored} dimension={column.dimension} hint={column.hint} digits={6} />
              </td>
              <td className="numeric">
                <Quantity value={now} dimension={column.dimension} hint={column.hint} digits={6} />
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </Sheet>
  )
}
