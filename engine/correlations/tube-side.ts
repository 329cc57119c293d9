/** Coolant coefficient inside the tubes; all numbers are h Di/k with properties at the bulk mean. */
import type { Card } from './card.ts'
import { konakov, LAMINAR_LIMIT, TURBULENT_START } from './friction.ts'

/**
 * Laminar developing flow at uniform wall temperature, mean over the length (VDI, Gnielinski):
 * [3.66³ + 0.7³ + (1.615 Gz^(1/3) − 0.7)³ + ((2/(1 + 22 Pr))^(1/6) Gz^(1/2))³]^(1/3), Gz = Re Pr Di/L.
 */
export function laminarUniformTemperature(re: number, pr: number, diameterOverLength: number): number {
  const gz = re * pr * diameterOverLength
  const a = 1.615 * Math.cbrt(gz) - 0.7
  const b = Math.sqrt(Math.cbrt(2 / (1 + 22 * pr))) * Math.sqrt(gz)
  return Math.cbrt(49.370896 + a * a * a + b * b * b) // 3.66³ + 0.7³
}

/** Laminar developing flow at uniform flux: [4.364³ + 0.6³ + (1.953 Gz^(1/3) − 0.6)³ + (0.924 Pr^(1/3) (Re Di/L)^(1/2))³]^(1/3). */
export function laminarUniformFlux(re: number, pr: number, diameterOverLength: number): number {
  const a = 1.953 * Math.cbrt(re * pr * diameterOverLength) - 0.6
  const b = 0.924 * Math.cbrt(pr) * Math.sqrt(re * diameterOverLength)
  return Math.cbrt(4.364 ** 3 + 0.6 ** 3 + a * a * a + b * b * b)
}

/** Hausen's laminar mean, 3.66 + 0.0668 Gz/(1 + 0.04 Gz^(2/3)). */
export function hausen(graetz: number): number {
  const c = Math.cbrt(graetz)
  return 3.66 + (0.0668 * graetz) / (1 + 0.04 * c * c)
}

/** Laminar Sieder and Tate, 1.86 Gz^(1/3) × viscosity factor; no 3.66 floor of its own. */
export function siederTateLaminar(graetz: number, viscosityFactor = 1): number {
  return 1.86 * Math.cbrt(graetz) * viscosityFactor
}

/** Mean entry-length factor 1 + (Di/L)^(2/3) (the local form has a third of the correction). */
export function entryFactor(diameterOverLength: number): number {
  const c = Math.cbrt(diameterOverLength)
  return 1 + c * c
}

/** Gnielinski's turbulent number from a given Darcy factor, without entry and wall factors. */
export function gnielinskiFromFriction(re: number, pr: number, frictionFactor: number): number {
  const f8 = frictionFactor / 8
  const c = Math.cbrt(pr)
  return (f8 * (re - 1000) * pr) / (1 + 12.7 * Math.sqrt(f8) * (c * c - 1))
}

/** Petukhov, Kirillov and Popov from a given Darcy factor, (f/8) Re Pr/(1.07 + 900/Re − 0.63/(1 + 10 Pr) + 12.7 (f/8)^(1/2) (Pr^(2/3) − 1)). */
export function petukhovFromFriction(re: number, pr: number, frictionFactor: number): number {
  const f8 = frictionFactor / 8
  const c = Math.cbrt(pr)
  const constant = 1.07 + 900 / re - 0.63 / (1 + 10 * pr)
  return (f8 * re * pr) / (constant + 12.7 * Math.sqrt(f8) * (c * c - 1))
}

/** Turbulent Gnielinski with Konakov friction and the mean entry factor; meant for Re ≥ 4000. */
export function gnielinskiTurbulent(re: number, pr: number, diameterOverLength: number): number {
  return gnielinskiFromFriction(re, pr, konakov(re)) * entryFactor(diameterOverLength)
}

