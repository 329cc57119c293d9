// A field of the case that may hold one value, a list or a range, changed in place.
import type { ReactNode } from 'react'
import {
  Field,
  FieldRow,
  type Option,
  QuantityField,
  SelectField,
  TextField,
} from '#app/components/ui/field.tsx'
import { acceptedUnits, displayUnit } from '#engine/units.ts'
import { useForm } from './form-context.tsx'
import { listItems, QUANTITIES, varyMode } from './form-fields.ts'

/** Chooses between one value and several; stands at the right of the label. */
function VarySwitch({
  name,
  label,
  modes,
}: {
  name: string
  label: string
  modes: readonly ('list' | 'range')[]
}) {
  const { fields, setAll, disabled } = useForm()
  const mode = varyMode(name, fields)
  const change = (next: string) => {
    const base = fields[name]?.trim() ?? ''
    const at = (part: string) => `vary.${name}.${part}`
    const seed: Record<string, string> = { [`vary.${name}`]: next }
    if (next === 'list' && !fields[at('values')])
      seed[at('values')] = mode === 'range' ? rangeAsList(fields, name) : base
    if (next === 'range') {
      const items = listItems(fields[at('values')] ?? '')
      if (!fields[at('from')]) seed[at('from')] = items[0] ?? base
      if (!fields[at('to')]) seed[at('to')] = items.length > 1 ? (items.at(-1) ?? '') : ''
      if (!fields[at('count')]) seed[at('count')] = String(items.length > 1 ? items.length : 5)
    }
    setAll(seed)
  }
  return (
    <select
      name={`vary.${name}`}
      value={mode}
      disabled={disabled}
      aria-label={`${label}: one value or several`}
      onChange={(event) => change(event.target.value)}
      className={`vary-switch ${mode === '' ? '' : 'vary-switch-on'}`}
    >
      <option value="">one value</option>
      {modes.map((entry) => (
        <option key={entry} value={entry}>
          {entry === 'list' ? 'a list' : 'a range'}
        </option>
      ))}
    </select>
  )
}

const rangeAsList = (fields: Readonly<Record<string, string>>, name: string) =>
  [fields[`vary.${name}.from`], fields[`vary.${name}.to`]].filter(Boolean).join('; ')

/** A quantity with its unit; `vary={false}` where a sweep cannot change it. */
export function CaseQuantity({
  name,
  label,
  symbol,
  help,
  vary = true,
  optional,
}: {
  name: string
  label: string
  symbol?: string
  /** One sentence: what is typical, and where that comes from. */
  help?: ReactNode
  vary?: boolean
  optional?: boolean
}) {
  const { fields, set, fault, leave, units, disabled } = useForm()
  const { dimension, hint } = QUANTITIES[name]
  const unit = displayUnit(dimension, units, hint)
  const mode = vary ? varyMode(name, fields) : ''
  const control = (field: string) => ({
    name: field,
    value: fields[field] ?? '',
    disabled,
    onChange: (event: { target: { value: string } }) => set(field, event.target.value),
    onBlur: () => leave(field),
    fault: fault(field),
  })
  const title = (
    <>
      {label}
      {symbol ? <i className="ms-1.5 font-normal text-soft">{symbol}</i> : null}
      {optional ? <span className="ms-1.5 font-normal text-soft">optional</span> : null}
    </>
  )
  const aside = vary ? <VarySwitch name={name} label={label} modes={['list', 'range']} /> : undefined
  const taken = acceptedUnits(dimension)
  const shape = {
    label: title,
    unit,
    hint: help,
    aside,
    title: taken.length > 1 ? `Units read: ${taken.join(', ')}` : undefined,
  }
  if (mode === '') return <QuantityField {...shape} {...control(name)} />
  return (
    <div className="varied">
      {mode === 'list' ? (
        <TextField
          {...shape}
          {...control(`vary.${name}.values`)}
          label={
            <>
              {title}
              {unit ? <span className="ms-1.5 font-normal text-soft">{unit}</span> : null}
            </>
          }
          placeholder="values, with ; between"
        />
      ) : (
        <>
          <FieldRow className="varied-row">
            <QuantityField
              {...shape}
              hint={undefined}
              label={<>{title} from</>}
              {...control(`vary.${name}.from`)}
            />
            <QuantityField label="to" unit={unit} {...control(`vary.${name}.to`)} />
          </FieldRow>
          <FieldRow className="varied-row mt-2">
            <QuantityField label="values" {...control(`vary.${name}.count`)} />
            <SelectField
              label="spacing"
              options={[
                { value: 'linear', label: 'even' },
                { value: 'geometric', label: 'even ratios' },
              ]}
              {...control(`vary.${name}.scale`)}
            />
          </FieldRow>
          {help ? <p className="mt-1 text-note text-soft">{help}</p> : null}
        </>
      )}
      <QuantityField
        className="mt-2"
        label={<span className="font-normal text-soft">in the base case</span>}
        unit={unit}
        {...control(name)}
        placeholder="first value"
      />
    </div>
  )
}

/** A choice from a list; varied, several may be ticked. */
export function CaseChoice({
  name,
  label,
  options,
  help,
  vary = true,
  empty,
}: {
  name: string
  label: string
  options: readonly Option[]
  help?: ReactNode
  vary?: boolean
  /** What stands for no choice, if that is allowed. */
  empty?: string
}) {
  const { fields, set, fault, leave, disabled } = useForm()
  const mode = vary ? varyMode(name, fields) : ''
  const aside = vary ? <VarySwitch name={name} label={label} modes={['list']} /> : undefined
  const picked = `vary.${name}.values`
  const all = empty === undefined ? options : [{ value: '', label: empty }, ...options]
  const select = (
    <SelectField
      label={mode === '' ? label : <span className="font-normal text-soft">in the base case</span>}
      name={name}
      options={all}
      hint={mode === '' ? help : undefined}
      aside={mode === '' ? aside : undefined}
      fault={fault(name)}
      value={fields[name] ?? ''}
      disabled={disabled}
      className={mode === '' ? '' : 'mt-2'}
      onChange={(event) => set(name, event.target.value)}
      onBlur={() => leave(name)}
    />
  )
  if (mode === '') return select
  const chosen = (fields[picked] ?? '').split(/\s+/).filter(Boolean)
  return (
    <div className="varied">
      <Field
        label={label}
        name={picked}
        aside={aside}
        hint={help}
        fault={fault(picked)}
        control={(ties) => (
          // biome-ignore lint/a11y/useSemanticElements: the label above is the group's, a legend would say it twice
          <div role="group" aria-label={label} {...ties} className="ticks scroll-thin">
            <input type="hidden" name={picked} value={chosen.join(' ')} />
            {options
              .filter((option) => option.value !== '' && option.value !== 'given')
              .map((option) => (
                <label key={option.value} className="tick">
                  <input
                    type="checkbox"
                    checked={chosen.includes(option.value)}
                    disabled={disabled}
                    onChange={(event) =>
                      set(
                        picked,
                        (event.target.checked
                          ? [...chosen, option.value]
                          : chosen.filter((value) => value !== option.value)
                        ).join(' '),
                      )
                    }
                  />
                  {option.label}
                </label>
              ))}
          </div>
        )}
      />
      {select}
    </div>
  )
}
