// The choice of axes and colour: a form of selects that asks for its page at once, or by its button without scripts.
import { Form, useSubmit } from 'react-router'

export type AxisOption = { id: string; label: string; group: string }

export function AxesForm({
  search,
  options,
  colours,
  x,
  y,
  colour,
}: {
  search: URLSearchParams
  options: readonly AxisOption[]
  colours: readonly AxisOption[]
  x: string
  y: string
  colour: string | null
}) {
  const submit = useSubmit()
  const kept = [...search].filter(([key]) => !['x', 'y', 'colour', 'page'].includes(key))
  return (
    <Form
      method="get"
      replace
      preventScrollReset
      className="flex flex-wrap items-center gap-x-3 gap-y-2 text-note"
      onChange={(event) => submit(event.currentTarget, { replace: true, preventScrollReset: true })}
    >
      {kept.map(([key, value]) => (
        <input key={`${key}=${value}`} type="hidden" name={key} value={value} />
      ))}
      <Choice name="y" label="Upward" value={y} options={options} />
      <Choice name="x" label="Across" value={x} options={options} />
      <Choice
        name="colour"
        label="Colour"
        value={colour ?? 'none'}
        options={[{ id: 'none', label: 'none', group: '' }, ...colours]}
      />
      <noscript>
        <button type="submit" className="button button-plain button-small">
          Show
        </button>
      </noscript>
    </Form>
  )
}

function Choice({
  name,
  label,
  value,
  options,
}: {
  name: string
  label: string
  value: string
  options: readonly AxisOption[]
}) {
  const groups = [...new Set(options.map(({ group }) => group))]
  return (
    <label className="inline-flex items-center gap-1.5 text-soft">
      {label}
      <select key={value} name={name} defaultValue={value} className="input compact-select">
        {groups.map((group) => {
          const own = options.filter((option) => option.group === group)
          const entries = own.map(({ id, label: text }) => (
            <option key={id} value={id}>
              {text}
            </option>
          ))
          return group === '' ? (
            entries
          ) : (
            <optgroup key={group} label={group}>
              {entries}
            </optgroup>
          )
        })}
      </select>
    </label>
  )
}
