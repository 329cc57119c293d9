/** Darcy friction factors and the coolant pressure drop of a pass. */
import type { Card } from './card.ts'

/** Upper end of laminar flow. */
export const LAMINAR_LIMIT = 2300
/** Lower end of fully turbulent flow in the blends. */
export const TURBULENT_START = 4000

/**
 * Churchill 1977, one formula for all regimes:
 * f = 8 [(8/Re)^12 + (A + B)^−1.5]^(1/12), A = {2.457 ln[1/((7/Re)^0.9 + 0.27 e/D)]}^16, B = (37530/Re)^16.
 */
export function churchill(re: number, relativeRoughness: number): number {
  const inner = Math.exp(0.9 * Math.log(7 / re)) + 0.27 * relativeRoughness
  const a = power16(-2.457 * Math.log(inner))
  const b = power16(37530 / re)
  const sum = a + b
  const l2 = (8 / re) * (8 / re)
  const l4 = l2 * l2
  const total = l4 * l4 * l4 + 1 / (sum * Math.sqrt(sum))
  return 8 * Math.cbrt(Math.sqrt(Math.sqrt(total)))
}

function power16(x: number): number {
  const x2 = x * x
  const x4 = x2 * x2
  const x8 = x4 * x4
  return x8 * x8
}

/** Colebrook and White, f^−0.5 = −2 log10(e/(3.7 D) + 2.51/(Re f^0.5)), solved by Newton in f^−0.5; turbulent only. */
export function colebrookTurbulent(re: number, relativeRoughness: number): number {
  const rough = relativeRoughness / 3.7
  const slope = 2.51 / re
  let x = 8
  for (let i = 0; i < 20; i++) {
    const inner = rough + slope * x
    const g = x + (2 / Math.LN10) * Math.log(inner)
    const step = g / (1 + ((2 / Math.LN10) * slope) / inner)
    x -= step
    if (step < 1e-13 && step > -1e-13) break
  }
  return 1 / (x * x)
}

/** Colebrook with 64/Re up to Re 2300 and a straight line in Re to the turbulent value at 4000 (assumption). */
export function colebrook(re: number, relativeRoughness: number): number {
  if (re <= LAMINAR_LIMIT) return 64 / re
  if (re >= TURBULENT_START) return colebrookTurbulent(re, relativeRoughness)
  const w = (re - LAMINAR_LIMIT) / (TURBULENT_START - LAMINAR_LIMIT)
  return (1 - w) * (64 / LAMINAR_LIMIT) + w * colebrookTurbulent(TURBULENT_START, relativeRoughness)
}

/** Konakov's smooth turbulent factor (1.8 log10 Re − 1.5)^−2: the one inside Gnielinski's equation. */
export function konakov(re: number): number {
  const x = (1.8 / Math.LN10) * Math.log(re) - 1.5
  return 1 / (x * x)
}

/** Filonenko's smooth turbulent factor (1.82 log10 Re − 1.64)^−2. */
export function filonenko(re: number): number {
  const x = (1.82 / Math.LN10) * Math.log(re) - 1.64
  return 1 / (x * x)
}

/** Velocity heads lost per pass at entrance (0.5) and exit (1.0). */
export const PASS_HEADS = 1.5
/** Velocity heads lost in each return between two passes. */
export const RETURN_HEADS = 0.5

/** Pressure drop of one pass, (f L/Di + heads) ρ v²/2, Pa; heads 1.5 unless given. */
export function passPressureDrop(
  frictionFactor: number,
  length: number,
  insideDiameter: number,
  density: number,
  velocity: number,
  heads = PASS_HEADS,
): number {
  return (((frictionFactor * length) / insideDiameter + heads) * density * velocity * velocity) / 2
}

/** Pressure drop of one return between passes, 0.5 ρ v²/2, Pa. */
export function returnPressureDrop(density: number, velocity: number): number {
  return (RETURN_HEADS * density * velocity * velocity) / 2
}

