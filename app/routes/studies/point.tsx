// One point’s calculation sheet, printable: its body, and what the present engine finds otherwise.
import { Link } from 'react-router'
import { BandTable } from '#app/components/sheet/band.tsx'
import { PrintButton } from '#app/components/sheet/print-button.tsx'
import { Said } from '#app/components/sheet/said.tsx'
import { LinkButton } from '#app/components/ui/button.tsx'
import { Quantity, useUnits } from '#app/components/ui/number.tsx'
import { PageHead, Sheet } from '#app/components/ui/page.tsx'
import { type ByOtherMethods, byOtherMethods } from '#app/modules/explore/alternatives.ts'
import { describeCase } from '#app/modules/explore/case-words.ts'
import { resultColumns } from '#app/modules/explore/columns.ts'
import { type SheetPage, sheetPage } from '#app/modules/explore/explore.server.ts'
import { keyResultOf, limitStandings } from '#app/modules/explore/limits.ts'
import { formatQuantity } from '#engine/units.ts'
import type { Route } from './+types/point'
import { pointName } from './explore/point-margin.tsx'
import { OtherMethods } from './point/other-methods.tsx'
import { SheetBody } from './sheet-body.tsx'

export async function loader({ params, request }: Route.LoaderArgs) {
  const search = new URL(request.url).searchParams
  const page = await sheetPage(params.studyId, params.point, search.get('run'))
  return {
    ...page,
    // Some twenty evaluations, for whoever asks.
    byOthers: search.has('methods') ? byOtherMethods(page.sheet.case, page.sheet.result) : null,
  }
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

function SheetOfPoint({
  page,
  studyId,
}: {
  page: SheetPage & { byOthers: ByOtherMethods | null }
  studyId: string
}) {
  const units = useUnits()
  const { sheet, run, limits, cards } = page
  const { result, names } = sheet
  const bundle = sheet.case
  const standings = limitStandings(limits, (id) => keyResultOf(result, id))
  const missed = standings.filter(({ met }) => !met)
  const area = result.outsideArea
  const described = describeCase(bundle, names, page.swept, units)
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
      <SheetBody
        bundle={bundle}
        result={result}
        names={names}
        standings={standings}
        cards={cards}
        name={pointName(sheet.point)}
      />
      {page.byOthers ? (
        <OtherMethods by={page.byOthers} />
      ) : (
        <p className="screen-only">
          <Link to={`?run=${run.id}&methods=1`} preventScrollReset className="link font-semibold">
            What other methods say of this point
          </Link>
        </p>
      )}
      {sheet.band ? (
        <Sheet title="How sure the number is">
          <BandTable band={sheet.band} />
        </Sheet>
      ) : null}
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
