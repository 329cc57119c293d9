/** Vapour-side pressure drop per row and the saturation temperature it costs. */
import type { Card } from './card.ts'

/**
 * Gaddis and Gnielinski, laminar constant f_al = 280 π [(b^0.5 − 0.6)² + 0.75]/((4ab − π) w^1.6); w = a, or the diagonal
 * c = ((a/2)² + b²)^0.5 in staggered banks whose narrowest gap is the diagonal one.
 */
export function gaddisLaminar(a: number, b: number, staggered: boolean): number {
  const w = staggered && diagonalGoverns(a, b) ? Math.sqrt((a / 2) * (a / 2) + b * b) : a
  const rb = Math.sqrt(b) - 0.6
  return (280 * Math.PI * (rb * rb + 0.75)) / ((4 * a * b - Math.PI) * w ** 1.6)
}

/** Gaddis and Gnielinski, turbulent constant: f_at staggered, f_ati in-line. */
export function gaddisTurbulent(a: number, b: number, staggered: boolean): number {
  if (staggered) {
    return 2.5 + 1.2 / (a - 0.85) ** 1.08 + 0.4 * (b / a - 1) ** 3 - 0.01 * (a / b - 1) ** 3
  }
  const first = 0.22 + (1.2 * (1 - 0.94 / b) ** 0.6) / (a - 0.85) ** 1.3
  return first * 10 ** (0.47 * (b / a - 1.5)) + 0.03 * (a - 1) * (b - 1)
}

/** Gaddis and Gnielinski, inlet and exit loss fn of short banks: xi0 (1/N − 0.1) for 5 ≤ N < 10, 0 from 10, the N = 5 value below. */
export function gaddisEndLoss(a: number, b: number, staggered: boolean, rows: number): number {
  if (rows >= 10) return 0
  let xi0 = 1 / (a * a)
  if (staggered && diagonalGoverns(a, b)) {
    const c = Math.sqrt((a / 2) * (a / 2) + b * b)
    const r = (2 * (c - 1)) / (a * (a - 1))
    xi0 = r * r
  }
  return xi0 * (1 / Math.max(5, rows) - 0.1)
}

/** True where the diagonal gap is the narrowest: b < 0.5 (2a + 1)^0.5. */
export function diagonalGoverns(a: number, b: number): boolean {
  return b < 0.5 * Math.sqrt(2 * a + 1)
}

/** Loss coefficient of a row and d ln xi/d ln Re, as `fillGaddisRow` leaves them. */
export const XI = 0
export const XI_POWER = 1

/**
 * Gaddis and Gnielinski, loss per row from the constants of the bank, and the power of Re that it goes by:
 * staggered xi = f_al/Re + (f_at/Re^0.25 + fn)(1 − exp(−(Re + 200)/1000)),
 * in-line xi = f_al/Re + (f_ati/Re^n + fn)(1 − exp(−(Re + 1000)/2000)) with n = 0.1 b/a.
 */
export function fillGaddisRow(
  re: number,
  laminar: number,
  turbulent: number,
  endLoss: number,
  staggered: boolean,
  inlineExponent: number,
  out: Float64Array,
): void {
  const beyond = staggered ? (re + 200) / 1000 : (re + 1000) / 2000
  const missing = beyond < 40 ? Math.exp(-beyond) : 0
  const exponent = staggered ? 0.25 : inlineExponent
  const falling = turbulent * (staggered ? 1 / Math.sqrt(Math.sqrt(re)) : Math.exp(-exponent * Math.log(re)))
  const viscous = laminar / re
  const xi = viscous + (falling + endLoss) * (1 - missing)
  const rising = (falling + endLoss) * missing * (re / (staggered ? 1000 : 2000))
  out[XI] = xi
  out[XI_POWER] = (rising - exponent * falling * (1 - missing) - viscous) / xi
}

const row = new Float64Array(2)

/** Gaddis and Gnielinski, loss coefficient of one row on ρ U_max²/2; Re with U_max, `rows` of the whole bank. */
export function gaddisGnielinski(re: number, a: number, b: number, staggered: boolean, rows: number): number {
  const laminar = gaddisLaminar(a, b, staggered)
  const turbulent = gaddisTurbulent(a, b, staggered)
  const endLoss = gaddisEndLoss(a, b, staggered, rows)
  fillGaddisRow(re, laminar, turbulent, endLoss, staggered, (0.1 * b) / a, row)
  return row[XI]
}

