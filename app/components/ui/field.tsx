// Form fields: label above, unit beside the box, hint and fault below, tied together for assistive technology.
import { type ComponentProps, type ReactNode, useId } from 'react'

export type Problem = string | string[] | null | undefined

type FieldShape = {
  label: ReactNode
  name: string
  /** One sentence: what is typical, what is allowed. */
  hint?: ReactNode
  /** What is wrong and what to do. */
  fault?: Problem
  /** Room at the right of the label: a symbol, a switch to a range. */
  aside?: ReactNode
  hideLabel?: boolean
  className?: string
}

function faultText(fault: Problem): string | null {
  if (!fault) return null
  const text = Array.isArray(fault) ? fault.filter(Boolean).join(' ') : fault
  return text === '' ? null : text
}

/** Several fields on one line where there is room, one under another where there is not. */
export function FieldRow({ children, className = '' }: { children: ReactNode; className?: string }) {
  return (
    <div
      className={`grid grid-cols-[repeat(auto-fit,minmax(min(100%,11rem),1fr))] items-start gap-x-4 gap-y-4 ${className}`}
    >
      {children}
    </div>
  )
}

/** A titled group of fields. */
export function FieldGroup({
  title,
  intro,
  children,
}: {
  title: string
  intro?: ReactNode
  children: ReactNode
}) {
  return (
    <fieldset className="min-w-0">
      <legend className="mb-1 text-lead font-bold">{title}</legend>
      {intro ? <p className="mb-3 max-w-[65ch] text-note text-soft">{intro}</p> : null}
      <div className="grid gap-4">{children}</div>
    </fieldset>
  )
}

/** The frame every field shares; `control` receives the ids and states that tie it to label, hint and fault. */
export function Field({
  label,
  name,
  hint,
  fault,
  aside,
  hideLabel,
  className = '',
  control,
}: FieldShape & {
  control: (props: {
    id: string
    name: string
    'aria-describedby'?: string
    'aria-invalid'?: true
  }) => ReactNode
}) {
  const id = useId()
  const text = faultText(fault)
  const describedBy = [text ? `${id}-fault` : '', hint ? `${id}-hint` : ''].filter(Boolean).join(' ')
  return (
    <div className={`min-w-0 ${className}`}>
      <div className={`mb-1 flex items-baseline justify-between gap-2 ${hideLabel ? 'visually-hidden' : ''}`}>
        <label htmlFor={id} className="text-note font-semibold">
          {label}
        </label>
        {aside ? <span className="text-note text-soft">{aside}</span> : null}
      </div>
      {control({
        id,
        name,
        'aria-describedby': describedBy || undefined,
        'aria-invalid': text ? true : undefined,
      })}
      {text ? (
        <p id={`${id}-fault`} className="mt-1 text-note font-semibold text-red-ink" data-fault={name}>
          {text}
        </p>
      ) : null}
      {hint ? (
        <p id={`${id}-hint`} className="mt-1 text-note text-soft">
          {hint}
        </p>
      ) : null}
    </div>
  )
}

type ControlProps<Tag extends 'input' | 'select' | 'textarea'> = Omit<
  ComponentProps<Tag>,
  'id' | 'name' | 'className' | 'aria-invalid' | 'aria-describedby'
>

export function TextField({
  label,
  name,
  hint,
  fault,
  aside,
  hideLabel,
  className,
  ...input
}: FieldShape & ControlProps<'input'>) {
  return (
    <Field
      {...{ label, name, hint, fault, aside, hideLabel, className }}
      control={(ties) => <input type="text" autoComplete="off" {...input} {...ties} className="input" />}
    />
  )
}

/**
 * A number with a unit. The unit stands beside the box and is what a bare number means; another may be typed
 * after the number ("3/4 in", "0,5 bar"), so the box takes text. Parsing is the form's, by the engine's rules.
 */
export function QuantityField({
  label,
  name,
  unit,
  hint,
  fault,
  aside,
  hideLabel,
  className,
  ...input
}: FieldShape & ControlProps<'input'> & { unit?: string }) {
  return (
    <Field
      {...{ label, name, hint, fault, aside, hideLabel, className }}
      control={(ties) => (
        <div className="relative">
          <input
            type="text"
            inputMode="decimal"
            autoComplete="off"
            spellCheck={false}
            {...input}
            {...ties}
            className={`input text-end ${unit ? 'quantity-input' : ''}`}
            data-unit-length={unit ? Math.min(unit.length, 8) : undefined}
          />
          {unit ? (
            <span className="pointer-events-none absolute inset-y-0 end-0 flex w-16 items-center ps-2 text-note text-soft">
              {unit}
            </span>
          ) : null}
        </div>
      )}
    />
  )
}

