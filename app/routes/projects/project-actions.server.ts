// What can be done on a project's page: studies made, renamed, copied, archived, restored; members added and removed.
import { data, redirect } from 'react-router'
import type { Viewer } from '#app/http/context.ts'
import { AppError, failureOf } from '#app/http/errors.ts'
import { isId } from '#app/http/ids.ts'
import { can } from '#app/http/permissions.ts'
import type { Acting } from '#app/modules/audit/audit.server.ts'
import { addMember, removeMember } from '#app/modules/projects/projects.server.ts'
import { trimmedTo } from '#app/modules/stored-text.ts'
import {
  archiveStudy,
  copyStudy,
  createStudy,
  getStudy,
  readStudyFile,
  renameStudy,
  restoreStudy,
} from '#app/modules/studies/studies.server.ts'
import { exampleDefinition } from './examples.server.ts'

type Person = Acting & { personId: string }

export type Refused = { ok: false; intent: string; studyId: string; typed: string; fault: string }
/** What was done; `undo` is the intent that takes it back. */
export type Done = { ok: true; told: string; undo?: { intent: string; studyId: string } }

export async function actOnProject(projectId: string, form: FormData, viewer: Viewer, acting: Person) {
  const text = (name: string) => {
    const value = form.get(name)
    return typeof value === 'string' ? value : ''
  }
  const intent = text('intent')
  const studyId = text('studyId')
  try {
    switch (intent) {
      case 'example': {
        const definition = exampleDefinition(text('example'))
        if (!definition) throw new AppError('invalid', 'There is no such example; choose one of those shown.')
        const made = await createStudy(
          projectId,
          { name: String(definition.name), origin: `example ${text('example')}`, definition },
          acting,
        )
        return redirect(`/studies/${made.id}/define`)
      }
      case 'blank': {
        const made = await createStudy(
          projectId,
          { name: text('name'), definition: { name: text('name'), case: {}, sweep: { variables: [] } } },
          acting,
        )
        return redirect(`/studies/${made.id}/define`)
      }
      case 'upload':
        return await upload(projectId, form.get('file'), acting)
      case 'rename':
        await renameStudy(await ownStudy(projectId, studyId), text('name'), acting)
        return { ok: true, told: 'Renamed.' } satisfies Done
      case 'copy': {
        const made = await copyStudy(await ownStudy(projectId, studyId), acting)
        return redirect(`/studies/${made.id}/define`)
      }
      case 'archive':
        await archiveStudy(await ownStudy(projectId, studyId), acting)
        return { ok: true, told: 'Archived.', undo: { intent: 'restore', studyId } } satisfies Done
      case 'restore':
        await restoreStudy(await ownStudy(projectId, studyId), acting)
        return { ok: true, told: 'Restored.' } satisfies Done
      case 'addMember':
        requireManager(viewer)
        await addMember(projectId, text('email'), acting)
        return { ok: true, told: `Added ${text('email').trim()}.` } satisfies Done
      case 'removeMember':
        requireManager(viewer)
        await removeMember(projectId, text('personId'), acting)
        return { ok: true, told: 'Removed.' } satisfies Done
      default:
        throw new AppError('bad-request', 'This page does not know that act; reload it and try again.')
    }
  } catch (error) {
    const failure = failureOf(error)
    if (!failure || failure.code === 'forbidden' || failure.code === 'not-found') throw error
    const typed = text(intent === 'addMember' ? 'email' : 'name')
    return data<Refused>({ ok: false, intent, studyId, typed, fault: failure.message }, 400)
  }
}

/** The study's id, if it is one of this project's: the gate has only looked at the project. */
async function ownStudy(projectId: string, studyId: string): Promise<string> {
  const missing = new AppError('not-found', 'There is no such study in this project.')
  if (!isId(studyId)) throw missing
  const study = await getStudy(studyId)
  if (study.projectId !== projectId) throw missing
  return study.id
}

function requireManager(viewer: Viewer): void {
  if (!can(viewer.role, 'project.manage'))
    throw new AppError('forbidden', `Your role, ${viewer.role}, does not include this; ask a lead.`)
}

async function upload(projectId: string, file: FormDataEntryValue | null, acting: Person) {
  if (!(file instanceof File) || file.size === 0)
    throw new AppError('invalid', 'Study file: none was chosen; choose a .json file.')
  const read = readStudyFile(await file.text())
  if (!read.ok) throw new AppError('invalid', read.problem)
  const given = read.definition.name
  const name = typeof given === 'string' && given.trim() !== '' ? given : file.name.replace(/\.json$/i, '')
  const made = await createStudy(
    projectId,
    { name: trimmedTo(name, 200), origin: `file ${trimmedTo(file.name, 100)}`, definition: read.definition },
    acting,
  )
  return redirect(`/studies/${made.id}/define`)
}
