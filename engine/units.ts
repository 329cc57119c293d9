/**
 * Quantities as people write them, read into SI, and shown back in SI or US customary units.
 *
 * Conversion factors: NIST Special Publication 811 (2008), Appendix B; exact where that table prints them bold
 * (inch 0.0254 m, pound 0.45359237 kg, international-table Btu 1055.05585262 J, standard gravity 9.80665 m/s²,
 * atmosphere 101325 Pa). Derived factors are products of those.
 */

export type Dimension =
  | 'temperature'
  | 'temperatureDifference'
  | 'pressure'
  | 'length'
  | 'area'
  | 'volumeFlow'
  | 'power'
  | 'massFlow'
  | 'velocity'
  | 'heatFlux'
  | 'heatTransferCoefficient'
  | 'foulingResistance'
  | 'conductivity'
  | 'density'
  | 'specificHeat'
  | 'viscosity'
  | 'surfaceTension'
  | 'specificEnthalpy'
  | 'mass'
  | 'molarMass'
  | 'perLength'
  | 'angle'
  | 'energyPrice'
  | 'areaPrice'
  | 'money'
  | 'moneyPerYear'
  | 'time'
  | 'years'
  | 'fraction'
  | 'count'
  | 'none'

export type UnitSystem = 'si' | 'us'

/** Where a dimension is shown in more than one size: `tube` for millimetres and inches, `roughness` for micrometres. */
export type DisplayHint = 'tube' | 'roughness' | 'small' | 'large'

const INCH = 0.0254
const FOOT = 0.3048
const POUND = 0.45359237
const GRAVITY = 9.80665
const BTU = 1055.05585262
const HOUR = 3600
const RANKINE = 5 / 9
const PSI = (POUND * GRAVITY) / (INCH * INCH)
/** Conventional millimetre and inch of mercury: 13.5951 g/cm³ at standard gravity. */
const MMHG = 13.5951 * GRAVITY
const INHG = 13595.1 * GRAVITY * INCH

/** A unit: SI = (written + shift) × factor. */
type Unit = { factor: number; shift?: number }
const by = (factor: number): Unit => ({ factor })

const temperature: Record<string, Unit> = {
  K: by(1),
  degC: { factor: 1, shift: 273.15 },
  degF: { factor: RANKINE, shift: 459.67 },
  degR: by(RANKINE),
}
const temperatureDifference: Record<string, Unit> = {
  K: by(1),
  degC: by(1),
  degF: by(RANKINE),
  degR: by(RANKINE),
}

