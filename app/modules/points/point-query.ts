// Questions about points as an address carries them. Values are SI or ids, as in files.
import { z } from 'zod'
import { OUTCOMES } from '#engine/bundle/key-results.ts'
import type { PageQuery, PlotQuery, PointFilters } from './point-types.ts'

const OUTCOME_CODES = OUTCOMES.map(({ code }) => code) as [string, ...string[]]
const SETTINGS = new Set(['x', 'y', 'colour', 'sort', 'dir', 'limit', 'offset', 'max', 'outcome', 'meets'])

const whole = (min: number, max: number) =>
  z.coerce
    .number(`is not a number; give a whole number from ${min} to ${max}`)
    .int(`is not a whole number; give one from ${min} to ${max}`)
    .min(min, `is below ${min}`)
    .max(max, `is above ${max}`)
const finite = z
  .string()
  .trim()
  .min(1, 'is empty; give a number in SI units')
  .pipe(z.coerce.number('is not a number; give one in SI units'))
const id = z.string().min(1).max(100)

const pageShape = z.object({
  sort: id.optional(),
  dir: z.enum(['up', 'down'], 'is neither up nor down').optional(),
  limit: whole(1, 1000).optional(),
  offset: whole(0, 1_000_000).optional(),
})
const plotShape = z.object({
  x: id,
  y: id,
  colour: id.optional(),
  max: whole(1, 20_000).optional(),
})
const filterShape = z.object({
  outcome: z.enum(OUTCOME_CODES, `is no outcome; outcomes: ${OUTCOME_CODES.join(', ')}`).optional(),
  meets: z.enum(['1'], 'may only be 1').optional(),
})

export type Reading<T> = { ok: true; query: T } | { ok: false; faults: string[] }

/** `sort`, `dir`, `limit`, `offset`, and the filters. */
export function readPageQuery(search: URLSearchParams): Reading<PageQuery> {
  return reading(search, pageShape, ({ sort, dir, limit, offset }, filters) => ({
    sort,
    descending: dir === 'down',
    limit,
    offset,
    filters,
  }))
}

/** `x`, `y`, `colour`, `max`, and the filters. */
export function readPlotQuery(search: URLSearchParams): Reading<PlotQuery> {
  return reading(search, plotShape, (plot, filters) => ({ ...plot, filters }))
}

function reading<S extends z.ZodObject, T>(
  search: URLSearchParams,
  shape: S,
  make: (given: z.infer<S>, filters: PointFilters) => T,
): Reading<T> {
  const faults: string[] = []
  const given = read(search, shape, faults)
  const filters = readFilters(search, faults)
  return faults.length > 0 || given === undefined
    ? { ok: false, faults }
    : { ok: true, query: make(given, filters) }
}

/** `min.<id>`, `max.<id>`, `outcome`, `meets=1`, and `<variable's path>=<value>`. */
function readFilters(search: URLSearchParams, faults: string[]): PointFilters {
  const ranges: NonNullable<PointFilters['ranges']> = {}
  const inputs: NonNullable<PointFilters['inputs']> = {}
  for (const [key, text] of search) {
    if (SETTINGS.has(key)) continue
    const bound = /^(min|max)\.(.{1,100})$/.exec(key)
    if (!bound) {
      inputs[key] = text.trim() !== '' && Number.isFinite(Number(text)) ? Number(text) : text
      continue
    }
    const value = finite.safeParse(text)
    if (value.success) ranges[bound[2]] = { ...ranges[bound[2]], [bound[1]]: value.data }
    else faults.push(`${key}: ${value.error.issues[0].message}`)
  }
  const given = read(search, filterShape, faults)
  return { ranges, inputs, outcome: given?.outcome, meetingLimits: given?.meets === '1' }
}

function read<S extends z.ZodObject>(
  search: URLSearchParams,
  shape: S,
  faults: string[],
): z.infer<S> | undefined {
  const given: Record<string, string> = {}
  for (const name of Object.keys(shape.shape)) {
    const value = search.get(name)
    if (value !== null) given[name] = value
  }
  const parsed = shape.safeParse(given)
  if (parsed.success) return parsed.data
  for (const issue of parsed.error.issues)
    faults.push(
      `${issue.path.join('.')}: ${given[String(issue.path[0])] === undefined ? 'is missing' : issue.message}`,
    )
  return undefined
}
