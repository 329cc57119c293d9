// The optimum of a study: what it is, why it is the optimum, what its limits cost, and how sure the number is.
import { useEffect } from 'react'
import { data, Form, redirect, useNavigation, useRevalidator } from 'react-router'
import { BundleDrawing } from '#app/components/bundle-drawing/bundle-drawing.tsx'
import { bundleGeometry } from '#app/components/bundle-drawing/layout.ts'
import { BandLine, BandTable } from '#app/components/sheet/band.tsx'
import { LimitNotes } from '#app/components/sheet/limit-notes.tsx'
import { Said } from '#app/components/sheet/said.tsx'
import { Button, LinkButton, StatusButton } from '#app/components/ui/button.tsx'
import { FigureStrip } from '#app/components/ui/figure-strip.tsx'
import { MarginNote, NoteList } from '#app/components/ui/margin-note.tsx'
import { Digits, Quantity, useUnits } from '#app/components/ui/number.tsx'
import { EmptyState, MarginPage, PageHead, PlainPage, Sheet } from '#app/components/ui/page.tsx'
import { ProgressBar } from '#app/components/ui/progress.tsx'
import { When } from '#app/components/ui/when.tsx'
import { readForm } from '#app/http/body.ts'
import { viewerContext } from '#app/http/context.ts'
import { AppError, failureOf } from '#app/http/errors.ts'
import { can } from '#app/http/permissions.ts'
import { askAnalysis, cancelAnalysis } from '#app/modules/analyses/analyses.server.ts'
import { type OptimumPage, optimumPage } from '#app/modules/analyses/optimum-page.server.ts'
import { describeCase } from '#app/modules/explore/case-words.ts'
import { latestRevision } from '#app/modules/studies/studies.server.ts'
import { NOTE_LABELS } from '#engine/notes.ts'
import { LIMITS } from '#engine/sweep/limits.ts'
import { OBJECTIVE_LABELS } from '#engine/sweep/objective.ts'
import { formatQuantity } from '#engine/units.ts'
import { actingOf } from '../acting.ts'
import type { Route } from './+types/optimum'
import { SafetyNote } from './explore/point-margin.tsx'
import { Named, objectiveDimension } from './optimum/named.tsx'
import { BestWithEach, Certificate, FrontSheet, Neighbours, Robust, Worth } from './optimum/why.tsx'

export const meta: Route.MetaFunction = () => [{ title: 'Optimum · Rowfall' }]

export async function loader({ params, context }: Route.LoaderArgs) {
  return {
    page: await optimumPage(params.studyId),
    mayRun: can(context.get(viewerContext).role, 'study.run'),
  }
}

const FRONT_POINTS = 12

export async function action({ params, request, context }: Route.ActionArgs) {
  const { studyId } = params
  const form = await readForm(request)
  const acting = actingOf(context)
  const intent = form.get('intent')
  try {
    switch (intent) {
      case 'optimum':
      case 'front': {
        const revision = await latestRevision(studyId)
        if (!revision) throw new AppError('conflict', 'Nothing is defined yet; define the study first.')
        const of = { studyId, revisionId: revision.id }
        if (intent === 'optimum') await askAnalysis(of, 'optimum', {}, acting)
        else await askAnalysis(of, 'front', { axes: frontAxes(form), points: FRONT_POINTS }, acting)
        return redirect(`/studies/${studyId}/optimum`)
      }
      case 'cancel':
        await cancelAnalysis(studyId, String(form.get('analysis') ?? ''), acting)
        return redirect(`/studies/${studyId}/optimum`)
      default:
        throw new AppError('bad-request', 'This page does not know that act; reload it and try again.')
    }
  } catch (error) {
    const failure = failureOf(error)
    if (failure?.code !== 'conflict' && failure?.code !== 'invalid') throw error
    return data({ fault: failure.message }, 400)
  }
}

/** The two results of a front; only results that have a least. */
function frontAxes(form: FormData) {
  const axis = (name: string, usual: string) => {
    const result = form.get(name) ?? usual
    if (!FRONT_RESULTS.includes(String(result)))
      throw new AppError('invalid', 'Front: choose two of the results offered.')
    return { result: String(result) }
  }
  const axes = { x: axis('x', 'coolantPressureDrop'), y: axis('y', 'outsideArea') }
  if (axes.x.result === axes.y.result) throw new AppError('invalid', 'Front: choose two different results.')
  return axes
}

const FRONT_RESULTS = [
  'outsideArea',
  'tubeMass',
  'pumpingPower',
  'yearlyCost',
  'coolantPressureDrop',
  'vapourPressureDrop',
  'tubeLength',
]

/** An open analysis is looked at this often. */
const LOOK_MS = 1000

