// What the study varies, how, under which limits, and for the least of what.
import { FieldRow, QuantityField, SelectField } from '#app/components/ui/field.tsx'
import { Digits } from '#app/components/ui/number.tsx'
import { Sheet } from '#app/components/ui/page.tsx'
import { LIMITS, type LimitInfo } from '#engine/sweep/limits.ts'
import { OBJECTIVE_LABELS, OBJECTIVES } from '#engine/sweep/objective.ts'
import { displayUnit } from '#engine/units.ts'
import { useForm } from './form-context.tsx'
import type { Preview } from './preview.ts'

export function Limits() {
  const { fields, set, fault, leave, units, disabled } = useForm()
  const box = (limit: LimitInfo, side: 'min' | 'max') => {
    const name = `limits.${limit.id}.${side}`
    return (
      <QuantityField
        key={side}
        label={`${limit.label}, ${side === 'min' ? 'at least' : 'at most'}`}
        name={name}
        unit={displayUnit(limit.dimension, units)}
        value={fields[name] ?? ''}
        disabled={disabled}
        fault={fault(name)}
        placeholder="no limit"
        onChange={(event) => set(name, event.target.value)}
        onBlur={() => leave(name)}
      />
    )
  }
  const first = ['coolantPressureDrop', 'vapourPressureDrop', 'coolantVelocity', 'length']
  const front = LIMITS.filter((limit) => first.includes(limit.id))
  const rest = LIMITS.filter((limit) => !first.includes(limit.id))
  const both = (limit: LimitInfo) =>
    limit.id === 'coolantVelocity' || limit.id === 'meanWallSubcooling'
      ? (['min', 'max'] as const)
      : ([limit.bare] as const)
  const given = (list: LimitInfo[]) =>
    list.some((limit) => fields[`limits.${limit.id}.min`] || fields[`limits.${limit.id}.max`])
  return (
    <Sheet title="Limits and objective">
      <fieldset id="limits" className="grid gap-5" aria-label="Limits and objective">
        <SelectField
          label="Find the least"
          name="objective"
          value={fields.objective ?? 'outsideArea'}
          disabled={disabled}
          className="max-w-[22rem]"
          onChange={(event) => set('objective', event.target.value)}
          options={OBJECTIVES.map((id) => ({ value: id, label: OBJECTIVE_LABELS[id].toLowerCase() }))}
        />
        <div className="define-grid">
          {front.flatMap((limit) => both(limit).map((side) => box(limit, side)))}
        </div>
        <details className="define-fold" open={given(rest) || undefined}>
          <summary>More limits: flow, outlet, bundle size, subcooling, duty</summary>
          <div className="define-grid pt-3">
            {rest.flatMap((limit) => both(limit).map((side) => box(limit, side)))}
          </div>
        </details>
      </fieldset>
    </Sheet>
  )
}

const DESIGNS = [
  { value: 'factorial', label: 'every combination' },
  { value: 'latinHypercube', label: 'Latin hypercube sample' },
  { value: 'sobol', label: 'Sobol sample' },
  { value: 'oneAtATime', label: 'one at a time' },
]

export function SweepDesign({ preview }: { preview: Preview }) {
  const { fields, set, fault, leave, disabled } = useForm()
  const sampled = fields['sweep.design'] === 'latinHypercube' || fields['sweep.design'] === 'sobol'
  const box = (name: string, label: string, help: string) => (
    <QuantityField
      label={label}
      name={name}
      hint={help}
      value={fields[name] ?? ''}
      disabled={disabled}
      fault={fault(name)}
      onChange={(event) => set(name, event.target.value)}
      onBlur={() => leave(name)}
    />
  )
  return (
    <Sheet title="Sweep">
      <fieldset id="sweep" className="grid gap-4" aria-label="Sweep" tabIndex={-1}>
        {preview.counts.length > 0 ? (
          <p>
            {preview.counts.map(({ label, values }, i) => (
              <span key={label}>
                {i > 0 ? ' × ' : ''}
                {values > 0 ? (
                  <>
                    <b>{values}</b> {label.toLowerCase()}
                  </>
                ) : (
                  label.toLowerCase()
                )}
              </span>
            ))}
            {preview.points !== null ? (
              <>
                {' '}
                ={' '}
                <b>
                  <Digits>{preview.points}</Digits> points
                </b>
              </>
            ) : null}
          </p>
        ) : (
          <p className="text-soft">
            Nothing is varied yet. Turn any field above from <b>one value</b> into a list or a range.
          </p>
        )}
        <FieldRow>
          <SelectField
            label="Design"
            name="sweep.design"
            value={fields['sweep.design'] ?? 'factorial'}
            disabled={disabled}
            onChange={(event) => set('sweep.design', event.target.value)}
            options={DESIGNS}
          />
          {sampled ? box('sweep.samples', 'Points', 'At most 1 000 000.') : null}
          {sampled
            ? box('sweep.seed', 'Seed', 'The same seed draws the same points; 1 when left empty.')
            : null}
        </FieldRow>
      </fieldset>
    </Sheet>
  )
}
