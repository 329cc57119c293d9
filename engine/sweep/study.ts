// The study file: its one schema, shared by form, file, API and job, and its reading into a checked study.
import { z } from 'zod'
import { MULTIPLIER_IDS } from '#engine/bundle/multipliers.ts'
import { type Case, caseSchema, type Fault, parseCase } from '#engine/case.ts'
import { tubeCatalogue } from '#engine/tubes.ts'
import { parseQuantity } from '#engine/units.ts'
import { LIMIT_IDS, LIMITS, type Limit, type LimitId, type Limits } from './limits.ts'
import { nearest } from './nearest.ts'
import { OBJECTIVES, type Objective } from './objective.ts'
import { CATALOGUE_PATH, findSweepPath, SWEEP_PATHS, type SweepPathInfo } from './paths.ts'
import { SOBOL_MAX_VARIABLES } from './sobol.ts'
import { structureFaults } from './structure.ts'

/** The most points one study may have. */
export const MAX_POINTS = 1_000_000
/** More values than this in one variable are more than any screen or sheet can tell apart. */
const MAX_VALUES = MAX_POINTS

export const DESIGNS = ['factorial', 'latinHypercube', 'sobol', 'oneAtATime'] as const
export type Design = (typeof DESIGNS)[number]
export const SCALES = ['linear', 'geometric'] as const
export type Scale = (typeof SCALES)[number]

const quantity = z
  .union([z.number(), z.string()])
  .describe('A number in SI units, or text with a unit such as "3/4 in", "40 degC", "60 kPa"')
const sweptValue = z
  .union([z.number(), z.string()])
  .describe('A number in SI units, text with a unit, or the id of a choice')
const pathField = z.string().min(1).describe('Path into the case, for example "tube.outsideDiameter"')

const listVariable = z.strictObject({ path: pathField, values: z.array(sweptValue).min(1).max(MAX_VALUES) })
const rangeVariable = z.strictObject({
  path: pathField,
  from: quantity,
  to: quantity,
  count: z
    .int()
    .min(1)
    .max(MAX_VALUES)
    .optional()
    .describe('Values from end to end; a sampled design needs none'),
  scale: z.enum(SCALES).optional(),
})
const catalogueVariable = z.strictObject({
  catalogue: z.array(z.string()).min(1).describe('Tube ids; each sets outside diameter and wall together'),
})
const variableSchema = z.union([listVariable, rangeVariable, catalogueVariable])

const sweepShape = {
  variables: z.array(variableSchema).min(1),
  design: z.enum(DESIGNS).optional().describe('factorial when not given'),
  samples: z.int().min(1).max(MAX_POINTS).optional().describe('Points of a Latin hypercube or Sobol design'),
  seed: z.int().min(0).max(4294967295).optional().describe('1 when not given'),
}

const bounds = z.strictObject({ min: quantity.optional(), max: quantity.optional() })
const limitSchema = z.union([quantity, bounds])
const limitsSchema = z.strictObject(
  Object.fromEntries(LIMIT_IDS.map((id) => [id, limitSchema.optional()])) as Record<
    LimitId,
    z.ZodOptional<typeof limitSchema>
  >,
)

const optimiseSchema = z.strictObject({
  variables: z
    .array(z.strictObject({ path: pathField, from: quantity, to: quantity }))
    .max(8)
    .optional(),
})
const uncertaintySchema = z.strictObject({
  samples: z.int().min(10).max(100_000).optional(),
  seed: z.int().min(0).max(4294967295).optional(),
  sigmas: z.record(z.string(), z.number().min(0).max(3)).optional().describe('Sigma of ln, by method group'),
})

const studyShape = {
  $schema: z.string().optional(),
  name: z.string().trim().min(1).max(200),
  description: z.string().max(4000).optional(),
  objective: z.enum(OBJECTIVES).optional().describe('outsideArea when not given'),
  limits: limitsSchema.optional(),
  optimise: optimiseSchema.optional(),
  uncertainty: uncertaintySchema.optional(),
}

/** The study file. A field of the case that is swept may be left out of `case`. */
export const studySchema = z.strictObject({
  ...studyShape,
  case: caseSchema,
  sweep: z.strictObject(sweepShape),
})