export const WALL_PRANDTL_POWER = 0.11
export const WALL_VISCOSITY_POWER = 0.14

/** Wall factor K = (Pr/Prw)^0.11 of a liquid; above 1 when the coolant is heated. */
export function wallPrandtlFactor(prBulk: number, prWall: number): number {
  return Math.exp(WALL_PRANDTL_POWER * Math.log(prBulk / prWall))
}

/** Wall factor (µ/µw)^0.14 of Sieder and Tate. */
export function wallViscosityFactor(viscosityBulk: number, viscosityWall: number): number {
  return Math.exp(WALL_VISCOSITY_POWER * Math.log(viscosityBulk / viscosityWall))
}

/**
 * Gnielinski 2013 over all regimes: laminar VDI up to 2300, turbulent from 4000, straight line between the two END
 * values (at 2300 and at 4000) in between. `wallFactor` is K = (Pr/Prw)^0.11 and acts on the turbulent part.
 */
export function gnielinski(re: number, pr: number, diameterOverLength: number, wallFactor = 1): number {
  if (re >= TURBULENT_START) return gnielinskiTurbulent(re, pr, diameterOverLength) * wallFactor
  if (re <= LAMINAR_LIMIT) return laminarUniformTemperature(re, pr, diameterOverLength)
  const w = (re - LAMINAR_LIMIT) / (TURBULENT_START - LAMINAR_LIMIT)
  return (
    (1 - w) * laminarUniformTemperature(LAMINAR_LIMIT, pr, diameterOverLength) +
    w * gnielinskiTurbulent(TURBULENT_START, pr, diameterOverLength) * wallFactor
  )
}

/** Reynolds number from which the two comparison laws hold as printed. */
export const FULLY_TURBULENT = 10_000

/** Turbulent Sieder and Tate, 0.027 Re^0.8 Pr^(1/3) × viscosity factor. */
export function siederTateTurbulent(re: number, pr: number, viscosityFactor = 1): number {
  return 0.027 * Math.exp(0.8 * Math.log(re)) * Math.cbrt(pr) * viscosityFactor
}

/**
 * Sieder and Tate over all regimes: 1.86 Gz^(1/3) floored at 3.66 up to 2300, 0.027 Re^0.8 Pr^(1/3) from 10 000,
 * straight line between the end values (assumption). `viscosityFactor` is (µ/µw)^0.14.
 */
export function siederTate(re: number, pr: number, diameterOverLength: number, viscosityFactor = 1): number {
  if (re >= FULLY_TURBULENT) return siederTateTurbulent(re, pr, viscosityFactor)
  const laminarRe = Math.min(re, LAMINAR_LIMIT)
  const laminar = Math.max(3.66, siederTateLaminar(laminarRe * pr * diameterOverLength, viscosityFactor))
  if (re <= LAMINAR_LIMIT) return laminar
  const w = (re - LAMINAR_LIMIT) / (FULLY_TURBULENT - LAMINAR_LIMIT)
  return (1 - w) * laminar + w * siederTateTurbulent(FULLY_TURBULENT, pr, viscosityFactor)
}

/** Turbulent Dittus and Boelter for a heated fluid, 0.023 Re^0.8 Pr^0.4. */
export function dittusBoelterTurbulent(re: number, pr: number): number {
  return 0.023 * Math.exp(0.8 * Math.log(re) + 0.4 * Math.log(pr))
}

/** Dittus and Boelter from 10 000, laminar VDI up to 2300, straight line between the end values (assumption). */
export function dittusBoelter(re: number, pr: number, diameterOverLength: number): number {
  if (re >= FULLY_TURBULENT) return dittusBoelterTurbulent(re, pr)
  if (re <= LAMINAR_LIMIT) return laminarUniformTemperature(re, pr, diameterOverLength)
  const w = (re - LAMINAR_LIMIT) / (FULLY_TURBULENT - LAMINAR_LIMIT)
  return (
    (1 - w) * laminarUniformTemperature(LAMINAR_LIMIT, pr, diameterOverLength) +
    w * dittusBoelterTurbulent(FULLY_TURBULENT, pr)
  )
}

