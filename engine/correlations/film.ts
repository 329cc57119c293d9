/** Laminar film condensation of quiescent vapour on one horizontal tube. */
import type { Card } from './card.ts'
import { GRAVITY } from './constants.ts'

/** Exact Nusselt constant of the isothermal horizontal cylinder (quadrature: 0.72802), one constant for every run. */
export const NUSSELT_TUBE_CONSTANT = 0.728

/** Latent-heat correction inside the coefficient (Rohsenow 1956). */
export const ROHSENOW_COEFFICIENT = 0.68

/** Enthalpy of film subcooling carried by the mass and energy balance (linear profile, 3/8). */
export const FILM_SUBCOOLING = 0.375

/** Constant of the film-flow form, 0.728^(4/3) π^(1/3) 2^(1/3) = 1.2085. */
export const FILM_FLOW_CONSTANT = 0.728 ** (4 / 3) * Math.cbrt(2 * Math.PI)

/** Smallest subcooling at which a coefficient is printed, K; the flux form needs no floor. */
export const MINIMUM_PRINTED_SUBCOOLING = 1e-6

/** Weight φ of T_ref = Tw + φ (Ts − Tw) by property-temperature method. */
export const PROPERTY_TEMPERATURE_WEIGHT = { oneThird: 0.33, mean: 0.5, saturation: 1 } as const

/** Film reference temperature Tw + φ (Ts − Tw), K. Latent heat and vapour density stay at Ts. */
export function filmReferenceTemperature(
  wallTemperature: number,
  saturationTemperature: number,
  weight: number,
): number {
  return wallTemperature + weight * (saturationTemperature - wallTemperature)
}

/**
 * Latent heat inside the film coefficient, hfg + 0.68 cp ΔT + cpv superheat, J/kg.
 * Belongs in the coefficient only: in the mass balance it understates condensate by 0.3 Ja.
 */
export function rohsenowLatentHeat(
  latentHeat: number,
  liquidSpecificHeat: number,
  subcooling: number,
  superheatEnthalpy = 0,
): number {
  return latentHeat + ROHSENOW_COEFFICIENT * liquidSpecificHeat * subcooling + superheatEnthalpy
}

/** Enthalpy given up per kilogram of condensate, hfg + 0.375 cp ΔT + cpv superheat, J/kg: the mass and energy balance. */
export function balanceLatentHeat(
  latentHeat: number,
  liquidSpecificHeat: number,
  subcooling: number,
  superheatEnthalpy = 0,
): number {
  return latentHeat + FILM_SUBCOOLING * liquidSpecificHeat * subcooling + superheatEnthalpy
}

/** Plain latent heat for coefficient and balance alike, hfg + cpv superheat, J/kg. */
export function plainLatentHeat(latentHeat: number, superheatEnthalpy = 0): number {
  return latentHeat + superheatEnthalpy
}

/**
 * Film drive G4 ΔT = g ρl (ρl − ρv) D³ hfg' / (µl k), K. Finite at every subcooling, so that flux forms need no
 * division by ΔT; G4 itself is drive/ΔT.
 */
export function filmDrive(
  diameter: number,
  liquidDensity: number,
  vapourDensity: number,
  liquidViscosity: number,
  liquidConductivity: number,
  latentHeat: number,
): number {
  return (
    (GRAVITY *
      liquidDensity *
      (liquidDensity - vapourDensity) *
      diameter *
      diameter *
      diameter *
      latentHeat) /
    (liquidViscosity * liquidConductivity)
  )
}

/** Nusselt flux on one horizontal tube, q = 0.728 (k/D) (drive ΔT³)^(1/4), W/m²; 0 on a dry wall (ΔT ≤ 0). */
export function nusseltTubeFlux(conductivityOverDiameter: number, drive: number, subcooling: number): number {
  if (!(subcooling > 0)) return 0
  return (
    NUSSELT_TUBE_CONSTANT *
    conductivityOverDiameter *
    Math.sqrt(Math.sqrt(drive * subcooling * subcooling * subcooling))
  )
}

/** Nusselt number 0.728 G4^(1/4) of one horizontal tube from G4 = drive/ΔT. */
export function nusseltTubeNumber(g4: number): number {
  return NUSSELT_TUBE_CONSTANT * Math.sqrt(Math.sqrt(g4))
}

/**
 * Nusselt coefficient of one horizontal tube for printing, h = 0.728 (k/D) G4^(1/4), W/(m² K).
 * The subcooling is floored at 1e-6 K because h grows without limit; solvers use {@link nusseltTubeFlux}.
 */