/** The file's frame, with case and variables read by themselves so that each fault can say where it is. */
const frameSchema = z.strictObject({
  ...studyShape,
  case: z.record(z.string(), z.unknown()),
  sweep: z.strictObject({ ...sweepShape, variables: z.array(z.unknown()).min(1) }),
  limits: z.record(z.string(), z.unknown()).optional(),
})

const STUDY_KEYS = ['name', 'description', 'case', 'sweep', 'objective', 'limits', 'optimise', 'uncertainty']
const SWEEP_KEYS = ['variables', 'design', 'samples', 'seed']

export type SweptValue = number | string

/** A swept variable, checked: values in SI units or ids. */
export type StudyVariable =
  | { path: string; values: SweptValue[] }
  | { path: string; from: number; to: number; count?: number; scale?: Scale }
  | { catalogue: string[] }

/** A checked study in SI units: plain data, and itself a valid study file. */
export interface Study {
  name: string
  description?: string
  case: Case
  sweep: { variables: StudyVariable[]; design: Design; samples?: number; seed?: number }
  objective: Objective
  limits: Limits
  optimise?: { variables: { path: string; from: number; to: number }[] }
  uncertainty?: { samples: number; seed: number; sigmas: Record<string, number> }
}

export type ParsedStudy = { ok: true; study: Study; notes: string[] } | { ok: false; faults: Fault[] }

type Raw = Record<string, unknown>

/** Reads a study file's content; on failure every fault found, each with its path. */
export function parseStudy(input: unknown): ParsedStudy {
  if (typeof input !== 'object' || input === null || Array.isArray(input))
    return refuse([
      { path: 'study', problem: 'is not an object', remedy: 'give name, case, sweep, objective and limits' },
    ])
  const faults = structureFaultsOfFrame(input as Raw)
  const raw = input as Raw
  const sweep = (isObject(raw.sweep) ? raw.sweep : {}) as Raw
  const rawVariables = Array.isArray(sweep.variables) ? sweep.variables : []
  const design = DESIGNS.includes(sweep.design as Design) ? (sweep.design as Design) : 'factorial'
  const notes: string[] = []

  const read = rawVariables.map((variable, j) => readVariable(variable, j, design, faults))
  const variables = read.filter((variable) => variable !== null)
  duplicateFaults(read, faults)

  const limits = readLimits(raw.limits, faults)
  const optimise = readOptimise(raw.optimise, faults)
  sigmaFaults(raw.uncertainty, faults)

  let parsedCase: Case | null = null
  if (isObject(raw.case)) {
    const conflicts = conflictFaults(raw.case, read)
    faults.push(...conflicts)
    const filled = fillSwept(raw.case, variables)
    const parsed = parseCase(filled.input)
    if (parsed.ok) parsedCase = parsed.case
    else {
      for (const fault of parsed.faults) {
        const source = filled.paths.find((path) => covers(path, fault.path))
        if (source === undefined && !conflicts.some((conflict) => sameChoice(conflict, fault)))
          faults.push({ ...fault, path: fault.path ? `case.${fault.path}` : 'case' })
      }
    }
    if (conflicts.length === 0) valueFaults(filled.input, read, parsedCase !== null, faults, notes)
    if (optimise && faults.length === 0)
      boundFaults(raw.case, filled.input, variables, optimise.variables, faults)
  }

  const samples = typeof sweep.samples === 'number' ? sweep.samples : undefined
  const points = countPoints(variables, design, samples)
  const sampled = design === 'latinHypercube' || design === 'sobol'
  if (sampled && sweep.samples === undefined)
    faults.push({
      path: 'sweep.samples',
      problem: `is missing and a ${design === 'sobol' ? 'Sobol' : 'Latin hypercube'} design needs it`,
      remedy: `give a whole number from 1 to ${grouped(MAX_POINTS)}`,
    })
  if (design === 'sobol' && variables.length > SOBOL_MAX_VARIABLES)
    faults.push({
      path: 'sweep.variables',
      problem: `are ${variables.length} and a Sobol design covers ${SOBOL_MAX_VARIABLES}`,
      remedy: 'sweep fewer variables or choose latinHypercube',
    })
  if (!sampled && points > MAX_POINTS)
    faults.push({
      path: 'sweep.variables',
      problem: `make ${grouped(points)} points (${variables.map((v) => valueCount(v)).join(' × ')})`,
      remedy: `at most ${grouped(MAX_POINTS)}: give fewer values, or choose latinHypercube or sobol with samples`,
    })
  if (!sampled && sweep.samples !== undefined)
    notes.push(`sweep.samples is not used: a ${design} design takes every point its values make.`)

  if (faults.length > 0 || parsedCase === null) return refuse(faults)

  notes.push(...limitNotes(parsedCase, limits, variables))
  const uncertainty = raw.uncertainty as z.infer<typeof uncertaintySchema> | undefined
  return {
    ok: true,
    notes,
    study: {
      name: (raw.name as string).trim(),
      ...(typeof raw.description === 'string' ? { description: raw.description } : {}),
      case: parsedCase,
      sweep: {
        variables,
        design,
        ...(sampled ? { samples, seed: (sweep.seed as number | undefined) ?? 1 } : {}),
      },
      objective: (raw.objective as Objective | undefined) ?? 'outsideArea',
      limits,
      ...(optimise ? { optimise } : {}),
      ...(uncertainty
        ? {
            uncertainty: {
              samples: uncertainty.samples ?? 200,
              seed: uncertainty.seed ?? 1,
              sigmas: uncertainty.sigmas ?? {},
            },
          }
        : {}),
    },
  }
}

