// POST /studies/:studyId/views: keeps or takes away a view of the results, and goes back to it.
import { data, redirect } from 'react-router'
import { readForm } from '#app/http/body.ts'
import { projectContext } from '#app/http/context.ts'
import { AppError, failureOf } from '#app/http/errors.ts'
import { localPath } from '#app/modules/accounts/sign-in.server.ts'
import { deleteView, saveView } from '#app/modules/comparisons/saved.server.ts'
import { actingOf } from '../acting.ts'
import type { Route } from './+types/views'

export async function action({ request, params, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const text = (name: string) => String(form.get(name) ?? '')
  const of = { studyId: params.studyId, projectId: context.get(projectContext).projectId }
  try {
    switch (text('intent')) {
      case 'save':
        await saveView(
          of,
          { name: text('name'), query: text('query'), shared: form.has('shared') },
          actingOf(context),
        )
        break
      case 'delete':
        await deleteView(of, text('view'), actingOf(context))
        break
      default:
        throw new AppError('bad-request', 'That act is not known; reload the page and try again.')
    }
  } catch (error) {
    const failure = failureOf(error)
    if (failure?.code !== 'invalid' && failure?.code !== 'conflict') throw error
    return data({ fault: failure.message }, 400)
  }
  return redirect(localPath(form.get('returnTo')))
}
