// Measured points of a project: uploaded, read as cases, set against what is predicted, and fitted.
import { data, Form, Link, redirect, useNavigation } from 'react-router'
import { ParityPlot } from '#app/components/charts/parity-plot.tsx'
import { Button, LinkButton } from '#app/components/ui/button.tsx'
import { SelectField, TextField } from '#app/components/ui/field.tsx'
import { MarginNote } from '#app/components/ui/margin-note.tsx'
import { useUnits } from '#app/components/ui/number.tsx'
import { plural } from '#app/components/ui/number-format.ts'
import { EmptyState, PageHead, PlainPage, Scroll, Sheet } from '#app/components/ui/page.tsx'
import { useFaultFocus } from '#app/components/ui/use-fault-focus.ts'
import { When } from '#app/components/ui/when.tsx'
import { readForm } from '#app/http/body.ts'
import { projectContext, viewerContext } from '#app/http/context.ts'
import { AppError, failureOf } from '#app/http/errors.ts'
import { can } from '#app/http/permissions.ts'
import {
  applyFit,
  benchParity,
  deleteBenchData,
  fitBenchData,
  getBenchData,
  listBenchData,
  mapBenchData,
  removeCorrection,
  studyCorrections,
  uploadBenchData,
} from '#app/modules/bench-data/bench-data.server.ts'
import {
  IN_CELL,
  isMeasured,
  MEASURED,
  MOST_FITTED,
  TARGETS,
  UNITS,
} from '#app/modules/bench-data/columns.ts'
import { listStudies } from '#app/modules/studies/studies.server.ts'
import { KEY_RESULT_INDEX, KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { MULTIPLIER_GROUPS } from '#engine/bundle/multipliers.ts'
import { displayUnit, toDisplay } from '#engine/units.ts'
import { actingOf } from '../acting.ts'
import type { Route } from './+types/bench-data'

export const meta: Route.MetaFunction = () => [{ title: 'Bench data · Rowfall' }]

export const handle = {
  crumbs: ({ project }: Route.ComponentProps['loaderData']) => [
    { label: project.name, to: `/projects/${project.id}` },
    { label: 'Bench data', to: `/projects/${project.id}/bench-data` },
  ],
}

export async function loader({ params, request, context }: Route.LoaderArgs) {
  const search = new URL(request.url).searchParams
  const { projectId, projectName } = context.get(projectContext)
  const viewer = context.get(viewerContext)
  const benchId = search.get('data')
  const [bench, listed, studies] = await Promise.all([
    benchId === null ? null : getBenchData(projectId, benchId),
    listBenchData(projectId),
    listStudies(projectId),
  ])
  const asked = search.get('result') ?? bench?.fit?.result ?? ''
  const having = MEASURED.filter((id) => bench?.points.some(({ measured }) => measured[id] !== undefined))
  const result = isMeasured(asked) && having.includes(asked) ? asked : having[0]
  return {
    project: { id: params.projectId, name: projectName },
    mayEdit: can(viewer.role, 'study.edit'),
    listed,
    bases: studies.filter(({ revision }) => revision !== null).map(({ id, name }) => ({ id, name })),
    studies: bench?.fit ? await studyCorrections(studies, viewer.personId) : [],
    bench: bench && {
      id: bench.id,
      name: bench.name,
      fileName: bench.fileName,
      own: bench.uploadedBy === viewer.personId,
      mapping: bench.mapping,
      points: bench.points.length,
      having,
      fit: bench.fit,
      parity: result ? await benchParity(bench, result) : null,
    },
  }
}

export async function action({ params, request, context }: Route.ActionArgs) {
  const { projectId } = params
  const acting = actingOf(context)
  const form = await readForm(request)
  const text = (name: string) => {
    const value = form.get(name)
    return typeof value === 'string' ? value : ''
  }
  const id = new URL(request.url).searchParams.get('data') ?? ''
  const intent = text('intent')
  const page = `/projects/${projectId}/bench-data`
  try {
    switch (intent) {
      case 'upload': {
        const file = form.get('file')
        const made = await uploadBenchData(
          projectId,
          {
            name: text('name'),
            studyId: text('study'),
            fileName: file instanceof File ? file.name : '',
            file: Buffer.from(file instanceof File ? await file.arrayBuffer() : new ArrayBuffer()),
          },
          acting,
        )
        return redirect(`${page}?data=${made.id}`)
      }
      case 'columns': {
        const columns = []
        for (let i = 0; form.has(`target.${i}`) && columns.length < 100; i++)
          columns.push({ target: text(`target.${i}`), unit: text(`unit.${i}`) })
        const { faults } = await mapBenchData(projectId, id, { columns, length: text('length') }, acting)
        return faults.length > 0 ? data({ intent, faults, told: '' }, 400) : redirect(`${page}?data=${id}`)
      }
      case 'fit': {
        const result = text('result')
        if (!isMeasured(result)) throw new AppError('invalid', 'Measured result: choose one of the list.')
        await fitBenchData(projectId, id, result, text('group'), acting)
        return redirect(`${page}?data=${id}`)
      }
      case 'apply': {
        const name = await applyFit(projectId, id, text('study'), acting)
        return {
          intent,
          faults: [],
          told: `The correction now stands in your draft of ${name}; run it to have it in its results.`,
        }
      }
      case 'unapply': {
        const name = await removeCorrection(projectId, text('correction'), text('study'), acting)
        return { intent, faults: [], told: `The correction is taken out of your draft of ${name}.` }
      }
      case 'delete':
        await deleteBenchData(projectId, id, acting)
        return redirect(page)
      default:
        throw new AppError('bad-request', 'This page does not know that act; reload it and try again.')
    }
  } catch (error) {
    const failure = failureOf(error)
    if (!failure || !['invalid', 'conflict', 'too-large'].includes(failure.code)) throw error
    return data({ intent, faults: [failure.message], told: '' }, 400)
  }
}

type Data = Route.ComponentProps['loaderData']
type BenchView = NonNullable<Data['bench']>
type Answer = { intent: string; faults: string[]; told: string } | undefined

const labelOf = (id: keyof typeof KEY_RESULT_INDEX) => KEY_RESULTS[KEY_RESULT_INDEX[id]].label

export default function BenchData({ loaderData, actionData }: Route.ComponentProps) {
  const { bench, project, listed, mayEdit } = loaderData
  const answer: Answer = actionData
  if (bench) return <OneBench {...{ loaderData, bench, answer }} />
  return (
    <PlainPage>
      <PageHead
        title={
          listed.length === 0
            ? 'No measured points yet'
            : `${listed.length} ${plural(listed.length, 'set', 'sets')} of measured points`
        }
        reason="What a test stand measured, beside what is predicted for it; a fitted factor can then correct a study."
      />
      {listed.length > 0 ? (
        <Sheet title="Measured points">
          <ul className="grid gap-1">
            {listed.map(({ id, name, fileName, uploadedBy, uploadedAt }) => (
              <li key={id}>
                <Link to={`/projects/${project.id}/bench-data?data=${id}`} className="link font-semibold">
                  {name}
                </Link>{' '}
                <span className="text-note text-soft">
                  {fileName}, {uploadedBy}, <When at={uploadedAt} />
                </span>
              </li>
            ))}
          </ul>
        </Sheet>
      ) : null}
      {mayEdit ? <Upload bases={loaderData.bases} answer={answer} /> : null}
    </PlainPage>
  )
}

/** Faults of one form, together above its button. */
function Faults({ answer, of }: { answer: Answer; of: string }) {
  if (answer?.intent !== of || answer.faults.length === 0) return null
  return (
    <div role="alert">
      <MarginNote tone="failed" title="This was not done.">
        <ul className="grid gap-1">
          {answer.faults.map((fault) => (
            <li key={fault}>{fault}</li>
          ))}
        </ul>
      </MarginNote>
    </div>
  )
}

function Upload({ bases, answer }: { bases: Data['bases']; answer: Answer }) {
  const refused = answer?.intent === 'upload' ? answer.faults[0] : undefined
  const form = useFaultFocus(refused)
  const faultOf = (field: string) => (refused?.startsWith(`${field}:`) ? refused : undefined)
  if (bases.length === 0)
    return (
      <EmptyState title="Run a study first">
        The latest revision of a study gives what a row of the file does not: fluid, tubes, layout and
        methods.
      </EmptyState>
    )
  return (
    <Sheet title="Upload measured points" className="screen-only max-w-3xl">
      <Form method="post" encType="multipart/form-data" ref={form} className="grid gap-4">
        <TextField
          label="File"
          name="file"
          type="file"
          accept=".csv,.txt,.tsv,.xlsx"
          required
          fault={faultOf('File')}
          hint="CSV or a workbook (first sheet), up to 8 MB and 5000 rows; the first row names the columns."
        />
        <TextField
          label="Name"
          name="name"
          required
          maxLength={120}
          fault={faultOf('Name')}
          hint="A correction made from the points carries it."
        />
        <SelectField
          label="Base study"
          name="study"
          fault={faultOf('Base study') ?? faultOf('Study')}
          options={bases.map(({ id, name }) => ({ value: id, label: name }))}
          hint="Its latest revision gives what a row does not."
        />
        <Button type="submit" name="intent" value="upload" look="main" className="justify-self-start">
          Upload
        </Button>
      </Form>
    </Sheet>
  )
}

function OneBench({ loaderData, bench, answer }: { loaderData: Data; bench: BenchView; answer: Answer }) {
  const { project, mayEdit } = loaderData
  const { mapping, parity, fit } = bench
  return (
    <PlainPage>
      <PageHead
        over={`${bench.name}, ${bench.fileName}`}
        title={headline(bench)}
        reason={`Base case: ${mapping.base.studyName}, revision ${mapping.base.revision}${mapping.length === '' ? '' : `, tubes of ${mapping.length}`}.`}
        acts={
          <LinkButton to={`/projects/${project.id}/bench-data`} look="quiet">
            All measured points
          </LinkButton>
        }
      />
      {parity ? <Parity bench={bench} parity={parity} /> : null}
      {fit ? <FitSheet {...{ loaderData, fit, answer }} name={bench.name} /> : null}
      {mayEdit && parity ? <FitForm bench={bench} answer={answer} /> : null}
      <RowFaults bench={bench} />
      {mayEdit ? <Columns key={bench.id} bench={bench} answer={answer} /> : null}
      {bench.own && mayEdit ? (
        <Form method="post" className="screen-only">
          <Button type="submit" name="intent" value="delete" small>
            Delete “{bench.name}” and its file
          </Button>
        </Form>
      ) : null}
    </PlainPage>
  )
}

const percent = (share: number) => `${Math.round(share * 100)} %`

function headline({ mapping, parity, points }: BenchView): string {
  if (!mapping.checked)
    return `${mapping.rows} ${plural(mapping.rows, 'row', 'rows')}: say what the columns are`
  if (points === 0) return `None of ${mapping.rows} rows is a whole point`
  const known = parity?.points.filter(({ predicted }) => predicted !== null).length ?? 0
  if (!parity || parity.bias === null || known === 0) return `None of ${points} points could be predicted`
  const off = Math.abs(parity.bias - 1)
  const what = labelOf(parity.result).toLowerCase()
  return `Measured ${what} is ${off < 0.005 ? 'on average as predicted' : `on average ${percent(off)} ${parity.bias > 1 ? 'above' : 'below'} what is predicted`}; ${percent(parity.within[0].of)} of ${known} points within ±10 %`
}

function Parity({ bench, parity }: { bench: BenchView; parity: NonNullable<BenchView['parity']> }) {
  const units = useUnits()
  const { dimension, label } = KEY_RESULTS[KEY_RESULT_INDEX[parity.result]]
  const shown = (value: number) => toDisplay(value, dimension, units).value
  const [ten, twenty] = parity.within
  return (
    <Sheet title={`Predicted against measured ${label.toLowerCase()}`}>
      {bench.having.length > 1 ? (
        <nav aria-label="Measured result" className="mb-3 flex flex-wrap gap-3">
          {bench.having.map((id) => (
            <Link
              key={id}
              to={`?data=${bench.id}&result=${id}`}
              className="link"
              aria-current={id === parity.result ? 'page' : undefined}
            >
              {labelOf(id)}
            </Link>
          ))}
        </nav>
      ) : null}
      <p className="mb-3 text-note text-soft">
        {percent(ten.of)} within ±10 %, {percent(twenty.of)} within ±20 %
        {parity.meanError === null ? '' : `; mean deviation ${percent(parity.meanError)}`}.
        {bench.points > MOST_FITTED ? ` The first ${MOST_FITTED} points are shown.` : ''}
      </p>
      <ParityPlot
        name={`Predicted against measured ${label.toLowerCase()}`}
        quantity={label.toLowerCase()}
        unit={displayUnit(dimension, units)}
        points={parity.points.map((point) => ({
          ...point,
          measured: shown(point.measured),
          predicted: point.predicted === null ? null : shown(point.predicted),
        }))}
      />
    </Sheet>
  )
}

function FitForm({ bench, answer }: { bench: BenchView; answer: Answer }) {
  const busy = useNavigation().formData?.get('intent') === 'fit'
  return (
    <Sheet title={bench.fit ? 'Fit another factor' : 'Fit a factor'} className="screen-only max-w-3xl">
      <Form method="post" className="grid gap-4">
        <Faults answer={answer} of="fit" />
        <SelectField
          label="Measured result"
          name="result"
          defaultValue={bench.parity?.result}
          options={bench.having.map((id) => ({ value: id, label: labelOf(id) }))}
        />
        <SelectField
          label="Part of the calculation"
          name="group"
          defaultValue={bench.fit?.fit.group ?? 'film'}
          options={MULTIPLIER_GROUPS.map(({ id, label, multiplies }) => ({
            value: id,
            label: `${label}: ${multiplies}`,
          }))}
          hint={`One factor for all points, of at most ${MOST_FITTED}; points that lie far off are named and left out.`}
        />
        <Button type="submit" name="intent" value="fit" disabled={busy} className="justify-self-start">
          Fit the factor
        </Button>
      </Form>
    </Sheet>
  )
}

function FitSheet({
  loaderData,
  fit: { result, fit },
  name,
  answer,
}: {
  loaderData: Data
  fit: NonNullable<BenchView['fit']>
  name: string
  answer: Answer
}) {
  const { studies, mayEdit } = loaderData
  const without = fit.points.filter(({ reason }) => reason !== null)
  const carrying = studies.filter(({ corrections }) => corrections.some((entry) => entry.name === name))
  return (
    <Sheet
      title={`${fit.label}: factor ${fit.factor.toPrecision(3)}, fitted to ${labelOf(result).toLowerCase()}`}
    >
      <div className="grid max-w-[75ch] gap-3">
        <p>
          {fit.interval
            ? `95 % interval ${fit.interval.low.toPrecision(3)} to ${fit.interval.high.toPrecision(3)}, from ${fit.used} of ${fit.points.length} points.`
            : `From ${fit.used} of ${fit.points.length} points: too few for an interval.`}
          {fit.scatter === null ? '' : ` Scatter between points ${percent(fit.scatter)}.`}
        </p>
        {fit.outliers.length > 0 ? (
          <MarginNote tone="attention" title={`Left out as outliers: ${fit.outliers.join(', ')}.`}>
            With them the factor is {fit.withOutliers.factor.toPrecision(3)}.
          </MarginNote>
        ) : null}
        {without.length > 0 ? (
          <MarginNote
            tone="attention"
            title={`${without.length} ${plural(without.length, 'point has', 'points have')} no factor.`}
          >
            {without
              .slice(0, 5)
              .map((point) => `${point.name}: ${point.reason}`)
              .join('; ')}
          </MarginNote>
        ) : null}
        {answer && answer.told !== '' ? (
          <div role="status">
            <MarginNote title={answer.told} />
          </div>
        ) : null}
        <Faults answer={answer} of="apply" />
        <Faults answer={answer} of="unapply" />
        {mayEdit && studies.length > 0 ? (
          <Form method="post" className="screen-only flex flex-wrap items-end gap-3">
            <SelectField
              label="Apply to a study"
              name="study"
              className="grow basis-60"
              options={studies.map((study) => ({ value: study.id, label: study.name }))}
            />
            <Button type="submit" name="intent" value="apply" look="main">
              Apply as “{name}”
            </Button>
          </Form>
        ) : null}
        {carrying.map((study) => (
          <Form key={study.id} method="post" className="flex flex-wrap items-center gap-3">
            <input type="hidden" name="study" value={study.id} />
            <input type="hidden" name="correction" value={name} />
            <span>
              <Link to={`/studies/${study.id}/define`} className="link font-semibold">
                {study.name}
              </Link>{' '}
              carries it with factor{' '}
              {study.corrections.find((entry) => entry.name === name)?.factor.toPrecision(3)}.
            </span>
            {mayEdit ? (
              <Button type="submit" name="intent" value="unapply" small>
                Take it out
              </Button>
            ) : null}
          </Form>
        ))}
      </div>
    </Sheet>
  )
}

function RowFaults({ bench: { mapping, points } }: { bench: BenchView }) {
  if (mapping.faults.length === 0) return null
  return (
    <Sheet
      title={`${mapping.invalidRows} of ${mapping.rows} rows left out, ${points} kept`}
      flush
      className="max-w-5xl"
    >
      <Scroll label="Rows left out" className="max-h-96 overflow-y-auto">
        <table className="data-table">
          <caption className="visually-hidden">Rows left out, and why</caption>
          <thead>
            <tr>
              <th scope="col" className="numeric">
                Row
              </th>
              <th scope="col">Column</th>
              <th scope="col">Problem</th>
              <th scope="col">Remedy</th>
            </tr>
          </thead>
          <tbody>
            {mapping.faults.map((fault, i) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: faults keep their place
              <tr key={i}>
                <th scope="row" className="numeric">
                  {fault.line}
                </th>
                <td>{fault.column}</td>
                <td>{fault.problem}</td>
                <td>{fault.remedy}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </Scroll>
    </Sheet>
  )
}

const TARGET_OPTIONS = [
  { value: '', label: 'not used' },
  ...TARGETS.filter(({ kind }) => kind === 'name').map(({ id, label }) => ({ value: id, label })),
  ...(['measured', 'field'] as const).map((kind) => ({
    label: kind === 'measured' ? 'Measured result' : 'Field of the case',
    options: TARGETS.filter((target) => target.kind === kind).map(({ id, label }) => ({ value: id, label })),
  })),
]
const UNIT_OPTIONS = [
  { value: '', label: 'no unit' },
  { value: IN_CELL, label: IN_CELL },
  ...UNITS.map((unit) => ({ value: unit, label: unit })),
]

function Columns({ bench: { mapping }, answer }: { bench: BenchView; answer: Answer }) {
  return (
    <Sheet title="What the columns are" className="screen-only max-w-3xl">
      <Form method="post" className="grid gap-4">
        <Faults answer={answer} of="columns" />
        <ul className="grid gap-3">
          {mapping.head.map((head, i) => (
            // biome-ignore lint/suspicious/noArrayIndexKey: columns are their places in the file
            <li key={i} className="grid items-end gap-x-3 gap-y-1 sm:grid-cols-[minmax(0,1fr)_9rem]">
              <SelectField
                label={head || `Column ${i + 1}`}
                name={`target.${i}`}
                defaultValue={mapping.columns[i]?.target ?? ''}
                options={TARGET_OPTIONS}
              />
              <SelectField
                label={`Unit of ${head || `column ${i + 1}`}`}
                hideLabel
                name={`unit.${i}`}
                defaultValue={mapping.columns[i]?.unit ?? ''}
                options={UNIT_OPTIONS}
              />
            </li>
          ))}
        </ul>
        <TextField
          label="Tube length in all rows"
          name="length"
          defaultValue={mapping.length}
          maxLength={60}
          hint="With its unit, such as 2 m; leave it empty where a column or the base study gives it."
        />
        <Button
          type="submit"
          name="intent"
          value="columns"
          look={mapping.checked ? 'plain' : 'main'}
          className="justify-self-start"
        >
          Check the rows
        </Button>
      </Form>
    </Sheet>
  )
}
