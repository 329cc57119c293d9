/** Non-condensable gas: diffusivity and the pieces of the Colburn and Hougen balance of a row. */
import type { Card } from './card.ts'
import { GAS_CONSTANT } from './constants.ts'

/** Fuller diffusion volumes (newer table; never mixed with the older one). */
export const DIFFUSION_VOLUMES = {
  water: 13.1,
  air: 19.7,
  nitrogen: 18.5,
  oxygen: 16.3,
  carbonDioxide: 26.9,
  ammonia: 20.7,
  helium: 2.67,
  hydrogen: 6.12,
  argon: 16.2,
} as const

/** Atomic increments for fluids without a volume of their own; F is from memory. */
export const DIFFUSION_INCREMENTS = {
  C: 15.9,
  H: 2.31,
  O: 6.11,
  N: 4.54,
  Cl: 21,
  F: 14.7,
  S: 22.9,
  ring: -18.3,
} as const

/** Fuller, Schettler and Giddings diffusivity, m²/s; T in K, p in Pa, molar masses in kg/mol. */
export function fullerDiffusivity(
  temperature: number,
  pressure: number,
  vapourMolarMass: number,
  gasMolarMass: number,
  vapourVolume: number,
  gasVolume: number,
): number {
  const sum = Math.cbrt(vapourVolume) + Math.cbrt(gasVolume)
  return (
    (1.013e-2 * temperature ** 1.75 * Math.sqrt(1e-3 / vapourMolarMass + 1e-3 / gasMolarMass)) /
    (pressure * sum * sum)
  )
}

/** Gas mole fraction below which a row counts as pure vapour: the logarithm turns singular as Ti → Ts. */
export const PURE_VAPOUR_GAS_FRACTION = 1e-6

/**
 * Condensation mass flux from film theory, M c β ln((1 − y_i)/(1 − y_b)), kg/(m² s), c = p/(R T): already the high-flux
 * form. NaN for y_i ≥ 1 (interface at or above Ts): the caller's bracket must stay below.
 */
export function condensationMassFlux(
  molarMass: number,
  pressure: number,
  temperature: number,
  massTransferCoefficient: number,
  interfaceFraction: number,
  bulkFraction: number,
): number {
  if (!(interfaceFraction < 1) || !(bulkFraction < 1)) return Number.NaN
  return (
    ((molarMass * pressure) / (GAS_CONSTANT * temperature)) *
    massTransferCoefficient *
    Math.log((1 - interfaceFraction) / (1 - bulkFraction))
  )
}

/** Ackermann factor A/(1 − e^(−A)), A = m'' cpv/h_g, for heat flow to a condensing interface; 1 + A/2 for small A. */
export function ackermann(a: number): number {
  return Math.abs(a) < 1e-6 ? 1 + a / 2 : -a / Math.expm1(-a)
}

/** Heat flux at the interface, h_g Ack (T_v − T_i) + m'' dh, W/m²; dh carries film subcooling once. */
export function colburnHougenFlux(
  gasCoefficient: number,
  ackermannFactor: number,
  vapourTemperature: number,
  interfaceTemperature: number,
  massFlux: number,
  balanceHeat: number,
): number {
  return (
    gasCoefficient * ackermannFactor * (vapourTemperature - interfaceTemperature) + massFlux * balanceHeat
  )
}

/** Wall temperature a dry tube would take, Tc + (Tv − Tc) h_g/(h_g + U_in), K: below Ts the vapour condenses directly. */
export function dryWallTemperature(
  coolantTemperature: number,
  vapourTemperature: number,
  gasCoefficient: number,
  innerConductance: number,
): number {
  return (
    coolantTemperature +
    ((vapourTemperature - coolantTemperature) * gasCoefficient) / (gasCoefficient + innerConductance)
  )
}

/** Uchida, 380 (w_v/w_g)^0.7 from the gas MASS fraction, W/(m² K): stagnant steam-air only, never in a bundle. */
export function uchida(gasMassFraction: number): number {
  return 380 * ((1 - gasMassFraction) / gasMassFraction) ** 0.7
}

