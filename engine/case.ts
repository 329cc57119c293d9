// A case: everything that fixes one evaluation. The schema here is the only one; form, file, API and job payload share it.
import { z } from 'zod'
import { MULTIPLIER_IDS } from '#engine/bundle/multipliers.ts'
import { findCard } from '#engine/correlations/registry.ts'
import {
  coolantModel,
  coolants,
  findCoolant,
  findFluid,
  fluidModel,
  fluids,
  saturationPressure,
} from '#engine/fluids/index.ts'
import { economicsDefaults, materials } from '#engine/materials.ts'
import { nearest } from '#engine/sweep/nearest.ts'
import { type Dimension, parseQuantity } from '#engine/units.ts'
import { type Fault, faultsFromIssues } from './fault.ts'

export { type Fault, faultLine } from './fault.ts'

/** Every message below reads "problem; remedy": `faultsFromIssues` splits it there. */
const said = (problem: string, remedy: string): string => `${problem}; ${remedy}`

type Bounds = {
  /** Inclusive bounds [SI]. */
  min?: number
  max?: number
  /** Exclusive lower bound [SI]. */
  above?: number
  whole?: boolean
  /** The bounds as a reader wants them, e.g. "above 0 and at most 1 m". */
  allowed: string
}

/** A number in SI, or text with a unit ("3/4 in", "60 kPa"). */
export const quantity = (dimension: Dimension, bounds: Bounds) =>
  z
    .union([z.number(), z.string()], {
      error: (issue) =>
        said(
          issue.input === undefined ? 'it is missing' : 'it is not a number',
          `give a number in SI or text with a unit, ${bounds.allowed}`,
        ),
    })
    .transform((given, ctx): number => {
      const parsed = parseQuantity(given, dimension)
      if (!parsed.ok) {
        ctx.addIssue({ code: 'custom', message: said(parsed.problem, parsed.remedy), input: given })
        return z.NEVER
      }
      const value = parsed.value
      const wrong =
        !Number.isFinite(value) ||
        (bounds.min !== undefined && value < bounds.min) ||
        (bounds.max !== undefined && value > bounds.max) ||
        (bounds.above !== undefined && value <= bounds.above)
      if (wrong) {
        ctx.addIssue({
          code: 'custom',
          message: said(`${JSON.stringify(given)} is out of bounds`, `allowed is ${bounds.allowed}`),
          input: given,
        })
        return z.NEVER
      }
      if (bounds.whole && !Number.isInteger(value)) {
        ctx.addIssue({
          code: 'custom',
          message: said(`${JSON.stringify(given)} is not a whole number`, `allowed is ${bounds.allowed}`),
          input: given,
        })
        return z.NEVER
      }
      return value
    })

/** An object that refuses keys it does not know and names the nearest it does. */
const record = <Shape extends z.core.$ZodLooseShape>(shape: Shape) => {
  const keys = Object.keys(shape)
  return z.strictObject(shape, {
    error: (issue) => {
      if (issue.code === 'unrecognized_keys') {
        const near = [...new Set(issue.keys.map((key) => nearest(key, keys)).filter((key) => key !== null))]
        return said(
          `there is no field ${issue.keys.map((key) => `"${key}"`).join(', ')} here`,
          `${near.length ? `did you mean ${near.map((key) => `"${key}"`).join(', ')}? ` : ''}allowed are ${keys.join(', ')}`,
        )
      }
      return said(
        issue.input === undefined ? 'it is missing' : 'it is not an object',
        `give an object with ${keys.join(', ')}`,
      )
    },
  })
}

/** One of a few words. */
const oneOf = <const Values extends readonly [string, ...string[]]>(values: Values) =>
  z.enum(values, {
    error: (issue) => {
      const near = typeof issue.input === 'string' ? nearest(issue.input, values) : null
      return said(
        issue.input === undefined ? 'it is missing' : `${JSON.stringify(issue.input)} is not known`,
        `${near ? `did you mean "${near}"? ` : ''}allowed are ${values.join(', ')}`,
      )
    },
  })

