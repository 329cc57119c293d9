// The Define form as flat text fields, and the study definition they stand for. Pure, so that the same reading serves
// the page while one types and the server when a form is posted without scripts.
import { LIMITS } from '#engine/sweep/limits.ts'
import { findSweepPath } from '#engine/sweep/paths.ts'
import {
  type Dimension,
  type DisplayHint,
  displayUnit,
  parseQuantity,
  toDisplay,
  type UnitSystem,
} from '#engine/units.ts'

/** What stands in each field, by the field's name. Absent and empty are the same. */
export type Fields = Readonly<Record<string, string>>
export type Definition = Record<string, unknown>

export type VaryMode = '' | 'list' | 'range'

type Raw = Record<string, unknown>

/** Fields that hold a quantity: their dimension and the size they are shown in. Path in the case where it differs. */
export const QUANTITIES: Readonly<Record<string, { dimension: Dimension; hint?: DisplayHint }>> = {
  saturationTemperature: { dimension: 'temperature' },
  saturationPressure: { dimension: 'pressure' },
  duty: { dimension: 'power' },
  'drive.wallSubcooling': { dimension: 'temperatureDifference' },
  'drive.velocity': { dimension: 'velocity' },
  'drive.massFlow': { dimension: 'massFlow' },
  'drive.outletTemperature': { dimension: 'temperature' },
  'coolant.inletTemperature': { dimension: 'temperature' },
  'coolant.foulingResistance': { dimension: 'foulingResistance' },
  'coolant.properties.density': { dimension: 'density' },
  'coolant.properties.specificHeat': { dimension: 'specificHeat' },
  'coolant.properties.viscosity': { dimension: 'viscosity' },
  'coolant.properties.conductivity': { dimension: 'conductivity' },
  'fluid.properties.liquidDensity': { dimension: 'density' },
  'fluid.properties.latentHeat': { dimension: 'specificEnthalpy' },
  'fluid.properties.liquidViscosity': { dimension: 'viscosity' },
  'fluid.properties.liquidConductivity': { dimension: 'conductivity' },
  'fluid.properties.vapourDensity': { dimension: 'density' },
  'fluid.properties.liquidSpecificHeat': { dimension: 'specificHeat' },
  'fluid.properties.surfaceTension': { dimension: 'surfaceTension' },
  'fluid.properties.vapourViscosity': { dimension: 'viscosity', hint: 'small' },
  'fluid.properties.vapourConductivity': { dimension: 'conductivity' },
  'fluid.properties.vapourSpecificHeat': { dimension: 'specificHeat' },
  'fluid.properties.pressure': { dimension: 'pressure' },
  'fluid.properties.molarMass': { dimension: 'molarMass' },
  'tube.outsideDiameter': { dimension: 'length', hint: 'tube' },
  'tube.wallThickness': { dimension: 'length', hint: 'tube' },
  'tube.conductivity': { dimension: 'conductivity' },
  'tube.roughness': { dimension: 'length', hint: 'roughness' },
  'tube.outsideFoulingResistance': { dimension: 'foulingResistance' },
  'tube.surface.finsPerMetre': { dimension: 'perLength' },
  'tube.surface.finHeight': { dimension: 'length', hint: 'tube' },
  'tube.surface.finThickness': { dimension: 'length', hint: 'tube' },
  'tube.surface.contactAngle': { dimension: 'angle' },
  'tube.surface.degradation': { dimension: 'fraction' },
  'bundle.pitchRatio': { dimension: 'none' },
  'bundle.rows': { dimension: 'count' },
  'bundle.tubesPerRow': { dimension: 'count' },
  'bundle.passes': { dimension: 'count' },
  'bundle.length': { dimension: 'length' },
  'vapour.superheat': { dimension: 'temperatureDifference' },
  'vapour.gas.moleFraction': { dimension: 'fraction' },
  'vapour.gas.ventFraction': { dimension: 'fraction' },
  'economics.tubePrice': { dimension: 'money' },
  'economics.energyPrice': { dimension: 'energyPrice' },
  'economics.hoursPerYear': { dimension: 'count' },
  'economics.years': { dimension: 'count' },
  'economics.interest': { dimension: 'fraction' },
  'economics.pumpEfficiency': { dimension: 'fraction' },
}

