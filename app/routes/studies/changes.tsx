// What changed between two runs of a study: its definition, its best points, and where both evaluated the same points,
// every number that differs.
import { Form, Link } from 'react-router'
import { Button } from '#app/components/ui/button.tsx'
import { SelectField } from '#app/components/ui/field.tsx'
import { Digits, Quantity, useUnits } from '#app/components/ui/number.tsx'
import { significant } from '#app/components/ui/number-format.ts'
import { EmptyState, PageHead, PlainPage, Scroll, Sheet } from '#app/components/ui/page.tsx'
import { AppError } from '#app/http/errors.ts'
import { describeCase } from '#app/modules/explore/case-words.ts'
import { resultColumns } from '#app/modules/explore/columns.ts'
import { keyResultOf } from '#app/modules/explore/limits.ts'
import { caseNames } from '#app/modules/explore/names.server.ts'
import { runChanges } from '#app/modules/points/changes.server.ts'
import { definitionChanges } from '#app/modules/points/definition-changes.ts'
import { pointSheet } from '#app/modules/points/points.server.ts'
import { listRuns, type RunListing } from '#app/modules/runs/runs.server.ts'
import { getRevision } from '#app/modules/studies/studies.server.ts'
import { OUTCOMES } from '#engine/bundle/key-results.ts'
import { formatQuantity } from '#engine/units.ts'
import type { Route } from './+types/changes'

export const meta: Route.MetaFunction = () => [{ title: 'What changed · Rowfall' }]

export async function loader({ params, request }: Route.LoaderArgs) {
  const search = new URL(request.url).searchParams
  const runs = (await listRuns(params.studyId)).filter(({ state }) => state === 'done')
  const chosen = (name: string, usual: RunListing | undefined) => {
    const id = search.get(name)
    if (id === null) return usual
    const run = runs.find((each) => each.id === id)
    if (!run) throw new AppError('not-found', 'This study has no such finished run.')
    return run
  }
  const to = chosen('to', runs[0])
  const from = chosen(
    'from',
    runs.find(({ id }) => id !== to?.id),
  )
  const listed = runs.map(({ id, revision, plannedAt, engineVersion }) => ({
    value: id,
    label: `revision ${revision}, ${plannedAt.toISOString().slice(0, 16).replace('T', ' ')}, engine ${engineVersion}`,
  }))
  if (!from || !to || from.id === to.id) return { listed, from: from?.id, to: to?.id, changes: null }
  const sameRevision = from.revisionId === to.revisionId
  const kept = from.pointsDroppedAt === null && to.pointsDroppedAt === null
  const [before, after, bestBefore, bestAfter, points] = await Promise.all([
    getRevision(from.revisionId),
    getRevision(to.revisionId),
    bestOf(from),
    bestOf(to),
    sameRevision && kept ? runChanges(from.id, to.id) : null,
  ])
  return {
    listed,
    from: from.id,
    to: to.id,
    changes: {
      definition: sameRevision ? [] : definitionChanges(before.definition, after.definition),
      revisions: [from.revision, to.revision],
      engines: [from.engineVersion, to.engineVersion],
      sameContent: from.contentHash === to.contentHash,
      best: [bestBefore, bestAfter],
      points,
    },
  }
}

async function bestOf(run: RunListing) {
  if (run.bestPoint === null) return null
  const { case: bundle, result } = await pointSheet(run.id, run.bestPoint)
  const values = Object.fromEntries(BEST.map((id) => [id, keyResultOf(result, id)]))
  return { point: run.bestPoint, case: bundle, names: caseNames(bundle), values }
}

const BEST = [
  'outsideArea',
  'tubeLength',
  'tubeMass',
  'yearlyCost',
  'coolantPressureDrop',
  'vapourPressureDrop',
]

const columns = new Map(resultColumns().map((column) => [column.id, column]))
const outcomeText = (code: string) => OUTCOMES.find((outcome) => outcome.code === code)?.text ?? code