/** Units of each dimension by their canonical spelling; the first is the SI unit of a bare number. */
const units: Record<Dimension, Record<string, Unit>> = {
  temperature,
  temperatureDifference,
  pressure: {
    Pa: by(1),
    hPa: by(100),
    kPa: by(1e3),
    MPa: by(1e6),
    mbar: by(100),
    bar: by(1e5),
    atm: by(101325),
    psi: by(PSI),
    psia: by(PSI),
    mmHg: by(MMHG),
    Torr: by(101325 / 760),
    inHg: by(INHG),
  },
  length: {
    m: by(1),
    mm: by(1e-3),
    cm: by(1e-2),
    um: by(1e-6),
    in: by(INCH),
    ft: by(FOOT),
    mil: by(INCH / 1000),
  },
  area: {
    m2: by(1),
    cm2: by(1e-4),
    mm2: by(1e-6),
    ft2: by(FOOT * FOOT),
    in2: by(INCH * INCH),
  },
  volumeFlow: {
    'm3/s': by(1),
    'm3/h': by(1 / HOUR),
    'L/s': by(1e-3),
    'L/min': by(1e-3 / 60),
    // US liquid gallon: 231 cubic inches
    gpm: by((231 * INCH ** 3) / 60),
  },
  power: {
    W: by(1),
    kW: by(1e3),
    MW: by(1e6),
    GW: by(1e9),
    'Btu/h': by(BTU / HOUR),
    'MMBtu/h': by((1e6 * BTU) / HOUR),
    // ton of refrigeration: 12 000 Btu/h
    TR: by((12000 * BTU) / HOUR),
    'kcal/h': by(4186.8 / HOUR),
    hp: by(550 * FOOT * POUND * GRAVITY),
  },
  massFlow: {
    'kg/s': by(1),
    'kg/min': by(1 / 60),
    'kg/h': by(1 / HOUR),
    'g/s': by(1e-3),
    't/h': by(1000 / HOUR),
    'lb/s': by(POUND),
    'lb/min': by(POUND / 60),
    'lb/h': by(POUND / HOUR),
  },
  velocity: {
    'm/s': by(1),
    'cm/s': by(1e-2),
    'km/h': by(1000 / HOUR),
    'ft/s': by(FOOT),
    'ft/min': by(FOOT / 60),
  },
  heatFlux: {
    'W/m2': by(1),
    'kW/m2': by(1e3),
    'Btu/h/ft2': by(BTU / HOUR / (FOOT * FOOT)),
  },
  heatTransferCoefficient: {
    'W/m2/K': by(1),
    'kW/m2/K': by(1e3),
    'Btu/h/ft2/degF': by(BTU / HOUR / (FOOT * FOOT) / RANKINE),
  },
  foulingResistance: {
    'm2*K/W': by(1),
    'm2*K/kW': by(1e-3),
    'h*ft2*degF/Btu': by((HOUR * FOOT * FOOT * RANKINE) / BTU),
  },
  conductivity: {
    'W/m/K': by(1),
    'mW/m/K': by(1e-3),
    'Btu/h/ft/degF': by(BTU / HOUR / FOOT / RANKINE),
  },
  density: {
    'kg/m3': by(1),
    'g/cm3': by(1e3),
    'kg/L': by(1e3),
    'lb/ft3': by(POUND / FOOT ** 3),
  },
  specificHeat: {
    'J/kg/K': by(1),
    'kJ/kg/K': by(1e3),
    'Btu/lb/degF': by(BTU / POUND / RANKINE),
  },
  viscosity: {
    'Pa*s': by(1),
    'mPa*s': by(1e-3),
    'uPa*s': by(1e-6),
    cP: by(1e-3),
    'lb/ft/h': by(POUND / FOOT / HOUR),
    'lb/ft/s': by(POUND / FOOT),
  },
  surfaceTension: {
    'N/m': by(1),
    'mN/m': by(1e-3),
    'dyn/cm': by(1e-3),
    'lbf/ft': by((POUND * GRAVITY) / FOOT),
  },
  specificEnthalpy: {
    'J/kg': by(1),
    'kJ/kg': by(1e3),
    'MJ/kg': by(1e6),
    'Btu/lb': by(BTU / POUND),
  },
  mass: { kg: by(1), g: by(1e-3), t: by(1e3), lb: by(POUND) },
  molarMass: { 'kg/mol': by(1), 'g/mol': by(1e-3), 'kg/kmol': by(1e-3), 'lb/lbmol': by(1e-3) },
  perLength: { '1/m': by(1), '1/mm': by(1e3), '1/in': by(1 / INCH), '1/ft': by(1 / FOOT) },
  angle: { rad: by(1), deg: by(Math.PI / 180) },
  energyPrice: { '1/kWh': by(1), '1/MWh': by(1e-3) },
  areaPrice: { '1/m2': by(1), '1/ft2': by(1 / (FOOT * FOOT)) },
  money: {},
  moneyPerYear: { '1/a': by(1) },
  time: { s: by(1), min: by(60), h: by(HOUR), d: by(86400) },
  years: { a: by(1) },
  fraction: { '1': by(1), '%': by(1e-2), ppm: by(1e-6) },
  count: {},
  none: {},
}