/** How many points the sweep makes. */
export function countPoints(
  variables: readonly StudyVariable[],
  design: Design,
  samples: number | undefined,
): number {
  if (design === 'latinHypercube' || design === 'sobol') return samples ?? 0
  if (design === 'oneAtATime') return variables.reduce((sum, variable) => sum + valueCount(variable), 1)
  return variables.reduce((product, variable) => product * valueCount(variable), 1)
}

function valueCount(variable: StudyVariable): number {
  if ('catalogue' in variable) return variable.catalogue.length
  return 'values' in variable ? variable.values.length : (variable.count ?? 1)
}

/** Value `index` of a range with `count` values: both ends exact, and the same bits wherever it is asked for. */
export function rangeValue(
  from: number,
  to: number,
  scale: Scale | undefined,
  index: number,
  count: number,
): number {
  if (index <= 0 || count <= 1) return from
  if (index >= count - 1) return to
  return betweenEnds(from, to, scale, index / (count - 1))
}

/** The value a share `u` of the way along a range. */
export function betweenEnds(from: number, to: number, scale: Scale | undefined, u: number): number {
  if (scale === 'geometric') return from * Math.exp(u * Math.log(to / from))
  // Rounded to twelve digits: 0.3 in a list and 0.3 in a range from 0.1 to 0.5 are the same number.
  return Number((from + (to - from) * u).toPrecision(12))
}

// ---------------------------------------------------------------------------------------------------------

const refuse = (faults: Fault[]): ParsedStudy => ({ ok: false, faults })
const isObject = (value: unknown): value is Raw =>
  typeof value === 'object' && value !== null && !Array.isArray(value)
const grouped = (n: number) => n.toLocaleString('en-GB', { maximumFractionDigits: 0 }).replaceAll(',', ' ')

