// The finding as a sentence: what the run has answered so far, and no more than that.
import { LIMITS, type LimitId, type LimitInfo, type Limits } from '#engine/sweep/limits.ts'
import { OBJECTIVE_LABELS, type Objective } from '#engine/sweep/objective.ts'
import { formatQuantity, type UnitSystem } from '#engine/units.ts'
import { type PointColumn, resultColumns } from './columns.ts'
import { said } from './view.ts'

export type FindingInput = {
  state: 'queued' | 'running' | 'done' | 'cancelled' | 'failed'
  paused: boolean
  waitingForWorker: boolean
  done: number
  points: number
  evaluated: number
  meetingLimits: number
  objective: Objective
  limits: Limits
  best: { objective: number; described: string } | null
  /**
   * What each limit does, the others held: the objective reachable without it, or, where nothing meets all, the
   * value nearest to its bound. Absent while a run is under way.
   */
  limitEffects: readonly LimitEffect[] | null
  limitsNotMet: Readonly<Record<string, number>>
  failures: readonly { text: string; count: number }[]
  fault: string | null
  pointsPerSecond: number | null
  secondsLeft: number | null
}

export type LimitEffect = {
  limit: LimitId
  side: 'min' | 'max'
  bound: number
  /** Least objective when only this limit is lifted; null where no point meets the others. */
  without: number | null
  /** Value nearest to the bound among points that meet the others; null where there is none. */
  nearest: number | null
}

export type Finding = { headline: string; reason: string[] }

const columns = resultColumns()
const columnOf = (id: string) => columns.find((column) => column.id === id) as PointColumn
const infoOf = (id: LimitId) => LIMITS.find((limit) => limit.id === id) as LimitInfo

const number = (value: number) => String(value)
const points = (count: number) => `${number(count)} ${count === 1 ? 'point' : 'points'}`

/** Limits as a clause: "within 60 kPa", "within 60 kPa coolant drop and 2.4 m/s coolant velocity", "within all 4 limits". */
export function withinClause(limits: Limits, units: UnitSystem): string {
  const given = LIMITS.filter(({ id }) => limits[id])
  if (given.length === 0) return ''
  if (given.length > 2) return ` within all ${given.length} limits`
  const only = given.length === 1
  const texts = given.map((info) =>
    limitPhrase(info.id, limits, units, only && info.dimension === 'pressure'),
  )
  return ` ${texts.join(' and ').replace(' and within ', ' and ')}`
}

const SHORT: Partial<Record<LimitId, string>> = {
  coolantPressureDrop: 'coolant drop',
  vapourPressureDrop: 'vapour drop',
  length: 'length',
  bundleWidth: 'width',
  bundleHeight: 'height',
}

function limitPhrase(id: LimitId, limits: Limits, units: UnitSystem, bare: boolean): string {
  const { min, max } = limits[id] ?? {}
  const info = infoOf(id)
  const column = columnOf(info.result)
  const name = bare ? '' : ` ${SHORT[id] ?? info.label.toLowerCase()}`
  if (min !== undefined && max !== undefined)
    return `within ${bound(min, column, units, false)} to ${bound(max, column, units)}${name}`
  return max !== undefined
    ? `within ${bound(max, column, units)}${name}`
    : `with at least ${bound(min as number, column, units)}${name}`
}

/** A bound is what a person gave: its own digits, not three. */
function bound(value: number, column: PointColumn, units: UnitSystem, unit = true): string {
  // Converted, a bound loses the roundness it was given with, and more than four digits say nothing.
  const digits = units === 'si' ? 6 : 4
  return formatQuantity(value, column.dimension, units, { digits, hint: column.hint, unit }).replace(
    /(\.\d*?)0+(?=\D|$)/,
    (_, kept: string) => (kept === '.' ? '' : kept),
  )
}

const money = (value: number) => formatQuantity(value, 'money', 'si', { digits: 3 })

function objectiveText(value: number, objective: Objective, units: UnitSystem): string {
  return objective === 'yearlyCost' ? `${money(value)} a year` : said(value, columnOf(objective), units)
}