/** Up to four library ids near to one that is not known, or a few to begin with. */
const nearIds = (given: string, known: readonly { id: string; name: string }[]): string => {
  const wanted = given.toLowerCase().replace(/[^a-z0-9]/g, '')
  const scored = known
    .map((entry) => {
      const id = entry.id.toLowerCase().replace(/[^a-z0-9]/g, '')
      const name = entry.name.toLowerCase().replace(/[^a-z0-9]/g, '')
      let score = 0
      if (wanted && (id.includes(wanted) || wanted.includes(id))) score += 3
      if (wanted && name.includes(wanted)) score += 2
      let same = 0
      while (same < wanted.length && same < id.length && wanted[same] === id[same]) same++
      return { id: entry.id, score: score + same }
    })
    .sort((a, b) => b.score - a.score)
  const first = nearest(
    given,
    known.map((entry) => entry.id),
  )
  const ids = [...(first ? [first] : []), ...scored.filter((s) => s.score > 0).map((s) => s.id)]
  const near = [...new Set(ids)].slice(0, 4)
  return near.length ? `near matches: ${near.join(', ')}` : `known are ${known.map((k) => k.id).join(', ')}`
}

const positive = (dimension: Dimension, max: number, text: string) =>
  quantity(dimension, { above: 0, max, allowed: text })

const propertyFields = {
  liquidDensity: positive('density', 3e4, 'above 0 kg/m³'),
  latentHeat: positive('specificEnthalpy', 1e8, 'above 0 J/kg'),
  liquidViscosity: positive('viscosity', 1e3, 'above 0 Pa s'),
  liquidConductivity: positive('conductivity', 1e3, 'above 0 W/(m K)'),
  vapourDensity: positive('density', 3e4, 'above 0 kg/m³').optional(),
  liquidSpecificHeat: positive('specificHeat', 1e6, 'above 0 J/(kg K)').optional(),
  surfaceTension: positive('surfaceTension', 10, 'above 0 N/m').optional(),
  vapourViscosity: positive('viscosity', 1, 'above 0 Pa s').optional(),
  vapourConductivity: positive('conductivity', 100, 'above 0 W/(m K)').optional(),
  vapourSpecificHeat: positive('specificHeat', 1e6, 'above 0 J/(kg K)').optional(),
  pressure: positive('pressure', 1e9, 'above 0 Pa').optional(),
  molarMass: positive('molarMass', 10, 'above 0 kg/mol').optional(),
}

const fluidSchema = z.union(
  [
    z.string().transform((id, ctx): string => {
      const card = findFluid(id)
      if (card) return card.id
      ctx.addIssue({
        code: 'custom',
        message: said(`there is no fluid "${id}" in the library`, nearIds(id, fluids)),
        input: id,
      })
      return z.NEVER
    }),
    record({ properties: record(propertyFields) }),
  ],
  {
    error: (issue) =>
      said(
        issue.input === undefined
          ? 'it is missing'
          : 'it is neither a library id nor properties given by hand',
        'give a library id such as "r134a", or { "properties": { liquidDensity, latentHeat, liquidViscosity, liquidConductivity, … } }',
      ),
  },
)

const coolantFields = {
  density: positive('density', 3e4, 'above 0 kg/m³'),
  specificHeat: positive('specificHeat', 1e6, 'above 0 J/(kg K)'),
  viscosity: positive('viscosity', 1e3, 'above 0 Pa s'),
  conductivity: positive('conductivity', 1e3, 'above 0 W/(m K)'),
}

const coolantSchema = z.union(
  [
    z.string().transform((id, ctx): string => {
      const card = findCoolant(id)
      if (card) return card.id
      ctx.addIssue({
        code: 'custom',
        message: said(`there is no coolant "${id}"`, nearIds(id, coolants)),
        input: id,
      })
      return z.NEVER
    }),
    record({ properties: record(coolantFields) }),
  ],
  {
    error: (issue) =>
      said(
        issue.input === undefined
          ? 'it is missing'
          : 'it is neither a coolant id nor properties given by hand',
        `give an id (${coolants.map((c) => c.id).join(', ')}) or { "properties": { density, specificHeat, viscosity, conductivity } }`,
      ),
  },
)

const temperature = quantity('temperature', {
  above: 0,
  max: 2000,
  allowed: 'above 0 K and at most 2000 K (a bare number is in kelvin)',
})
const fouling = quantity('foulingResistance', { min: 0, max: 1, allowed: 'from 0 to 1 m²K/W' })