export function nusseltTube(
  diameter: number,
  subcooling: number,
  liquidDensity: number,
  vapourDensity: number,
  liquidViscosity: number,
  liquidConductivity: number,
  latentHeat: number,
): number {
  const x = Math.max(subcooling, MINIMUM_PRINTED_SUBCOOLING)
  const drive = filmDrive(
    diameter,
    liquidDensity,
    vapourDensity,
    liquidViscosity,
    liquidConductivity,
    latentHeat,
  )
  return (liquidConductivity / diameter) * nusseltTubeNumber(drive / x)
}

/**
 * Chen's single-tube factor on h, [(1 + 0.68 ζ + 0.02 ζ ξ)/(1 + 0.95 ξ − 0.15 ζ ξ)]^(1/4), with ζ = cp ΔT/hfg and
 * ξ = k ΔT/(µ hfg). It already carries film subcooling: apply it to the Nusselt coefficient with the PLAIN latent heat.
 */
export function chenTubeFactor(zeta: number, xi: number): number {
  const ratio = (1 + 0.68 * zeta + 0.02 * zeta * xi) / (1 + 0.95 * xi - 0.15 * zeta * xi)
  return Math.sqrt(Math.sqrt(ratio))
}

/** Film Reynolds number 2 Γ/µ, Γ the total condensate leaving the tube (both sides together), kg/(m s). */
export function filmReynolds(condensatePerLength: number, liquidViscosity: number): number {
  return (2 * condensatePerLength) / liquidViscosity
}

/** Film-flow form of the Nusselt tube, h* = 1.2085 Re_f^(−1/3), with h* = (h/k)(ν² ρl/((ρl − ρv) g))^(1/3). */
export function filmFlowNumber(filmReynoldsNumber: number): number {
  return FILM_FLOW_CONSTANT / Math.cbrt(filmReynoldsNumber)
}

/** Length scale of h*, (ν² ρl/((ρl − ρv) g))^(1/3), m. */
export function filmLength(liquidDensity: number, vapourDensity: number, liquidViscosity: number): number {
  const nu = liquidViscosity / liquidDensity
  return Math.cbrt((nu * nu * liquidDensity) / ((liquidDensity - vapourDensity) * GRAVITY))
}

const filmSymbols = {
  h: 'mean film coefficient on the outside area, W/(m2 K)',
  k: 'liquid conductivity, W/(m K)',
  D: 'outside diameter, m',
  G4: "g rho_l (rho_l - rho_v) D^3 hfg'/(mu_l k dT)",
  dT: 'wall subcooling Ts - Tw, K',
  "hfg'": 'latent heat as chosen under latentHeat, J/kg',
}

