/** Dropwise condensation of steam. Temperatures come in kelvin and are converted where a fit takes Celsius. */
import type { Card } from './card.ts'
import { CELSIUS_ZERO, GAS_CONSTANT, GRAVITY } from './constants.ts'

/** Subcooling beyond which the dropwise flux is held, K (assumption: the coefficient falls beyond about 10 K). */
export const DROPWISE_MAX_SUBCOOLING = 10

/** Rose's steam fit, q = 1000 t^0.8 (5 ΔT + 0.3 ΔT²), W/m², t in °C inside; ΔT vapour to surface, held at 10 K. */
export function roseDropwiseFlux(saturationTemperature: number, subcooling: number): number {
  if (!(subcooling > 0)) return 0
  const celsius = Math.max(0, saturationTemperature - CELSIUS_ZERO)
  const x = Math.min(subcooling, DROPWISE_MAX_SUBCOOLING)
  return 1000 * celsius ** 0.8 * (5 * x + 0.3 * x * x)
}

/** Griffith's coefficient, 51104 + 2044 t (t in °C inside, 22 to 100), 255510 from 100 °C, W/(m² K); held at 22 °C below. */
export function griffith(saturationTemperature: number): number {
  const celsius = saturationTemperature - CELSIUS_ZERO
  // 1e-9 K keeps 373.15 K, which is not exactly 100 °C in binary, on the printed straight line.
  if (celsius > 100 + 1e-9) return 255_510
  return 51_104 + 2044 * Math.max(22, celsius)
}

/** Griffith's flux, W/m², with the subcooling held at 10 K. */
export function griffithFlux(saturationTemperature: number, subcooling: number): number {
  if (!(subcooling > 0)) return 0
  return griffith(saturationTemperature) * Math.min(subcooling, DROPWISE_MAX_SUBCOOLING)
}

/** Specific gas constant of steam and its isentropic exponent in the population model. */
const STEAM_GAS_CONSTANT = 461.5
const STEAM_EXPONENT = 1.33

/** Smallest viable drop radius 2 σ Ts/(ρl hfg ΔT), m. */
export function smallestDrop(
  saturationTemperature: number,
  subcooling: number,
  surfaceTension: number,
  liquidDensity: number,
  latentHeat: number,
): number {
  return (2 * surfaceTension * saturationTemperature) / (liquidDensity * latentHeat * subcooling)
}

/** Largest drop radius 0.4 (σ/((ρl − ρv) g))^(1/2), m. */
export function largestDrop(surfaceTension: number, liquidDensity: number, vapourDensity: number): number {
  return 0.4 * Math.sqrt(surfaceTension / ((liquidDensity - vapourDensity) * GRAVITY))
}

/**
 * Le Fevre and Rose population model, W/m²:
 * q = 1/(3 rmax^(1/3)) ∫ [ΔT − 2 σ Ts/(r ρl hfg)]/[(2/3) r/k + Ri + Rp] r^(−2/3) dr, by midpoints in ln r.
 * `promoterResistance` is film thickness over conductivity, m² K/W.
 */
export function leFevreRoseFlux(
  saturationTemperature: number,
  subcooling: number,
  surfaceTension: number,
  liquidDensity: number,
  vapourDensity: number,
  liquidConductivity: number,
  latentHeat: number,
  promoterResistance = 0,
  points = 200,
): number {
  if (!(subcooling > 0)) return 0
  const x = Math.min(subcooling, DROPWISE_MAX_SUBCOOLING)
  const rMin = smallestDrop(saturationTemperature, x, surfaceTension, liquidDensity, latentHeat)
  const rMax = largestDrop(surfaceTension, liquidDensity, vapourDensity)
  if (rMin >= rMax) return 0
  const interfaceResistance =
    ((0.5 * saturationTemperature) / (latentHeat * latentHeat * vapourDensity)) *
    ((STEAM_EXPONENT + 1) / (STEAM_EXPONENT - 1)) *
    Math.sqrt((STEAM_GAS_CONSTANT * saturationTemperature) / (2 * Math.PI))
  const start = Math.log(rMin)
  const step = (Math.log(rMax) - start) / points
  let sum = 0
  for (let i = 0; i < points; i++) {
    const r = Math.exp(start + (i + 0.5) * step)
    const numerator = x * (1 - rMin / r)
    const denominator = ((2 / 3) * r) / liquidConductivity + interfaceResistance + promoterResistance
    sum += (numerator / denominator) * Math.cbrt(r)
  }
  return (sum * step) / (3 * Math.cbrt(rMax))
}