/** Other spellings, compared after `canonical` has tidied them. Matching is exact first, then without case where that is safe. */
const aliases: Partial<Record<Dimension, Record<string, string>>> = {
  temperature: {
    c: 'degC',
    celsius: 'degC',
    f: 'degF',
    fahrenheit: 'degF',
    k: 'K',
    kelvin: 'K',
    degk: 'K',
    r: 'degR',
    rankine: 'degR',
  },
  pressure: {
    pascal: 'Pa',
    millibar: 'mbar',
    torr: 'Torr',
    'lbf/in2': 'psi',
    'n/m2': 'Pa',
    '"hg': 'inHg',
    'in hg': 'inHg',
    'mm hg': 'mmHg',
    'bar(a)': 'bar',
    bara: 'bar',
  },
  length: {
    metre: 'm',
    metres: 'm',
    meter: 'm',
    meters: 'm',
    millimetre: 'mm',
    millimetres: 'mm',
    millimeter: 'mm',
    millimeters: 'mm',
    micron: 'um',
    microns: 'um',
    inch: 'in',
    inches: 'in',
    '"': 'in',
    '″': 'in',
    foot: 'ft',
    feet: 'ft',
    "'": 'ft',
    '′': 'ft',
    thou: 'mil',
  },
  area: { 'sq ft': 'ft2', sqft: 'ft2', 'sq m': 'm2', sqm: 'm2', 'sq in': 'in2' },
  volumeFlow: { 'gal/min': 'gpm', usgpm: 'gpm' },
  power: {
    'btu/hr': 'Btu/h',
    btuh: 'Btu/h',
    tr: 'TR',
    'ton of refrigeration': 'TR',
    'tons of refrigeration': 'TR',
    'ton ref': 'TR',
    watt: 'W',
    watts: 'W',
    rt: 'TR',
    'j/s': 'W',
  },
  massFlow: {
    'lb/hr': 'lb/h',
    'lbm/h': 'lb/h',
    'lbm/hr': 'lb/h',
    'lbm/s': 'lb/s',
    'lbs/h': 'lb/h',
    'lbs/hr': 'lb/h',
    'kg/hr': 'kg/h',
    pph: 'lb/h',
  },
  velocity: { fps: 'ft/s', fpm: 'ft/min', kph: 'km/h' },
  heatFlux: { 'btu/hr/ft2': 'Btu/h/ft2' },
  heatTransferCoefficient: { 'btu/hr/ft2/degf': 'Btu/h/ft2/degF' },
  foulingResistance: { 'hr*ft2*degf/btu': 'h*ft2*degF/Btu' },
  conductivity: { 'btu/hr/ft/degf': 'Btu/h/ft/degF' },
  specificHeat: { 'btu/lbm/degf': 'Btu/lb/degF' },
  specificEnthalpy: { 'btu/lbm': 'Btu/lb' },
  viscosity: {
    'pa*sec': 'Pa*s',
    'kg/m/s': 'Pa*s',
    'lbm/ft/h': 'lb/ft/h',
    'lb/ft/hr': 'lb/ft/h',
    'lbm/ft/s': 'lb/ft/s',
    'n*s/m2': 'Pa*s',
  },
  mass: {
    kilogram: 'kg',
    kilograms: 'kg',
    lbm: 'lb',
    lbs: 'lb',
    pound: 'lb',
    pounds: 'lb',
    tonne: 't',
    tonnes: 't',
  },
  perLength: {
    fpi: '1/in',
    fpm: '1/m',
    'fins/m': '1/m',
    'fins/in': '1/in',
    'fins/inch': '1/in',
    '1/inch': '1/in',
    'fins/mm': '1/mm',
    'fins/ft': '1/ft',
    'fins per metre': '1/m',
    'fins per meter': '1/m',
    'fins per inch': '1/in',
    'per metre': '1/m',
    'per meter': '1/m',
    'per inch': '1/in',
    'per m': '1/m',
    'per in': '1/in',
    '/m': '1/m',
    '/in': '1/in',
    'm-1': '1/m',
  },
  angle: { radian: 'rad', radians: 'rad', degree: 'deg', degrees: 'deg', '°': 'deg' },
  energyPrice: { '/kwh': '1/kWh', 'per kwh': '1/kWh', '/mwh': '1/MWh', 'per mwh': '1/MWh' },
  areaPrice: { '/m2': '1/m2', 'per m2': '1/m2', '/ft2': '1/ft2', 'per ft2': '1/ft2' },
  moneyPerYear: { '/a': '1/a', 'per year': '1/a', '/year': '1/a', '/yr': '1/a' },
  time: {
    hours: 'h',
    hour: 'h',
    hr: 'h',
    sec: 's',
    seconds: 's',
    second: 's',
    minutes: 'min',
    minute: 'min',
    days: 'd',
    day: 'd',
  },
  years: { year: 'a', years: 'a', yr: 'a', y: 'a' },
  fraction: { percent: '%', 'per cent': '%' },
}
aliases.temperatureDifference = aliases.temperature

