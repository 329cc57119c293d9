// The Define form: the base case, what is varied, limits; with the live margin beside it.
import { type FormEvent, useCallback, useEffect, useMemo, useRef, useState } from 'react'
import { Form, useLocation } from 'react-router'
import './define.css'
import { BundleDrawing } from '#app/components/bundle-drawing/bundle-drawing.tsx'
import { bundleGeometry } from '#app/components/bundle-drawing/layout.ts'
import { Button, StatusButton } from '#app/components/ui/button.tsx'
import { MarginNote } from '#app/components/ui/margin-note.tsx'
import { MarginPage, PageHead } from '#app/components/ui/page.tsx'
import { tell } from '#app/components/ui/toast.tsx'
import type { UnitSystem } from '#engine/units.ts'
import { Bundle, Drive, DutyAndFluid, Economics, Methods, NameAndDescription, Tube } from './case-fields.tsx'
import { DefineMargin, type MarginFault } from './define-margin.tsx'
import { FormContext, type FormState } from './form-context.tsx'
import { type Definition, definitionFromFields, fieldOfFault } from './form-fields.ts'
import type { FormOptions } from './options.ts'
import type { Preview } from './preview.ts'
import { Limits, SweepDesign } from './sweep-fields.tsx'
import { takeUnsaved } from './unsaved.ts'
import { type SaveState, useAutosave } from './use-autosave.ts'
import { useFields } from './use-fields.ts'
import { usePreview } from './use-preview.ts'

export type DefineFormProps = {
  definition: Definition
  draft: { version: number; savedAt: string | null }
  options: FormOptions
  units: UnitSystem
  initialPreview: Preview
  cores: number
  mayEdit: boolean
  /** What the study stands at, said over the headline. */
  standing: string
  busy: boolean
  /** The server's word on the last post, where scripts did not run or the server knows better. */
  refusal: string | null
  acts?: React.ReactNode
}

export function DefineForm({
  definition,
  draft,
  options,
  units,
  initialPreview,
  cores,
  mayEdit,
  standing,
  busy,
  refusal,
  acts,
}: DefineFormProps) {
  const { fields, set, setAll, undo, canUndo, replace } = useFields(definition, units)
  const place = useLocation().pathname
  const [left, setLeft] = useState<ReadonlySet<string>>(new Set())
  const [tried, setTried] = useState(refusal !== null)
  const form = useRef<HTMLFormElement>(null)
  const current = useMemo(() => definitionFromFields(fields, units), [fields, units])
  const { preview, settled } = usePreview(current, initialPreview)
  const save = useAutosave(current, draft, mayEdit, place)
  const begun = useRef(JSON.stringify(current))
  useEffect(() => {
    const held = mayEdit ? takeUnsaved(place, draft.version, begun.current) : null
    if (!held) return
    replace(held)
    tell('What you had typed before is back.')
  }, [mayEdit, place, draft.version, replace])

  const faults = useMemo(
    () =>
      preview.faults.map((fault): MarginFault => {
        const field = fieldOfFault(fault.path, fields)
        return { field, label: labelOf(fault.path), problem: fault.problem, remedy: fault.remedy }
      }),
    [preview.faults, fields],
  )
  const leave = useCallback(
    (name: string) => setLeft((names) => (names.has(name) ? names : new Set(names).add(name))),
    [],
  )
  const state: FormState = {
    fields,
    set,
    setAll,
    leave,
    units,
    options,
    disabled: !mayEdit,
    fault: (name) => {
      if (!tried && !left.has(name)) return undefined
      const fault = faults.find((entry) => entry.field === name)
      return fault && `${sentence(fault.problem)}${fault.remedy ? `; ${fault.remedy}` : ''}.`
    },
  }

  const go = (field: string) => {
    leave(field)
    const at = form.current?.elements.namedItem(field)
    const element = (at instanceof RadioNodeList ? at[0] : at) ?? document.getElementById(field)
    if (!(element instanceof HTMLElement)) return
    element.closest('details')?.setAttribute('open', '')
    element.focus()
    element.scrollIntoView({ block: 'center', behavior: 'smooth' })
  }
  const submit = (event: FormEvent) => {
    setTried(true)
    if (settled && faults.length > 0) {
      event.preventDefault()
      go(faults[0].field)
    }
  }

  return (
    <FormContext value={state}>
      <Form method="post" ref={form} onSubmit={submit} noValidate className="contents">
        <input type="hidden" name="version" value={save.version} />
        <input type="hidden" name="definition" value={JSON.stringify(current)} disabled={!mayEdit} />
        <Scripted />
        <input type="hidden" name="sweep.order" value={fields['sweep.order'] ?? ''} />
        <input type="hidden" name="rest" value={fields.rest ?? ''} />
        <MarginPage
          marginLabel="What the definition amounts to"
          margin={
            <DefineMargin
              preview={preview}
              faults={faults}
              settled={settled}
              cores={cores}
              picture={
                preview.base ? (
                  <BundleDrawing
                    geometry={bundleGeometry(preview.base.case)}
                    rows={preview.base.result.rows}
                    name="the base case"
                    table={false}
                  />
                ) : null
              }
              onGo={go}
            />
          }
        >
          <PageHead
            over={standing}
            title={headline(preview, faults.length)}
            reason={<Saved state={save.state} mayEdit={mayEdit} />}
            acts={
              <>
                {acts}
                {mayEdit ? (
                  <>
                    <Button onClick={undo} disabled={!canUndo}>
                      Undo
                    </Button>
                    <StatusButton look="main" name="intent" value="run" busy={busy} working="Starting…">
                      Run the study
                    </StatusButton>
                  </>
                ) : null}
              </>
            }
          />
          {refusal ? <MarginNote tone="failed" title={refusal} /> : null}
          {save.state.kind === 'conflict' ? (
            <MarginNote tone="attention" title="This draft was saved elsewhere in the meantime.">
              <p>Another tab or person saved it; nothing has been overwritten. Saving here has stopped.</p>
              <p className="mt-2 flex flex-wrap gap-2">
                <Button small onClick={() => location.reload()}>
                  Show what was saved
                </Button>
                {save.conflictVersion !== null ? (
                  <Button small onClick={() => save.overwrite(save.conflictVersion as number)}>
                    Keep what stands here
                  </Button>
                ) : null}
              </p>
            </MarginNote>
          ) : null}
          <NameAndDescription />
          <DutyAndFluid />
          <Drive />
          <Tube />
          <Bundle />
          <Limits />
          <SweepDesign preview={preview} />
          <Methods />
          <Economics />
          {mayEdit ? (
            <div className="flex flex-wrap items-center justify-end gap-3">
              <noscript>
                <Button type="submit" name="intent" value="keep">
                  Save and check
                </Button>
              </noscript>
              <StatusButton look="main" name="intent" value="run" busy={busy} working="Starting…">
                Run the study
              </StatusButton>
            </div>
          ) : null}
        </MarginPage>
      </Form>
    </FormContext>
  )
}

