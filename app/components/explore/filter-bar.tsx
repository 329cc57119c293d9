// The filters in words, each with the way to lift it, and a folded form to add one.
import { type FormEvent, useState } from 'react'
import { Link } from 'react-router'
import { Button } from '#app/components/ui/button.tsx'

export type FilterField = {
  id: string
  label: string
  unit: string
  /** Values to choose from; without them, bounds are typed. */
  values?: readonly { value: string; label: string }[]
}

export function FilterBar({
  filters,
  clearHref,
  fields,
  onBounds,
  onValue,
}: {
  filters: readonly { text: string; href: string }[]
  clearHref: string
  fields: readonly FilterField[]
  /** Bounds as typed, in the field's unit; answers what is wrong with them, or null. */
  onBounds: (id: string, min: string, max: string) => string | null
  onValue: (id: string, value: string) => void
}) {
  return (
    <div className="flex flex-wrap items-center gap-2 text-note">
      {filters.length === 0 ? (
        <span className="text-soft">No filter: every point is shown.</span>
      ) : (
        <>
          <span className="text-soft">Only points with</span>
          {filters.map(({ text, href }) => (
            <span key={text} className="tag tag-attention inline-flex items-center gap-1.5">
              {text}
              <Link to={href} preventScrollReset aria-label={`Lift the filter ${text}`} className="font-bold">
                ×
              </Link>
            </span>
          ))}
          {filters.length > 1 ? (
            <Link to={clearHref} preventScrollReset className="link">
              Lift all
            </Link>
          ) : null}
        </>
      )}
      <FilterForm {...{ fields, onBounds, onValue }} />
    </div>
  )
}

function FilterForm({
  fields,
  onBounds,
  onValue,
}: Pick<Parameters<typeof FilterBar>[0], 'fields' | 'onBounds' | 'onValue'>) {
  const [open, setOpen] = useState(false)
  const [id, setId] = useState(fields[0]?.id ?? '')
  const [fault, setFault] = useState<string | null>(null)
  const field = fields.find((one) => one.id === id)
  if (!field) return null
  const apply = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const form = new FormData(event.currentTarget)
    if (field.values) onValue(id, String(form.get('value')))
    else {
      const problem = onBounds(id, String(form.get('min') ?? ''), String(form.get('max') ?? ''))
      setFault(problem)
      if (problem !== null) return
    }
    setOpen(false)
  }
  if (!open)
    return (
      <Button look="quiet" small className="screen-only" onClick={() => setOpen(true)}>
        Add a filter
      </Button>
    )
  return (
    <form onSubmit={apply} className="flex w-full flex-wrap items-end gap-2 pt-1">
      <label className="grid gap-0.5">
        <span className="text-soft">Result or variable</span>
        <select
          className="input compact-select"
          value={id}
          onChange={(event) => {
            setId(event.target.value)
            setFault(null)
          }}
        >
          {fields.map((one) => (
            <option key={one.id} value={one.id}>
              {one.label}
            </option>
          ))}
        </select>
      </label>
      {field.values ? (
        <label className="grid gap-0.5">
          <span className="text-soft">is</span>
          <select name="value" className="input compact-select">
            {field.values.map(({ value, label }) => (
              <option key={value} value={value}>
                {label}
              </option>
            ))}
          </select>
        </label>
      ) : (
        (['min', 'max'] as const).map((side) => (
          <label key={side} className="grid gap-0.5">
            <span className="text-soft">
              {side === 'min' ? 'at least' : 'at most'}
              {field.unit ? `, ${field.unit}` : ''}
            </span>
            <input
              name={side}
              type="text"
              inputMode="decimal"
              autoComplete="off"
              aria-invalid={fault ? true : undefined}
              aria-describedby={fault ? 'filter-fault' : undefined}
              className="input compact-input"
            />
          </label>
        ))
      )}
      <Button type="submit" small>
        Filter
      </Button>
      <Button look="quiet" small onClick={() => setOpen(false)}>
        Cancel
      </Button>
      {fault ? (
        <p id="filter-fault" role="alert" className="w-full font-semibold text-red-ink">
          {fault}
        </p>
      ) : null}
    </form>
  )
}
