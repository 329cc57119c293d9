// Decide: the candidate of the latest run, what speaks for caution, its review, other studies to set beside it, and
// what to hand on.
import { data, Form, Link, redirect } from 'react-router'
import { BundleDrawing } from '#app/components/bundle-drawing/bundle-drawing.tsx'
import { bundleGeometry } from '#app/components/bundle-drawing/layout.ts'
import { BandLine } from '#app/components/sheet/band.tsx'
import { LimitNotes } from '#app/components/sheet/limit-notes.tsx'
import { Said } from '#app/components/sheet/said.tsx'
import { Comments } from '#app/components/study/comments.tsx'
import { Button, DownloadLink, LinkButton } from '#app/components/ui/button.tsx'
import { MarginNote, NoteList } from '#app/components/ui/margin-note.tsx'
import { Digits, Quantity, useUnits } from '#app/components/ui/number.tsx'
import { EmptyState, MarginPage, PageHead, PlainPage, Scroll, Sheet } from '#app/components/ui/page.tsx'
import { readForm } from '#app/http/body.ts'
import { projectContext, viewerContext } from '#app/http/context.ts'
import { AppError, failureOf } from '#app/http/errors.ts'
import { can, type Permission } from '#app/http/permissions.ts'
import { addComment, listComments, withdrawComment } from '#app/modules/comments/comments.server.ts'
import { chosenOf } from '#app/modules/comparisons/chosen.ts'
import { candidateOf, MOST_COMPARED, type RunCandidate } from '#app/modules/comparisons/comparison.server.ts'
import { describeCase } from '#app/modules/explore/case-words.ts'
import { keyResultOf, limitStandings } from '#app/modules/explore/limits.ts'
import { listMembers } from '#app/modules/projects/projects.server.ts'
import { baselineOf } from '#app/modules/reviews/records.server.ts'
import {
  acceptReview,
  askReview,
  readPoint,
  returnReview,
  reviewsOfStudy,
  withdrawReview,
} from '#app/modules/reviews/reviews.server.ts'
import { listStudies } from '#app/modules/studies/studies.server.ts'
import { NOTE_LABELS } from '#engine/notes.ts'
import { OBJECTIVE_LABELS } from '#engine/sweep/objective.ts'
import { formatQuantity } from '#engine/units.ts'
import { actingOf } from '../acting.ts'
import type { Route } from './+types/decide'
import { AgainstBaseline } from './decide/against-baseline.tsx'
import { ReviewSheet } from './decide/review-sheet.tsx'
import { PointFigures } from './explore/figures.tsx'
import { SafetyNote } from './explore/point-margin.tsx'

export const meta: Route.MetaFunction = () => [{ title: 'Decide · Rowfall' }]

export async function loader({ params, context }: Route.LoaderArgs) {
  const { projectId } = context.get(projectContext)
  const viewer = context.get(viewerContext)
  const [candidate, studies, reviews, comments, members, baseline] = await Promise.all([
    candidateOf(params.studyId),
    listStudies(projectId),
    reviewsOfStudy(params.studyId),
    listComments({ studyId: params.studyId }, projectId),
    listMembers(projectId),
    baselineOf(projectId),
  ])
  return {
    projectId,
    candidate,
    reviews,
    comments,
    members: members.map(({ id, name }) => ({ id, name })),
    viewer: {
      id: viewer.personId,
      mayAsk: can(viewer.role, 'study.edit'),
      mayDecide: can(viewer.role, 'study.accept'),
    },
    baseline: baseline && {
      id: baseline.id,
      number: baseline.number,
      studyName: baseline.studyName,
      own: baseline.studyId === params.studyId,
      result: baseline.content.result,
      objective: baseline.content.objective,
    },
    most: MOST_COMPARED,
    others: studies
      .filter(({ id, run }) => run && id !== params.studyId)
      .map(({ id, name, run }) => ({ id, name, state: run?.state })),
  }
}

