// Comments under what they are about, and the field for another.
import { useEffect, useRef } from 'react'
import { useFetcher } from 'react-router'
import { StatusButton } from '../ui/button.tsx'
import { TextAreaField } from '../ui/field.tsx'
import { Sheet } from '../ui/page.tsx'
import { When } from '../ui/when.tsx'

export type ShownComment = {
  id: string
  writtenBy: string
  name: string
  writtenAt: string
  pieces: { text: string; person?: string }[] | null
}

export function Comments({
  comments,
  members,
  viewerId,
}: {
  comments: readonly ShownComment[]
  members: readonly { id: string; name: string }[]
  viewerId: string
}) {
  const fetcher = useFetcher<{ fault?: string } | null>()
  const area = useRef<HTMLFormElement>(null)
  const sent = useRef(false)
  useEffect(() => {
    if (fetcher.state !== 'idle') {
      sent.current = true
      return
    }
    if (!sent.current) return
    sent.current = false
    if (!fetcher.data?.fault) area.current?.reset()
  }, [fetcher.state, fetcher.data])
  const others = members.filter(({ id }) => id !== viewerId)
  return (
    <Sheet
      title={comments.length === 0 ? 'Comments' : `Comments (${comments.length})`}
      className="screen-only"
    >
      {comments.length === 0 ? null : (
        <ul className="mb-4 grid gap-3">
          {comments.map((comment) => (
            <li
              key={comment.id}
              id={`comment-${comment.id}`}
              className="max-w-[75ch] target:bg-verdigris-wash"
            >
              <div className="text-note text-soft">
                <span className="font-semibold text-ink">{comment.name}</span> <When at={comment.writtenAt} />
                {comment.pieces !== null && comment.writtenBy === viewerId ? (
                  <fetcher.Form method="post" className="ms-2 inline">
                    <input type="hidden" name="comment" value={comment.id} />
                    <button type="submit" name="intent" value="withdrawComment" className="link">
                      Withdraw
                    </button>
                  </fetcher.Form>
                ) : null}
              </div>
              {comment.pieces === null ? (
                <p className="text-soft italic">withdrawn</p>
              ) : (
                <p className="whitespace-pre-wrap [overflow-wrap:anywhere]">
                  {comment.pieces.map((piece, i) =>
                    piece.person ? (
                      // biome-ignore lint/suspicious/noArrayIndexKey: pieces have no identity but their place
                      <span key={i} className="font-semibold text-verdigris-ink">
                        {piece.text}
                      </span>
                    ) : (
                      piece.text
                    ),
                  )}
                </p>
              )}
            </li>
          ))}
        </ul>
      )}
      <fetcher.Form method="post" ref={area} className="grid max-w-[75ch] gap-2">
        <TextAreaField
          label="Your comment"
          name="body"
          required
          maxLength={4000}
          fault={fetcher.data?.fault}
          hint={
            others.length > 0
              ? `Write @ and a name to tell someone: ${others
                  .slice(0, 4)
                  .map(({ name }) => `@${name}`)
                  .join(', ')}${others.length > 4 ? ' …' : ''}`
              : undefined
          }
        />
        <StatusButton
          name="intent"
          value="comment"
          busy={fetcher.state !== 'idle'}
          working="Writing…"
          className="justify-self-start"
        >
          Comment
        </StatusButton>
      </fetcher.Form>
    </Sheet>
  )
}
