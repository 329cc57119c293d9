// What one has been told, latest first. Opening one marks it as read.
import { Form, redirect } from 'react-router'
import { Button } from '#app/components/ui/button.tsx'
import { EmptyState, PageHead, PlainPage } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import { When } from '#app/components/ui/when.tsx'
import { readForm } from '#app/http/body.ts'
import { viewerContext } from '#app/http/context.ts'
import { AppError } from '#app/http/errors.ts'
import { isId } from '#app/http/ids.ts'
import { listNotices, markRead } from '#app/modules/notices/notices.server.ts'
import type { Route } from './+types/notices'

export const meta: Route.MetaFunction = () => [{ title: 'Notices · Rowfall' }]

export const handle = { crumbs: () => [{ label: 'Notices', to: '/notices' }] }

export async function loader({ context }: Route.LoaderArgs) {
  const notices = await listNotices(context.get(viewerContext).personId)
  return {
    notices: notices.map(({ at, readAt, ...notice }) => ({
      ...notice,
      at: at.toISOString(),
      unread: readAt === null,
    })),
  }
}

export async function action({ request, context }: Route.ActionArgs) {
  const { personId } = context.get(viewerContext)
  const form = await readForm(request)
  switch (form.get('intent')) {
    case 'open': {
      const id = form.get('notice')
      const notice = isId(id) && (await listNotices(personId)).find((each) => each.id === id)
      if (!notice) throw new AppError('not-found', 'There is no such notice of yours.')
      await markRead(personId, notice.id)
      return redirect(notice.href)
    }
    case 'readAll':
      await markRead(personId)
      return redirect('/notices')
    default:
      throw new AppError('bad-request', 'This page does not know that act; reload it and try again.')
  }
}

export default function Notices({ loaderData }: Route.ComponentProps) {
  const { notices } = loaderData
  const unread = notices.filter((notice) => notice.unread).length
  return (
    <PlainPage>
      <PageHead
        title={unread === 0 ? 'Nothing new' : unread === 1 ? 'One new notice' : `${unread} new notices`}
        acts={
          unread > 0 ? (
            <Form method="post">
              <Button type="submit" name="intent" value="readAll">
                Mark all as read
              </Button>
            </Form>
          ) : null
        }
      />
      {notices.length === 0 ? (
        <EmptyState title="Nobody has told you anything yet">
          Here you hear of runs that have ended, reviews asked and answered, and comments that mention you.
        </EmptyState>
      ) : (
        <ul className="sheet max-w-4xl divide-y divide-line">
          {notices.map((notice) => (
            <li key={notice.id} className="flex flex-wrap items-baseline gap-x-3 px-4 py-3 sm:px-5">
              <Form method="post" className="min-w-0 grow">
                <input type="hidden" name="notice" value={notice.id} />
                <button
                  type="submit"
                  name="intent"
                  value="open"
                  className={`link text-start ${notice.unread ? 'font-bold' : ''}`}
                >
                  {notice.sentence}
                </button>
              </Form>
              {notice.unread ? <Tag tone="attention">new</Tag> : null}
              <span className="text-note text-soft">
                <When at={notice.at} />
              </span>
            </li>
          ))}
        </ul>
      )}
    </PlainPage>
  )
}
