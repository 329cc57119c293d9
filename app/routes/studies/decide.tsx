// Decide: the candidate of the latest run, what speaks for caution, other studies to set beside it, and what to hand on.
import { Form, Link } from 'react-router'
import { BundleDrawing } from '#app/components/bundle-drawing/bundle-drawing.tsx'
import { bundleGeometry } from '#app/components/bundle-drawing/layout.ts'
import { LimitNotes } from '#app/components/sheet/limit-notes.tsx'
import { Said } from '#app/components/sheet/said.tsx'
import { Button, DownloadLink, LinkButton } from '#app/components/ui/button.tsx'
import { MarginNote, NoteList } from '#app/components/ui/margin-note.tsx'
import { Digits, Quantity, useUnits } from '#app/components/ui/number.tsx'
import { EmptyState, MarginPage, PageHead, PlainPage, Scroll, Sheet } from '#app/components/ui/page.tsx'
import { projectContext } from '#app/http/context.ts'
import { chosenOf } from '#app/modules/comparisons/chosen.ts'
import { candidateOf, MOST_COMPARED, type RunCandidate } from '#app/modules/comparisons/comparison.server.ts'
import { describeCase } from '#app/modules/explore/case-words.ts'
import { keyResultOf, limitStandings } from '#app/modules/explore/limits.ts'
import { listStudies } from '#app/modules/studies/studies.server.ts'
import { NOTE_LABELS } from '#engine/notes.ts'
import { OBJECTIVE_LABELS } from '#engine/sweep/objective.ts'
import { formatQuantity } from '#engine/units.ts'
import type { Route } from './+types/decide'
import { PointFigures } from './explore/figures.tsx'
import { SafetyNote } from './explore/point-margin.tsx'

export const meta: Route.MetaFunction = () => [{ title: 'Decide · Rowfall' }]

export async function loader({ params, context }: Route.LoaderArgs) {
  const { projectId } = context.get(projectContext)
  const [candidate, studies] = await Promise.all([candidateOf(params.studyId), listStudies(projectId)])
  return {
    projectId,
    candidate,
    most: MOST_COMPARED,
    others: studies
      .filter(({ id, run }) => run && id !== params.studyId)
      .map(({ id, name, run }) => ({ id, name, state: run?.state })),
  }
}

export default function Decide({ loaderData, params }: Route.ComponentProps) {
  const { candidate } = loaderData
  return candidate.run === null ? (
    <PlainPage>
      <PageHead title="Nothing to decide on yet" />
      <EmptyState
        title="A decision rests on a run"
        acts={
          <LinkButton to={`/studies/${params.studyId}/run`} look="main">
            Go to Run
          </LinkButton>
        }
      >
        Once points are evaluated, the candidate stands here with its cautions, beside the studies it competes
        with.
      </EmptyState>
    </PlainPage>
  ) : (
    <DecideOnRun {...loaderData} candidate={candidate as RunCandidate} />
  )
}

type Others = Route.ComponentProps['loaderData']['others']

