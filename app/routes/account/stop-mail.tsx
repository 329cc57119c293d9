// Where an e-mail's stop link leads: one press, without signing in, and that kind of e-mail ends for its receiver.
import { Form, Link } from 'react-router'
import { Mark } from '#app/components/shell/mark.tsx'
import { Button } from '#app/components/ui/button.tsx'
import { PageHead, PlainPage } from '#app/components/ui/page.tsx'
import { AppError } from '#app/http/errors.ts'
import { setPreferences } from '#app/modules/accounts/people.server.ts'
import { readStopToken } from '#app/modules/mail/outbox.server.ts'
import type { Route } from './+types/stop-mail'

export const meta: Route.MetaFunction = () => [{ title: 'E-mail settings · Rowfall' }]

function read(token: string) {
  const found = readStopToken(token)
  if (!found)
    throw new AppError(
      'not-found',
      'This link is not whole. Sign in, and change what you are told under Your account.',
    )
  return found
}

export function loader({ params }: Route.LoaderArgs) {
  return { stops: read(params.token).stops }
}

export async function action({ params }: Route.ActionArgs) {
  const { personId, kind } = read(params.token)
  await setPreferences(
    personId,
    kind === 'runEnded'
      ? { mailRunMinutes: null }
      : kind === 'mention'
        ? { mailMentions: false }
        : { mailReviews: false },
  )
  return { stopped: true }
}

export default function StopMail({ loaderData, actionData }: Route.ComponentProps) {
  return (
    <>
      <header className="flex h-14 items-center border-b border-line px-4 sm:px-7">
        <a href="/" className="flex items-center gap-2.5 text-lead font-extrabold">
          <Mark />
          Rowfall
        </a>
      </header>
      <main id="main">
        <PlainPage>
          <PageHead
            title={
              actionData?.stopped
                ? `You get no more e-mail about ${loaderData.stops}`
                : `No more e-mail about ${loaderData.stops}?`
            }
            reason="Notices inside Rowfall stay."
          />
          {actionData?.stopped ? (
            <p>
              <Link to="/account" className="link">
                All e-mail settings
              </Link>
            </p>
          ) : (
            <Form method="post">
              <Button type="submit" look="main">
                Stop it
              </Button>
            </Form>
          )}
        </PlainPage>
      </main>
    </>
  )
}
