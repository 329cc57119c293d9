// Row by row, everything the march found; the heat of the rows sums to the duty at the foot.
import { DRAINAGE_NAMES } from '#app/components/bundle-drawing/words.ts'
import { Digits, useUnits } from '#app/components/ui/number.tsx'
import type { PassResult, RowResult } from '#engine/result.ts'
import { type Dimension, displayUnit, formatNumber, toDisplay } from '#engine/units.ts'
import { SymbolText } from './entries.tsx'
import './sheet.css'

type Column<Row> = {
  label: string
  symbol?: string
  dimension: Dimension
  value: (row: Row) => number | null
  digits?: number
}

const whole = <Row,>(label: string, value: (row: Row) => number): Column<Row> => ({
  label,
  dimension: 'count',
  value,
})

export function RowsTable({
  rows,
  heat,
  passOf,
}: {
  rows: readonly RowResult[]
  /** Heat of each row [W]; null where the length is not known. */
  heat: readonly (number | null)[]
  passOf: (row: number) => number
}) {
  const gas = rows.some((row) => row.gasMoleFraction > 0)
  const factor = (label: string, symbol: string, of: keyof RowResult['factors']): Column<RowResult> => ({
    label,
    symbol,
    dimension: 'none',
    value: (row) => row.factors[of],
  })
  const used = (of: keyof RowResult['factors']) => rows.some((row) => row.factors[of] !== 1)
  const columns: Column<RowResult>[] = [
    whole('Pass', (row) => passOf(row.row)),
    whole('Tubes', (row) => row.tubes),
    {
      label: 'Saturation',
      symbol: 'T_s',
      dimension: 'temperature',
      value: (row) => row.saturationTemperature,
    },
    { label: 'Wall', symbol: 'T_w', dimension: 'temperature', value: (row) => row.wallTemperature },
    ...(rows.some((row) => row.coolantTemperature !== null)
      ? [
          {
            label: 'Coolant',
            symbol: 'T_c',
            dimension: 'temperature' as const,
            value: (row: RowResult) => row.coolantTemperature,
          },
        ]
      : []),
    {
      label: 'Subcooling',
      symbol: 'x',
      dimension: 'temperatureDifference',
      value: (row) => row.wallSubcooling,
    },
    {
      label: 'Coefficient',
      symbol: 'h',
      dimension: 'heatTransferCoefficient',
      value: (row) => row.coefficient,
    },
    { label: 'Flux', symbol: 'q', dimension: 'heatFlux', value: (row) => row.heatFlux },
    {
      label: 'Heat',
      symbol: 'q A',
      dimension: 'power',
      value: (row) => heat[row.row - 1] ?? null,
      digits: 5,
    },
    { label: 'Film Re', symbol: 'Re_f', dimension: 'none', value: (row) => row.filmReynolds },
    { label: 'Vapour', symbol: 'u', dimension: 'velocity', value: (row) => row.vapourVelocity },
    ...(gas
      ? [
          {
            label: 'Gas',
            symbol: 'y',
            dimension: 'fraction' as const,
            value: (row: RowResult) => row.gasMoleFraction,
          },
        ]
      : []),
    ...(used('inundation') ? [factor('Inundation', 'f_n', 'inundation')] : []),
    ...(used('shear') ? [factor('Shear', 'f_u', 'shear')] : []),
    ...(used('gas') ? [factor('Gas', 'f_y', 'gas')] : []),
    ...(used('surface') ? [factor('Surface', 'f_s', 'surface')] : []),
  ]
  const total = heat.every((value) => value !== null) ? heat.reduce((a: number, b) => a + (b ?? 0), 0) : null
  return (
    <ColumnsTable
      caption="Row by row, from the top"
      head="Row"
      columns={columns}
      rows={rows.map((row) => ({
        key: row.row,
        row,
        note: row.drainageMode ? DRAINAGE_NAMES[row.drainageMode] : '–',
      }))}
      noteHead="Drains in"
      foot={total === null ? undefined : { label: 'Heat', value: total }}
    />
  )
}

export function PassesTable({ passes }: { passes: readonly PassResult[] }) {
  const columns: Column<PassResult>[] = [
    whole('Rows', (pass) => pass.rows),
    { label: 'In', symbol: 'T_c,in', dimension: 'temperature', value: (pass) => pass.inletTemperature },
    { label: 'Out', symbol: 'T_c,out', dimension: 'temperature', value: (pass) => pass.outletTemperature },
    { label: 'Velocity', symbol: 'v_c', dimension: 'velocity', value: (pass) => pass.velocity },
    { label: 'Reynolds', symbol: 'Re_c', dimension: 'none', value: (pass) => pass.reynolds },
    {
      label: 'Inside coefficient',
      symbol: 'h_i',
      dimension: 'heatTransferCoefficient',
      value: (pass) => pass.coefficient,
    },
    { label: 'Pressure drop', symbol: 'Δp', dimension: 'pressure', value: (pass) => pass.pressureDrop },
  ]
  return (
    <ColumnsTable
      caption="Pass by pass, in the coolant's order"
      head="Pass"
      columns={columns}
      rows={passes.map((pass) => ({ key: pass.pass, row: pass }))}
    />
  )
}

function ColumnsTable<Row>({
  caption,
  head,
  columns,
  rows,
  noteHead,
  foot,
}: {
  caption: string
  head: string
  columns: readonly Column<Row>[]
  rows: readonly { key: number; row: Row; note?: string }[]
  noteHead?: string
  /** The sum of one column, by its label. */
  foot?: { label: string; value: number }
}) {
  const units = useUnits()
  const cell = (value: number | null, { dimension, digits = 4 }: Column<Row>) => {
    if (value === null) return '–'
    if (dimension === 'count') return value
    const shown = toDisplay(value, dimension, units).value
    // Temperatures are read against each other: two decimals, however large they are.
    return <Digits>{dimension === 'temperature' ? shown.toFixed(2) : formatNumber(shown, digits)}</Digits>
  }
  return (
    <div className="scroll-thin relative overflow-x-auto">
      <table className="data-table rows-table">
        <caption className="visually-hidden">{caption}</caption>
        <thead>
          <tr>
            <th scope="col">{head}</th>
            {columns.map(({ label, symbol, dimension }) => {
              const unit = displayUnit(dimension, units)
              return (
                <th key={label + (symbol ?? '')} scope="col" className="numeric">
                  {label}
                  <br />
                  <span className="font-normal">
                    {symbol ? (
                      <i>
                        <SymbolText text={symbol} />
                      </i>
                    ) : null}
                    {symbol && unit ? ', ' : ''}
                    {unit}
                  </span>
                </th>
              )
            })}
            {noteHead ? <th scope="col">{noteHead}</th> : null}
          </tr>
        </thead>
        <tbody>
          {rows.map(({ key, row, note }) => (
            <tr key={key}>
              <th scope="row">{key}</th>
              {columns.map((column) => (
                <td key={column.label + (column.symbol ?? '')} className="numeric">
                  {cell(column.value(row), column)}
                </td>
              ))}
              {noteHead ? <td>{note}</td> : null}
            </tr>
          ))}
        </tbody>
        {foot ? (
          <tfoot>
            <tr>
              <th scope="row">Sum</th>
              {columns.map((column) => (
                <td key={column.label + (column.symbol ?? '')} className="numeric font-bold">
                  {column.label === foot.label ? cell(foot.value, column) : null}
                </td>
              ))}
              {noteHead ? <td /> : null}
            </tr>
          </tfoot>
        ) : null}
      </table>
    </div>
  )
}