function structureFaultsOfFrame(raw: Raw): Fault[] {
  const faults: Fault[] = []
  for (const fault of structureFaults(frameSchema, raw, [], STUDY_KEYS)) {
    const inSweep = /^sweep\.[^.[]+$/.test(fault.path) && fault.problem === 'is not a field known here'
    if (inSweep) {
      const near = nearest(fault.path.slice('sweep.'.length), SWEEP_KEYS)
      faults.push({
        ...fault,
        remedy: near ? `did you mean "${near}"?` : `known fields: ${SWEEP_KEYS.join(', ')}`,
      })
    } else if (fault.path === 'sweep' && fault.problem === 'is missing') {
      faults.push({ ...fault, remedy: 'give sweep.variables, at least one, and sweep.design' })
    } else if (fault.path === 'sweep.variables') {
      faults.push({
        ...fault,
        remedy: 'give at least one: a path with values, or from, to and count; or a catalogue',
      })
    } else if (fault.path === 'case' && fault.problem === 'is missing') {
      faults.push({ ...fault, remedy: 'give the base case that the sweep varies' })
    } else faults.push(fault)
  }
  return faults
}

function readVariable(raw: unknown, j: number, design: Design, faults: Fault[]): StudyVariable | null {
  const at = `sweep.variables.${j}`
  const before = faults.length
  if (!isObject(raw)) {
    faults.push({
      path: at,
      problem: 'is not an object',
      remedy: 'give a path with values or a range, or a catalogue',
    })
    return null
  }
  const keys: PropertyKey[] = ['sweep', 'variables', j]
  if ('catalogue' in raw) {
    faults.push(...structureFaults(catalogueVariable, raw, keys, ['catalogue']))
    if (faults.length > before) return null
    const { catalogue } = raw as { catalogue: string[] }
    catalogue.forEach((id, k) => {
      if (tubeCatalogue.some((tube) => tube.id === id)) return
      const ids = tubeCatalogue.map((tube) => tube.id)
      const near = nearest(id, ids)
      faults.push({
        path: `${at}.catalogue.${k}`,
        problem: `"${id}" is not in the tube catalogue`,
        remedy: near ? `did you mean "${near}"?` : `known: ${ids.join(', ')}`,
      })
    })
    return faults.length > before ? null : { catalogue: [...catalogue] }
  }
  if (!('values' in raw) && !('from' in raw) && !('to' in raw)) {
    faults.push({
      path: at,
      problem: 'has no values',
      remedy: 'give values, or from, to and count; for tubes a catalogue',
    })
    return null
  }
  const schema = 'values' in raw ? listVariable : rangeVariable
  faults.push(
    ...structureFaults(
      schema,
      raw,
      keys,
      'values' in raw ? ['path', 'values'] : ['path', 'from', 'to', 'count', 'scale'],
    ),
  )
  if (faults.length > before) return null

  const path = (raw.path as string).trim()
  const info = findSweepPath(path)
  if (!info) {
    const known = SWEEP_PATHS.map((known) => known.path)
    const near = nearest(path, known)
    faults.push({
      path: `${at}.path`,
      problem: `"${path}" is nothing a sweep can vary`,
      remedy: near ? `did you mean "${near}"?` : `allowed: ${known.join(', ')}`,
    })
    return null
  }
  const variable =
    'values' in raw
      ? readList(info, raw.values as SweptValue[], at, faults)
      : readRange(info, raw, at, design, faults)
  return faults.length > before ? null : variable
}

function readList(info: SweepPathInfo, values: SweptValue[], at: string, faults: Fault[]): StudyVariable {
  return {
    path: info.path,
    values: values.map((value, k) => readValue(info, value, `${at}.values.${k}`, faults)),
  }
}

function readRange(
  info: SweepPathInfo,
  raw: Raw,
  at: string,
  design: Design,
  faults: Fault[],
): StudyVariable | null {
  if (info.kind === 'choice') {
    faults.push({
      path: at,
      problem: `${info.label.toLowerCase()} is a choice, not a range`,
      remedy: 'give values: a list of ids',
    })
    return null
  }
  const before = faults.length
  const from = readValue(info, raw.from as SweptValue, `${at}.from`, faults, true) as number
  const to = readValue(info, raw.to as SweptValue, `${at}.to`, faults, true) as number
  const count = raw.count as number | undefined
  const scale = raw.scale as Scale | undefined
  const stepped = design === 'factorial' || design === 'oneAtATime'
  if (stepped && count === undefined)
    faults.push({
      path: `${at}.count`,
      problem: 'is missing',
      remedy: 'give how many values the range has, ends included',
    })
  if (faults.length > before) return null
  if (stepped && count === 1 && from !== to)
    faults.push({
      path: `${at}.count`,
      problem: 'is 1 and the ends differ',
      remedy: 'give 2 or more, or one value in values',
    })
  if (stepped && count !== undefined && count > 1 && from === to)
    faults.push({
      path: `${at}.to`,
      problem: 'equals from',
      remedy: 'give two different ends, or one value in values',
    })
  if (scale === 'geometric' && !(from > 0 && to > 0))
    faults.push({
      path: `${at}.scale`,
      problem: 'is geometric and an end is not above zero',
      remedy: 'give ends above zero or scale linear',
    })
  if (info.kind === 'whole' && faults.length === before && (!stepped || count !== undefined)) {
    const steps = stepped ? (count as number) : 2
    for (let k = 0; k < Math.min(steps, 10_000); k++) {
      const value = rangeValue(from, to, scale, k, steps)
      if (Number.isInteger(value)) continue
      faults.push({
        path: `${at}.count`,
        problem: `makes ${info.label.toLowerCase()} ${Number(value.toPrecision(6))}, which is not a whole number`,
        remedy:
          scale === 'geometric'
            ? 'give a list of whole numbers in values'
            : `give count ${wholeCounts(from, to)}`,
      })
      break
    }
  }
  return {
    path: info.path,
    from,
    to,
    ...(count !== undefined ? { count } : {}),
    ...(scale !== undefined ? { scale } : {}),
  }
}

function wholeCounts(from: number, to: number): string {
  const span = Math.abs(to - from)
  if (!Number.isInteger(span) || span < 1) return 'of a range with whole ends'
  const counts: number[] = []
  for (let steps = 1; steps <= span && counts.length < 6; steps++)
    if (span % steps === 0) counts.push(steps + 1)
  return counts.join(', ')
}

function readValue(
  info: SweepPathInfo,
  value: SweptValue,
  at: string,
  faults: Fault[],
  anyNumber = false,
): SweptValue {
  if (info.kind === 'choice') {
    if (typeof value === 'string' && value.trim() !== '') return value.trim()
    faults.push({
      path: at,
      problem: `${String(value)} is not an id`,
      remedy: `give the id of a ${info.label.toLowerCase()} as text`,
    })
    return ''
  }
  const parsed = parseQuantity(value, info.dimension)
  if (!parsed.ok) {
    faults.push({ path: at, problem: parsed.problem, remedy: parsed.remedy })
    return Number.NaN
  }
  if (info.kind === 'whole' && !anyNumber && !Number.isInteger(parsed.value))
    faults.push({
      path: at,
      problem: `${parsed.value} is not a whole number`,
      remedy: `give a whole number of ${info.label.toLowerCase()}`,
    })
  return parsed.value
}

const variablePath = (variable: StudyVariable) => ('catalogue' in variable ? CATALOGUE_PATH : variable.path)

function duplicateFaults(read: readonly (StudyVariable | null)[], faults: Fault[]): void {
  const sets = (variable: StudyVariable) =>
    'catalogue' in variable ? ['tube.outsideDiameter', 'tube.wallThickness'] : [variable.path]
  const seen = new Map<string, number>()
  read.forEach((variable, j) => {
    if (!variable) return
    const clash = sets(variable).find((path) => seen.has(path))
    if (clash !== undefined) {
      const first = seen.get(clash)
      faults.push({
        path: `sweep.variables.${j}`,
        problem: `sweeps ${clash}, which sweep.variables.${first} sweeps already`,
        remedy:
          'catalogue' in variable || clash.startsWith('tube.outside') || clash.startsWith('tube.wall')
            ? 'keep one: a catalogue sets outside diameter and wall together'
            : 'put all its values in one variable',
      })
    }
    for (const path of sets(variable)) if (!seen.has(path)) seen.set(path, j)
  })
}

function conflictFaults(rawCase: Raw, read: readonly (StudyVariable | null)[]): Fault[] {
  const faults: Fault[] = []
  const auto = getPath(rawCase, 'bundle.tubesPerRow') === 'auto'
  const swept = new Map<string, number>()
  read.forEach((variable, j) => {
    if (variable && !('catalogue' in variable)) swept.set(variable.path, j)
  })
  for (const [path, j] of swept) {
    const info = findSweepPath(path) as SweepPathInfo
    const at = `sweep.variables.${j}.path`
    const drive = getPath(rawCase, 'drive.kind')
    if (info.drive && drive !== undefined && drive !== info.drive) {
      const twin = path.startsWith('drive.coolant.')
        ? path.replace('drive.coolant.', 'drive.')
        : path.replace('drive.', 'drive.coolant.')
      faults.push({
        path: at,
        problem: `"${path}" belongs to the drive ${info.drive} and the case has the drive ${String(drive)}`,
        remedy: findSweepPath(twin)
          ? `sweep "${twin}", or give the case the drive ${info.drive}`
          : `give the case the drive ${info.drive}, or sweep another path`,
      })
      continue
    }
    if (path === 'bundle.tubesPerRow' && auto)
      faults.push({
        path: at,
        problem: 'the case has "auto" tubes per row, which the coolant velocity and flow decide',
        remedy: 'give case.bundle.tubesPerRow a whole number, or sweep another path',
      })
    for (const other of info.insteadOf ?? []) {
      const velocityWithFlow =
        auto && info.drive === 'coolant' && (path === 'drive.velocity' || other === 'drive.velocity')
      if (velocityWithFlow) continue
      const otherSwept = swept.get(other)
      if (otherSwept !== undefined && otherSwept < j)
        faults.push({
          path: at,
          problem: `"${path}" and "${other}" are both swept and only one of them can be given`,
          remedy: 'keep one of the two variables',
        })
      else if (otherSwept === undefined && getPath(rawCase, other) !== undefined)
        faults.push({
          path: at,
          problem: `"${path}" cannot be swept while the case gives ${other}`,
          remedy:
            other === 'duty'
              ? 'take duty out of the case and set limits.duty.min, or sweep another path'
              : `take ${other} out of the case, or sweep ${other}`,
        })
    }
  }
  return faults
}

/** A case fault that says again, in the case's words, what a conflict between sweep and case has said. */
function sameChoice(conflict: Fault, fault: Fault): boolean {
  const named = conflict.problem + conflict.remedy
  return fault.path === '' || named.includes(fault.path) || fault.path.split('.').length === 1
}

/** Whether a fault at `faultPath` is about what is set at `path`. */
const covers = (path: string, faultPath: string) =>
  faultPath === path ||
  faultPath.startsWith(`${path}.`) ||
  (path === CATALOGUE_PATH && (faultPath === 'tube.outsideDiameter' || faultPath === 'tube.wallThickness'))

export function getPath(input: unknown, path: string): unknown {
  let value = input
  for (const key of path.split('.')) value = isObject(value) ? value[key] : undefined
  return value
}

/** A copy of the case with one path set; branches on the way are copied, the rest is shared. */
export function withPath<T extends object>(input: T, path: string, value: unknown): T {
  const [key, ...rest] = path.split('.')
  const record = input as Raw
  const next =
    rest.length === 0 ? value : withPath(isObject(record[key]) ? record[key] : {}, rest.join('.'), value)
  return { ...record, [key]: next } as T
}

/** A copy of the case with a swept value set; a catalogue id sets diameter and wall. */
export function withSwept<T extends object>(input: T, path: string, value: SweptValue): T {
  if (path !== CATALOGUE_PATH) return withPath(input, path, value)
  const tube = tubeCatalogue.find((entry) => entry.id === value)
  if (!tube) throw new RangeError(`tube ${value} is not in the catalogue`)
  return withPath(
    withPath(input, 'tube.outsideDiameter', tube.outsideDiameter),
    'tube.wallThickness',
    tube.wallThickness,
  )
}

const firstValue = (variable: StudyVariable): SweptValue =>
  'catalogue' in variable ? variable.catalogue[0] : 'values' in variable ? variable.values[0] : variable.from

/** The case with swept fields that it leaves out taken from their first value. */
function fillSwept(rawCase: Raw, variables: readonly StudyVariable[]): { input: Raw; paths: string[] } {
  let input = rawCase
  const paths: string[] = []
  for (const variable of variables) {
    const path = variablePath(variable)
    const absent =
      path === CATALOGUE_PATH
        ? getPath(rawCase, 'tube.outsideDiameter') === undefined ||
          getPath(rawCase, 'tube.wallThickness') === undefined
        : getPath(rawCase, path) === undefined
    if (!absent) continue
    input = withSwept(input, path, firstValue(variable))
    paths.push(path)
  }
  return { input, paths }
}

function extremes(variable: StudyVariable): SweptValue[] {
  if ('catalogue' in variable) return variable.catalogue
  if ('from' in variable)
    return variable.from === variable.to ? [variable.from] : [variable.from, variable.to]
  if (typeof variable.values[0] === 'string') return variable.values.slice(0, 200)
  const numbers = variable.values as number[]
  const low = numbers.reduce((a, b) => Math.min(a, b))
  const high = numbers.reduce((a, b) => Math.max(a, b))
  return low === high ? [low] : [low, high]
}

/**
 * Checks every swept value in the case. What a path may hold is an interval or a list, so the ends of a variable speak
 * for the numbers between. A value refused only together with another swept field (passes above rows) is left to
 * its points, which then carry the reason.
 */
function valueFaults(
  filled: Raw,
  read: readonly (StudyVariable | null)[],
  caseStands: boolean,
  faults: Fault[],
  notes: string[],
): void {
  const faultsAt = (input: Raw, path: string): Fault[] => {
    const parsed = parseCase(input)
    return parsed.ok ? [] : parsed.faults.filter((fault) => covers(path, fault.path))
  }
  read.forEach((variable, j) => {
    if (!variable) return
    const path = variablePath(variable)
    const others = read.filter((other) => other !== null && other !== variable) as StudyVariable[]
    const refusal = (value: SweptValue): Fault | null => {
      const input = withSwept(filled, path, value)
      const found = faultsAt(input, path)
      if (found.length === 0) return null
      const saved = others.some((other) =>
        extremes(other).some(
          (swept) => faultsAt(withSwept(input, variablePath(other), swept), path).length === 0,
        ),
      )
      return saved ? null : found[0]
    }
    const label = 'catalogue' in variable ? 'catalogue' : 'values'
    const report = (fault: Fault, where: string, value: SweptValue) =>
      faults.push({
        path: `sweep.variables.${j}.${where}`,
        problem: fault.problem.includes(String(value)) ? fault.problem : `${value} ${fault.problem}`,
        remedy: fault.remedy,
      })
    if ('from' in variable) {
      const low = refusal(variable.from)
      if (low) report(low, 'from', variable.from)
      const high = variable.to === variable.from ? null : refusal(variable.to)
      if (high) report(high, 'to', variable.to)
    } else {
      const values: SweptValue[] = 'catalogue' in variable ? variable.catalogue : variable.values
      const numeric = typeof values[0] === 'number'
      if (!numeric || extremes(variable).some((value) => refusal(value) !== null))
        values.slice(0, 1000).forEach((value, k) => {
          const fault = refusal(value)
          if (fault) report(fault, `${label}.${k}`, value)
        })
    }
    if (caseStands && path === 'fluid' && faults.length === 0)
      for (const value of extremes(variable)) {
        const parsed = parseCase(withSwept(filled, path, value))
        if (parsed.ok) continue
        const { path: field, problem } = parsed.faults[0]
        notes.push(
          `With fluid ${value}, ${field} ${problem}; points that stay so carry the reason instead of numbers.`,
        )
      }
  })
}

/** A sigma of a group that is none would silently change nothing. */
function sigmaFaults(raw: unknown, faults: Fault[]): void {
  const sigmas = isObject(raw) && isObject(raw.sigmas) ? raw.sigmas : {}
  for (const id of Object.keys(sigmas)) {
    if ((MULTIPLIER_IDS as readonly string[]).includes(id)) continue
    const near = nearest(id, MULTIPLIER_IDS)
    faults.push({
      path: `uncertainty.sigmas.${id}`,
      problem: 'is no group of factors',
      remedy: near ? `did you mean "${near}"?` : `known groups: ${MULTIPLIER_IDS.join(', ')}`,
    })
  }
}

/** Checks the bounds of `optimise.variables` as if the sweep had them too. */
function boundFaults(
  rawCase: Raw,
  filled: Raw,
  swept: readonly StudyVariable[],
  bounded: readonly { path: string; from: number; to: number }[],
  faults: Fault[],
): void {
  const others = swept.filter((variable) => !bounded.some(({ path }) => path === variablePath(variable)))
  const read: StudyVariable[] = [...others, ...bounded.map((variable) => ({ ...variable, count: 2 }))]
  const found = conflictFaults(rawCase, read)
  duplicateFaults(read, found)
  if (found.length === 0) valueFaults(filled, read, false, found, [])
  const named = (text: string) =>
    text.replace(/\bsweep\.variables\.(\d+)/g, (_, k: string) =>
      Number(k) < others.length
        ? `sweep.variables.${swept.indexOf(others[Number(k)])}`
        : `optimise.variables.${Number(k) - others.length}`,
    )
  for (const fault of found) {
    const path = named(fault.path)
    if (path.startsWith('optimise.')) faults.push({ ...fault, path, problem: named(fault.problem) })
  }
}

function readLimits(raw: unknown, faults: Fault[]): Limits {
  const limits: Limits = {}
  if (!isObject(raw)) return limits
  for (const [id, given] of Object.entries(raw)) {
    const info = LIMITS.find((limit) => limit.id === id)
    const at = `limits.${id}`
    if (!info) {
      const near = nearest(id, LIMIT_IDS)
      faults.push({
        path: at,
        problem: 'is not a limit known here',
        remedy: near ? `did you mean "${near}"?` : `known limits: ${LIMIT_IDS.join(', ')}`,
      })
      continue
    }
    if (given === undefined || given === null) continue
    const shape = isObject(given) ? structureFaults(bounds, given, ['limits', id], ['min', 'max']) : []
    if (shape.length > 0) {
      faults.push(...shape)
      continue
    }
    const parts: Raw = isObject(given) ? given : { [info.bare]: given }
    const limit: Limit = {}
    for (const side of ['min', 'max'] as const) {
      const value = parts[side]
      if (value === undefined) continue
      const where = isObject(given) ? `${at}.${side}` : at
      if (typeof value !== 'number' && typeof value !== 'string') {
        faults.push({
          path: where,
          problem: 'is not a quantity',
          remedy: 'give a number in SI units or text with a unit',
        })
        continue
      }
      const parsed = parseQuantity(value, info.dimension)
      if (!parsed.ok) faults.push({ path: where, problem: parsed.problem, remedy: parsed.remedy })
      else if (!(parsed.value > 0) && !(side === 'min' && parsed.value === 0))
        faults.push({
          path: where,
          problem: `${parsed.value} is not above zero`,
          remedy: 'give a value above zero or leave the limit out',
        })
      else limit[side] = parsed.value
    }
    if (limit.min !== undefined && limit.max !== undefined && limit.min > limit.max)
      faults.push({
        path: at,
        problem: `min ${limit.min} is above max ${limit.max}`,
        remedy: 'give a min at or under the max',
      })
    if (isObject(given) && given.min === undefined && given.max === undefined)
      faults.push({
        path: at,
        problem: 'has neither min nor max',
        remedy: 'give one of them or leave the limit out',
      })
    if (limit.min !== undefined || limit.max !== undefined) limits[info.id] = limit
  }
  return limits
}

function readOptimise(raw: unknown, faults: Fault[]): Study['optimise'] {
  if (!isObject(raw)) return undefined
  const given = Array.isArray(raw.variables) ? raw.variables : []
  const variables: { path: string; from: number; to: number }[] = []
  given.forEach((variable, j) => {
    const at = `optimise.variables.${j}`
    if (!isObject(variable) || typeof variable.path !== 'string') return
    const info = findSweepPath(variable.path)
    if (!info || info.kind === 'choice') {
      const near = nearest(
        variable.path,
        SWEEP_PATHS.filter((known) => known.kind !== 'choice').map((known) => known.path),
      )
      faults.push({
        path: `${at}.path`,
        problem: `"${variable.path}" is nothing with bounds`,
        remedy: near ? `did you mean "${near}"?` : 'give the path of a number in the case',
      })
      return
    }
    const before = faults.length
    const from = readValue(info, variable.from as SweptValue, `${at}.from`, faults) as number
    const to = readValue(info, variable.to as SweptValue, `${at}.to`, faults) as number
    if (faults.length > before) return
    if (!(from < to))
      faults.push({
        path: at,
        problem: `from ${from} is not under to ${to}`,
        remedy: 'give a lower and an upper bound',
      })
    else variables.push({ path: info.path, from, to })
  })
  return { variables }
}

function limitNotes(base: Case, limits: Limits, variables: readonly StudyVariable[]): string[] {
  const notes: string[] = []
  const paths = variables.map(variablePath)
  const subcoolingDrive = getPath(base, 'drive.kind') === 'wallSubcooling'
  const coolantNamed = !subcoolingDrive || getPath(base, 'drive.coolant') !== undefined
  if (subcoolingDrive && !coolantNamed && paths.includes('drive.wallSubcooling')) {
    const opposed =
      limits.meanWallSubcooling?.max !== undefined || limits.vapourPressureDrop?.max !== undefined
    if (!opposed)
      notes.push(
        'More subcooling will always win: the study varies wall subcooling, names no coolant and sets no limit that opposes it. Name a coolant in case.drive.coolant with a limit on its pressure drop, or set limits.meanWallSubcooling.max.',
      )
  }
  if (!coolantNamed)
    for (const info of LIMITS)
      if (info.needsCoolant && limits[info.id])
        notes.push(
          `limits.${info.id} is met by no point: the case names no coolant, so its value is null. Name one in case.drive.coolant or take the limit out.`,
        )
  if (getPath(base, 'duty') !== undefined && limits.duty?.min !== undefined && !paths.includes('duty'))
    notes.push('limits.duty bounds what the case gives as duty already; the length follows from it.')
  return notes
}