/** Jakob 1938, loss per row: 4 [0.25 + 0.118/(a−1)^1.08] Re^−0.16 staggered, 4 [0.044 + 0.08 b/(a−1)^(0.43+1.13/b)] Re^−0.15 in-line. */
export function jakob(re: number, a: number, b: number, staggered: boolean): number {
  return staggered
    ? 4 * (0.25 + 0.118 / (a - 1) ** 1.08) * Math.exp(-0.16 * Math.log(re))
    : 4 * (0.044 + (0.08 * b) / (a - 1) ** (0.43 + 1.13 / b)) * Math.exp(-0.15 * Math.log(re))
}

/** One branch of the Zukauskas Euler polynomials: c0 + c1 z + … + c4 z⁴ with z = 1/Re, or z = Re where `inRe`. */
interface EulerBranch {
  readonly from: number
  readonly to: number
  readonly c: readonly [number, number, number, number, number]
  readonly inRe?: true
}

interface EulerColumn {
  readonly a: number
  readonly branches: readonly EulerBranch[]
}

// Signs settled between transcriptions that conflict: staggered 1.5 low +0.426e3/−0.574e3, in-line 1.25 c3 +0.10e11,
// staggered 1.25 high −0.599e13.
const staggeredEuler: readonly EulerColumn[] = [
  {
    a: 1.25,
    branches: [
      { from: 3, to: 1e3, c: [0.795, 0.247e3, 0.335e3, -0.155e4, 0.241e4] },
      { from: 1e3, to: 2e6, c: [0.245, 0.339e4, -0.984e7, 0.132e11, -0.599e13] },
    ],
  },
  {
    a: 1.5,
    branches: [
      { from: 3, to: 1e3, c: [0.683, 0.111e3, -0.973e2, 0.426e3, -0.574e3] },
      { from: 1e3, to: 2e6, c: [0.203, 0.248e4, -0.758e7, 0.104e11, -0.482e13] },
    ],
  },
  {
    a: 2,
    branches: [
      { from: 7, to: 1e2, c: [0.713, 0.448e2, -0.126e3, -0.582e3, 0] },
      { from: 1e2, to: 1e4, c: [0.343, 0.303e3, -0.717e5, 0.88e7, -0.38e9] },
      { from: 1e4, to: 2e6, c: [0.162, 0.181e4, 0.792e8, -0.165e13, 0.872e16] },
    ],
  },
  {
    a: 2.5,
    branches: [
      { from: 1e2, to: 5e3, c: [0.33, 0.989e2, -0.148e5, 0.192e7, -0.862e8] },
      { from: 5e3, to: 2e6, c: [0.119, 0.498e4, -0.507e8, 0.251e12, -0.463e15] },
    ],
  },
]

const inlineEuler: readonly EulerColumn[] = [
  {
    a: 1.25,
    branches: [
      { from: 3, to: 2e3, c: [0.272, 0.207e3, 0.102e3, -0.286e3, 0] },
      { from: 2e3, to: 2e6, c: [0.267, 0.249e4, -0.927e7, 0.1e11, 0] },
    ],
  },
  {
    a: 1.5,
    branches: [
      { from: 3, to: 2e3, c: [0.263, 0.867e2, -0.202e1, 0, 0] },
      { from: 2e3, to: 2e6, c: [0.235, 0.197e4, -0.124e8, 0.312e11, -0.274e14] },
    ],
  },
  {
    a: 2,
    branches: [
      { from: 7, to: 800, c: [0.188, 0.566e2, -0.646e3, 0.601e4, -0.183e5] },
      { from: 800, to: 2e6, c: [0.247, -0.595e-6, 0.15e-11, -0.137e-17, 0.396e-24], inRe: true },
    ],
  },
  { a: 2.5, branches: [{ from: 600, to: 2e5, c: [0.177, -0.311e-6, 0.117e-11, 0, 0], inRe: true }] },
]