export default function Changes({ loaderData, params }: Route.ComponentProps) {
  const { listed, changes } = loaderData
  const units = useUnits()
  if (changes === null)
    return (
      <PlainPage>
        <PageHead title="What changed between two runs" />
        <EmptyState title="There are not yet two finished runs of this study">
          Change the definition and run it again, or run it again with a later engine; the difference then
          stands here.
        </EmptyState>
      </PlainPage>
    )
  const [before, after] = changes.best
  const areas = [before?.values.outsideArea ?? null, after?.values.outsideArea ?? null]
  const sameRevision = changes.revisions[0] === changes.revisions[1]
  return (
    <PlainPage>
      <PageHead
        title={headline(changes.sameContent && sameRevision, areas, (area) =>
          formatQuantity(area, 'area', units, { digits: 3 }),
        )}
        reason={
          sameRevision
            ? `Both are of revision ${changes.revisions[0]}, by engine ${changes.engines.join(' and ')}.`
            : `Revision ${changes.revisions.join(' and ')}, by engine ${changes.engines.join(' and ')}: ${changes.definition.length} ${changes.definition.length === 1 ? 'place differs' : 'places differ'}.`
        }
      />
      <Form method="get" className="screen-only flex flex-wrap items-end gap-3">
        <SelectField label="From" name="from" defaultValue={loaderData.from} options={listed} />
        <SelectField label="To" name="to" defaultValue={loaderData.to} options={listed} />
        <Button type="submit">Show</Button>
      </Form>
      {changes.definition.length > 0 ? (
        <Sheet title="Definition">
          <Scroll label="What the definitions say differently">
            <table className="data-table">
              <thead>
                <tr>
                  <th scope="col">Place</th>
                  <th scope="col">Before</th>
                  <th scope="col">After</th>
                </tr>
              </thead>
              <tbody>
                {changes.definition.map(({ path, before: had, after: has }) => (
                  <tr key={path}>
                    <th scope="row">{path}</th>
                    <td className="[overflow-wrap:anywhere]">
                      {had ?? <span className="text-soft">absent</span>}
                    </td>
                    <td className="[overflow-wrap:anywhere]">
                      {has ?? <span className="text-soft">absent</span>}
                    </td>
                  </tr>
                ))}
              </tbody>
            </table>
          </Scroll>
        </Sheet>
      ) : null}
      <Sheet title="Best points">
        <Scroll label="Best points before and after">
          <table className="data-table">
            <thead>
              <tr>
                <th scope="col">Result</th>
                <th scope="col" className="numeric">
                  Before
                </th>
                <th scope="col" className="numeric">
                  After
                </th>
              </tr>
            </thead>
            <tbody>
              <tr>
                <th scope="row">Point</th>
                {[before, after].map((best, k) => (
                  <td key={k === 0 ? 'before' : 'after'} className="numeric">
                    {best ? (
                      <Link
                        className="link"
                        to={`/studies/${params.studyId}/points/${best.point}?run=${k === 0 ? loaderData.from : loaderData.to}`}
                      >
                        {best.point}: {describeCase(best.case, best.names, ['fluid'], units)}
                      </Link>
                    ) : (
                      'nothing meets every limit'
                    )}
                  </td>
                ))}
              </tr>
              {BEST.map((id) => {
                const column = columns.get(id)
                return column ? (
                  <tr key={id}>
                    <th scope="row">{column.label}</th>
                    {[before, after].map((best, k) => (
                      <td key={k === 0 ? 'before' : 'after'} className="numeric">
                        <Quantity
                          value={best?.values[id]}
                          dimension={column.dimension}
                          hint={column.hint}
                          digits={5}
                        />
                      </td>
                    ))}
                  </tr>
                ) : null
              })}
            </tbody>
          </table>
        </Scroll>
      </Sheet>
      {changes.points ? (
        <PointChanges points={changes.points} studyId={params.studyId} to={loaderData.to} />
      ) : null}
    </PlainPage>
  )
}

function headline(same: boolean, [before, after]: (number | null)[], say: (area: number) => string): string {
  if (same) return 'Nothing changed: both runs have the same content'
  if (before === null || after === null)
    return after === null && before !== null
      ? 'Nothing meets every limit any more'
      : after !== null
        ? `Something meets every limit now: ${say(after)}`
        : 'Nothing met every limit before, and nothing does now'
  if (Math.abs(after / before - 1) < 1e-6) return `The least area is the same: ${say(after)}`
  const percent = significant(Math.abs(after / before - 1) * 100, 2)
  return `The least area ${after < before ? 'fell' : 'rose'} by ${percent} %: from ${say(before)} to ${say(after)}`
}

function PointChanges({
  points,
  studyId,
  to,
}: {
  points: NonNullable<NonNullable<Route.ComponentProps['loaderData']['changes']>['points']>
  studyId: string
  to: string | undefined
}) {
  if (points.columns.length === 0)
    return (
      <p className="text-soft">
        All <Digits>{points.points}</Digits> points have the same numbers in both.
      </p>
    )
  return (
    <Sheet title="Point by point">
      {points.outcomes.length > 0 ? (
        <ul className="mb-3 grid gap-1">
          {points.outcomes.map(({ before, after, points: count }) => (
            <li key={`${before} ${after}`}>
              <Digits>{count}</Digits> {count === 1 ? 'point' : 'points'}: {outcomeText(before)}, now{' '}
              {outcomeText(after)}.
            </li>
          ))}
        </ul>
      ) : null}
      <Scroll label="Results that changed">
        <table className="data-table">
          <thead>
            <tr>
              <th scope="col">Result</th>
              <th scope="col" className="numeric">
                Points changed
              </th>
              <th scope="col" className="numeric">
                Largest change
              </th>
              <th scope="col">At</th>
            </tr>
          </thead>
          <tbody>
            {points.columns.map(({ id, points: count, largest }) => (
              <tr key={id}>
                <th scope="row">{columns.get(id)?.label ?? id}</th>
                <td className="numeric">
                  <Digits>{count}</Digits>
                </td>
                <td className="numeric">{largest ? `${significant(largest.share * 100, 2)} %` : '–'}</td>
                <td>
                  {largest ? (
                    <Link to={`/studies/${studyId}/points/${largest.point}?run=${to}`} className="link">
                      point {largest.point}
                    </Link>
                  ) : null}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </Scroll>
    </Sheet>
  )
}