export const METHOD_NAMES = [
  'film',
  'latentHeat',
  'propertyTemperature',
  'inundation',
  'vapourShear',
  'fins',
  'dropwise',
  'gas',
  'tubeSide',
  'tubeFriction',
  'vapourPressureDrop',
  'twoPhase',
] as const

/** Swept fields in the order the form shows them. */
export const SWEPT_FIELDS = [
  'fluid',
  'saturationTemperature',
  'saturationPressure',
  'duty',
  'bundle.length',
  'drive.wallSubcooling',
  'coolant.id',
  'coolant.inletTemperature',
  'drive.velocity',
  'drive.massFlow',
  'drive.outletTemperature',
  'coolant.foulingResistance',
  'tube.catalogue',
  'tube.outsideDiameter',
  'tube.wallThickness',
  'tube.material',
  'tube.conductivity',
  'tube.outsideFoulingResistance',
  'tube.roughness',
  'tube.surface.finsPerMetre',
  'tube.surface.finHeight',
  'tube.surface.finThickness',
  'tube.surface.contactAngle',
  'tube.surface.degradation',
  'bundle.shape',
  'bundle.layout',
  'bundle.pitchRatio',
  'bundle.rows',
  'bundle.tubesPerRow',
  'bundle.passes',
  'bundle.coolantEntry',
  'vapour.superheat',
  'vapour.gas.moleFraction',
  'vapour.gas.ventFraction',
  ...METHOD_NAMES.map((name) => `methods.${name}`),
  'economics.tubePrice',
  'economics.energyPrice',
]

/** A field's path in the case: the coolant's fields stand in two places, by the drive. */
export function pathOfField(name: string, fields: Fields): string {
  if (!name.startsWith('coolant.')) return name
  const under = fields['drive.kind'] === 'wallSubcooling' ? 'drive.coolant' : 'drive'
  const rest = name.slice('coolant.'.length)
  return `${under}.${rest === 'id' || rest.startsWith('properties.') ? 'coolant' : rest}`
}

function fieldOfPath(path: string): string {
  if (path === 'tube') return 'tube.catalogue'
  if (path === 'drive.coolant' || path === 'drive.coolant.coolant') return 'coolant.id'
  const coolant = /^drive\.(?:coolant\.)?(inletTemperature|foulingResistance)$/.exec(path)
  if (coolant) return `coolant.${coolant[1]}`
  const properties = /^drive\.(?:coolant\.)+properties\.(\w+)$/.exec(path)
  if (properties) return `coolant.properties.${properties[1]}`
  return path
}

/** Whether a field has a say, given what is chosen elsewhere; the others keep their text but are left out. */
export function isActive(name: string, fields: Fields): boolean {
  const subcooling = fields['drive.kind'] === 'wallSubcooling'
  const named = !subcooling || fields['coolant.named'] === 'yes'
  switch (name) {
    case 'saturationTemperature':
      return fields.state !== 'pressure'
    case 'saturationPressure':
      return fields.state === 'pressure'
    case 'duty':
      return fields.question !== 'rate'
    case 'bundle.length':
      return fields.question === 'rate'
    case 'drive.wallSubcooling':
      return subcooling
    case 'drive.velocity':
      return !subcooling && (fields.flow === 'velocity' || isAuto(fields))
    case 'drive.massFlow':
      return !subcooling && fields.flow === 'massFlow'
    case 'drive.outletTemperature':
      return !subcooling && fields.flow === 'outletTemperature'
    case 'tube.material':
      return fields.wallBy !== 'conductivity'
    case 'tube.conductivity':
      return fields.wallBy === 'conductivity'
    case 'bundle.tubesPerRow':
      return fields['bundle.shape'] !== 'circular'
  }
  if (name.startsWith('coolant.properties.')) return named && fields['coolant.id'] === 'given'
  if (name.startsWith('coolant.')) return named
  if (name.startsWith('fluid.properties.')) return fields.fluid === 'given'
  if (name.startsWith('tube.surface.fin')) return fields['tube.surface.kind'] === 'integralFin'
  if (/^tube\.surface\.(promoter|contactAngle|degradation)$/.test(name))
    return fields['tube.surface.kind'] === 'dropwise'
  if (name.startsWith('vapour.gas.')) return fields['vapour.gas'] === 'yes'
  return true
}