const symbols = {
  Nu: 'h Di/k',
  Re: 'rho v Di/mu',
  Pr: 'mu cp/k',
  L: 'tube length per pass, m',
  f: 'Darcy factor',
}

export const tubeSideCards = [
  {
    id: 'tubeSide.gnielinski',
    choice: 'tubeSide',
    methodId: 'gnielinski',
    name: 'Gnielinski 2013 with laminar and transition flow',
    equation:
      'Re >= 4000: Nu = (f/8)(Re - 1000) Pr/(1 + 12.7 (f/8)^0.5 (Pr^(2/3) - 1)) (1 + (Di/L)^(2/3)) K, f = (1.8 log10 Re - 1.5)^-2, K = (Pr/Prw)^0.11; Re <= 2300: [3.66^3 + 0.7^3 + (1.615 Gz^(1/3) - 0.7)^3 + ((2/(1+22 Pr))^(1/6) Gz^(1/2))^3]^(1/3), Gz = Re Pr Di/L; between: straight line in Re between the values at 2300 and 4000',
    symbols,
    source: [
      'Gnielinski 2013, Int. J. Heat Mass Transfer 63:134',
      'Gnielinski 1976, Int. Chem. Eng. 16:359',
      'VDI Heat Atlas, chapter Gb',
    ],
    range: { coolantReynolds: [4000, 5e6], coolantPrandtl: [0.5, 2000], wallPrandtlRatio: [0.1, 10] },
    rangeText: 'Laminar part below 2300; between 2300 and 4000 the blend is uncertain (sigma 0.15).',
    scatter: '±10 %, 90 % of data within 20 % (from memory); transition ±25 %',
    sigmaLn: 0.07,
    evidence: 'printed value checked',
    default: true,
    requires: [],
    available: true,
    notes: [
      'Smooth friction factor inside the coefficient also for rough or fouled tubes: conservative.',
      'A hard switch at 2300 would jump by a factor of 2.3.',
    ],
  },
  {
    id: 'tubeSide.siederTate',
    choice: 'tubeSide',
    methodId: 'siederTate',
    name: 'Sieder and Tate',
    equation:
      'Re >= 1e4: Nu = 0.027 Re^0.8 Pr^(1/3) (mu/muw)^0.14; Re <= 2300: max(3.66, 1.86 Gz^(1/3) (mu/muw)^0.14); straight line between',
    symbols,
    source: ['Sieder and Tate 1936, Ind. Eng. Chem. 28:1429'],
    range: { coolantReynolds: [1e4, 1e6], coolantPrandtl: [0.7, 16700] },
    rangeText: 'The line from 2300 to 10 000 is an assumption.',
    scatter: '±20 % (from memory)',
    sigmaLn: 0.12,
    evidence: 'from memory, unverified',
    requires: [],
    available: true,
    notes: ['For comparison.'],
  },
  {
    id: 'tubeSide.dittusBoelter',
    choice: 'tubeSide',
    methodId: 'dittusBoelter',
    name: 'Dittus and Boelter, heated coolant',
    equation: 'Re >= 1e4: Nu = 0.023 Re^0.8 Pr^0.4; laminar as Gnielinski up to 2300; straight line between',
    symbols,
    source: ['Dittus and Boelter 1930', 'McAdams 1942 (constant 0.023)'],
    range: { coolantReynolds: [1e4, 1e6], coolantPrandtl: [0.7, 160] },
    rangeText: 'The line from 2300 to 10 000 is an assumption.',
    scatter: '±25 % (from memory)',
    sigmaLn: 0.12,
    evidence: 'printed value checked',
    requires: [],
    available: true,
    notes: ['For comparison; about 12 % below Gnielinski for cooling water.'],
  },
] as const satisfies readonly Card[]