/** Dimension names as a person reads them. */
const names: Record<Dimension, string> = {
  temperature: 'a temperature',
  temperatureDifference: 'a temperature difference',
  pressure: 'a pressure',
  length: 'a length',
  area: 'an area',
  volumeFlow: 'a volume flow',
  power: 'a power',
  massFlow: 'a mass flow',
  velocity: 'a velocity',
  heatFlux: 'a heat flux',
  heatTransferCoefficient: 'a heat transfer coefficient',
  foulingResistance: 'a fouling resistance',
  conductivity: 'a thermal conductivity',
  density: 'a density',
  specificHeat: 'a specific heat',
  viscosity: 'a viscosity',
  surfaceTension: 'a surface tension',
  specificEnthalpy: 'a heat per mass',
  mass: 'a mass',
  molarMass: 'a molar mass',
  perLength: 'a number per length',
  angle: 'an angle',
  energyPrice: 'a price of energy',
  areaPrice: 'a price per area',
  money: 'an amount of money',
  moneyPerYear: 'money per year',
  time: 'a time',
  years: 'a number of years',
  fraction: 'a fraction',
  count: 'a number',
  none: 'a number',
}

/** A unit as typed, in one canonical spelling: superscripts, middle dots, °, brackets and blanks resolved. */
function canonical(text: string): string {
  let unit = text
    .trim()
    .replace(/[µμ]/g, 'u')
    .replace(/℃/g, '°C')
    .replace(/℉/g, '°F')
    .replace(/²|\^2/g, '2')
    .replace(/³|\^3/g, '3')
    .replace(/⁻¹|\^-1/g, '-1')
    .replace(/[⋅·•×]/g, '*')
    .replace(/[º˚]/g, '°')
    .replace(/°\s*(?=[CFKR]\b)/gi, 'deg')
    .replace(/\bdeg(rees?)?\.?\s*(?=[CFKR]\b)/gi, 'deg')
    .replace(/\s*([*/()])\s*/g, '$1')
    .replace(/\s+/g, ' ')
  // "W/(m2*K)", "W/m2K" and "h ft2 F/Btu" all become products and quotients without brackets.
  unit = unit.replace(/\/\(([^()]*)\)/g, (_, inner: string) => `/${inner.replace(/[* ]/g, '/')}`)
  unit = unit.replace(/^\(([^()]*)\)(?=\/|$)/, '$1')
  return unit
}

/** Written without separators: `m2K/W`, `W/mK`, `kJ/kgK`, and blanks as products. */
function spread(unit: string): string {
  const [top, ...below] = unit.split('/')
  const product = (part: string) =>
    part.replace(/(?<=m2|ft2|kg|lb|lbm|\bm|\bft|h|hr)[ *]?(?=(?:K|degC|degF|F|C)$)/g, '*')
  const degrees = (part: string) =>
    part
      .split('*')
      .map((factor) =>
        /^(?:F|degF|degR|R)$/i.test(factor) ? 'degF' : /^(?:C|degC|K)$/i.test(factor) ? 'K' : factor,
      )
      .join('*')
  const upper = degrees(product(top.replace(/ /g, '*')))
  const lower = below.flatMap((part) => degrees(product(part.replace(/ /g, '*'))).split('*'))
  return [upper, ...lower].join('/')
}

const lower = (table: Record<string, unknown>) => {
  const seen = new Map<string, string>()
  for (const key of Object.keys(table)) {
    const small = key.toLowerCase()
    // Two spellings that differ only in case (mW and MW) are never matched without case.
    seen.set(small, seen.has(small) ? '' : key)
  }
  return seen
}
const loose = Object.fromEntries(
  Object.entries(units).map(([dimension, table]) => [dimension, lower(table)]),
) as Record<Dimension, Map<string, string>>

function findUnit(text: string, dimension: Dimension): Unit | undefined {
  const table = units[dimension]
  const tidy = canonical(text)
  for (const spelling of [tidy, spread(tidy)]) {
    if (Object.hasOwn(table, spelling)) return table[spelling]
    const alias = aliases[dimension]
    const small = spelling.toLowerCase()
    if (alias && Object.hasOwn(alias, small)) return table[alias[small]]
    const key = loose[dimension].get(small)
    // "mw" could be milli or mega, "m" and "M" differ: prefixes that change meaning with case must be typed right.
    if (key && !(/^[mM]/.test(key) && key[0] !== spelling[0])) return table[key]
  }
  return undefined
}

/** How units are offered to a person. */
function accepted(dimension: Dimension): string {
  const list = Object.keys(units[dimension]).map(pretty)
  if (list.length === 0) return 'write a plain number'
  return `write it in ${list.slice(0, -1).join(', ')}${list.length > 1 ? ' or ' : ''}${list[list.length - 1]}, or as a bare number in ${pretty(Object.keys(units[dimension])[0])}`
}