const isAuto = (fields: Fields) => (fields['bundle.tubesPerRow'] ?? '').trim().toLowerCase() === 'auto'

/** The mode a field is in; one that has no say is not varied either. */
export function varyMode(name: string, fields: Fields): VaryMode {
  const mode = fields[`vary.${name}`]
  return mode === 'list' || mode === 'range' ? mode : ''
}

// --- fields -> definition -----------------------------------------------------------------------------------

export function definitionFromFields(fields: Fields, units: UnitSystem): Definition {
  const kase: Raw = {}
  const has = (name: string) => (fields[name] ?? '').trim() !== ''
  const put = (name: string, path = pathOfField(name, fields)) => {
    if (!isActive(name, fields) || !has(name)) return
    setPath(kase, path, name in QUANTITIES ? written(fields[name], name, units) : fields[name].trim())
  }

  if (fields.fluid === 'given') {
    setPath(kase, 'fluid', { properties: {} })
    for (const name of Object.keys(QUANTITIES)) if (name.startsWith('fluid.properties.')) put(name)
  } else put('fluid')
  put('saturationTemperature')
  put('saturationPressure')
  put('duty')

  const drive = fields['drive.kind'] === 'wallSubcooling' ? 'wallSubcooling' : 'coolant'
  setPath(kase, 'drive.kind', drive)
  put('drive.wallSubcooling')
  if (isActive('coolant.id', fields)) {
    if (fields['coolant.id'] === 'given') {
      const under = pathOfField('coolant.id', fields)
      setPath(kase, under, { properties: {} })
      for (const name of Object.keys(QUANTITIES))
        if (name.startsWith('coolant.properties.'))
          put(name, `${under}.properties.${name.slice('coolant.properties.'.length)}`)
    } else put('coolant.id')
    put('coolant.inletTemperature')
    put('coolant.foulingResistance')
  }
  for (const name of ['drive.velocity', 'drive.massFlow', 'drive.outletTemperature']) put(name)

  for (const name of [
    'outsideDiameter',
    'wallThickness',
    'material',
    'conductivity',
    'roughness',
    'outsideFoulingResistance',
  ])
    put(`tube.${name}`)
  if (has('tube.surface.kind')) {
    setPath(kase, 'tube.surface.kind', fields['tube.surface.kind'])
    for (const name of [
      'finsPerMetre',
      'finHeight',
      'finThickness',
      'promoter',
      'contactAngle',
      'degradation',
    ])
      put(`tube.surface.${name}`)
  }
  for (const name of ['shape', 'layout', 'pitchRatio', 'rows', 'passes', 'coolantEntry', 'length'])
    put(`bundle.${name}`)
  if (isActive('bundle.tubesPerRow', fields) && has('bundle.tubesPerRow'))
    setPath(
      kase,
      'bundle.tubesPerRow',
      isAuto(fields) ? 'auto' : written(fields['bundle.tubesPerRow'], 'bundle.tubesPerRow', units),
    )
  put('vapour.superheat')
  if (fields['vapour.gas'] === 'yes') {
    setPath(kase, 'vapour.gas.kind', 'air')
    put('vapour.gas.moleFraction')
    put('vapour.gas.ventFraction')
  }
  for (const name of METHOD_NAMES) put(`methods.${name}`)
  for (const name of Object.keys(QUANTITIES)) if (name.startsWith('economics.')) put(name)

  const definition: Definition = { name: (fields.name ?? '').trim() }
  if (has('description')) definition.description = fields.description.trim()
  definition.case = kase
  definition.sweep = sweepFromFields(fields, units)
  if (has('objective')) definition.objective = fields.objective
  const limits: Raw = {}
  for (const limit of LIMITS)
    for (const side of ['min', 'max'] as const) {
      const text = (fields[`limits.${limit.id}.${side}`] ?? '').trim()
      if (text !== '')
        setPath(limits, `${limit.id}.${side}`, writtenAs(text, limit.dimension, undefined, units))
    }
  if (Object.keys(limits).length > 0) definition.limits = limits
  const rest = restOf(fields)
  if (Array.isArray(rest.corrections)) kase.corrections = rest.corrections
  return { ...definition, ...pick(rest, REST_KEYS) }
}