function branchValue(branch: EulerBranch, re: number): number {
  const z = branch.inRe ? re : 1 / re
  const c = branch.c
  return c[0] + z * (c[1] + z * (c[2] + z * (c[3] + z * c[4])))
}

/**
 * Euler number of one column. At a join the branches jump and the upper one explodes below it, so between join/2 and
 * 2 join ln Eu is interpolated in ln Re between low(join/2) and high(2 join). Below the first branch Eu ~ 1/Re (or the
 * last row's loss would diverge as U → 0); above the last the end value is held.
 */
function columnEuler(column: EulerColumn, re: number): number {
  const branches = column.branches
  const first = branches[0]
  if (re < first.from) return (branchValue(first, first.from) * first.from) / re
  const last = branches[branches.length - 1]
  if (re >= last.to) return branchValue(last, last.to)
  for (let i = 0; i < branches.length; i++) {
    const branch = branches[i]
    if (i + 1 < branches.length) {
      const join = branch.to
      if (re < join / 2) return branchValue(branch, re)
      if (re < join * 2) {
        const low = Math.log(branchValue(branch, join / 2))
        const high = Math.log(branchValue(branches[i + 1], join * 2))
        const w = Math.log(re / (join / 2)) / Math.log(4)
        return Math.exp(low + w * (high - low))
      }
    } else {
      return branchValue(branch, re)
    }
  }
  return branchValue(last, re)
}

/** Euler number over k1 of an equilateral (staggered) or square (in-line) bank, interpolated in ln a; a held in 1.25 to 2.5. */
export function zukauskasEuler(re: number, a: number, staggered: boolean): number {
  const columns = staggered ? staggeredEuler : inlineEuler
  if (a <= columns[0].a) return columnEuler(columns[0], re)
  for (let i = 1; i < columns.length; i++) {
    const right = columns[i]
    if (a <= right.a) {
      const left = columns[i - 1]
      const low = Math.log(columnEuler(left, re))
      const high = Math.log(columnEuler(right, re))
      const w = Math.log(a / left.a) / Math.log(right.a / left.a)
      return Math.exp(low + w * (high - low))
    }
  }
  return columnEuler(columns[columns.length - 1], re)
}

/** Pitch ratio sT/sL of the equilateral layout, 2/√3, where k1 is 1 by definition. */
const EQUILATERAL = 2 / Math.sqrt(3)

/** Staggered k1 fit at one of Re 1e2, 1e3, 1e4, 1e5 (decade 2 to 5) for r = sT/sL. */
export function zukauskasStaggeredFit(r: number, decade: number): number {
  if (decade <= 2) return 0.93 * r ** 0.48
  if (decade === 3) return r < 1.2247 ? r ** -0.048 : 0.951 * r ** 0.284
  if (decade === 4) return 1.28 - 0.708 / r + 0.55 / (r * r) - 0.113 / (r * r * r)
  return 2.016 + r * (-1.675 + r * (0.948 + r * (-0.234 + r * 0.021)))
}

function inlineFit(r: number, decade: number): number {
  if (decade <= 3) return 1.009 * r ** -0.744
  if (decade === 4) return 1.007 * r ** -0.655
  if (decade === 5) return 1.004 * r ** -0.539
  if (decade === 6) return 1.218 + r * (-0.297 + r * 0.0265)
  return 1
}

/** Arrangement factor k1, interpolated in ln Re between its fits; 1 for the equilateral and the square layout. */
export function zukauskasArrangement(re: number, a: number, b: number, staggered: boolean): number {
  const r = staggered ? a / b : (a - 1) / (b - 1)
  const law = staggered ? zukauskasStaggeredFit : inlineFit
  if (Math.abs(r - (staggered ? EQUILATERAL : 1)) < 1e-3) return 1
  const lowest = staggered ? 2 : 3
  const highest = staggered ? 5 : 7
  const x = Math.log10(re)
  if (x <= lowest) return law(r, lowest)
  if (x >= highest) return law(r, highest)
  const decade = Math.floor(x)
  const low = law(r, decade)
  return low + (x - decade) * (law(r, decade + 1) - low)
}

