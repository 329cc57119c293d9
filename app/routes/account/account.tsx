// One's own account: what one is told by e-mail, and the browsers one is signed in with.
import { data, Form, redirect } from 'react-router'
import { Button } from '#app/components/ui/button.tsx'
import { CheckField, TextField } from '#app/components/ui/field.tsx'
import { PageHead, PlainPage, Sheet } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import { useFaultFocus } from '#app/components/ui/use-fault-focus.ts'
import { When } from '#app/components/ui/when.tsx'
import { readForm } from '#app/http/body.ts'
import { viewerContext } from '#app/http/context.ts'
import { AppError } from '#app/http/errors.ts'
import { isId } from '#app/http/ids.ts'
import { getPerson, setPreferences } from '#app/modules/accounts/people.server.ts'
import { listSessions, revokeOtherSessions, revokeSession } from '#app/modules/accounts/sessions.server.ts'
import type { Route } from './+types/account'
import { browserOf } from './browser-name.ts'

export const meta: Route.MetaFunction = () => [{ title: 'Your account · Rowfall' }]

export const handle = { crumbs: () => [{ label: 'Your account', to: '/account' }] }

export async function loader({ context, request }: Route.LoaderArgs) {
  const viewer = context.get(viewerContext)
  const [person, sessions] = await Promise.all([getPerson(viewer.personId), listSessions(viewer.personId)])
  return {
    name: viewer.name,
    email: viewer.email,
    role: viewer.role,
    groups: person.groups,
    mail: {
      runMinutes: person.mailRunMinutes,
      reviews: person.mailReviews,
      mentions: person.mailMentions,
    },
    kept: new URL(request.url).searchParams.has('kept'),
    sessions: sessions.map(({ id, createdAt, seenAt, userAgent }) => ({
      id,
      browser: browserOf(userAgent),
      createdAt: createdAt.toISOString(),
      seenAt: seenAt.toISOString(),
      own: id === viewer.sessionId,
    })),
  }
}

const LONGEST_MINUTES = 10_000

export async function action({ request, context }: Route.ActionArgs) {
  const { personId, sessionId } = context.get(viewerContext)
  const form = await readForm(request)
  switch (form.get('intent')) {
    case 'mail': {
      const typed = String(form.get('runMinutes') ?? '').trim()
      const minutes = Number(typed.replace(',', '.'))
      if (
        form.has('runs') &&
        !(typed !== '' && Number.isInteger(minutes) && minutes >= 0 && minutes <= LONGEST_MINUTES)
      )
        return data(
          { fault: `Minutes: give a whole number from 0 to ${LONGEST_MINUTES}.`, typed: typed.slice(0, 40) },
          400,
        )
      await setPreferences(personId, {
        mailRunMinutes: form.has('runs') ? minutes : null,
        mailReviews: form.has('reviews'),
        mailMentions: form.has('mentions'),
      })
      return redirect('/account?kept=1')
    }
    case 'revoke': {
      const id = form.get('session')
      if (!isId(id) || !(await revokeSession(personId, id)))
        throw new AppError('not-found', 'There is no such session of yours; it may have ended already.')
      return redirect('/account')
    }
    case 'revokeOthers':
      await revokeOtherSessions(personId, sessionId)
      return redirect('/account')
    default:
      throw new AppError('bad-request', 'This page does not know that act; reload it and try again.')
  }
}

export default function Account({ loaderData, actionData }: Route.ComponentProps) {
  const { name, email, role, groups, mail, sessions, kept } = loaderData
  const form = useFaultFocus(actionData ?? null)
  return (
    <PlainPage>
      <PageHead
        title={name}
        reason={`${email}, ${role}${groups.length > 0 ? `, by the identity provider’s ${groups.length > 1 ? 'groups' : 'group'} ${groups.join(', ')}` : ''}. Name, address and groups are the identity provider’s.`}
      />
      <Sheet title="E-mail" className="max-w-3xl">
        <Form method="post" ref={form} className="grid gap-3">
          <div className="flex flex-wrap items-start gap-x-4 gap-y-2">
            <CheckField
              label="When a run of mine has ended"
              name="runs"
              defaultChecked={mail.runMinutes !== null}
              className="pt-7"
            />
            <TextField
              label="If it took at least so many minutes"
              name="runMinutes"
              inputMode="numeric"
              className="w-56"
              defaultValue={actionData?.typed ?? mail.runMinutes ?? 5}
              fault={actionData?.fault}
            />
          </div>
          <CheckField
            label="When a review is asked of me, or mine is answered"
            name="reviews"
            defaultChecked={mail.reviews}
          />
          <CheckField
            label="When a comment mentions me"
            name="mentions"
            defaultChecked={mail.mentions}
            hint="Notices in Rowfall are there in any case."
          />
          <div className="flex items-center gap-3">
            <Button type="submit" name="intent" value="mail">
              Keep these settings
            </Button>
            {kept ? <p role="status">Kept.</p> : null}
          </div>
        </Form>
      </Sheet>
      <Sheet
        title={
          sessions.length === 1 ? 'Signed in with one browser' : `Signed in with ${sessions.length} browsers`
        }
        className="max-w-3xl"
      >
        <ul className="divide-y divide-line">
          {sessions.map((session) => (
            <li key={session.id} className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1 py-2">
              <div>
                <p className="font-semibold">
                  {session.browser} {session.own ? <Tag tone="sound">this one</Tag> : null}
                </p>
                <p className="text-note text-soft">
                  signed in <When at={session.createdAt} />, last used <When at={session.seenAt} />
                </p>
              </div>
              {session.own ? null : (
                <Form method="post">
                  <input type="hidden" name="session" value={session.id} />
                  <Button
                    type="submit"
                    name="intent"
                    value="revoke"
                    small
                    aria-label={`End the session with ${session.browser}`}
                  >
                    End it
                  </Button>
                </Form>
              )}
            </li>
          ))}
        </ul>
        {sessions.length > 1 ? (
          <Form method="post" className="mt-3">
            <Button type="submit" name="intent" value="revokeOthers">
              End all others
            </Button>
          </Form>
        ) : null}
      </Sheet>
    </PlainPage>
  )
}
