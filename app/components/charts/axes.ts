// Ticks, ranges and scales of a chart's axes. Pure.

export type Axis = {
  label: string
  unit: string
  /** A limit on the axis, in the axis' own unit: beyond it the plot is tinted. */
  min?: number
  max?: number
  /** Whole numbers only: rows, tubes, passes. */
  whole?: boolean
}

export type Range = { low: number; high: number; log: boolean }

/** Values on an axis spread over more than this ratio are set on a logarithmic scale, so that none is squeezed flat. */
const LOG_RATIO = 40

/**
 * The range that shows every value and the limit. Logarithmic when the bulk of the values, 2 % left out at either
 * end, spreads over more than a factor of 40.
 */
export function axisRange(values: readonly number[], axis: Axis = { label: '', unit: '' }): Range {
  const finite = values.filter(Number.isFinite).sort((a, b) => a - b)
  if (finite.length === 0) return { low: 0, high: 1, log: false }
  let low = finite[0]
  let high = finite[finite.length - 1]
  const at = (share: number) => finite[Math.min(finite.length - 1, Math.floor(share * finite.length))]
  const log = low > 0 && !axis.whole && at(0.98) / at(0.02) > LOG_RATIO
  for (const limit of [axis.min, axis.max]) {
    if (limit === undefined || (log && limit <= 0)) continue
    low = Math.min(low, limit)
    high = Math.max(high, limit)
  }
  if (log) {
    const room = (high / low) ** 0.04
    return { low: low / room, high: high * room, log }
  }
  if (axis.whole) return { low: low - 0.5, high: high + 0.5, log }
  const span = high - low || Math.abs(high) || 1
  const room = span * 0.05
  // An axis that begins near zero begins at zero.
  return { low: low >= 0 && low < span * 0.25 ? Math.min(0, low) : low - room, high: high + room, log }
}

/** Round values across a range, about `count` of them. */
export function ticks(range: Range, count = 6): number[] {
  if (range.log) return logTicks(range, count)
  const span = range.high - range.low
  if (!(span > 0)) return [range.low]
  const rough = span / count
  const power = 10 ** Math.floor(Math.log10(rough))
  const step = ([1, 2, 2.5, 5].find((times) => times * power >= rough) ?? 10) * power
  const first = Math.ceil(range.low / step - 1e-9)
  const last = Math.floor(range.high / step + 1e-9)
  return Array.from({ length: Math.max(0, last - first + 1) }, (_, i) =>
    Number(((first + i) * step).toPrecision(12)),
  )
}

function logTicks({ low, high }: Range, count: number): number[] {
  const decades = Math.log10(high / low)
  const steps = decades > count ? [1] : decades > 2 ? [1, 3] : [1, 2, 5]
  const found: number[] = []
  for (let power = Math.floor(Math.log10(low)); power <= Math.ceil(Math.log10(high)); power++)
    for (const step of steps) {
      const value = Number((step * 10 ** power).toPrecision(12))
      if (value >= low && value <= high) found.push(value)
    }
  return found
}

/** Share of the way from the low end to the high end, 0 to 1 inside. */
export function place(value: number, { low, high, log }: Range): number {
  return log ? Math.log(value / low) / Math.log(high / low) : (value - low) / (high - low)
}

/** A tick's number in plain decimals. */
export function tickText(value: number): string {
  return String(Number(value.toPrecision(6)))
}

/** "coolant pressure drop, kPa" */
export function axisTitle({ label, unit }: Axis): string {
  return unit === '' ? label : `${label}, ${unit}`
}
