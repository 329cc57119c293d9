// E-mail that the local catcher took, because no mail server is set. It exists on demo machines only.
import { EmptyState, PageHead, PlainPage } from '#app/components/ui/page.tsx'
import { caughtMail } from '#app/modules/mail/caught.server.ts'
import type { Route } from './+types/caught-mail'

export const meta: Route.MetaFunction = () => [{ title: 'Caught e-mail · Rowfall' }]

export const handle = { crumbs: () => [{ label: 'Caught e-mail', to: '/caught-mail' }] }

export async function loader() {
  return { mail: await caughtMail() }
}

export default function CaughtMail({ loaderData }: Route.ComponentProps) {
  const { mail } = loaderData
  return (
    <PlainPage>
      <PageHead
        over="No mail server is set"
        title={
          mail.length === 0
            ? 'No e-mail has been caught yet'
            : `${mail.length === 1 ? 'One e-mail was' : `${mail.length} e-mails were`} caught instead of sent`
        }
        reason="Set SMTP_URL and MAIL_FROM to send for real."
      />
      {mail.length === 0 ? (
        <EmptyState title="It fills as things happen">
          Ask for a review, mention someone in a comment, or let a long run end.
        </EmptyState>
      ) : (
        <ul className="grid max-w-4xl gap-3">
          {mail.map(({ name, to, subject, text, at }) => (
            <li key={name} className="sheet px-4 py-3 sm:px-5">
              <h2 className="font-bold">{subject}</h2>
              <p className="text-note text-soft">
                to {to}
                {at ? `, ${at.slice(0, 16).replace('T', ' ')} UTC` : ''}
              </p>
              <pre className="mt-2 font-sans whitespace-pre-wrap [overflow-wrap:anywhere]">{text}</pre>
            </li>
          ))}
        </ul>
      )}
    </PlainPage>
  )
}