export function finding(input: FindingInput, units: UnitSystem): Finding {
  const { state, done, points: planned, best, objective, limits } = input
  const whole = state === 'done'
  const thing = objective === 'outsideArea' ? '' : ` ${OBJECTIVE_LABELS[objective].toLowerCase()}`
  const bestText = best
    ? `${objectiveText(best.objective, objective, units)}${best.described ? `, ${best.described}` : ''}`
    : ''
  const within = withinClause(limits, units)
  const progress = `${number(done)} of ${points(planned)} done`

  if (state === 'queued' || (state === 'running' && done === 0))
    return {
      headline: input.paused
        ? `Paused before the first of ${points(planned)}`
        : `Waiting to start on ${points(planned)}`,
      reason: input.waitingForWorker
        ? ['No worker serves the queue at present; the run starts by itself when one does.']
        : ['The finding stands here as soon as the first points are done.'],
    }

  if (state === 'running') {
    const reason = [meetingSentence(input)]
    if (input.paused) reason.unshift('The run is paused and keeps what is done.')
    else if (input.pointsPerSecond !== null)
      reason.push(`${number(Math.round(input.pointsPerSecond))} points a second.`)
    return {
      headline: best
        ? `${progress}, best so far ${objectiveText(best.objective, objective, units)}${thing}`
        : `${progress}, none${within || ' usable'} so far`,
      reason,
    }
  }

  const head = whole
    ? ''
    : state === 'cancelled'
      ? `Cancelled at ${progress.replace(' done', '')}: `
      : `The run failed at ${progress.replace(' done', '')}: `
  const lower = (text: string) => (head === '' ? text : text.charAt(0).toLowerCase() + text.slice(1))
  const fault = input.fault ? [`${input.fault.replace(/\.$/, '')}.`] : []

  if (done === 0)
    return { headline: `${head.slice(0, -2)}`, reason: [...fault, 'No point was done before that.'] }

  if (best) {
    const least = thing === '' ? 'Least' : `Least${thing}`
    return {
      headline: `${head}${lower(`${least} of ${points(done)}${within}: ${bestText}`)}`,
      reason: [...fault, meetingSentence(input), ...bindingSentences(input, units)],
    }
  }

  if (input.evaluated === 0) {
    const [first] = input.failures
    return {
      headline: `${head}${lower(`None of ${points(done)} could be evaluated`)}`,
      reason: [...fault, ...(first ? [`Commonest reason, ${points(first.count)}: ${first.text}.`] : [])],
    }
  }
  return {
    headline: `${head}${lower(nothingMeets(input, units))}`,
    reason: [...fault, ...stoppedSentences(input)],
  }
}

/** Nothing meets all limits: what the closest point would need. */
function nothingMeets({ limitEffects, limits }: FindingInput, units: UnitSystem): string {
  const given = LIMITS.filter(({ id }) => limits[id])
  const excess = (effect: LimitEffect) =>
    Math.abs((effect.nearest as number) - effect.bound) / Math.max(Math.abs(effect.bound), 1e-12)
  const [closest] = (limitEffects ?? [])
    .filter((effect) => effect.nearest !== null)
    .sort((a, b) => excess(a) - excess(b))
  if (!closest)
    return given.length > 1
      ? 'No point meets every limit, nor all but one of them'
      : `No point meets the limit on ${infoOf(given[0].id).label.toLowerCase()}, or has a value for it`
  const info = infoOf(closest.limit)
  const column = columnOf(info.result)
  const needs = said(closest.nearest as number, column, units)
  const given_ = bound(closest.bound, column, units)
  if (given.length === 1) {
    const name = info.dimension === 'pressure' ? '' : ` ${info.label.toLowerCase()}`
    return closest.side === 'max'
      ? `No point meets ${given_}${name}; the closest needs ${needs}`
      : `No point reaches ${given_}${name}; the closest gives ${needs}`
  }
  return `No point meets every limit; the closest ${closest.side === 'max' ? 'needs' : 'gives'} ${needs} ${info.label.toLowerCase()} where ${given_} is ${closest.side === 'max' ? 'allowed' : 'asked for'}`
}

function meetingSentence({ meetingLimits, done, limits, evaluated }: FindingInput): string {
  const all = LIMITS.some(({ id }) => limits[id])
  if (!all) return `The study sets no limit; ${number(evaluated)} of ${points(done)} could be evaluated.`
  return meetingLimits === done
    ? `All ${points(done)} meet every limit.`
    : `${number(meetingLimits)} of ${points(done)} ${meetingLimits === 1 ? 'meets' : 'meet'} every limit.`
}

/** Which limits bind: those without which less would have been found. */
function bindingSentences({ limitEffects, best, objective }: FindingInput, units: UnitSystem): string[] {
  if (!limitEffects || limitEffects.length === 0 || !best) return []
  const binding = limitEffects
    .filter(({ without }) => without !== null && without < best.objective * (1 - 1e-9))
    .sort((a, b) => (a.without as number) - (b.without as number))
  if (binding.length === 0)
    return [limitEffects.length === 1 ? 'The limit does not bind.' : 'No limit binds by itself.']
  const [first, ...rest] = binding
  const name = (effect: LimitEffect) =>
    `${infoOf(effect.limit).label.toLowerCase()}${effect.side === 'min' ? ' (lower limit)' : ''}`
  const without = `without it the least would be ${objectiveText(first.without as number, objective, units)}`
  if (rest.length === 0) return [`The ${name(first)} is the limit that binds: ${without}.`]
  return [
    `The ${name(first)} binds most: ${without}. The ${rest.map(name).join(' and the ')} ${rest.length === 1 ? 'binds' : 'bind'} too.`,
  ]
}

/** How many evaluated points each limit stops, the hardest first. */
function stoppedSentences({ limitsNotMet, evaluated, done }: FindingInput): string[] {
  const stops = Object.entries(limitsNotMet)
    .filter(([, count]) => count > 0)
    .sort(([, a], [, b]) => b - a)
    .slice(0, 3)
    .map(([id, count]) => `the ${infoOf(id as LimitId).label.toLowerCase()} ${number(count)}`)
  const could = `${number(evaluated)} of ${points(done)} could be evaluated`
  return [stops.length === 0 ? `${could}.` : `${could}; the limits stop of these: ${stops.join(', ')}.`]
}
