// A study's review: asked for, answered, and all that went before.
import { Form, Link, useNavigation } from 'react-router'
import { Button, StatusButton } from '#app/components/ui/button.tsx'
import { SelectField, TextAreaField } from '#app/components/ui/field.tsx'
import { Sheet } from '#app/components/ui/page.tsx'
import { Tag, type Tone } from '#app/components/ui/tag.tsx'
import { useFaultFocus } from '#app/components/ui/use-fault-focus.ts'
import { When } from '#app/components/ui/when.tsx'
import type { ListedReview } from '#app/modules/reviews/reviews.server.ts'

type Refused = { intent: string; fault: string; typed: string } | null

export function ReviewSheet({
  reviews,
  viewer,
  projectId,
  refused,
  ready,
}: {
  reviews: readonly ListedReview[]
  viewer: { id: string; mayAsk: boolean; mayDecide: boolean }
  projectId: string
  refused: Refused
  /** Null while the run has not ended. */
  ready: { runId: string; points: { value: string; label: string }[]; chosen: string } | null
}) {
  const open = reviews.find(({ state }) => state === 'asked')
  const earlier = reviews.filter(({ state }) => state !== 'asked')
  const form = useFaultFocus(refused)
  const intent = useNavigation().formData?.get('intent')
  const faultOf = (...intents: string[]) =>
    refused && intents.includes(refused.intent) ? refused.fault : undefined
  return (
    <Sheet title="Review">
      <div className="grid gap-5">
        {open ? (
          <div className="grid gap-3">
            <p className="flex flex-wrap items-baseline gap-2">
              <Tag tone="attention">review asked</Tag>
              <span>
                <span className="font-semibold">{open.askedByName}</span> put{' '}
                {open.point === null ? 'the refined point' : `point ${open.point}`} forward,{' '}
                <When at={open.askedAt} />.
              </span>
            </p>
            <Words>{open.note}</Words>
            {viewer.mayDecide ? (
              <Form method="post" ref={form} className="screen-only grid max-w-[65ch] gap-3">
                <TextAreaField
                  label="Reason"
                  name="reason"
                  maxLength={4000}
                  defaultValue={refused?.typed}
                  fault={faultOf('accept', 'return')}
                  hint="Kept with the decision. To return it, say what should change."
                />
                <div className="flex flex-wrap gap-2">
                  <StatusButton
                    name="intent"
                    value="accept"
                    look="main"
                    busy={intent === 'accept'}
                    working="Accepting…"
                  >
                    Accept it
                  </StatusButton>
                  <StatusButton name="intent" value="return" busy={intent === 'return'} working="Returning…">
                    Return it
                  </StatusButton>
                </div>
              </Form>
            ) : (
              <p className="text-soft">A lead of the project accepts it or returns it with a reason.</p>
            )}
            {open.askedBy === viewer.id ? (
              <Form method="post" className="screen-only">
                <Button type="submit" name="intent" value="withdraw" small>
                  Withdraw it
                </Button>
              </Form>
            ) : null}
          </div>
        ) : viewer.mayAsk && ready && ready.points.length > 0 ? (
          <Form method="post" ref={form} className="screen-only grid max-w-[65ch] gap-3">
            <input type="hidden" name="run" value={ready.runId} />
            <SelectField
              label="Point to put forward"
              name="point"
              defaultValue={ready.chosen}
              options={ready.points}
            />
            <TextAreaField
              label="Note to the lead"
              name="note"
              maxLength={4000}
              defaultValue={refused?.typed}
              fault={faultOf('ask')}
              hint="Why this one; what to look at."
            />
            <StatusButton
              name="intent"
              value="ask"
              look="main"
              busy={intent === 'ask'}
              working="Asking…"
              className="justify-self-start"
            >
              Ask for a review
            </StatusButton>
          </Form>
        ) : (
          <p className="max-w-[65ch] text-soft">
            {ready === null
              ? 'A review can be asked for once the run has finished.'
              : ready.points.length === 0
                ? 'No point meets every limit, so there is none to put forward.'
                : 'An engineer of the project can ask for a review.'}
          </p>
        )}
        {earlier.length > 0 ? (
          <ul className="grid gap-3 border-t border-line pt-4">
            {earlier.map((review) => (
              <li key={review.id}>
                <p className="flex flex-wrap items-baseline gap-2">
                  <Tag tone={TONES[review.state]}>{review.state}</Tag>
                  <span>
                    {review.answeredByName} <When at={review.answeredAt ?? review.askedAt} />; asked by{' '}
                    {review.askedByName} with{' '}
                    {review.point === null ? 'the refined point' : `point ${review.point}`}.
                  </span>
                  {review.recordId ? (
                    <Link to={`/projects/${projectId}/records/${review.recordId}`} className="link">
                      The record
                    </Link>
                  ) : null}
                </p>
                <Words>{review.reason}</Words>
              </li>
            ))}
          </ul>
        ) : null}
      </div>
    </Sheet>
  )
}

const TONES: Record<ListedReview['state'], Tone> = {
  asked: 'attention',
  accepted: 'sound',
  returned: 'failed',
  withdrawn: 'neutral',
}

function Words({ children }: { children: string }) {
  return children ? (
    <p className="mt-1 max-w-[65ch] border-s-2 border-line ps-3 whitespace-pre-wrap [overflow-wrap:anywhere]">
      {children}
    </p>
  ) : null
}