/** Schrage's interface coefficient (2α/(2−α)) hfg² ρv/Ts/(2π R Ts/M)^(1/2), W/(m² K); molar mass in kg/mol. */
export function interfaceCoefficient(
  saturationTemperature: number,
  vapourDensity: number,
  latentHeat: number,
  molarMass: number,
  accommodation = 1,
): number {
  const gas = GAS_CONSTANT / molarMass
  return (
    (((2 * accommodation) / (2 - accommodation)) * latentHeat * latentHeat * vapourDensity) /
    (saturationTemperature * Math.sqrt(2 * Math.PI * gas * saturationTemperature))
  )
}

const symbols = {
  q: 'heat flux, W/m2',
  t: 'saturation temperature, degC',
  dT: 'vapour-to-surface subcooling, K',
}
const notes = [
  'Water only, on a promoter the user asserts; refrigerants and hydrocarbons wet the surface.',
  'A degradation factor (0.5 by default, assumption) multiplies the coefficient, and the film-mode area is given beside it.',
]

export const dropwiseCards = [
  {
    id: 'dropwise.rose',
    choice: 'dropwise',
    methodId: 'rose',
    name: 'Rose, steam fit',
    equation: 'q = 1000 t^0.8 (5 dT + 0.3 dT^2), dT held at 10 K',
    symbols,
    source: ['Rose 2002, Proc. IMechE A 216:115'],
    range: { saturationPressure: [5e3, 1e5], wallSubcooling: [0.3, 10] },
    scatter: '±25 % (from memory); low-pressure dropwise is very uncertain',
    sigmaLn: 0.25,
    evidence: 'from memory, unverified',
    default: true,
    requires: [],
    available: false,
    notes,
  },
  {
    id: 'dropwise.griffith',
    choice: 'dropwise',
    methodId: 'griffith',
    name: 'Griffith, steam fit',
    equation: 'h = 51104 + 2044 t (22 < t < 100 degC), 255510 from 100 degC',
    symbols: { ...symbols, h: 'coefficient, W/(m2 K)' },
    source: ['Griffith, Handbook of Heat Transfer'],
    range: { saturationTemperature: [295.15, 373.15], wallSubcooling: [0, 10] },
    scatter: 'not stated; 26 to 40 % above Rose between 30 and 50 °C at 1 K',
    sigmaLn: 0.25,
    evidence: 'from memory, unverified',
    requires: [],
    available: false,
    notes,
  },
  {
    id: 'dropwise.leFevreRose',
    choice: 'dropwise',
    methodId: 'leFevreRose',
    name: 'Le Fevre and Rose, drop population',
    equation:
      'q = 1/(3 rmax^(1/3)) int_rmin^rmax [dT - 2 sigma Ts/(r rho_l hfg)]/[(2/3) r/k + Ri] r^(-2/3) dr',
    symbols: {
      ...symbols,
      Ri: 'interface resistance, m2 K/W',
      rmin: 'smallest viable drop, m',
      rmax: 'largest drop, m',
    },
    source: ['Le Fevre and Rose 1966, 3rd Int. Heat Transfer Conf.'],
    range: { wallSubcooling: [0, 10] },
    scatter: '7 to 51 % above the Rose fit: an upper bound',
    sigmaLn: 0.25,
    evidence: 'from memory, unverified',
    requires: ['vapourDensity', 'surfaceTension'],
    available: false,
    notes,
  },
] as const satisfies readonly Card[]