/** Zukauskas loss coefficient of one row, Eu k1, on ρ U_max²/2. */
export function zukauskas(re: number, a: number, b: number, staggered: boolean): number {
  return zukauskasEuler(re, a, staggered) * zukauskasArrangement(re, a, b, staggered)
}

/** Loss of one row, xi ρv U_max²/2, Pa. */
export function rowPressureDrop(loss: number, vapourDensity: number, maximumVelocity: number): number {
  return (loss * vapourDensity * maximumVelocity * maximumVelocity) / 2
}

/** C of the two-phase multiplier for cross-flow (Ishihara, Palen and Taborek). */
export const ISHIHARA_C = 8

/**
 * Two-phase loss from the vapour-alone and liquid-alone losses in the same passage,
 * dp = dp_v + 8 (dp_v dp_l)^(1/2) + dp_l, Pa: phi_v² = 1 + C X + X² without its singular ends.
 */
export function ishihara(vapourAlone: number, liquidAlone: number): number {
  return vapourAlone + ISHIHARA_C * Math.sqrt(vapourAlone * liquidAlone) + liquidAlone
}

/** Grant and Chisholm multiplier phi_lo² for comparison; `gamma2` = dp_vo/dp_lo, vertical cross-flow n = 0.37, B = 1. */
export function grantChisholm(quality: number, gamma2: number, b = 1, n = 0.37): number {
  const e = (2 - n) / 2
  return 1 + (gamma2 - 1) * (b * quality ** e * (1 - quality) ** e + quality ** (2 - n))
}

/** Slope of the saturation line, dTs/dp = Ts (1/ρv − 1/ρl)/hfg, K/Pa. */
export function saturationSlope(
  saturationTemperature: number,
  vapourDensity: number,
  liquidDensity: number,
  latentHeat: number,
): number {
  return (saturationTemperature * (1 / vapourDensity - 1 / liquidDensity)) / latentHeat
}

const dropSymbols = {
  xi: 'loss of one row on rho_v U_max^2/2',
  Re: 'rho_v U_max D/mu_v',
  a: 'sT/D',
  b: 'sL/D',
  c: '((a/2)^2 + b^2)^0.5',
}