const driveSchema = z.discriminatedUnion(
  'kind',
  [
    record({
      kind: z.literal('wallSubcooling'),
      wallSubcooling: quantity('temperatureDifference', {
        above: 0,
        max: 500,
        allowed: 'above 0 K and at most 500 K',
      }),
      coolant: record({
        coolant: coolantSchema,
        inletTemperature: temperature,
        foulingResistance: fouling.default(0),
      }).optional(),
    }),
    record({
      kind: z.literal('coolant'),
      coolant: coolantSchema,
      inletTemperature: temperature,
      velocity: positive('velocity', 100, 'above 0 and at most 100 m/s').optional(),
      massFlow: positive('massFlow', 1e6, 'above 0 kg/s').optional(),
      outletTemperature: temperature.optional(),
      foulingResistance: fouling.default(0),
    }),
  ],
  {
    error: (issue) =>
      said(
        issue.input === undefined ? 'it is missing' : 'its kind is not known',
        'give { "kind": "wallSubcooling", … } or { "kind": "coolant", … }',
      ),
  },
)

const surfaceSchema = z.discriminatedUnion(
  'kind',
  [
    record({ kind: z.literal('plain') }),
    record({
      kind: z.literal('integralFin'),
      finsPerMetre: positive('perLength', 1e4, 'above 0 per metre'),
      finHeight: positive('length', 0.05, 'above 0 m'),
      finThickness: positive('length', 0.05, 'above 0 m'),
    }),
    record({
      kind: z.literal('dropwise'),
      promoter: z.string({ error: () => said('it is missing', 'name the promoter') }),
      contactAngle: quantity('angle', { above: 0, max: Math.PI, allowed: 'above 0 and at most π rad' }),
      degradation: quantity('fraction', { above: 0, max: 1, allowed: 'above 0 and at most 1' }).default(0.5),
    }),
  ],
  {
    error: () =>
      said(
        'its kind is not known',
        'give { "kind": "plain" }, { "kind": "integralFin", … } or { "kind": "dropwise", … }',
      ),
  },
)

const materialSchema = z.string().transform((id, ctx): string => {
  const known = materials.find((entry) => entry.id === id.toLowerCase())
  if (known) return known.id
  ctx.addIssue({
    code: 'custom',
    message: said(`there is no material "${id}"`, nearIds(id, materials)),
    input: id,
  })
  return z.NEVER
})

const tubeSchema = record({
  outsideDiameter: positive('length', 1, 'above 0 and at most 1 m'),
  wallThickness: positive('length', 0.1, 'above 0 and at most 0.1 m').optional(),
  material: materialSchema.optional(),
  conductivity: positive('conductivity', 5000, 'above 0 W/(m K)').optional(),
  roughness: quantity('length', { min: 0, max: 0.01, allowed: 'from 0 to 0.01 m' }).default(1.5e-6),
  outsideFoulingResistance: fouling.default(0),
  surface: surfaceSchema.default({ kind: 'plain' }),
})

const whole = (max: number) =>
  quantity('count', { min: 1, max, whole: true, allowed: `a whole number from 1 to ${max}` })

const bundleSchema = record({
  shape: oneOf(['rectangular', 'circular']).default('rectangular'),
  layout: oneOf(['triangular30', 'triangular60', 'square90', 'square45']).default('triangular30'),
  pitchRatio: quantity('none', { above: 1, max: 10, allowed: 'above 1 and at most 10' }),
  rows: whole(MAX_ROWS()),
  tubesPerRow: z
    .union([z.literal('auto'), whole(2000)], {
      error: (issue) =>
        said(
          issue.input === undefined ? 'it is missing' : 'it is neither a number nor "auto"',
          'give a whole number from 1 to 2000, or "auto"',
        ),
    })
    .optional(),
  passes: whole(64).default(1),
  coolantEntry: oneOf(['bottom', 'top']).default('bottom'),
  length: positive('length', 1e6, 'above 0 and at most 1 000 000 m').optional(),
})

/** Most rows a case may have; the solver's arrays are made for as many. */
function MAX_ROWS(): number {
  return 500
}