function DecideOnRun({
  candidate,
  others,
  projectId,
  most,
}: {
  candidate: RunCandidate
  others: Others
  projectId: string
  most: number
}) {
  const units = useUnits()
  const { best, refined, run, limits, objective } = candidate
  const chosen = chosenOf(candidate)
  const sheet = (point: number | 'refined') => `/studies/${candidate.id}/points/${point}?run=${run.id}`
  const standings = chosen ? limitStandings(limits, (id) => keyResultOf(chosen.result, id)) : []
  return (
    <MarginPage
      marginLabel="Limits, validity and cautions"
      margin={
        <>
          {chosen ? (
            <BundleDrawing
              geometry={bundleGeometry(chosen.case)}
              rows={chosen.result.rows}
              name="the candidate"
              table={false}
            />
          ) : null}
          <LimitNotes standings={standings} />
          <div className="grid gap-3.5">
            {chosen ? <SafetyNote names={chosen.names} /> : null}
            <MarginNote tone="attention" title="Screening results, not a certified design.">
              Pressure equipment, refrigerant charge and ventilation follow local codes and licensed practice.
            </MarginNote>
          </div>
          {chosen ? <NoteList notes={chosen.result.notes} labels={NOTE_LABELS} first={6} /> : null}
        </>
      }
    >
      <PageHead
        over={`Revision ${run.revision}, run of ${run.plannedAt.slice(0, 10)}`}
        title={
          <Said>
            {chosen
              ? `The candidate: ${formatQuantity(chosen.result.outsideArea, 'area', units, { digits: 3 })}, ${describeCase(
                  chosen.case,
                  chosen.names,
                  [],
                  units,
                )}`
              : 'No candidate: no point meets every limit'}
          </Said>
        }
        reason={
          chosen ? (
            refined?.improved ? (
              <>
                Refined from point {<Digits>{best?.point ?? 0}</Digits>} under the same limits, with whole
                tubes.
              </>
            ) : (
              `${OBJECTIVE_LABELS[objective]} is least at this point of the sweep.`
            )
          ) : (
            'Explore shows which limits stop the points, and the closest.'
          )
        }
        acts={
          <LinkButton
            to={`/studies/${candidate.id}/explore?run=${run.id}${chosen ? `&point=${chosen.point}` : ''}`}
          >
            Look at it in Explore
          </LinkButton>
        }
      />
      {chosen ? (
        <PointFigures
          label="The candidate"
          objective={objective}
          results={Object.fromEntries(FIGURES.map((id) => [id, keyResultOf(chosen.result, id)]))}
        />
      ) : null}
      {best && refined?.improved ? (
        <Sheet title="What refining gained">
          <p className="mb-3 max-w-[70ch] text-soft">{refined.statement}</p>
          <Scroll label="Best and refined point">
            <table className="data-table">
              <thead>
                <tr>
                  <th scope="col">Point</th>
                  <th scope="col" className="numeric">
                    Outside area
                  </th>
                  <th scope="col" className="numeric">
                    Tube length
                  </th>
                  <th scope="col" className="numeric">
                    Coolant velocity
                  </th>
                  <th scope="col" className="numeric">
                    Coolant pressure drop
                  </th>
                </tr>
              </thead>
              <tbody>
                {[best, refined].map(({ point, result }) => (
                  <tr key={point}>
                    <th scope="row">
                      <Link to={sheet(point)} className="link">
                        {point === 'refined' ? 'Refined' : `Best of the sweep, point ${point}`}
                      </Link>
                    </th>
                    <td className="numeric">
                      <Quantity value={result.outsideArea} dimension="area" digits={4} />
                    </td>
                    <td className="numeric">
                      <Quantity value={result.tubeLength} dimension="length" digits={4} />
                    </td>
                    <td className="numeric">
                      <Quantity value={result.coolant?.velocity} dimension="velocity" digits={4} />
                    </td>
                    <td className="numeric">
                      <Quantity value={result.coolant?.pressureDrop} dimension="pressure" digits={4} />
                    </td>
                  </tr>
                ))}
              </tbody>
            </table>
          </Scroll>
        </Sheet>
      ) : null}
      <Beside {...{ candidate, others, projectId, most }} />
      <Sheet title="Hand on">
        <p className="mb-3 max-w-[70ch] text-soft">
          Files carry SI units, full precision, the methods with their sources, and the cautions.
        </p>
        <div className="flex flex-wrap gap-2">
          <DownloadLink href={`/runs/${run.id}/workbook.xlsx`} download look="main">
            Workbook
          </DownloadLink>
          <DownloadLink href={`/runs/${run.id}/points.csv`} download>
            Points as CSV
          </DownloadLink>
          <DownloadLink href={`/studies/${candidate.id}/study.json`} download>
            Study file
          </DownloadLink>
          {chosen ? <LinkButton to={sheet(chosen.point)}>Calculation sheet</LinkButton> : null}
        </div>
      </Sheet>
    </MarginPage>
  )
}

const FIGURES = [
  'outsideArea',
  'tubeMass',
  'pumpingPower',
  'yearlyCost',
  'coolantPressureDrop',
  'vapourPressureDrop',
  'overallCoefficient',
  'tubeLength',
]

function Beside({
  candidate,
  others,
  projectId,
  most,
}: {
  candidate: RunCandidate
  others: Others
  projectId: string
  most: number
}) {
  return (
    <Sheet title="Set it beside other studies">
      {others.length === 0 ? (
        <p className="max-w-[70ch] text-soft">
          No other study of this project has a run. Copy this one, change one thing, run it, and compare.
        </p>
      ) : (
        <Form method="get" action={`/projects/${projectId}/compare`} className="grid gap-3">
          <input type="hidden" name="study" value={candidate.id} />
          <fieldset>
            <legend className="mb-1 text-note text-soft">Up to {most - 1} others</legend>
            <ul className="grid gap-1">
              {others.map(({ id, name }, i) => (
                <li key={id}>
                  <label className="inline-flex items-baseline gap-2">
                    <input
                      type="checkbox"
                      name="study"
                      value={id}
                      defaultChecked={i === 0}
                      className="size-4 translate-y-0.5"
                    />
                    {name}
                  </label>
                </li>
              ))}
            </ul>
          </fieldset>
          <Button type="submit" className="justify-self-start">
            Compare
          </Button>
        </Form>
      )}
    </Sheet>
  )
}