/** Pressure drop of `passes` equal passes, Np (f L/Di + 1.5) ρ v²/2 + 0.5 (Np − 1) ρ v²/2, Pa; nozzles excluded. */
export function coolantPressureDrop(
  frictionFactor: number,
  length: number,
  insideDiameter: number,
  density: number,
  velocity: number,
  passes: number,
): number {
  return (
    passes * passPressureDrop(frictionFactor, length, insideDiameter, density, velocity) +
    (passes - 1) * returnPressureDrop(density, velocity)
  )
}

const frictionSymbols = {
  f: 'Darcy friction factor',
  Re: 'rho v Di/mu',
  'e/D': 'roughness over inside diameter',
}

export const frictionCards = [
  {
    id: 'tubeFriction.churchill',
    choice: 'tubeFriction',
    methodId: 'churchill',
    name: 'Churchill, all regimes',
    equation:
      'f = 8 [(8/Re)^12 + (A + B)^-1.5]^(1/12), A = {2.457 ln[1/((7/Re)^0.9 + 0.27 e/D)]}^16, B = (37530/Re)^16',
    symbols: frictionSymbols,
    source: ['Churchill 1977, Chem. Eng. 84(24):91'],
    range: { coolantReynolds: 'not stated', relativeRoughness: 'not stated' },
    scatter: '±5 to 10 % turbulent, 20 % in transition',
    sigmaLn: 0.05,
    evidence: 'formula seen',
    default: true,
    requires: [],
    available: true,
  },
  {
    id: 'tubeFriction.colebrook',
    choice: 'tubeFriction',
    methodId: 'colebrook',
    name: 'Colebrook and White, implicit',
    equation: 'f^-0.5 = -2 log10(e/(3.7 D) + 2.51/(Re f^0.5)); 64/Re below 2300, straight line to 4000',
    symbols: frictionSymbols,
    source: ['Colebrook 1939, J. Inst. Civ. Eng. 11:133'],
    range: { coolantReynolds: [4000, 1e8], relativeRoughness: [0, 0.05] },
    rangeText: 'Turbulent law; the line from 2300 to 4000 is an assumption.',
    scatter: '±5 to 10 %',
    sigmaLn: 0.05,
    evidence: 'formula seen',
    requires: [],
    available: true,
  },
  {
    id: 'tubeFriction.konakov',
    choice: 'tubeFriction',
    name: 'Konakov, smooth tube',
    equation: 'f = (1.8 log10 Re - 1.5)^-2',
    symbols: frictionSymbols,
    source: ['Konakov 1946', 'Gnielinski 2013, Int. J. Heat Mass Transfer 63:134'],
    range: { coolantReynolds: [4000, 5e6] },
    scatter: 'not stated',
    sigmaLn: null,
    evidence: 'formula seen',
    requires: [],
    available: false,
    notes: [
      'Used inside the Gnielinski coefficient only: heat transfer takes the smooth factor, which is conservative.',
    ],
  },
  {
    id: 'tubeFriction.filonenko',
    choice: 'tubeFriction',
    name: 'Filonenko, smooth tube',
    equation: 'f = (1.82 log10 Re - 1.64)^-2',
    symbols: frictionSymbols,
    source: ['Filonenko 1954', 'Petukhov 1970, Adv. Heat Transfer 6:503'],
    range: { coolantReynolds: [4000, 5e6] },
    scatter: 'not stated',
    sigmaLn: null,
    evidence: 'formula seen',
    requires: [],
    available: false,
    notes: ['For comparison with Konakov.'],
  },
  {
    id: 'coolantPressureDrop.heads',
    choice: 'coolantPressureDrop',
    name: 'Friction with end and return losses',
    equation: 'dp = Np (f L/Di + 1.5) rho v^2/2 + 0.5 (Np - 1) rho v^2/2',
    symbols: { Np: 'passes', L: 'tube length per pass, m', v: 'velocity in the tubes, m/s' },
    source: ['entrance 0.5 and exit 1.0 per pass, 0.5 per return: assumption between published rules'],
    range: {},
    scatter: 'local losses ±25 %; published rules run from 2 Np − 1.5 to 4 Np velocity heads',
    sigmaLn: 0.25,
    evidence: 'assumption',
    requires: [],
    available: true,
    notes: ['Nozzles are excluded.'],
  },
] as const satisfies readonly Card[]