export async function action({ request, params, context }: Route.ActionArgs) {
  const { studyId } = params
  const { projectId } = context.get(projectContext)
  const { role } = context.get(viewerContext)
  const acting = actingOf(context)
  const form = await readForm(request)
  const text = (name: string) => String(form.get(name) ?? '')
  const demand = (permission: Permission) => {
    if (!can(role, permission))
      throw new AppError('forbidden', `Your role, ${role}, does not include this; ask a lead of the project.`)
  }
  const intent = text('intent')
  try {
    switch (intent) {
      case 'ask':
        demand('study.edit')
        await askReview(
          studyId,
          { runId: text('run'), point: readPoint(text('point')), note: text('note') },
          acting,
        )
        return null
      case 'withdraw':
        demand('study.edit')
        await withdrawReview(studyId, acting)
        return null
      case 'return':
        demand('study.accept')
        await returnReview(studyId, text('reason'), acting)
        return null
      case 'accept':
        demand('study.accept')
        return redirect(
          `/projects/${projectId}/records/${await acceptReview(studyId, text('reason'), acting)}`,
        )
      case 'comment':
        await addComment({ studyId }, projectId, text('body'), acting)
        return null
      case 'withdrawComment':
        await withdrawComment(text('comment'), projectId, acting)
        return null
      default:
        throw new AppError('bad-request', 'This page does not know that act; reload it and try again.')
    }
  } catch (error) {
    const failure = failureOf(error)
    if (failure?.code !== 'invalid' && failure?.code !== 'conflict') throw error
    return data({ intent, fault: failure.message, typed: text('reason') || text('note') }, 400)
  }
}

export default function Decide({ loaderData, actionData, params }: Route.ComponentProps) {
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
    <DecideOnRun
      {...loaderData}
      candidate={candidate as RunCandidate}
      refused={actionData && 'fault' in actionData ? actionData : null}
    />
  )
}

type Data = Route.ComponentProps['loaderData']
type Others = Data['others']

function DecideOnRun({
  candidate,
  others,
  projectId,
  most,
  reviews,
  comments,
  members,
  viewer,
  baseline,
  refused,
}: Omit<Data, 'candidate'> & {
  candidate: RunCandidate
  refused: { intent: string; fault: string; typed: string } | null
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
            <>
              {refined?.improved ? (
                <>
                  Refined from point {<Digits>{best?.point ?? 0}</Digits>} under the same limits, with whole
                  tubes.
                </>
              ) : (
                `${OBJECTIVE_LABELS[objective]} is least at this point of the sweep.`
              )}{' '}
              {chosen.band ? (
                <>
                  Under the methods’ scatter: <BandLine band={chosen.band} />.
                </>
              ) : null}
            </>
          ) : (
            'Explore shows which limits stop the points, and the closest.'
          )
        }
        acts={
          <>
            <LinkButton
              to={`/studies/${candidate.id}/explore?run=${run.id}${chosen ? `&point=${chosen.point}` : ''}`}
            >
              Look at it in Explore
            </LinkButton>
            <LinkButton to={`/studies/${candidate.id}/optimum`}>The optimum, and why</LinkButton>
          </>
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
      {chosen && baseline ? (
        <AgainstBaseline baseline={baseline} projectId={projectId} result={chosen.result} />
      ) : null}
      <ReviewSheet
        reviews={reviews}
        viewer={viewer}
        projectId={projectId}
        refused={refused}
        ready={
          run.state === 'done'
            ? {
                runId: run.id,
                points: [
                  ...(refined ? [{ value: 'refined', label: 'the refined point' }] : []),
                  ...(best
                    ? [{ value: String(best.point), label: `point ${best.point}, best of the sweep` }]
                    : []),
                ],
                chosen: String(chosen?.point ?? ''),
              }
            : null
        }
      />
      <Comments comments={comments} members={members} viewerId={viewer.id} />
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