const vapourSchema = record({
  superheat: quantity('temperatureDifference', { min: 0, max: 300, allowed: 'from 0 to 300 K' }).default(0),
  gas: record({
    kind: oneOf(['air']),
    moleFraction: quantity('fraction', { min: 0, max: 0.9, allowed: 'from 0 to 0.9' }),
    ventFraction: quantity('fraction', { above: 0, max: 0.9, allowed: 'above 0 and at most 0.9' }).default(
      0.02,
    ),
  }).optional(),
})

/** Choices of method, first the default. */
export const METHOD_CHOICES = {
  film: ['nusselt', 'chen'],
  latentHeat: ['rohsenow', 'plain'],
  propertyTemperature: ['oneThird', 'mean', 'saturation'],
  inundation: ['condensateFlow', 'drainageMode', 'nusselt', 'kern', 'eissenberg', 'chen', 'none'],
  vapourShear: [
    'butterworth',
    'shekriladzeGomelauri',
    'rose',
    'fujiiUeharaKurata',
    'mcnaught',
    'honda',
    'none',
  ],
  fins: ['rose', 'beattyKatz'],
  dropwise: ['rose', 'griffith', 'leFevreRose'],
  gas: ['colburnHougen', 'none'],
  tubeSide: ['gnielinski', 'siederTate', 'dittusBoelter'],
  tubeFriction: ['churchill', 'colebrook'],
  vapourPressureDrop: ['gaddisGnielinski', 'zukauskas', 'jakob', 'none'],
  twoPhase: ['ishihara', 'none'],
} as const

export type MethodChoice = keyof typeof METHOD_CHOICES

const methodsSchema = record({
  film: oneOf(METHOD_CHOICES.film).default('nusselt'),
  latentHeat: oneOf(METHOD_CHOICES.latentHeat).default('rohsenow'),
  propertyTemperature: oneOf(METHOD_CHOICES.propertyTemperature).default('oneThird'),
  inundation: oneOf(METHOD_CHOICES.inundation).default('condensateFlow'),
  vapourShear: oneOf(METHOD_CHOICES.vapourShear).default('butterworth'),
  fins: oneOf(METHOD_CHOICES.fins).default('rose'),
  dropwise: oneOf(METHOD_CHOICES.dropwise).default('rose'),
  gas: oneOf(METHOD_CHOICES.gas).default('colburnHougen'),
  tubeSide: oneOf(METHOD_CHOICES.tubeSide).default('gnielinski'),
  tubeFriction: oneOf(METHOD_CHOICES.tubeFriction).default('churchill'),
  vapourPressureDrop: oneOf(METHOD_CHOICES.vapourPressureDrop).default('gaddisGnielinski'),
  twoPhase: oneOf(METHOD_CHOICES.twoPhase).default('ishihara'),
})

export type Methods = z.output<typeof methodsSchema>

const economicsSchema = record({
  tubePrice: quantity('money', { min: 0, max: 1e9, allowed: 'at least 0 per m² of outside area' }).default(
    economicsDefaults.tubePrice,
  ),
  energyPrice: quantity('energyPrice', { min: 0, max: 1e6, allowed: 'at least 0 per kWh' }).default(
    economicsDefaults.energyPrice,
  ),
  hoursPerYear: quantity('count', { min: 0, max: 8784, allowed: 'from 0 to 8784 h' }).default(
    economicsDefaults.hoursPerYear,
  ),
  years: quantity('count', { above: 0, max: 200, allowed: 'above 0 and at most 200 years' }).default(
    economicsDefaults.years,
  ),
  interest: quantity('fraction', { min: 0, max: 1, allowed: 'from 0 to 1' }).default(
    economicsDefaults.interest,
  ),
  pumpEfficiency: quantity('fraction', { above: 0, max: 1, allowed: 'above 0 and at most 1' }).default(
    economicsDefaults.pumpEfficiency,
  ),
})

/** Corrections of one group together stay within these, as each does by itself. */
const CORRECTION_RANGE = [0.2, 5] as const

const line = (what: string) =>
  z
    .string({ error: () => said('it is missing', `give ${what} as text`) })
    .trim()
    .min(1, said('it is empty', `give ${what}`))
    .max(200, said('it is too long', 'allowed are 200 characters'))