export const vapourDropCards = [
  {
    id: 'vapourPressureDrop.gaddisGnielinski',
    choice: 'vapourPressureDrop',
    methodId: 'gaddisGnielinski',
    name: 'Gaddis and Gnielinski (VDI Heat Atlas)',
    equation:
      'staggered xi = f_al/Re + (f_at/Re^0.25 + fn)(1 - exp(-(Re+200)/1000)); in-line xi = f_al/Re + (f_ati/Re^(0.1 b/a) + fn)(1 - exp(-(Re+1000)/2000)); f_al = 280 pi [(b^0.5-0.6)^2 + 0.75]/((4ab-pi) w^1.6); f_at = 2.5 + 1.2/(a-0.85)^1.08 + 0.4 (b/a-1)^3 - 0.01 (a/b-1)^3; f_ati = [0.22 + 1.2 (1-0.94/b)^0.6/(a-0.85)^1.3] 10^(0.47(b/a-1.5)) + 0.03 (a-1)(b-1)',
    symbols: dropSymbols,
    source: ['Gaddis and Gnielinski, VDI Heat Atlas, chapter L1.4'],
    range: {
      vapourReynolds: [1, 3e5],
      rows: [5, Number.MAX_VALUE],
      transversePitchRatio: [0.85, 3],
      rowPitchRatio: 'not stated',
    },
    rangeText:
      'In-line banks need b > 0.94; all need a > 0.85 and 4ab > π. Below five rows the five-row end loss is used.',
    scatter: '±20 to 30 % (from memory)',
    sigmaLn: 0.11,
    evidence: 'plausibility checked, from memory',
    default: true,
    requires: ['vapourDensity', 'vapourViscosity'],
    available: true,
    notes: ['Agrees with the Zukauskas polynomials within their common scatter between Re 1e2 and 1e5.'],
  },
  {
    id: 'vapourPressureDrop.zukauskas',
    choice: 'vapourPressureDrop',
    methodId: 'zukauskas',
    name: 'Zukauskas, Euler-number polynomials',
    equation:
      'xi = k1 (c0 + c1/Re + c2/Re^2 + c3/Re^3 + c4/Re^4) by column a = 1.25, 1.5, 2.0, 2.5; ln Eu interpolated in ln a, and in ln Re across the joins',
    symbols: { ...dropSymbols, k1: 'arrangement factor, 1 for equilateral and square' },
    source: [
      'Zukauskas 1987, in Handbook of Single-Phase Convective Heat Transfer',
      'two independent transcriptions',
    ],
    range: { vapourReynolds: [3, 2e6], transversePitchRatio: [1.25, 2.5] },
    scatter: '±15 to 20 % in range (from memory)',
    sigmaLn: 0.11,
    evidence: 'formula seen',
    requires: ['vapourDensity', 'vapourViscosity'],
    available: true,
    notes: [
      'Conflicting signs between transcriptions are settled by continuity at the joins and by the low-Re limit.',
      'Below the lowest Reynolds number the loss follows 1/Re.',
    ],
  },
  {
    id: 'vapourPressureDrop.jakob',
    choice: 'vapourPressureDrop',
    methodId: 'jakob',
    name: 'Jakob 1938',
    equation:
      'staggered xi = 4 [0.25 + 0.118/(a-1)^1.08] Re^-0.16; in-line xi = 4 [0.044 + 0.08 b/(a-1)^(0.43+1.13/b)] Re^-0.15',
    symbols: dropSymbols,
    source: ['Jakob 1938, Trans. ASME 60:384'],
    range: { vapourReynolds: [1e3, 1e5], transversePitchRatio: 'not stated' },
    rangeText: 'Low below Re 1e3.',
    scatter: 'not stated',
    sigmaLn: 0.2,
    evidence: 'from memory, unverified',
    requires: ['vapourDensity', 'vapourViscosity'],
    available: true,
  },
  {
    id: 'vapourPressureDrop.none',
    choice: 'vapourPressureDrop',
    methodId: 'none',
    name: 'No vapour pressure drop',
    equation: 'dp = 0; every row at the inlet saturation temperature',
    symbols: {},
    source: ['for hand checks'],
    range: {},
    scatter: 'optimistic at low pressure',
    sigmaLn: null,
    evidence: 'assumption',
    requires: [],
    available: true,
  },
  {
    id: 'twoPhase.ishihara',
    choice: 'twoPhase',
    methodId: 'ishihara',
    name: 'Ishihara, Palen and Taborek',
    equation: 'dp = dp_v + 8 (dp_v dp_l)^(1/2) + dp_l',
    symbols: {
      dp_v: 'vapour-alone loss at the local vapour flow, Pa',
      dp_l: 'liquid-alone loss in the same passage, Pa',
    },
    source: ['Ishihara, Palen and Taborek 1980, Heat Transfer Engineering 1(3):23'],
    range: { martinelli: [0, 0.2] },
    rangeText: 'Best for shear-controlled flow, X_tt < 0.2.',
    scatter: '±30 % (from memory)',
    sigmaLn: 0.2,
    evidence: 'from memory, unverified',
    default: true,
    requires: ['vapourDensity', 'vapourViscosity'],
    available: true,
    notes: [
      'Condensate that drains by gravity mostly does not fill the passage: the multiplier is on the safe side.',
    ],
  },
  {
    id: 'twoPhase.none',
    choice: 'twoPhase',
    methodId: 'none',
    name: 'Vapour alone',
    equation: 'dp = dp_v',
    symbols: {},
    source: ['for comparison'],
    range: {},
    scatter: 'low where the passage carries liquid',
    sigmaLn: null,
    evidence: 'assumption',
    requires: [],
    available: true,
  },
  {
    id: 'vapourSide.saturationSlope',
    choice: 'vapourSide',
    name: 'Saturation temperature lost to pressure drop',
    equation: 'dTs/dp = Ts (1/rho_v - 1/rho_l)/hfg',
    symbols: { Ts: 'saturation temperature, K' },
    source: ['Clausius and Clapeyron'],
    range: {},
    scatter: 'exact for small changes',
    sigmaLn: null,
    evidence: 'definition',
    requires: ['vapourDensity'],
    available: true,
  },
] as const satisfies readonly Card[]