function useFollowed(open: boolean) {
  const { revalidate, state } = useRevalidator()
  useEffect(() => {
    if (!open || state !== 'idle') return
    const timer = setTimeout(() => void revalidate(), document.hidden ? 10 * LOOK_MS : LOOK_MS)
    return () => clearTimeout(timer)
  }, [open, state, revalidate])
}

export default function Optimum({ loaderData, actionData, params }: Route.ComponentProps) {
  const { page, mayRun } = loaderData
  const fault = actionData && 'fault' in actionData ? actionData.fault : null
  useFollowed(page.kind === 'study' && ((page.analysis?.open || page.front?.open) ?? false))
  if (page.kind === 'undefined')
    return (
      <PlainPage>
        <PageHead title="Nothing to optimise yet" />
        <EmptyState
          title="An optimum is searched once the study is defined"
          acts={
            <LinkButton to={`/studies/${params.studyId}/define`} look="main">
              Go to Define
            </LinkButton>
          }
        />
      </PlainPage>
    )
  const refused = fault ? (
    <MarginNote tone="failed" title="It was not started.">
      {fault}
    </MarginNote>
  ) : null
  if (page.found) return <Found page={page} found={page.found} mayRun={mayRun} refused={refused} />
  const { analysis } = page
  return (
    <PlainPage>
      <PageHead
        over={`Revision ${page.revision}`}
        title={
          analysis?.open
            ? 'The optimum is being worked out'
            : page.infeasibility
              ? 'Nothing meets every limit'
              : analysis?.state === 'failed'
                ? 'The search failed'
                : 'The optimum has not been searched yet'
        }
        reason={
          page.infeasibility?.statement ??
          analysis?.fault ??
          'Between and beside the swept points: all combinations of whole numbers and choices, and every value in between of what can take any value.'
        }
      />
      {refused}
      {page.infeasibility ? <Relaxations infeasibility={page.infeasibility} /> : null}
      {analysis?.open ? (
        <Following analysis={analysis} mayRun={mayRun} />
      ) : mayRun ? (
        <Ask intent="optimum" look="main">
          {analysis ? 'Search again' : `Find the least ${OBJECTIVE_LABELS[page.objective].toLowerCase()}`}
        </Ask>
      ) : (
        <p className="text-soft">An engineer of the project can start the search.</p>
      )}
    </PlainPage>
  )
}

const STAGES: Record<string, string> = {
  search: 'combinations bounded or searched',
  certificate: 'Checking on dense grids, pricing the limits, drawing samples',
  robust: 'combinations lengthened until nine of ten samples meet the duty',
  infeasible: 'Nothing meets every limit; finding out which one to relax',
  front: 'points of the front',
}

function Following({
  analysis,
  mayRun,
}: {
  analysis: { id: string; progress: { stage: string; done: number; of: number } | null }
  mayRun: boolean
}) {
  const { progress } = analysis
  return (
    <div className="grid max-w-2xl gap-3" role="status">
      <ProgressBar done={progress?.done ?? 0} total={progress?.of || 1} label="How far the search is" />
      <p className="text-soft">
        {progress === null ? (
          'Waiting for a worker.'
        ) : progress.of > 1 ? (
          <>
            <Digits>{progress.done}</Digits> of <Digits>{progress.of}</Digits> {STAGES[progress.stage]}.
          </>
        ) : (
          `${STAGES[progress.stage]}.`
        )}
      </p>
      {mayRun ? (
        <Form method="post">
          <input type="hidden" name="analysis" value={analysis.id} />
          <Button type="submit" name="intent" value="cancel" small>
            Cancel it
          </Button>
        </Form>
      ) : null}
    </div>
  )
}

function Ask({
  intent,
  look,
  children,
}: {
  intent: 'optimum' | 'front'
  look?: 'main'
  children: React.ReactNode
}) {
  const busy = useNavigation().formData?.get('intent') === intent
  return (
    <Form method="post">
      <StatusButton name="intent" value={intent} look={look} busy={busy} working="Starting…">
        {children}
      </StatusButton>
    </Form>
  )
}