/** Dehbi, L^0.05 [(3.7 + 28.7 P) − (2438 + 458.3 P) log10 w]/ΔT^0.25, P in atm, w the gas mass fraction, W/(m² K). */
export function dehbi(
  gasMassFraction: number,
  atmospheres: number,
  subcooling: number,
  height: number,
): number {
  return (
    (height ** 0.05 *
      (3.7 + 28.7 * atmospheres - (2438 + 458.3 * atmospheres) * Math.log10(gasMassFraction))) /
    subcooling ** 0.25
  )
}

export const gasCards = [
  {
    id: 'gas.colburnHougen',
    choice: 'gas',
    methodId: 'colburnHougen',
    name: 'Colburn and Hougen, row by row',
    equation:
      "m'' = M c beta ln((1-y_i)/(1-y_b)); q = h_g Ack (T_v - T_i) + m'' dh = q_film(T_i - T_w); Ack = A/(1 - exp(-A)), A = m'' cp_v/h_g",
    symbols: {
      y_i: 'vapour mole fraction at the interface',
      y_b: 'vapour mole fraction in the bulk',
      beta: 'mass transfer coefficient, m/s',
      h_g: 'gas-phase coefficient, W/(m2 K)',
    },
    source: [
      'Colburn and Hougen 1934, Ind. Eng. Chem. 26:1178',
      'Ackermann 1937',
      'VDI Heat Atlas, chapter Gg (cross-flow transfer)',
    ],
    range: { crossflowReynolds: [10, 1e6], prandtlOrSchmidt: [0.6, 1000] },
    scatter: '±15 to 25 % for a known gas content (from memory); the content is usually the larger unknown',
    sigmaLn: 0.11,
    evidence: 'formula seen',
    default: true,
    requires: [
      'vapourDensity',
      'vapourViscosity',
      'vapourConductivity',
      'vapourSpecificHeat',
      'liquidSpecificHeat',
    ],
    available: false,
    notes: [
      'The penalty is a velocity effect: a single degradation factor cannot represent both ends of a bundle.',
    ],
  },
  {
    id: 'gas.none',
    choice: 'gas',
    methodId: 'none',
    name: 'Gas ignored',
    equation: 'q = q_film(Ts - Tw)',
    symbols: {},
    source: ['for comparison'],
    range: {},
    scatter: 'optimistic',
    sigmaLn: null,
    evidence: 'assumption',
    requires: [],
    available: false,
  },
  {
    id: 'gas.fuller',
    choice: 'gas',
    name: 'Fuller, Schettler and Giddings diffusivity',
    equation: 'D = 1.013e-2 T^1.75 (1/Mv + 1/Mg)^(1/2)/(p (Sv^(1/3) + Sg^(1/3))^2), M in g/mol',
    symbols: { Sv: 'diffusion volume of the vapour', Sg: 'diffusion volume of the gas' },
    source: ['Fuller, Schettler and Giddings 1966, Ind. Eng. Chem. 58:18'],
    range: {},
    scatter: '±8 % (4.3 % is the residual on its own points)',
    sigmaLn: 0.05,
    evidence: 'formula seen',
    requires: [],
    available: false,
  },
  {
    id: 'gas.uchida',
    choice: 'gas',
    name: 'Uchida, stagnant steam and air',
    equation: 'h = 380 (w_v/w_g)^0.7, mass fractions',
    symbols: { w_g: 'gas mass fraction', w_v: 'vapour mass fraction' },
    source: ['Uchida 1965'],
    range: { gasMassFraction: [0.1, 0.9] },
    scatter: '±30 to 50 %',
    sigmaLn: null,
    evidence: 'formula seen',
    requires: [],
    available: false,
    notes: ['No velocity, no fluid property: never for a bundle.'],
  },
  {
    id: 'gas.dehbi',
    choice: 'gas',
    name: 'Dehbi, stagnant steam and air',
    equation: 'h = L^0.05 [(3.7 + 28.7 P) - (2438 + 458.3 P) log10 w]/dT^0.25',
    symbols: { P: 'pressure, atm', w: 'gas mass fraction', L: 'height, m' },
    source: ['Dehbi 1991'],
    range: { wallSubcooling: [10, 50] },
    rangeText: 'P 1.5 to 4.5 atm, L 0.3 to 3.5 m.',
    scatter: '±30 to 50 %',
    sigmaLn: null,
    evidence: 'from memory, unverified',
    requires: [],
    available: false,
    notes: ['Never for a bundle.'],
  },
] as const satisfies readonly Card[]