const correctionSchema = record({
  name: line('the name of the correction'),
  group: oneOf(MULTIPLIER_IDS),
  factor: quantity('none', {
    min: CORRECTION_RANGE[0],
    max: CORRECTION_RANGE[1],
    allowed: 'from 0.2 to 5; 1 changes nothing',
  }),
  source: line('where the correction comes from'),
})

const correctionsSchema = z
  .array(correctionSchema, {
    error: () => said('it is not a list', 'give a list of { name, group, factor, source }'),
  })
  .max(20, said('there are too many', 'allowed are 20 corrections'))

/** A factor on one part of the calculation, taken from measurements. */
export type Correction = z.output<typeof correctionSchema>

/** The fields of a case without the checks across fields. */
const caseObject = record({
  fluid: fluidSchema,
  saturationTemperature: temperature.optional(),
  saturationPressure: positive('pressure', 1e9, 'above 0 Pa').optional(),
  duty: positive('power', 1e12, 'above 0 W').optional(),
  drive: driveSchema,
  tube: tubeSchema,
  bundle: bundleSchema,
  vapour: vapourSchema.prefault({}),
  methods: methodsSchema.prefault({}),
  economics: economicsSchema.prefault({}),
  corrections: correctionsSchema.optional(),
})

/** A case with every default filled in; it parses to itself. */
export type Case = z.output<typeof caseObject>
/** A case as a person or a file gives it. */
export type CaseInput = z.input<typeof caseObject>

/** The schema of a case: fields, then what must hold between them. */
export const caseSchema = caseObject.superRefine((value, ctx) => {
  for (const fault of crossFaults(value))
    ctx.addIssue({ code: 'custom', path: fault.path.split('.'), message: said(fault.problem, fault.remedy) })
})

/** The case, or everything that is wrong with it. */
export function parseCase(input: unknown): { ok: true; case: Case } | { ok: false; faults: Fault[] } {
  const parsed = caseSchema.safeParse(input)
  if (parsed.success) return { ok: true, case: parsed.data }
  const faults = faultsFromIssues(parsed.error.issues)
  // The checks across fields run only on whole objects: a pair that excludes itself is said at once all the same.
  for (const fault of exclusiveFaults(input))
    if (!faults.some((known) => known.path === fault.path && known.problem === fault.problem))
      faults.push(fault)
  return { ok: false, faults }
}

const has = (value: unknown, key: string): boolean =>
  typeof value === 'object' && value !== null && (value as Record<string, unknown>)[key] !== undefined

const BOTH_DUTY_AND_LENGTH: Fault = {
  path: 'duty',
  problem: 'duty and bundle.length are both given',
  remedy:
    'give duty to size the length, or bundle.length to rate the duty; to hold a duty at a given length set limits.duty.min',
}
const BOTH_STATES: Fault = {
  path: 'saturationPressure',
  problem: 'saturationTemperature and saturationPressure are both given',
  remedy: 'give exactly one of the two',
}

function exclusiveFaults(input: unknown): Fault[] {
  const faults: Fault[] = []
  if (has(input, 'duty') && has((input as { bundle?: unknown }).bundle, 'length'))
    faults.push(BOTH_DUTY_AND_LENGTH)
  if (has(input, 'saturationTemperature') && has(input, 'saturationPressure')) faults.push(BOTH_STATES)
  return faults
}

/** What a fluid given by hand must hold beyond the four properties every film needs, by the method that needs it. */
function missingProperties(value: Case): Fault[] {
  if (typeof value.fluid === 'string') return []
  const given = value.fluid.properties as Record<string, number | undefined>
  const faults: Fault[] = []
  const plain = value.tube.surface.kind === 'plain'
  const asked = METHOD_ORDER.filter((choice) => {
    if (choice === 'fins') return value.tube.surface.kind === 'integralFin'
    if (choice === 'dropwise') return value.tube.surface.kind === 'dropwise'
    if (choice === 'gas') return value.vapour.gas !== undefined
    if (choice === 'twoPhase') return value.methods.vapourPressureDrop !== 'none'
    return plain || choice !== 'film'
  })
  for (const choice of asked) {
    const card = findCard(`${choice}.${value.methods[choice]}`)
    for (const property of card?.requires ?? []) {
      if (given[property] !== undefined || faults.some((fault) => fault.path.endsWith(`.${property}`)))
        continue
      const simpler =
        choice === 'latentHeat'
          ? 'methods.latentHeat "plain"'
          : choice === 'vapourShear' || choice === 'vapourPressureDrop'
            ? `methods.${choice} "none"`
            : 'a method that does without it'
      faults.push({
        path: `fluid.properties.${property}`,
        problem: `it is missing and the method ${choice} "${value.methods[choice]}" needs it`,
        remedy: `give it, or choose ${simpler}`,
      })
    }
  }
  if (value.methods.vapourPressureDrop !== 'none' && given.pressure === undefined)
    faults.push({
      path: 'fluid.properties.pressure',
      problem: 'it is missing and a vapour pressure drop is asked for',
      remedy: 'give the pressure of the vapour, or methods.vapourPressureDrop "none"',
    })
  return faults
}