export type Option = { value: string; label: string; disabled?: boolean }
export type OptionGroup = { label: string; options: Option[] }

export function SelectField({
  label,
  name,
  options,
  hint,
  fault,
  aside,
  hideLabel,
  className,
  ...select
}: FieldShape & ControlProps<'select'> & { options: readonly (Option | OptionGroup)[] }) {
  return (
    <Field
      {...{ label, name, hint, fault, aside, hideLabel, className }}
      control={(ties) => (
        <select {...select} {...ties} className="input">
          {options.map((entry) =>
            'options' in entry ? (
              <optgroup key={entry.label} label={entry.label}>
                {entry.options.map((option) => (
                  <option key={option.value} value={option.value} disabled={option.disabled}>
                    {option.label}
                  </option>
                ))}
              </optgroup>
            ) : (
              <option key={entry.value} value={entry.value} disabled={entry.disabled}>
                {entry.label}
              </option>
            ),
          )}
        </select>
      )}
    />
  )
}

export function TextAreaField({
  label,
  name,
  hint,
  fault,
  aside,
  hideLabel,
  className,
  ...area
}: FieldShape & ControlProps<'textarea'>) {
  return (
    <Field
      {...{ label, name, hint, fault, aside, hideLabel, className }}
      control={(ties) => <textarea rows={3} {...area} {...ties} className="input" />}
    />
  )
}

export function CheckField({
  label,
  name,
  hint,
  className = '',
  ...input
}: Pick<FieldShape, 'label' | 'name' | 'hint' | 'className'> & ControlProps<'input'>) {
  const id = useId()
  return (
    <div className={className}>
      <label className="flex items-baseline gap-2">
        <input
          type="checkbox"
          {...input}
          name={name}
          className="size-4 shrink-0 translate-y-0.5"
          aria-describedby={hint ? id : undefined}
        />
        <span className="font-medium">{label}</span>
      </label>
      {hint ? (
        <p id={id} className="ms-6 text-note text-soft">
          {hint}
        </p>
      ) : null}
    </div>
  )
}

/** One of a few, all visible: radios set side by side. */
export function ChoiceField({
  label,
  name,
  options,
  hint,
  fault,
  className = '',
  ...input
}: Pick<FieldShape, 'label' | 'name' | 'hint' | 'fault' | 'className'> & {
  options: readonly Option[]
  value?: string
  defaultValue?: string
  onChange?: ComponentProps<'input'>['onChange']
}) {
  const id = useId()
  const text = faultText(fault)
  const { value, defaultValue, onChange } = input
  return (
    <fieldset className={`min-w-0 ${className}`} aria-describedby={text || hint ? id : undefined}>
      <legend className="mb-1 text-note font-semibold">{label}</legend>
      <div className="inline-flex flex-wrap gap-px overflow-hidden rounded-md border border-line-strong bg-line-strong">
        {options.map((option) => (
          <label
            key={option.value}
            className="choice relative flex min-h-8.5 grow items-center justify-center bg-sheet px-3 py-1 font-medium has-checked:bg-verdigris-wash has-checked:text-verdigris-ink has-focus-visible:outline-2 has-focus-visible:-outline-offset-2 has-focus-visible:outline-verdigris has-disabled:cursor-not-allowed has-disabled:text-soft"
          >
            <input
              type="radio"
              name={name}
              value={option.value}
              disabled={option.disabled}
              className="absolute size-px opacity-0"
              {...(value !== undefined
                ? { checked: value === option.value, onChange: onChange ?? (() => {}) }
                : { defaultChecked: defaultValue === option.value, onChange })}
            />
            {option.label}
          </label>
        ))}
      </div>
      {text || hint ? (
        <p id={id} className={`mt-1 text-note ${text ? 'font-semibold text-red-ink' : 'text-soft'}`}>
          {text ?? hint}
        </p>
      ) : null}
    </fieldset>
  )
}

/** After a refused submit: focus the first field with a fault. Call from an effect on the form's element. */
export function focusFirstFault(form: HTMLElement | null): void {
  form?.querySelector<HTMLElement>('[aria-invalid="true"]')?.focus()
}