function Relaxations({ infeasibility }: { infeasibility: NonNullable<OptimumPage['infeasibility']> }) {
  const info = (id: string) => LIMITS.find((limit) => limit.id === id)
  if (infeasibility.relaxations.length === 0) return null
  return (
    <Sheet title="Any one of these is enough" className="max-w-3xl">
      <table className="data-table">
        <thead>
          <tr>
            <th scope="col">Limit</th>
            <th scope="col" className="numeric">
              Now
            </th>
            <th scope="col" className="numeric">
              Relaxed to
            </th>
          </tr>
        </thead>
        <tbody>
          {infeasibility.relaxations.map(({ id, side, from, to }) => (
            <tr key={`${id}${side}`}>
              <th scope="row">
                {info(id)?.label}, {side === 'max' ? 'at most' : 'at least'}
              </th>
              <td className="numeric">
                <Quantity value={from} dimension={info(id)?.dimension ?? 'none'} digits={4} />
              </td>
              <td className="numeric">
                <Quantity value={to} dimension={info(id)?.dimension ?? 'none'} digits={4} />
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </Sheet>
  )
}

type FoundOptimum = NonNullable<OptimumPage['found']>

function Found({
  page,
  found,
  mayRun,
  refused,
}: {
  page: OptimumPage
  found: FoundOptimum
  mayRun: boolean
  refused: React.ReactNode
}) {
  const units = useUnits()
  const { analysis, objective } = page
  const dimension = objectiveDimension(objective)
  const limits = found.binding.map((id) => LIMITS.find((limit) => limit.id === id)?.label.toLowerCase() ?? id)
  const stale = analysis !== null && analysis.revision !== page.revision
  const { searched } = found
  return (
    <MarginPage
      marginLabel="Limits, validity and cautions"
      margin={
        <>
          <BundleDrawing
            geometry={bundleGeometry(found.case)}
            rows={found.result.rows}
            name="the optimum"
            table={false}
          />
          <LimitNotes standings={found.standings} />
          <div className="grid gap-3.5">
            <SafetyNote names={found.names} />
            <MarginNote tone="attention" title="Screening results, not a certified design.">
              Pressure equipment, refrigerant charge and ventilation follow local codes and licensed practice.
            </MarginNote>
          </div>
          <NoteList notes={found.result.notes} labels={NOTE_LABELS} first={5} />
        </>
      }
    >
      <PageHead
        over={
          <>
            Revision {analysis?.revision}, engine {analysis?.engineVersion}
            {analysis?.endedAt ? (
              <>
                , <When at={analysis.endedAt} />
              </>
            ) : null}
            {stale ? '. The definition has changed since.' : ''}
          </>
        }
        title={
          <Said>
            {`Optimum: ${formatQuantity(found.objective, dimension, units, { digits: 4 })}, ${describeCase(
              found.case,
              found.names,
              found.inputs.map(({ path }) => path),
              units,
            )}`}
          </Said>
        }
        reason={
          <>
            {limits.length === 0
              ? 'No limit binds.'
              : `${limits.join(' and ').replace(/^./, (first) => first.toUpperCase())} ${limits.length === 1 ? 'binds' : 'bind'}.`}{' '}
            {found.band ? <BandLine band={found.band} /> : null}
          </>
        }
        acts={mayRun && !analysis?.open ? <Ask intent="optimum">Search again</Ask> : null}
      />
      {refused}
      {analysis?.open ? <Following analysis={analysis} mayRun={mayRun} /> : null}
      <FigureStrip
        label="The optimum"
        figures={[
          {
            label: OBJECTIVE_LABELS[objective],
            value: <Quantity value={found.objective} dimension={dimension} digits={4} />,
          },
          {
            label: 'Tube length',
            value: <Quantity value={found.result.tubeLength} dimension="length" digits={4} />,
          },
          {
            label: 'Overall coefficient',
            value: (
              <Quantity
                value={found.result.overallCoefficient}
                dimension="heatTransferCoefficient"
                digits={4}
              />
            ),
          },
          {
            label: 'Combinations',
            value: <Digits>{searched.combinations}</Digits>,
            detail: (
              <>
                <Digits>{searched.solved}</Digits> searched, the others bounded away
              </>
            ),
          },
        ]}
      />
      <Sheet title="Where it is">
        <table className="data-table max-w-2xl">
          <tbody>
            {found.inputs.map(({ path, label, shown, atEnd }) => (
              <tr key={path}>
                <th scope="row">{label}</th>
                <td className="numeric">
                  <Named shown={shown} />
                </td>
                <td className="text-soft">
                  {atEnd === null
                    ? ''
                    : atEnd === 'high'
                      ? 'upper end of its range'
                      : 'lower end of its range'}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </Sheet>
      <Worth worth={found.worth} objective={objective} />
      <Neighbours neighbours={found.neighbours} objective={objective} />
      <BestWithEach best={found.best} objective={objective} />
      <FrontSheet
        front={page.front}
        stale={page.front !== null && page.front.revision !== page.revision}
        ask={mayRun ? <Ask intent="front">{page.front ? 'Draw it again' : 'Draw the front'}</Ask> : null}
        following={page.front?.open ? <Following analysis={page.front} mayRun={mayRun} /> : null}
      />
      {found.band ? (
        <Sheet title="How sure the number is">
          <BandTable band={found.band} />
        </Sheet>
      ) : null}
      {found.robust ? <Robust robust={found.robust} objective={objective} /> : null}
      <Certificate certificate={found.certificate} searched={searched} rerated={found.rerated} />
    </MarginPage>
  )
}