/** What a study file may hold and the form does not show goes through unchanged. */
function restOf(fields: Fields): Raw {
  if (!fields.rest) return {}
  try {
    const rest: unknown = JSON.parse(fields.rest)
    return isRecord(rest) ? rest : {}
  } catch {
    return {}
  }
}
const REST_KEYS = ['optimise', 'uncertainty']

/** The varied fields that have a say, in the order of the study they came from, new ones last. */
export function variedFields(fields: Fields): string[] {
  const active = SWEPT_FIELDS.filter((name) =>
    name === 'tube.catalogue'
      ? fields['vary.tube.catalogue'] === 'list'
      : varyMode(name, fields) !== '' && isActive(name, fields),
  )
  const order = (fields['sweep.order'] ?? '').split(' ')
  const place = (name: string) => {
    const at = order.indexOf(name)
    return at < 0 ? order.length + SWEPT_FIELDS.indexOf(name) : at
  }
  return active.sort((a, b) => place(a) - place(b))
}

function sweepFromFields(fields: Fields, units: UnitSystem): Raw {
  const variables = variedFields(fields).map((name): Raw => {
    const at = (part: string) => (fields[`vary.${name}.${part}`] ?? '').trim()
    if (name === 'tube.catalogue') return { catalogue: words(at('values')) }
    const path = pathOfField(name, fields)
    const quantity = QUANTITIES[name]
    if (!quantity) return { path, values: words(at('values')) }
    if (varyMode(name, fields) === 'range') {
      const count = at('count')
      return {
        path,
        from: written(at('from'), name, units),
        to: written(at('to'), name, units),
        ...(count === '' ? {} : { count: numberOr(count) }),
        ...(at('scale') === 'geometric' ? { scale: 'geometric' } : {}),
      }
    }
    return { path, values: listItems(at('values')).map((item) => written(item, name, units)) }
  })
  const design = fields['sweep.design'] || 'factorial'
  const sampled = design === 'latinHypercube' || design === 'sobol'
  return {
    variables,
    design,
    ...(sampled && fields['sweep.samples']?.trim() ? { samples: numberOr(fields['sweep.samples']) } : {}),
    ...(sampled && fields['sweep.seed']?.trim() ? { seed: numberOr(fields['sweep.seed']) } : {}),
  }
}

const words = (text: string) => text.split(/[\s;]+/).filter((word) => word !== '')

/** Items of a list as typed: between semicolons, or commas followed by a gap, or gaps between bare numbers. */
export function listItems(text: string): string[] {
  const parts = text
    .split(/;|,\s|\n/)
    .map((item) => item.trim())
    .filter((item) => item !== '')
  if (parts.length === 1) {
    const spaced = /^((?:[-+]?[\d.,]+(?:e[-+]?\d+)?\s+)+)([-+]?[\d.,]+(?:e[-+]?\d+)?)(\s*[^\d\s].*)?$/i.exec(
      parts[0],
    )
    if (spaced && !/^\d+\s+\d+\/\d+/.test(parts[0])) {
      const numbers = [...spaced[1].trim().split(/\s+/), `${spaced[2]}${spaced[3] ?? ''}`]
      return withSharedUnit(numbers)
    }
  }
  return withSharedUnit(parts)
}

