// Numbers as text for people: significant digits without exponents, and the groups that digits are set in.

/** Plain decimal text with the given significant digits; what is copied from it is a number. */
export function significant(value: number, digits: number): string {
  if (!Number.isFinite(value)) return '–'
  if (value === 0) return '0'
  const magnitude = Math.floor(Math.log10(Math.abs(value)))
  if (magnitude < -5 || magnitude > 12) return value.toExponential(digits - 1)
  const rounded = Number(value.toPrecision(digits))
  // Rounding may carry into the next power of ten: 9.996 at three digits is 10.0.
  const carried = Math.floor(Math.log10(Math.abs(rounded)))
  return rounded.toFixed(Math.max(0, digits - 1 - carried))
}

/** Whole digits in threes from the right; the decimals stay with the last group. */
export function digitGroups(text: string): string[] {
  const match = /^(-?)(\d+)(.*)$/.exec(text)
  if (!match) return [text]
  const [, sign, whole, rest] = match
  const groups: string[] = []
  for (let end = whole.length; end > 0; end -= 3) groups.unshift(whole.slice(Math.max(0, end - 3), end))
  groups[0] = sign + groups[0]
  groups[groups.length - 1] += rest
  return groups
}

/** For titles and other plain-text places, where style cannot group: U+202F between groups. */
export function groupedText(value: number | string): string {
  return digitGroups(String(value)).join('\u202f')
}

/** Seconds as "40 s", "3 min 20 s" or "2 h 5 min". */
export function duration(seconds: number): string {
  const s = Math.max(0, Math.round(seconds))
  if (s < 60) return `${s} s`
  const minutes = Math.floor(s / 60)
  if (minutes < 60) return s % 60 === 0 ? `${minutes} min` : `${minutes} min ${s % 60} s`
  return minutes % 60 === 0
    ? `${Math.floor(minutes / 60)} h`
    : `${Math.floor(minutes / 60)} h ${minutes % 60} min`
}

export function plural(count: number, one: string, many = `${one}s`): string {
  return count === 1 ? one : many
}
