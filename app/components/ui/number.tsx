// Numbers and quantities as they stand on a page: grouped by style, in the viewer's units, null as a dash.
import { createContext, type ReactNode, useContext } from 'react'
import { type Dimension, type DisplayHint, toDisplay, type UnitSystem } from '#engine/units.ts'
import { digitGroups, significant } from './number-format.ts'

const UnitsContext = createContext<UnitSystem>('si')

export function UnitsProvider({ units, children }: { units: UnitSystem; children: ReactNode }) {
  return <UnitsContext value={units}>{children}</UnitsContext>
}

/** The unit system the viewer reads; the engine, files and the API stay SI. */
export function useUnits(): UnitSystem {
  return useContext(UnitsContext)
}

/** A number's text with gaps between groups that are margins, so that copying gives a plain number. */
export function Digits({ children }: { children: number | string }) {
  const groups = digitGroups(String(children))
  if (groups.length === 1) return <span className="number">{groups[0]}</span>
  return (
    <span className="number">
      {groups.map((group, i) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: groups have no identity but their place
        <span key={i} className="digit-group">
          {group}
        </span>
      ))}
    </span>
  )
}

export type QuantityProps = {
  /** SI value; null where the engine gave none. */
  value: number | null | undefined
  dimension: Dimension
  /** Significant digits: three in headlines, four in tables. */
  digits?: number
  hint?: DisplayHint
  /** False in a column whose head carries the unit. */
  unit?: boolean
}

export function Quantity({ value, dimension, digits = 3, hint, unit = true }: QuantityProps) {
  const units = useUnits()
  if (value === null || value === undefined || !Number.isFinite(value)) {
    return <span title="no value; the notes say why">–</span>
  }
  const shown = toDisplay(value, dimension, units, hint)
  return (
    <span className="number">
      <Digits>{dimension === 'count' ? String(shown.value) : significant(shown.value, digits)}</Digits>
      {unit && shown.unit !== '' ? <span className="unit">{shown.unit}</span> : null}
    </span>
  )
}

/** "37 to 48 m²": the unit once, after the second number. */
export function QuantityRange({
  from,
  to,
  ...rest
}: Omit<QuantityProps, 'value' | 'unit'> & { from: number; to: number }) {
  return (
    <>
      <Quantity value={from} unit={false} {...rest} /> to <Quantity value={to} {...rest} />
    </>
  )
}
