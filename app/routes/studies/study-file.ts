// GET /studies/:studyId/study.json: the study as a file, for the command line, another installation or a colleague.
import { AppError } from '#app/http/errors.ts'
import { isId } from '#app/http/ids.ts'
import { attachment } from '#app/modules/exports/file-name.ts'
import { getRevision, getStudy, latestRevision } from '#app/modules/studies/studies.server.ts'
import type { Route } from './+types/study-file'

export async function loader({ params, request }: Route.LoaderArgs) {
  const study = await getStudy(params.studyId)
  const asked = new URL(request.url).searchParams.get('revision')
  if (asked !== null && !isId(asked)) throw new AppError('bad-request', 'revision: is not an id.')
  const revision = asked === null ? await latestRevision(study.id) : await getRevision(asked)
  if (revision === null || revision.studyId !== study.id)
    throw new AppError('not-found', 'The study has no such revision yet; keep its definition first.')
  return new Response(`${JSON.stringify(revision.definition, null, 2)}\n`, {
    headers: {
      'Content-Type': 'application/json; charset=utf-8',
      'Content-Disposition': attachment(study.name, 'json'),
      'Cache-Control': 'no-store',
    },
  })
}