/** "0.5; 0.75; 1 in": a unit after the last item alone is meant for all. */
function withSharedUnit(items: string[]): string[] {
  const unit = unitOf(items.at(-1) ?? '')
  if (unit === '' || items.slice(0, -1).some((item) => unitOf(item) !== '')) return items
  return items.map((item, i) => (i === items.length - 1 ? item : `${item} ${unit}`))
}

const unitOf = (text: string) =>
  /(?:^|[\d\s.])([a-zµμ°%/][^\d;]*.*)$/i
    .exec(text.replace(/^[-+\d.,\s/]*(?:e[-+]?\d+)?/i, ' '))?.[1]
    ?.trim() ?? ''

function numberOr(text: string): number | string {
  const parsed = parseQuantity(text, 'none')
  return parsed.ok ? parsed.value : text.trim()
}

const written = (text: string, name: string, units: UnitSystem) =>
  writtenAs(text, QUANTITIES[name].dimension, QUANTITIES[name].hint, units)

/** A bare number gets the unit it was shown with; what carries a unit of its own, or is no number, stays as typed. */
function writtenAs(
  text: string,
  dimension: Dimension,
  hint: DisplayHint | undefined,
  units: UnitSystem,
): number | string {
  const trimmed = text.trim()
  const bare = parseQuantity(trimmed, 'none')
  if (!bare.ok) return trimmed
  const unit = displayUnit(dimension, units, hint)
  return unit === '' ? bare.value : `${trimmed} ${unit}`
}

// --- definition -> fields -----------------------------------------------------------------------------------

