// Define: the base case, what is varied and under which limits; kept as a draft while one types, as a revision when run.
import { availableParallelism } from 'node:os'
import { useEffect, useRef } from 'react'
import { data, redirect, useFetcher, useNavigation } from 'react-router'
import { DefineForm } from '#app/components/define/define-form.tsx'
import { type Definition, definitionFromFields } from '#app/components/define/form-fields.ts'
import { formOptions } from '#app/components/define/options.ts'
import { previewDefinition } from '#app/components/define/preview.ts'
import type { SaveAnswer } from '#app/components/define/use-autosave.ts'
import { Button, DownloadLink } from '#app/components/ui/button.tsx'
import { Disclosure } from '#app/components/ui/disclosure.tsx'
import { useUnits } from '#app/components/ui/number.tsx'
import { readForm } from '#app/http/body.ts'
import { viewerContext } from '#app/http/context.ts'
import { AppError } from '#app/http/errors.ts'
import { can } from '#app/http/permissions.ts'
import { startRun } from '#app/modules/runs/runs.server.ts'
import {
  discardDraft,
  faultLines,
  getDraft,
  getStudy,
  keepRevision,
  latestRevision,
  readStudyFile,
  saveDraft,
} from '#app/modules/studies/studies.server.ts'
import { actingOf } from '../acting.ts'
import type { Route } from './+types/define'

export const meta: Route.MetaFunction = () => [{ title: 'Define · Rowfall' }]

export async function loader({ params, context }: Route.LoaderArgs) {
  const { personId, role } = context.get(viewerContext)
  const [study, revision, draft] = await Promise.all([
    getStudy(params.studyId),
    latestRevision(params.studyId),
    getDraft(params.studyId, personId),
  ])
  const mayEdit = can(role, 'study.edit') && study.archivedAt === null
  const definition: Definition = {
    ...((mayEdit ? draft?.definition : undefined) ?? revision?.definition ?? {}),
    name: study.name,
  }
  if (mayEdit && draft && typeof draft.definition.name === 'string') definition.name = draft.definition.name
  return {
    studyId: study.id,
    definition,
    draft: { version: draft?.version ?? 0, savedAt: draft?.savedAt.toISOString() ?? null },
    revision: revision?.number ?? null,
    behind: draft !== null && revision !== null && draft.baseRevision < revision.number,
    options: formOptions(),
    preview: previewDefinition(definition),
    cores: availableParallelism(),
    mayEdit,
  }
}

/** Saving the draft changes nothing that this page shows. */
export function shouldRevalidate({
  formData,
  defaultShouldRevalidate,
}: {
  formData?: FormData
  defaultShouldRevalidate: boolean
}) {
  return formData?.get('intent') === 'save' ? false : defaultShouldRevalidate
}