const METHOD_ORDER = Object.keys(METHOD_CHOICES) as MethodChoice[]

/** What must hold between the fields of a case whose every field is right by itself. */
function crossFaults(value: Case): Fault[] {
  const faults: Fault[] = []
  const fault = (path: string, problem: string, remedy: string) => faults.push({ path, problem, remedy })
  const { tube, bundle, drive, methods } = value

  if (value.saturationTemperature === undefined && value.saturationPressure === undefined)
    fault('saturationTemperature', 'it is missing', 'give saturationTemperature or saturationPressure')
  else if (value.saturationTemperature !== undefined && value.saturationPressure !== undefined)
    faults.push(BOTH_STATES)
  else if (typeof value.fluid !== 'string') {
    if (value.saturationTemperature === undefined)
      fault(
        'saturationPressure',
        'a fluid given by hand has no saturation line',
        'give saturationTemperature',
      )
  } else {
    const model = fluidModel(value.fluid)
    const [low, high] = [model.minTemperature, model.maxTemperature]
    if (value.saturationTemperature !== undefined) {
      const T = value.saturationTemperature
      if (T < low || T > high)
        fault(
          'saturationTemperature',
          `${T} K is outside the table of ${value.fluid}`,
          `allowed is ${low} to ${high} K (${(low - 273.15).toFixed(1)} to ${(high - 273.15).toFixed(1)} °C)`,
        )
    } else {
      const p = value.saturationPressure as number
      const [from, to] = [saturationPressure(model, low), saturationPressure(model, high)]
      if (p < from || p > to)
        fault(
          'saturationPressure',
          `${p} Pa is outside the table of ${value.fluid}`,
          `allowed is ${Math.ceil(from)} to ${Math.floor(to)} Pa`,
        )
    }
  }

  if (value.duty === undefined && bundle.length === undefined)
    fault(
      'duty',
      'neither duty nor bundle.length is given',
      'give duty to size the length, or bundle.length to rate the duty',
    )
  else if (value.duty !== undefined && bundle.length !== undefined) faults.push(BOTH_DUTY_AND_LENGTH)

  const cooled = drive.kind === 'coolant' ? drive : drive.coolant
  if (drive.kind === 'coolant') {
    const given = (['velocity', 'massFlow', 'outletTemperature'] as const).filter(
      (name) => drive[name] !== undefined,
    )
    const auto = bundle.tubesPerRow === 'auto'
    const pair = auto && given.length === 2 && given.includes('velocity')
    if (given.length === 0)
      fault(
        'drive.velocity',
        'no coolant flow is given',
        'give exactly one of velocity, massFlow, outletTemperature',
      )
    else if (given.length > 1 && !pair)
      fault(
        `drive.${given[1]}`,
        `${given.join(' and ')} are given together`,
        'give exactly one of velocity, massFlow, outletTemperature; velocity with one of the others only when bundle.tubesPerRow is "auto"',
      )
    if (drive.outletTemperature !== undefined) {
      if (value.duty === undefined)
        fault(
          'drive.outletTemperature',
          'an outlet temperature needs a duty',
          'give duty, or velocity or massFlow instead',
        )
      if (drive.outletTemperature <= drive.inletTemperature)
        fault(
          'drive.outletTemperature',
          `${drive.outletTemperature} K is not above the inlet temperature`,
          `give more than ${drive.inletTemperature} K`,
        )
    }
    if (auto && !pair)
      fault(
        'bundle.tubesPerRow',
        '"auto" needs the coolant velocity together with massFlow or outletTemperature',
        'give both, or a whole number of tubes per row',
      )
  } else if (bundle.tubesPerRow === 'auto')
    fault('bundle.tubesPerRow', '"auto" needs a coolant drive', 'give a whole number of tubes per row')

  if (cooled) {
    const under = drive.kind === 'coolant' ? 'drive' : 'drive.coolant'
    if (typeof cooled.coolant === 'string') {
      const model = coolantModel(cooled.coolant)
      const lowest = Math.max(model.minTemperature, model.freezingTemperature)
      if (cooled.inletTemperature < lowest || cooled.inletTemperature > model.maxTemperature)
        fault(
          `${under}.inletTemperature`,
          `${cooled.inletTemperature} K is beyond freezing or outside the table of ${cooled.coolant}`,
          `allowed is above ${lowest} and up to ${model.maxTemperature} K`,
        )
    }
    if (value.saturationTemperature !== undefined && cooled.inletTemperature >= value.saturationTemperature)
      fault(
        `${under}.inletTemperature`,
        `${cooled.inletTemperature} K is not below the saturation temperature: nothing condenses`,
        `give less than ${value.saturationTemperature} K`,
      )
    if (tube.wallThickness === undefined)
      fault(
        'tube.wallThickness',
        'it is missing and a coolant is named',
        'give the wall thickness of the tube',
      )
    if (tube.material === undefined && tube.conductivity === undefined)
      fault(
        'tube.material',
        'neither material nor conductivity is given and a coolant is named',
        'give one of them',
      )
  }
  if (tube.material !== undefined && tube.conductivity !== undefined)
    fault('tube.conductivity', 'material and conductivity are both given', 'give exactly one of the two')
  if (tube.wallThickness !== undefined && 2 * tube.wallThickness >= tube.outsideDiameter)
    fault(
      'tube.wallThickness',
      `${tube.wallThickness} m leaves no bore in a tube of ${tube.outsideDiameter} m`,
      `give less than half the outside diameter, ${tube.outsideDiameter / 2} m`,
    )

  if (bundle.shape === 'circular') {
    if (bundle.tubesPerRow !== undefined)
      fault(
        'bundle.tubesPerRow',
        'a circular bundle has as many tubes in a row as its chord holds',
        'leave it out, or choose shape "rectangular"',
      )
  } else if (bundle.tubesPerRow === undefined)
    fault('bundle.tubesPerRow', 'it is missing', 'give a whole number from 1 to 2000, or "auto"')
  if (bundle.passes > bundle.rows)
    fault(
      'bundle.passes',
      `${bundle.passes} passes do not fit ${bundle.rows} rows`,
      `give at most one pass a row, ${bundle.rows}`,
    )

  if (tube.surface.kind !== 'plain')
    fault(
      'tube.surface.kind',
      `"${tube.surface.kind}" is not evaluated by this version`,
      'give { "kind": "plain" }',
    )
  if (value.vapour.gas !== undefined)
    fault(
      'vapour.gas',
      'non-condensable gas is not evaluated by this version',
      'leave it out; the result is that of pure vapour',
    )
  if (value.vapour.superheat > 0)
    fault(
      'vapour.superheat',
      'superheat is not evaluated by this version',
      'leave it out; the vapour is taken as saturated',
    )
  if (methods.vapourShear === 'mcnaught' || methods.vapourShear === 'honda')
    fault(
      'methods.vapourShear',
      `"${methods.vapourShear}" is not evaluated by this version`,
      'choose butterworth, shekriladzeGomelauri, rose, fujiiUeharaKurata or none',
    )
  const together = new Map<string, number>()
  for (const { group, factor } of value.corrections ?? [])
    together.set(group, (together.get(group) ?? 1) * factor)
  for (const [group, factor] of together)
    if (factor < CORRECTION_RANGE[0] || factor > CORRECTION_RANGE[1])
      fault(
        'corrections',
        `those of ${group} multiply to ${Number(factor.toPrecision(3))}`,
        `together they may be from ${CORRECTION_RANGE[0]} to ${CORRECTION_RANGE[1]}`,
      )
  faults.push(...missingProperties(value))
  return faults
}