export function fieldsFromDefinition(definition: Definition, units: UnitSystem): Fields {
  const fields: Record<string, string> = {}
  const kase = isRecord(definition.case) ? definition.case : {}
  const text = (value: unknown) =>
    typeof value === 'string' || typeof value === 'number' ? String(value) : ''
  const show = (name: string, value: unknown) => {
    if (value === undefined || value === null) return
    fields[name] = name in QUANTITIES ? shown(value, name, units) : text(value)
  }

  fields.name = text(definition.name)
  fields.description = text(definition.description)
  const fluid = kase.fluid
  if (isRecord(fluid)) {
    fields.fluid = 'given'
    if (isRecord(fluid.properties))
      for (const [key, value] of Object.entries(fluid.properties)) show(`fluid.properties.${key}`, value)
  } else show('fluid', fluid)

  fields.state = kase.saturationPressure !== undefined ? 'pressure' : 'temperature'
  fields.question =
    getPath(kase, 'bundle.length') !== undefined ||
    (kase.duty === undefined && sweeps(definition, 'bundle.length'))
      ? 'rate'
      : 'size'
  for (const name of ['saturationTemperature', 'saturationPressure', 'duty']) show(name, kase[name])

  const drive = isRecord(kase.drive) ? kase.drive : {}
  const subcooling = drive.kind === 'wallSubcooling'
  fields['drive.kind'] = subcooling ? 'wallSubcooling' : 'coolant'
  show('drive.wallSubcooling', drive.wallSubcooling)
  const coolant = subcooling ? (isRecord(drive.coolant) ? drive.coolant : {}) : drive
  fields['coolant.named'] = subcooling ? (isRecord(drive.coolant) ? 'yes' : '') : 'yes'
  if (isRecord(coolant.coolant)) {
    fields['coolant.id'] = 'given'
    if (isRecord(coolant.coolant.properties))
      for (const [key, value] of Object.entries(coolant.coolant.properties))
        show(`coolant.properties.${key}`, value)
  } else show('coolant.id', coolant.coolant)
  show('coolant.inletTemperature', coolant.inletTemperature)
  show('coolant.foulingResistance', coolant.foulingResistance)
  for (const name of ['velocity', 'massFlow', 'outletTemperature']) show(`drive.${name}`, drive[name])
  const given = (name: string) => drive[name] !== undefined || sweeps(definition, `drive.${name}`)
  fields.flow = given('massFlow') ? 'massFlow' : given('outletTemperature') ? 'outletTemperature' : 'velocity'

  const tube = isRecord(kase.tube) ? kase.tube : {}
  for (const name of [
    'outsideDiameter',
    'wallThickness',
    'material',
    'conductivity',
    'roughness',
    'outsideFoulingResistance',
  ])
    show(`tube.${name}`, tube[name])
  fields.wallBy =
    tube.conductivity !== undefined || sweeps(definition, 'tube.conductivity') ? 'conductivity' : 'material'
  const surface = isRecord(tube.surface) ? tube.surface : {}
  fields['tube.surface.kind'] = text(surface.kind) || 'plain'
  for (const [key, value] of Object.entries(surface)) if (key !== 'kind') show(`tube.surface.${key}`, value)

  const bundle = isRecord(kase.bundle) ? kase.bundle : {}
  for (const name of [
    'shape',
    'layout',
    'pitchRatio',
    'rows',
    'tubesPerRow',
    'passes',
    'coolantEntry',
    'length',
  ])
    show(`bundle.${name}`, bundle[name])
  fields['bundle.shape'] ||= 'rectangular'
  fields['bundle.layout'] ||= 'triangular30'
  fields['bundle.coolantEntry'] ||= 'bottom'

  const vapour = isRecord(kase.vapour) ? kase.vapour : {}
  show('vapour.superheat', vapour.superheat)
  if (isRecord(vapour.gas)) {
    fields['vapour.gas'] = 'yes'
    show('vapour.gas.moleFraction', vapour.gas.moleFraction)
    show('vapour.gas.ventFraction', vapour.gas.ventFraction)
  }
  const methods = isRecord(kase.methods) ? kase.methods : {}
  for (const name of METHOD_NAMES) show(`methods.${name}`, methods[name])
  const economics = isRecord(kase.economics) ? kase.economics : {}
  for (const [key, value] of Object.entries(economics)) show(`economics.${key}`, value)

  fields.objective = text(definition.objective) || 'outsideArea'
  const limits = isRecord(definition.limits) ? definition.limits : {}
  for (const limit of LIMITS) {
    const value = limits[limit.id]
    const parts: Raw = isRecord(value)
      ? value
      : value === undefined || value === null
        ? {}
        : { [limit.bare]: value }
    for (const side of ['min', 'max'] as const)
      if (parts[side] !== undefined)
        fields[`limits.${limit.id}.${side}`] = shownAs(parts[side], limit.dimension, undefined, units)
  }

  const sweep = isRecord(definition.sweep) ? definition.sweep : {}
  fields['sweep.design'] = text(sweep.design) || 'factorial'
  fields['sweep.samples'] = text(sweep.samples)
  fields['sweep.seed'] = text(sweep.seed)
  const order: string[] = []
  for (const variable of Array.isArray(sweep.variables) ? sweep.variables : []) {
    if (!isRecord(variable)) continue
    if (Array.isArray(variable.catalogue)) {
      order.push('tube.catalogue')
      fields['vary.tube.catalogue'] = 'list'
      fields['vary.tube.catalogue.values'] = variable.catalogue.join(' ')
      continue
    }
    const name = fieldOfPath(text(variable.path))
    if (!findSweepPath(text(variable.path))) continue
    order.push(name)
    const quantity = QUANTITIES[name]
    if (Array.isArray(variable.values)) {
      fields[`vary.${name}`] = 'list'
      fields[`vary.${name}.values`] = variable.values
        .map((value) => (quantity ? shown(value, name, units) : text(value)))
        .join(quantity ? '; ' : ' ')
    } else {
      fields[`vary.${name}`] = 'range'
      fields[`vary.${name}.from`] = shown(variable.from, name, units)
      fields[`vary.${name}.to`] = shown(variable.to, name, units)
      fields[`vary.${name}.count`] = text(variable.count)
      fields[`vary.${name}.scale`] = text(variable.scale) || 'linear'
    }
  }
  fields['sweep.order'] = order.join(' ')
  const rest = { ...pick(definition, REST_KEYS), ...pick(kase, ['corrections']) }
  if (Object.keys(rest).length > 0) fields.rest = JSON.stringify(rest)
  return fields
}