export const filmCards = [
  {
    id: 'film.nusselt',
    choice: 'film',
    methodId: 'nusselt',
    name: 'Nusselt, single horizontal tube',
    equation: "h = 0.728 (k/D) G4^(1/4), G4 = g rho_l (rho_l - rho_v) D^3 hfg'/(mu_l k dT)",
    symbols: filmSymbols,
    source: [
      'Nusselt 1916, Z. VDI 60:541, 569',
      'Dhir and Lienhard 1971, J. Heat Transfer 93:97',
      'Minkowycz and Sparrow 1966, Int. J. Heat Mass Transfer 9:1125',
    ],
    range: {
      filmReynolds: [0, 3600],
      jakob: [0, 1],
      liquidPrandtl: 'not stated',
      reducedTemperature: 'not stated',
    },
    rangeText:
      'Laminar smooth film, quiescent vapour. Re_f < 3600 by the ASHRAE table for a single horizontal tube.',
    scatter:
      '±10 to 15 % for pure quiescent vapour on clean tubes (from memory); steam data tend to lie 0 to 15 % above',
    sigmaLn: 0.08,
    evidence: 'printed value checked',
    default: true,
    requires: [],
    available: true,
    notes: [
      'Exact constant by quadrature is 0.72802; 0.725 (graphical, Nusselt) and 0.729 (Dhir and Lienhard) are in circulation.',
      'A uniform-flux wall would lie about 5 to 7 % lower; that is left in the scatter.',
    ],
  },
  {
    id: 'film.chen',
    choice: 'film',
    methodId: 'chen',
    name: 'Chen, Nusselt tube with inertia and interface drag',
    equation:
      'h = h_Nusselt(hfg) [(1 + 0.68 z + 0.02 z x)/(1 + 0.95 x - 0.15 z x)]^(1/4), z = cp dT/hfg, x = k dT/(mu hfg)',
    symbols: { ...filmSymbols, z: 'cp dT/hfg', x: 'k dT/(mu hfg)' },
    source: ['Chen 1961, J. Heat Transfer 83:48 and 55'],
    range: {
      filmReynolds: [0, 3600],
      jakob: [0, 2],
      filmSuperheatGroup: [0, 20],
      liquidPrandtl: [1, Number.MAX_VALUE],
    },
    rangeText: 'z < 2, x < 20, Pr > 1 or both z and x small (from memory).',
    scatter: 'not stated; within 1.5 % of the plate similarity solution with vapour drag up to Ja 1 and Pr 1',
    sigmaLn: 0.08,
    evidence: 'limit-checked, from memory',
    requires: ['liquidSpecificHeat'],
    available: true,
    notes: [
      'Uses the plain latent heat inside the coefficient whatever latentHeat says: the factor carries subcooling.',
    ],
  },
  {
    id: 'latentHeat.rohsenow',
    choice: 'latentHeat',
    methodId: 'rohsenow',
    name: 'Rohsenow, convection in the film',
    equation:
      "hfg' = hfg + 0.68 cp dT + cpv superheat in the coefficient; dh = hfg + 0.375 cp dT + cpv superheat in the balance",
    symbols: {
      "hfg'": 'latent heat in the coefficient, J/kg',
      dh: 'enthalpy given up per kg of condensate, J/kg',
    },
    source: ['Rohsenow 1956, Trans. ASME 78:1645'],
    range: { jakob: [0, 1], liquidPrandtl: [0.5, Number.MAX_VALUE] },
    scatter: 'the zero-shear similarity solution lies 0.7 % lower at Pr 3, 0.3 % at Pr 10 and Ja 1',
    sigmaLn: null,
    evidence: 'printed value checked',
    default: true,
    requires: ['liquidSpecificHeat'],
    available: true,
    notes: ['0.68 belongs in the coefficient only: in the mass balance it understates condensate by 0.3 Ja.'],
  },
  {
    id: 'latentHeat.plain',
    choice: 'latentHeat',
    methodId: 'plain',
    name: 'Plain latent heat',
    equation: "hfg' = dh = hfg + cpv superheat",
    symbols: { hfg: 'latent heat at saturation, J/kg' },
    source: ['Nusselt 1916, Z. VDI 60:541'],
    range: { jakob: [0, 0.1] },
    rangeText: 'Below Ja of 0.1 the neglected film subcooling stays under 2 % of the coefficient.',
    scatter: 'low by (1 + 0.68 Ja)^(1/4)',
    sigmaLn: null,
    evidence: 'definition',
    requires: [],
    available: true,
  },
  {
    id: 'propertyTemperature.oneThird',
    choice: 'propertyTemperature',
    methodId: 'oneThird',
    name: 'Reference temperature one third up from the wall',
    equation: 'T_ref = Tw + 0.33 (Ts - Tw) for k, mu, rho, cp; hfg and rho_v at Ts',
    symbols: { Tw: 'film-side wall temperature, K', Ts: 'saturation temperature, K' },
    source: [
      'Denny and Mills 1969, J. Heat Transfer 91:495',
      'Minkowycz and Sparrow 1966, Int. J. Heat Mass Transfer 9:1125 (0.31)',
    ],
    range: {},
    scatter: 'other weights in use: 0.25 (Drew), 0.31 (Minkowycz and Sparrow)',
    sigmaLn: null,
    evidence: 'from memory, unverified',
    default: true,
    requires: [],
    available: true,
  },
  {
    id: 'propertyTemperature.mean',
    choice: 'propertyTemperature',
    methodId: 'mean',
    name: 'Mean film temperature',
    equation: 'T_ref = (Tw + Ts)/2',
    symbols: { Tw: 'film-side wall temperature, K', Ts: 'saturation temperature, K' },
    source: ['textbook practice'],
    range: {},
    scatter: 'not stated',
    sigmaLn: null,
    evidence: 'definition',
    requires: [],
    available: true,
  },
  {
    id: 'propertyTemperature.saturation',
    choice: 'propertyTemperature',
    methodId: 'saturation',
    name: 'Saturation temperature',
    equation: 'T_ref = Ts',
    symbols: { Ts: 'saturation temperature, K' },
    source: ['for comparison; film properties of a viscous liquid are then too favourable'],
    range: {},
    scatter: 'not stated',
    sigmaLn: null,
    evidence: 'definition',
    requires: [],
    available: true,
  },
] as const satisfies readonly Card[]
