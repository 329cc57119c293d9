// The state of the Explore page as its URL holds it, and the addresses that change one part of it.
import { OUTCOMES } from '#engine/bundle/key-results.ts'
import type { SweptValue } from '#engine/sweep/study.ts'
import { formatQuantity, fromDisplay, toDisplay, type UnitSystem } from '#engine/units.ts'
import type { PointColumn } from './columns.ts'

export const PAGE_SIZE = 25

export const PICTURES = ['scatter', 'map', 'distribution', 'parallel'] as const
export type PictureKind = (typeof PICTURES)[number]

export type ExploreView = {
  run: string | null
  show: PictureKind
  x: string | null
  y: string | null
  colour: string | null
  sort: string | null
  descending: boolean
  page: number
  /** A point's number, or "refined". */
  point: number | 'refined' | null
  pinned: number[]
  /** Column ids in order; empty: the usual ones. */
  columns: string[]
  ranges: Record<string, { min?: number; max?: number }>
  /** The table lists points that miss a limit too. */
  all: boolean
  outcome: string | null
  inputs: Record<string, SweptValue>
}

const number = (text: string | null): number | null => {
  if (text === null || text.trim() === '') return null
  const value = Number(text)
  return Number.isFinite(value) ? value : null
}

const whole = (text: string | null): number | null => {
  const value = number(text)
  return value !== null && Number.isInteger(value) && value >= 0 ? value : null
}

/** What the URL asks for; parts that name nothing of this study are left out, never guessed at. */
export function parseView(search: URLSearchParams, columns: readonly PointColumn[]): ExploreView {
  const known = new Map(columns.map((column) => [column.id, column]))
  const id = (name: string) => {
    const given = search.get(name)
    return given !== null && known.has(given) ? given : null
  }
  const ranges: ExploreView['ranges'] = {}
  const inputs: ExploreView['inputs'] = {}
  for (const [key, text] of search) {
    const bound = /^(min|max)\.(.+)$/.exec(key)
    const value = number(text)
    const column = known.get(bound ? bound[2] : key)
    if (!column) continue
    if (bound) {
      if (value !== null && !column.choice) ranges[column.id] = { ...ranges[column.id], [bound[1]]: value }
    } else if (column.kind === 'input') {
      if (column.choice) inputs[column.id] = text
      else if (value !== null) inputs[column.id] = value
    }
  }
  const point = search.get('point')
  const sort = search.get('sort')
  const outcome = search.get('outcome')
  return {
    run: search.get('run'),
    show: PICTURES.find((kind) => kind === search.get('show')) ?? 'scatter',
    x: id('x'),
    y: id('y'),
    colour: search.get('colour') === 'none' ? 'none' : id('colour'),
    sort: sort === 'point' ? sort : id('sort'),
    descending: search.get('dir') === 'down',
    page: whole(search.get('page')) ?? 0,
    point: point === 'refined' ? 'refined' : whole(point),
    pinned: [...new Set(search.getAll('pin').flatMap((text) => whole(text) ?? []))].slice(0, 4),
    columns: [...new Set(search.getAll('column'))].filter((one) => known.has(one)),
    ranges,
    all: search.get('all') === '1',
    outcome: OUTCOMES.some(({ code }) => code === outcome) ? outcome : null,
    inputs,
  }
}

type Change = Record<string, string | number | null | readonly (string | number)[]>

/** The search part of the address with these parameters changed; null takes one out. */
export function changed(search: URLSearchParams, change: Change): string {
  const next = new URLSearchParams(search)
  for (const [key, value] of Object.entries(change)) {
    next.delete(key)
    if (value === null || value === '') continue
    if (Array.isArray(value)) for (const one of value) next.append(key, String(one))
    else next.set(key, String(value))
  }
  // Another order or other filters begin at their first page.
  if (!('page' in change) && !('point' in change) && !('pin' in change)) next.delete('page')
  const text = next.toString()
  return text === '' ? '?' : `?${text}`
}

/** Without any filter. */
export function unfiltered(search: URLSearchParams, columns: readonly PointColumn[]): string {
  const inputs = new Set(columns.filter(({ kind }) => kind === 'input').map(({ id }) => id))
  const drop = [...search.keys()].filter(
    (key) => /^(min|max)\./.test(key) || key === 'outcome' || inputs.has(key),
  )
  return changed(search, Object.fromEntries(drop.map((key) => [key, null])))
}

export type FilterWord = { text: string; without: Record<string, null> }

const decimals = (value: number, column: PointColumn, units: UnitSystem) =>
  Number(toDisplay(value, column.dimension, units, column.hint).value.toPrecision(4))

/** Each filter in words, with what to take out of the URL to lift it. */
export function filterWords(
  view: ExploreView,
  columns: readonly PointColumn[],
  units: UnitSystem,
  names: Record<string, Record<string, string>> = {},
): FilterWord[] {
  const find = (id: string) => columns.find((column) => column.id === id)
  const words: FilterWord[] = []
  for (const [id, { min, max }] of Object.entries(view.ranges)) {
    const column = find(id)
    if (!column) continue
    const label = column.label.toLowerCase()
    const { unit } = toDisplay(1, column.dimension, units, column.hint)
    const after = unit === '' ? '' : ` ${unit}`
    const text =
      min !== undefined && max !== undefined
        ? `${label} ${decimals(min, column, units)} to ${decimals(max, column, units)}${after}`
        : min !== undefined
          ? `${label} at least ${decimals(min, column, units)}${after}`
          : `${label} at most ${decimals(max as number, column, units)}${after}`
    words.push({ text, without: { [`min.${id}`]: null, [`max.${id}`]: null } })
  }
  for (const [id, value] of Object.entries(view.inputs)) {
    const column = find(id)
    if (!column) continue
    words.push({
      text: `${column.label.toLowerCase()} ${valueText(value, column, units, names)}`,
      without: { [id]: null },
    })
  }
  if (view.outcome) {
    const outcome = OUTCOMES.find(({ code }) => code === view.outcome)
    words.push({ text: outcome?.text ?? view.outcome, without: { outcome: null } })
  }
  return words
}

/** An input's value for people: a choice by its name, a number as given. */
export function valueText(
  value: SweptValue,
  column: PointColumn,
  units: UnitSystem,
  names: Record<string, Record<string, string>> = {},
): string {
  if (typeof value === 'string') return names[column.id]?.[value] ?? value
  const { value: number, unit } = toDisplay(value, column.dimension, units, column.hint)
  return `${Number(number.toPrecision(units === 'si' ? 6 : 4))}${unit === '' ? '' : `\u00a0${unit}`}`
}

/** A bound as typed in the reader's unit, as the URL carries it: SI. Comma or point. */
export function boundToSi(text: string, column: PointColumn, units: UnitSystem): number | null {
  const value = number(text.trim().replace(',', '.'))
  return value === null ? null : fromDisplay(value, column.dimension, units, column.hint)
}

/** A quantity with three digits, as sentences carry it. */
export const said = (value: number, column: PointColumn, units: UnitSystem): string =>
  formatQuantity(value, column.dimension, units, { digits: 3, hint: column.hint })
