// The choice of axes and colour: a form of selects that asks for its page at once, or by its button without scripts.
import { Form, useSubmit } from 'react-router'

export type AxisOption = { id: string; label: string; group: string }

export type AxisChoice = { name: string; label: string; value: string; options: readonly AxisOption[] }

export function AxesForm({ search, choices }: { search: URLSearchParams; choices: readonly AxisChoice[] }) {
  const submit = useSubmit()
  const asked = new Set([...choices.map(({ name }) => name), 'page'])
  const kept = [...search].filter(([key]) => !asked.has(key))
  return (
    <Form
      method="get"
      preventScrollReset
      className="screen-only flex flex-wrap items-center gap-x-3 gap-y-2 text-note"
      onChange={(event) => submit(event.currentTarget, { preventScrollReset: true })}
    >
      {kept.map(([key, value]) => (
        <input key={`${key}=${value}`} type="hidden" name={key} value={value} />
      ))}
      {choices.map((choice) => (
        <Choice key={choice.name} {...choice} />
      ))}
      <noscript>
        <button type="submit" className="button button-plain button-small">
          Show
        </button>
      </noscript>
    </Form>
  )
}

function Choice({ name, label, value, options }: AxisChoice) {
  const groups = [...new Set(options.map(({ group }) => group))]
  return (
    <label className="inline-flex items-center gap-1.5 text-soft">
      {label}
      <select key={value} name={name} defaultValue={value} className="input compact-select">
        {groups.map((group) => {
          const entries = options
            .filter((option) => option.group === group)
            .map(({ id, label: text }) => (
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