/** A canonical unit as printed: m²·K/W, °C, µm. */
function pretty(unit: string): string {
  if (unit === '1') return 'parts of 1'
  const [top, ...below] = unit.split('/')
  const shown = (part: string) =>
    part
      .replace(/^deg(?=[CFR]$)/, '°')
      .replace(/degF/g, '°F')
      .replace(/\*/g, '·')
      .replace(/^u(?=m$|Pa)/, 'µ')
      .replace(/(?<=m|ft|in)2/g, '²')
      .replace(/(?<=m|ft|in)3/g, '³')
  if (below.length === 0) return shown(top)
  const bottom = below.map(shown).join('·')
  return `${shown(top)}/${below.length > 1 ? `(${bottom})` : bottom}`
}

/** Blanks that group digits: normal, no-break, thin, narrow no-break, figure; and the apostrophe. */
const GROUP = /(?<=\d)[ \u00a0\u2007\u2009\u202f'’](?=\d{3}(?!\d))/g

/** The number in front of a unit, or undefined: decimals with point or comma, exponents, fractions, mixed numbers. */
function parseNumber(text: string): number | undefined {
  const fraction = /^([+-]?)(?:(\d+)[ \u00a0\u2009\u202f-])?\s*(\d+)\s*[/⁄]\s*(\d+)$/.exec(text)
  if (fraction) {
    const [, sign, whole, top, bottom] = fraction
    if (Number(bottom) === 0) return undefined
    const value = Number(whole ?? 0) + Number(top) / Number(bottom)
    return sign === '-' ? -value : value
  }
  let plain = text.replace(GROUP, '')
  const points = plain.split('.').length - 1
  const commas = plain.split(',').length - 1
  if (points > 0 && commas > 0) {
    // Both are there: the last one is the decimal sign, the other groups thousands.
    const decimal = plain.lastIndexOf('.') > plain.lastIndexOf(',') ? '.' : ','
    const group = decimal === '.' ? ',' : '.'
    if (
      plain.split(decimal).length > 2 ||
      !new RegExp(`^[+-]?\\d{1,3}(\\${group}\\d{3})+\\${decimal}`).test(plain)
    )
      return undefined
    plain = plain.split(group).join('').replace(decimal, '.')
  } else if (commas === 1) plain = plain.replace(',', '.')
  else if (commas > 1) {
    if (!/^[+-]?\d{1,3}(,\d{3})+$/.test(plain)) return undefined
    plain = plain.replace(/,/g, '')
  }
  return /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(plain) ? Number(plain) : undefined
}

const UNICODE_FRACTIONS: Record<string, string> = {
  '½': '1/2',
  '¼': '1/4',
  '¾': '3/4',
  '⅛': '1/8',
  '⅜': '3/8',
  '⅝': '5/8',
  '⅞': '7/8',
}

export type Parsed = { ok: true; value: number } | { ok: false; problem: string; remedy: string }

/**
 * A quantity as typed, in SI. A bare number is SI already. As `temperatureDifference`, degrees of any
 * scale are steps: "9 degF" is 5 K and "5 degC" is 5 K.
 */
export function parseQuantity(text: string | number, dimension: Dimension): Parsed {
  if (typeof text === 'number') {
    return Number.isFinite(text)
      ? { ok: true, value: text }
      : { ok: false, problem: `${text} is not a finite number`, remedy: accepted(dimension) }
  }
  const tidy = text
    .trim()
    .replace(/[−–]/g, '-')
    .replace(/(\d?)\s*([½¼¾⅛⅜⅝⅞])/g, (_, digit: string, sign: string) =>
      digit ? `${digit} ${UNICODE_FRACTIONS[sign]}` : UNICODE_FRACTIONS[sign],
    )
  if (tidy === '')
    return { ok: false, problem: `${names[dimension]} is missing`, remedy: accepted(dimension) }
  // The number ends at the last digit from which the rest is a unit; units may hold digits (m2), so try long numbers first.
  const head = /^[+-]?[\d.,\s\u00a0\u2007\u2009\u202f'’/⁄-]*\d\.?(?:e[+-]?\d+)?/i.exec(tidy)
  if (!head) {
    return { ok: false, problem: `"${clip(text)}" does not begin with a number`, remedy: accepted(dimension) }
  }
  let cut = head[0].length
  // A trailing "1/" belongs to a unit such as 1/m only when a number stands before it: "1000 1/m".
  const perUnit = /^(.*\d)\s+(1\/[a-z]+.*)$/i.exec(tidy)
  if (perUnit && findUnit(perUnit[2], dimension)) cut = perUnit[1].length
  const number = tidy.slice(0, cut).trim()
  if (/^[+-]?[1-9]\d{0,2},\d{3}$/.test(number))
    return {
      ok: false,
      problem: `"${number}" can be read in two ways`,
      remedy: `write ${number.replace(',', '')} or ${number.replace(',', '.')}`,
    }
  const value = parseNumber(number)
  const written = tidy.slice(cut).trim()
  if (value === undefined || !Number.isFinite(value)) {
    return {
      ok: false,
      problem: `"${clip(number)}" is not a number`,
      remedy: accepted(dimension),
    }
  }
  if (written === '') return { ok: true, value }
  const unit = findUnit(written, dimension)
  if (!unit) {
    return {
      ok: false,
      problem: `"${clip(written)}" is not a unit of ${names[dimension].replace(/^an? /, '')}`,
      remedy: accepted(dimension),
    }
  }
  return { ok: true, value: scale(value, unit) }
}

const clip = (text: string) => (text.length > 40 ? `${text.slice(0, 40)}…` : text)

/** `value` in `unit` as SI, to fifteen digits, so that "19.05 mm" is 0.01905 and not 0.019049999999999998. */
function scale(value: number, unit: Unit): number {
  if (unit.factor === 1 && unit.shift === undefined) return value
  return Number(((value + (unit.shift ?? 0)) * unit.factor).toPrecision(15))
}

type Shown = { unit: string; of: string }
const shown = (of: string, unit = pretty(of)): Shown => ({ of, unit })

const displays: Record<UnitSystem, Partial<Record<Dimension | `${Dimension}:${DisplayHint}`, Shown>>> = {
  si: {
    temperature: shown('degC'),
    temperatureDifference: shown('K'),
    pressure: shown('kPa'),
    'pressure:small': shown('Pa'),
    'pressure:large': shown('bar'),
    length: shown('m'),
    'length:tube': shown('mm'),
    'length:small': shown('mm'),
    'length:roughness': shown('um'),
    area: shown('m2'),
    volumeFlow: shown('m3/h'),
    power: shown('kW'),
    'power:small': shown('W'),
    'power:large': shown('MW'),
    massFlow: shown('kg/s'),
    velocity: shown('m/s'),
    heatFlux: shown('kW/m2'),
    heatTransferCoefficient: shown('W/m2/K'),
    foulingResistance: shown('m2*K/kW'),
    conductivity: shown('W/m/K'),
    density: shown('kg/m3'),
    specificHeat: shown('kJ/kg/K'),
    viscosity: shown('mPa*s'),
    'viscosity:small': shown('uPa*s'),
    surfaceTension: shown('mN/m'),
    specificEnthalpy: shown('kJ/kg'),
    mass: shown('kg'),
    'mass:large': shown('t'),
    molarMass: shown('g/mol'),
    perLength: shown('1/m'),
    angle: shown('deg', '°'),
    energyPrice: shown('1/kWh', '/kWh'),
    areaPrice: shown('1/m2', '/m²'),
    moneyPerYear: shown('1/a', '/a'),
    time: shown('h'),
    years: shown('a'),
    fraction: shown('%'),
  },
  us: {
    temperature: shown('degF'),
    temperatureDifference: shown('degF'),
    pressure: shown('psi'),
    'pressure:small': shown('psi'),
    'pressure:large': shown('psi'),
    length: shown('ft'),
    'length:tube': shown('in'),
    'length:small': shown('in'),
    'length:roughness': shown('mil'),
    area: shown('ft2'),
    volumeFlow: shown('gpm'),
    power: shown('Btu/h'),
    'power:small': shown('hp'),
    'power:large': shown('MMBtu/h', '10⁶ Btu/h'),
    massFlow: shown('lb/h'),
    velocity: shown('ft/s'),
    heatFlux: shown('Btu/h/ft2'),
    heatTransferCoefficient: shown('Btu/h/ft2/degF'),
    foulingResistance: shown('h*ft2*degF/Btu'),
    conductivity: shown('Btu/h/ft/degF'),
    density: shown('lb/ft3'),
    specificHeat: shown('Btu/lb/degF'),
    viscosity: shown('cP'),
    surfaceTension: shown('lbf/ft'),
    specificEnthalpy: shown('Btu/lb'),
    mass: shown('lb'),
    molarMass: shown('lb/lbmol'),
    perLength: shown('1/in'),
    angle: shown('deg', '°'),
    energyPrice: shown('1/kWh', '/kWh'),
    areaPrice: shown('1/ft2', '/ft²'),
    moneyPerYear: shown('1/a', '/a'),
    time: shown('h'),
    years: shown('a'),
    fraction: shown('%'),
  },
}

const display = (dimension: Dimension, system: UnitSystem, hint?: DisplayHint) =>
  (hint && displays[system][`${dimension}:${hint}`]) || displays[system][dimension]

/** The unit a value of this dimension is shown in; '' where there is none. */
export function displayUnit(dimension: Dimension, system: UnitSystem, hint?: DisplayHint): string {
  return display(dimension, system, hint)?.unit ?? ''
}

/** An SI value as the reader's system shows it. */
export function toDisplay(
  value: number,
  dimension: Dimension,
  system: UnitSystem,
  hint?: DisplayHint,
): { value: number; unit: string } {
  const form = display(dimension, system, hint)
  if (!form) return { value, unit: '' }
  const unit = units[dimension][form.of]
  return { value: tidyDigits(value / unit.factor - (unit.shift ?? 0)), unit: form.unit }
}

/** The SI value of a number typed in the unit that `displayUnit` names. */
export function fromDisplay(
  value: number,
  dimension: Dimension,
  system: UnitSystem,
  hint?: DisplayHint,
): number {
  const form = display(dimension, system, hint)
  return form ? scale(value, units[dimension][form.of]) : value
}

/** Removes the binary remainder of a conversion: 19.049999999999997 reads 19.05. */
const tidyDigits = (value: number) => (Number.isFinite(value) ? Number(value.toPrecision(14)) : value)

/** A number to so many significant digits, in plain decimals, without grouping; '–' where there is none. */
export function formatNumber(value: number | null | undefined, digits = 4): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return '–'
  if (value === 0) return '0'
  const rounded = Number(value.toPrecision(digits))
  const size = Math.abs(rounded)
  if (size >= 1e15 || size < 1e-6) {
    const [mantissa, exponent] = rounded.toExponential(digits - 1).split('e')
    return `${mantissa.replace('-', '−')}e${Number(exponent)}`
  }
  const decimals = Math.max(0, Math.min(20, digits - 1 - Math.floor(Math.log10(size) + 1e-12)))
  return rounded.toFixed(decimals).replace('-', '−')
}

/** An SI value with its display unit, e.g. "40.9 kPa": significant digits, no grouping. */
export function formatQuantity(
  value: number | null | undefined,
  dimension: Dimension,
  system: UnitSystem,
  options: { digits?: number; hint?: DisplayHint; unit?: boolean } = {},
): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return '–'
  const form = toDisplay(value, dimension, system, options.hint)
  const text = formatNumber(form.value, options.digits)
  if (options.unit === false || form.unit === '') return text
  return /^[°%/]$/.test(form.unit) || form.unit.startsWith('/')
    ? `${text}${form.unit === '%' ? '\u00a0%' : form.unit}`
    : `${text}\u00a0${form.unit}`
}

/** The digits of a formatted number in groups of three on both sides of the point, for a page that sets the gaps. */
export function groupDigits(text: string): {
  sign: string
  whole: string[]
  decimals: string[]
  exponent: string
} {
  const match = /^([-−+]?)(\d+)(?:\.(\d+))?(e.*)?$/.exec(text)
  if (!match) return { sign: '', whole: [text], decimals: [], exponent: '' }
  const [, sign, whole, decimals = '', exponent = ''] = match
  const first = whole.length % 3
  return {
    sign,
    whole: [...(first ? [whole.slice(0, first)] : []), ...(whole.slice(first).match(/\d{3}/g) ?? [])],
    decimals: decimals.match(/\d{1,3}/g) ?? [],
    exponent,
  }
}

/** The units `parseQuantity` reads for a dimension, as printed; the SI unit first. */
export function acceptedUnits(dimension: Dimension): string[] {
  return Object.keys(units[dimension]).map(pretty)
}