/** Says that `definition` is this page's own reading; without scripts the fields speak for themselves. */
function Scripted() {
  const [ready, setReady] = useState(false)
  useEffect(() => setReady(true), [])
  return ready ? <input type="hidden" name="scripted" value="yes" /> : null
}

/** What stands over the form: never more than is known. */
export function headline(preview: Preview, faults: number): string {
  if (faults > 0)
    return faults === 1
      ? 'One thing is missing before this can run'
      : `${faults} things are missing before this can run`
  if (preview.points === null) return 'Define the study'
  const points = preview.points.toLocaleString('en-GB').replaceAll(',', '\u202f')
  return preview.points === 1 ? 'One point, ready to run' : `${points} points, ready to run`
}

function Saved({ state, mayEdit }: { state: SaveState; mayEdit: boolean }) {
  if (!mayEdit)
    return <span>You may read this definition; engineers and leads of the project may change it.</span>
  const text = {
    kept:
      state.kind === 'kept' && state.at
        ? 'Every change is kept as a draft of yours.'
        : 'Changes are kept as a draft of yours as you type.',
    changed: 'Keeping the draft…',
    saving: 'Keeping the draft…',
    conflict: 'The draft here is not saved.',
    failed: state.kind === 'failed' ? state.message : '',
  }[state.kind]
  return (
    <span role="status" data-save={state.kind}>
      {text}
    </span>
  )
}

const sentence = (text: string) => text.charAt(0).toUpperCase() + text.slice(1)

/** "case.tube.outsideDiameter" as words: "Tube outside diameter". */
function labelOf(path: string): string {
  const words = path
    .replace(/^case\./, '')
    .replace(/^sweep\.variables\.(\d+)/, (_, n) => `variable ${Number(n) + 1}`)
    .replace(/\.(\d+)/g, (_, n) => ` ${Number(n) + 1}`)
    .replace(/\./g, ' ')
    .replace(/([a-z])([A-Z])/g, '$1 $2')
    .toLowerCase()
  return sentence(words || 'study')
}
