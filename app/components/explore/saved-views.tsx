// Ways of looking at a study's results that people keep by name: opened, kept, taken away.
import { useEffect, useRef } from 'react'
import { Link, useFetcher, useLocation } from 'react-router'
import { Button, StatusButton } from '../ui/button.tsx'
import { Disclosure } from '../ui/disclosure.tsx'
import { CheckField, TextField } from '../ui/field.tsx'

export type SavedViewEntry = {
  id: string
  name: string
  query: string
  shared: boolean
  own: boolean
  createdByName: string
}

export function SavedViews({ studyId, views }: { studyId: string; views: readonly SavedViewEntry[] }) {
  const fetcher = useFetcher<{ fault?: string } | null>()
  const { pathname, search } = useLocation()
  const form = useRef<HTMLFormElement>(null)
  const sent = useRef(false)
  useEffect(() => {
    if (fetcher.state !== 'idle') sent.current = true
    else if (sent.current) {
      sent.current = false
      if (!fetcher.data?.fault) form.current?.reset()
    }
  }, [fetcher.state, fetcher.data])
  const action = `/studies/${studyId}/views`
  const here = <input type="hidden" name="returnTo" value={`${pathname}${search}`} />
  return (
    <Disclosure
      label={views.length > 0 ? `Views (${views.length})` : 'Views'}
      name="Saved views"
      look="plain"
      className="w-80 p-3"
    >
      <div className="grid gap-4">
        {views.length === 0 ? (
          <p className="text-note text-soft">
            A view keeps axes, filters, sorting, columns and the selected point under a name.
          </p>
        ) : (
          <ul className="grid gap-1">
            {views.map((view) => (
              <li key={view.id} className="flex items-baseline justify-between gap-3">
                <span className="min-w-0">
                  <Link to={`?${view.query}`} className="link font-semibold" data-closes>
                    {view.name}
                  </Link>{' '}
                  <span className="text-note text-soft">
                    {view.own ? (view.shared ? 'shared' : 'yours alone') : view.createdByName}
                  </span>
                </span>
                {view.own ? (
                  <fetcher.Form method="post" action={action}>
                    {here}
                    <input type="hidden" name="view" value={view.id} />
                    <Button
                      type="submit"
                      name="intent"
                      value="delete"
                      look="quiet"
                      small
                      aria-label={`Delete the view ${view.name}`}
                    >
                      Delete
                    </Button>
                  </fetcher.Form>
                ) : null}
              </li>
            ))}
          </ul>
        )}
        <fetcher.Form
          method="post"
          action={action}
          ref={form}
          className="grid gap-2 border-t border-line pt-3"
        >
          {here}
          <input type="hidden" name="query" value={search.replace(/^\?/, '') || 'sort=point'} />
          <TextField
            label="Save this view as"
            name="name"
            required
            maxLength={120}
            fault={fetcher.data?.fault}
          />
          <CheckField label="For all members of the project" name="shared" defaultChecked />
          <StatusButton
            name="intent"
            value="save"
            busy={fetcher.state !== 'idle'}
            working="Saving…"
            small
            className="justify-self-start"
          >
            Save
          </StatusButton>
        </fetcher.Form>
      </div>
    </Disclosure>
  )
}