export async function action({ params, request, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const viewer = context.get(viewerContext)
  const intent = form.get('intent')
  const { studyId } = params
  if (intent === 'discard') {
    await discardDraft(studyId, viewer.personId)
    return { replaced: true }
  }
  const version = Math.max(0, Math.trunc(Number(form.get('version')) || 0))
  if (intent === 'upload') {
    const file = form.get('file')
    const read =
      file instanceof File && file.size > 0
        ? readStudyFile(await file.text())
        : { ok: false as const, problem: 'Study file: none was chosen; choose a .json file.' }
    if (!read.ok) return data({ refused: read.problem }, 400)
    const saved = await saveDraft(studyId, viewer.personId, read.definition, version)
    if (!saved.saved)
      return data(
        { refused: 'The draft was saved elsewhere in the meantime; reload the page and upload again.' },
        409,
      )
    return { replaced: true }
  }

  const definition = readDefinition(form, viewer.units)
  if (intent === 'save') {
    const saved = await saveDraft(studyId, viewer.personId, definition, version)
    const at = { version: saved.version, savedAt: saved.savedAt.toISOString() }
    return (saved.saved ? { saved: at } : { conflict: at }) satisfies SaveAnswer
  }
  if (intent !== 'run' && intent !== 'keep')
    throw new AppError('bad-request', 'This page does not know that act.')
  // What was typed outlives a refusal: without scripts the draft is the only place it stands.
  const acting = actingOf(context)
  const kept = await keepRevision(studyId, definition, acting)
  if (!kept.ok) {
    const saved = await saveDraft(studyId, viewer.personId, definition, version)
    const lines = faultLines(kept.faults)
    return data(
      {
        refused: `The study cannot run yet. ${lines.slice(0, 3).join('. ')}${lines.length > 3 ? `; and ${lines.length - 3} more` : ''}.`,
        ...(saved.saved
          ? {}
          : { conflict: { version: saved.version, savedAt: saved.savedAt.toISOString() } }),
      },
      400,
    )
  }
  if (intent === 'keep') return redirect(`/studies/${studyId}/define`)
  await startRun(studyId, kept.revision.id, acting)
  return redirect(`/studies/${studyId}/run`)
}

/** The definition as the page computed it, or, posted without scripts, as its fields read. */
function readDefinition(form: FormData, units: 'si' | 'us'): Definition {
  const sent = form.get('definition')
  const scripted = form.get('scripted') === 'yes' || form.get('intent') === 'save'
  if (scripted && typeof sent === 'string') {
    const read = readStudyFile(sent)
    if (!read.ok) throw new AppError('invalid', read.problem)
    return read.definition
  }
  const fields: Record<string, string> = {}
  for (const [name, value] of form) if (typeof value === 'string') fields[name] = value
  return definitionFromFields(fields, units)
}

export default function Define({ loaderData, actionData }: Route.ComponentProps) {
  const { studyId, definition, draft, revision, behind, options, preview, cores, mayEdit } = loaderData
  const units = useUnits()
  const navigation = useNavigation()
  const busy = navigation.state !== 'idle' && navigation.formData?.get('intent') === 'run'
  const refusal = actionData && 'refused' in actionData ? actionData.refused : null
  const standing = [
    revision === null ? 'Not run yet' : `Revision ${revision}`,
    draft.version > 0 && mayEdit ? 'with your changes' : '',
    behind ? '; someone has made a newer revision since you began' : '',
  ]
    .filter(Boolean)
    .join(' ')
  return (
    <DefineForm
      key={`${studyId} ${revision}`}
      definition={definition}
      draft={draft}
      options={options}
      units={units}
      initialPreview={preview}
      cores={cores}
      mayEdit={mayEdit}
      standing={standing}
      busy={busy}
      refusal={refusal}
      acts={
        <FileActs
          studyId={studyId}
          version={draft.version}
          hasDraft={draft.version > 0 && revision !== null}
          mayEdit={mayEdit}
        />
      }
    />
  )
}

/** Download, upload, back to the last revision: beside the form, as they post something else. */
function FileActs({
  studyId,
  version,
  hasDraft,
  mayEdit,
}: {
  studyId: string
  version: number
  hasDraft: boolean
  mayEdit: boolean
}) {
  const fetcher = useFetcher<{ refused?: string; replaced?: boolean }>()
  const replaced = fetcher.data?.replaced === true
  // Another definition altogether: the form begins anew with it.
  useEffect(() => {
    if (replaced) location.reload()
  }, [replaced])
  const file = useRef<HTMLInputElement>(null)
  return (
    <Disclosure label="Study file" name="Study file: download, upload, discard changes" className="w-72 p-3">
      <div className="grid gap-3">
        <DownloadLink href={`/studies/${studyId}/study.json`} download small>
          Download the study file
        </DownloadLink>
        {mayEdit ? (
          <label className="grid gap-1 text-note">
            <span className="font-semibold">Replace what stands here with a file</span>
            <input
              ref={file}
              type="file"
              accept=".json,application/json"
              onChange={() => {
                const chosen = file.current?.files?.[0]
                if (!chosen) return
                const form = new FormData()
                form.set('intent', 'upload')
                form.set('version', String(version))
                form.set('file', chosen)
                fetcher.submit(form, { method: 'post', encType: 'multipart/form-data' })
              }}
            />
            {fetcher.data?.refused ? (
              <span className="font-semibold text-red-ink">{fetcher.data.refused}</span>
            ) : null}
          </label>
        ) : null}
        {mayEdit && hasDraft ? (
          <Button
            small
            look="danger"
            onClick={() => fetcher.submit({ intent: 'discard' }, { method: 'post' })}
          >
            Discard my changes since the last revision
          </Button>
        ) : null}
      </div>
    </Disclosure>
  )
}