function sweeps(definition: Definition, path: string): boolean {
  const variables = getPath(definition, 'sweep.variables')
  return (
    Array.isArray(variables) && variables.some((variable) => isRecord(variable) && variable.path === path)
  )
}

const shown = (value: unknown, name: string, units: UnitSystem) =>
  shownAs(value, QUANTITIES[name].dimension, QUANTITIES[name].hint, units)

function shownAs(
  value: unknown,
  dimension: Dimension,
  hint: DisplayHint | undefined,
  units: UnitSystem,
): string {
  const unit = displayUnit(dimension, units, hint)
  const fromSi = (si: number) => String(Number(toDisplay(si, dimension, units, hint).value.toPrecision(12)))
  if (typeof value === 'number') return fromSi(value)
  if (typeof value !== 'string') return ''
  const typed = /^(.*[\d.])\s*([^\d\s].*)$/.exec(value.trim())
  if (unit !== '' && typed && sameUnit(typed[2], unit, dimension)) return typed[1].trim()
  const bare = unit === '' ? null : parseQuantity(value, 'none')
  return bare?.ok ? fromSi(bare.value) : value
}

/** "degC" and "°C": whether two spellings mean one unit. */
function sameUnit(a: string, b: string, dimension: Dimension): boolean {
  if (a === b) return true
  const read = (text: string) => {
    const parsed = parseQuantity(text, dimension)
    return parsed.ok ? parsed.value : Number.NaN
  }
  return read(`1 ${a}`) === read(`1 ${b}`) && read(`2 ${a}`) === read(`2 ${b}`)
}

// --- faults -------------------------------------------------------------------------------------------------

/** The field that a fault of the study speaks about; '' where none does. */
export function fieldOfFault(path: string, fields: Fields): string {
  const inCase = /^case\.(.+)$/.exec(path)
  if (inCase) {
    const name = fieldOfPath(inCase[1])
    if (name === 'tube.surface') return 'tube.surface.kind'
    if (name === 'bundle.length' && fields.question !== 'rate') return 'duty'
    return name
  }
  const variable = /^sweep\.variables\.(\d+)(?:\.(\w+))?/.exec(path)
  if (variable) {
    const name = variedFields(fields)[Number(variable[1])]
    if (!name) return 'sweep'
    const part = variable[2]
    return `vary.${name}.${part && /^(from|to|count|scale)$/.test(part) ? part : varyMode(name, fields) === 'range' ? 'from' : 'values'}`
  }
  const limit = /^limits\.(\w+)(?:\.(min|max))?$/.exec(path)
  if (limit) return `limits.${limit[1]}.${limit[2] ?? (fields[`limits.${limit[1]}.max`] ? 'max' : 'min')}`
  if (path === 'sweep.variables' || path === 'sweep') return 'sweep'
  return path
}

// --- small helpers ------------------------------------------------------------------------------------------

const isRecord = (value: unknown): value is Raw =>
  typeof value === 'object' && value !== null && !Array.isArray(value)

function pick(record: Raw, keys: readonly string[]): Raw {
  const picked: Raw = {}
  for (const key of keys) if (record[key] !== undefined) picked[key] = record[key]
  return picked
}

function getPath(input: unknown, path: string): unknown {
  let value = input
  for (const key of path.split('.')) value = isRecord(value) ? value[key] : undefined
  return value
}

function setPath(target: Raw, path: string, value: unknown): void {
  const keys = path.split('.')
  let at = target
  for (const key of keys.slice(0, -1)) {
    if (!isRecord(at[key])) at[key] = {}
    at = at[key] as Raw
  }
  at[keys[keys.length - 1]] = value
}
