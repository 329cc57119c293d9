// Quantities of a calculation, one a line: label, symbol, value with unit, and what stands behind it.
import { Digits, Quantity, useUnits } from '#app/components/ui/number.tsx'
import { type Dimension, type DisplayHint, toDisplay } from '#engine/units.ts'
import { Said } from './said.tsx'
import './sheet.css'

export type SheetEntry = {
  label: string
  symbol?: string
  hint?: DisplayHint
  from?: string
} & ({ value: number | null; dimension: Dimension } | { text: string })

export function Entries({
  title,
  entries,
  digits,
  from,
}: {
  title: string
  entries: readonly SheetEntry[]
  /** Significant digits of computed values; without it, values stand as they were given. */
  digits?: number
  /** Shows the column that says where each value comes from. */
  from?: boolean
}) {
  return (
    <table className={from ? 'entries entries-wide' : 'entries'}>
      <caption className="visually-hidden">{title}</caption>
      <tbody>
        {entries.map((entry) => (
          <tr key={entry.label}>
            <th scope="row">
              {entry.label}
              {entry.from === 'assumption' ? ' (assumption)' : ''}
              {from && entry.from ? (
                <span className="from-under">
                  <Formula text={entry.from} />
                </span>
              ) : null}
            </th>
            <td className="symbol">
              <SymbolText text={entry.symbol ?? ''} />
            </td>
            <td className={`value ${'text' in entry ? 'wide' : ''}`}>
              {'text' in entry ? (
                entry.text
              ) : digits === undefined && entry.value !== null ? (
                <Given value={entry.value} dimension={entry.dimension} hint={entry.hint} />
              ) : (
                <Quantity
                  value={entry.value}
                  dimension={entry.dimension}
                  hint={entry.hint}
                  digits={digits ?? 4}
                />
              )}
            </td>
            {from ? <td className="from">{entry.from ? <Formula text={entry.from} /> : null}</td> : null}
          </tr>
        ))}
      </tbody>
    </table>
  )
}

/** A value as it was given, to its own digits: six of them at most, four when converted. */
export function Given({
  value,
  dimension,
  hint,
}: {
  value: number
  dimension: Dimension
  hint?: DisplayHint
}) {
  const units = useUnits()
  const shown = toDisplay(value, dimension, units, hint)
  return (
    <span className="number">
      <Digits>{Number(shown.value.toPrecision(units === 'si' ? 6 : 4))}</Digits>
      {shown.unit === '' ? null : <span className="unit">{shown.unit}</span>}
    </span>
  )
}

/** "T_c,in" with its index set low. */
export function SymbolText({ text }: { text: string }) {
  const [base, index] = text.split(/_(.*)/s)
  return index ? (
    <>
      {base}
      <sub>{index.replaceAll('_', ' ')}</sub>
    </>
  ) : (
    text
  )
}

/** An equation with the indices of its symbols set low. */
export function Formula({ text }: { text: string }) {
  return text.split(/([A-Za-zΔΣπρημ]+_[A-Za-z]+(?:,[a-z]+)?)/).map((part, i) =>
    i % 2 === 1 ? (
      // biome-ignore lint/suspicious/noArrayIndexKey: the parts of an equation are their places
      <SymbolText key={i} text={part} />
    ) : (
      // biome-ignore lint/suspicious/noArrayIndexKey: the parts of an equation are their places
      <Said key={i}>{part}</Said>
    ),
  )
}
