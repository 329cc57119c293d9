/** Condensate falling on lower rows: row laws, drainage modes and the implicit row solver. */
import type { Card } from './card.ts'
import { GRAVITY } from './constants.ts'

/** Exponent s of the condensate-flow law: 0.16 staggered (Wilson), 0.22 in-line (McNaught). */
export function condensateFlowExponent(staggered: boolean): number {
  return staggered ? 0.16 : 0.22
}

/**
 * Flux q of a row, from q^(1−s) (q + a)^s = q1: the single-tube flux q1 at this subcooling reduced by (Γn/γn)^(−s),
 * with a = Γ_in dh/(π D) the flux-equivalent of the condensate arriving from above, W/m². Row 1 (a = 0) returns q1.
 *
 * Newton on ln q: the function is convex and rises, so from ln q1 the steps come down monotonically; three usually
 * reach machine precision. q = 0 is no root here (the ratio form (Γ/γ)^(−s) has a spurious one).
 */
export function inundatedFlux(singleTubeFlux: number, arrivingFlux: number, exponent: number): number {
  if (!(singleTubeFlux > 0)) return 0
  if (!(arrivingFlux > 0) || exponent === 0) return singleTubeFlux
  const a = arrivingFlux / singleTubeFlux
  let u = 0
  let r = 1
  for (let i = 0; i < 12; i++) {
    const step = (u + exponent * Math.log(1 + a / r)) / (1 - (exponent * a) / (r + a))
    u -= step
    r = Math.exp(u)
    if (step < 1e-9 && step > -1e-9) break
  }
  return singleTubeFlux * r
}

/** d ln q/d ln q1 of {@link inundatedFlux}: 1/(1 − s a/(q + a)). */
export function inundatedFluxElasticity(flux: number, arrivingFlux: number, exponent: number): number {
  if (!(arrivingFlux > 0)) return 1
  return 1 / (1 - (exponent * arrivingFlux) / (flux + arrivingFlux))
}

/** Row factor (Γn/γn)^(−s) = (q/(q + a))^s from the flux found. */
export function condensateFlowFactor(flux: number, arrivingFlux: number, exponent: number): number {
  if (!(arrivingFlux > 0) || !(flux > 0)) return 1
  return (flux / (flux + arrivingFlux)) ** exponent
}

/** Modified Galileo number ρl σ³/(µl⁴ g). */
export function galileo(liquidDensity: number, surfaceTension: number, liquidViscosity: number): number {
  const mu2 = liquidViscosity * liquidViscosity
  return (liquidDensity * surfaceTension * surfaceTension * surfaceTension) / (mu2 * mu2 * GRAVITY)
}

/** Hu and Jacobi: droplet to droplet-column, Re_f = 0.074 Ga^0.302. */
export function dropletToDropletColumn(ga: number): number {
  return 0.074 * ga ** 0.302
}
/** Hu and Jacobi: droplet-column to column, Re_f = 0.096 Ga^0.301. */
export function dropletColumnToColumn(ga: number): number {
  return 0.096 * ga ** 0.301
}
/** Hu and Jacobi: column to column-sheet, Re_f = 1.414 Ga^0.233. */
export function columnToColumnSheet(ga: number): number {
  // biome-ignore lint/suspicious/noApproximativeNumericConstant: a fitted constant that happens to read like √2
  return 1.414 * ga ** 0.233
}
/** Hu and Jacobi: column-sheet to sheet, Re_f = 1.448 Ga^0.236. */
export function columnSheetToSheet(ga: number): number {
  return 1.448 * ga ** 0.236
}

/** Roques, Dupont and Thome's later plain-tube fit of the four transitions, in the same order. */
export function roquesTransitions(ga: number): readonly [number, number, number, number] {
  return [0.0417 * ga ** 0.3278, 0.0683 * ga ** 0.3214, 0.8553 * ga ** 0.2483, 1.068 * ga ** 0.2563]
}

/** Drainage modes in rising film flow; the index is what {@link drainageModeIndex} returns. */
export const DRAINAGE_MODES = ['droplet', 'dropletColumn', 'column', 'columnSheet', 'sheet'] as const
export type DrainageMode = (typeof DRAINAGE_MODES)[number]

/** Index into {@link DRAINAGE_MODES} for film Reynolds number 2 Γ/µ and modified Galileo number; no hysteresis. */
export function drainageModeIndex(filmReynoldsNumber: number, ga: number): number {
  if (filmReynoldsNumber < dropletToDropletColumn(ga)) return 0
  if (filmReynoldsNumber < dropletColumnToColumn(ga)) return 1
  if (filmReynoldsNumber < columnToColumnSheet(ga)) return 2
  if (filmReynoldsNumber < columnSheetToSheet(ga)) return 3
  return 4
}

/** Row exponent in droplets and columns (assumption after McNaught's 0.13). */
export const COLUMN_EXPONENT = 0.13

/** Row exponent in sheets: 0.16 staggered, 0.22 in-line (assumption). */
export function sheetExponent(staggered: boolean): number {
  return staggered ? 0.16 : 0.22
}

/**
 * Exponent s of the drainage-mode law: 0.13 up to columns, the sheet value in sheets, blended C1-smooth in ln Re_f
 * between the column/column-sheet and column-sheet/sheet lines.
 */
export function drainageExponent(
  filmReynoldsNumber: number,
  columnLine: number,
  sheetLine: number,
  staggered: boolean,
): number {
  if (!(filmReynoldsNumber > columnLine)) return COLUMN_EXPONENT
  if (filmReynoldsNumber >= sheetLine) return sheetExponent(staggered)
  const t = Math.log(filmReynoldsNumber / columnLine) / Math.log(sheetLine / columnLine)
  return COLUMN_EXPONENT + (sheetExponent(staggered) - COLUMN_EXPONENT) * t * t * (3 - 2 * t)
}

/**
 * Flux of a row under the drainage-mode law: q^(1−s) (q + a)^s = q1 with s taken at the film flow LEAVING the row,
 * Re_f = reynoldsPerFlux (q + a), reynoldsPerFlux = 2 π D/(µl dh). `columnLine` and `sheetLine` are
 * {@link columnToColumnSheet} and {@link columnSheetToSheet}. Left side rises with q, so the root is unique; a bracket
 * guards the steep blend.
 */
export function drainageModeFlux(
  singleTubeFlux: number,
  arrivingFlux: number,
  reynoldsPerFlux: number,
  columnLine: number,
  sheetLine: number,
  staggered: boolean,
): number {
  if (!(singleTubeFlux > 0)) return 0
  if (!(arrivingFlux > 0)) return singleTubeFlux
  let high = inundatedFlux(singleTubeFlux, arrivingFlux, COLUMN_EXPONENT)
  if (reynoldsPerFlux * (high + arrivingFlux) <= columnLine) return high
  let low = inundatedFlux(singleTubeFlux, arrivingFlux, sheetExponent(staggered))
  if (reynoldsPerFlux * (low + arrivingFlux) >= sheetLine) return low
  const lnBlend = Math.log(sheetLine / columnLine)
  const ds = sheetExponent(staggered) - COLUMN_EXPONENT
  let q = 0.5 * (low + high)
  for (let i = 0; i < 60; i++) {
    const total = q + arrivingFlux
    const re = reynoldsPerFlux * total
    const s = drainageExponent(re, columnLine, sheetLine, staggered)
    const ratio = Math.log(total / q)
    const f = Math.log(q / singleTubeFlux) + s * ratio
    if (f > 0) high = q
    else low = q
    let slope = 1 - (s * arrivingFlux) / total
    if (re > columnLine && re < sheetLine) {
      const t = Math.log(re / columnLine) / lnBlend
      slope += ((ds * 6 * t * (1 - t)) / lnBlend) * (q / total) * ratio
    }
    const next = q * Math.exp(-f / slope)
    if (Math.abs(next - q) <= 1e-13 * q) return next
    q = next > low && next < high ? next : 0.5 * (low + high)
  }
  return q
}

/** Tubes above and including row `row` (1-based) in its vertical line: all rows in-line, every second one staggered. */
export function tubesInVerticalLine(row: number, staggered: boolean): number {
  return staggered ? Math.ceil(row / 2) : row
}

/** Nusselt and Jakob: mean of N tubes in a vertical line over the top tube, N^(−1/4). */
export function nusseltRowMean(n: number): number {
  return 1 / Math.sqrt(Math.sqrt(n))
}

/** Kern: N^(−1/6). */
export function kernRowMean(n: number): number {
  return 1 / Math.cbrt(Math.sqrt(n))
}

/** Eissenberg: 0.60 + 0.42 N^(−1/4), clipped at 1 (the printed law gives 1.02 for one tube). */
export function eissenbergRowMean(n: number): number {
  return Math.min(1, 0.6 + 0.42 / Math.sqrt(Math.sqrt(n)))
}

/** Largest (N − 1) Ja of Chen's row law; beyond it the growth factor is held. */
export const CHEN_ROW_LIMIT = 2

/** Chen: N^(−1/4) [1 + 0.2 Ja (N − 1)], with (N − 1) Ja clipped at 2. */
export function chenRowMean(n: number, jakob: number): number {
  return (1 + 0.2 * Math.min(CHEN_ROW_LIMIT, (n - 1) * jakob)) / Math.sqrt(Math.sqrt(n))
}

/** Local factor of tube n from a mean law: n f(n) − (n − 1) f(n − 1), with f(0) taken as 0. */
export function nusseltRowLocal(n: number): number {
  return n <= 1 ? 1 : n * nusseltRowMean(n) - (n - 1) * nusseltRowMean(n - 1)
}
/** Local factor of tube n, Kern. */
export function kernRowLocal(n: number): number {
  return n <= 1 ? 1 : n * kernRowMean(n) - (n - 1) * kernRowMean(n - 1)
}
/** Local factor of tube n, Eissenberg with the mean clipped at 1. */
export function eissenbergRowLocal(n: number): number {
  return n <= 1 ? 1 : n * eissenbergRowMean(n) - (n - 1) * eissenbergRowMean(n - 1)
}
/** Local factor of tube n, Chen, at the Jakob number of that tube. */
export function chenRowLocal(n: number, jakob: number): number {
  return n <= 1 ? 1 : n * chenRowMean(n, jakob) - (n - 1) * chenRowMean(n - 1, jakob)
}

const rowSymbols = {
  N: 'tubes in a vertical line: all rows in-line, every second row in staggered layouts',
  'h_N/h_1': 'mean coefficient of N tubes over that of the top tube',
}
const flowSymbols = {
  Gam_n: 'condensate leaving row n per metre of tube, kg/(m s)',
  gam_n: 'condensate made by row n itself, kg/(m s)',
  s: 'exponent',
}
const lineNote =
  'Counts tubes in a vertical line: every row for 90°, every second row for staggered layouts. A row-mean law is applied row by row in its local form n f(n) − (n−1) f(n−1).'

export const inundationCards = [
  {
    id: 'inundation.condensateFlow',
    choice: 'inundation',
    methodId: 'condensateFlow',
    name: 'Local law in condensate flow',
    equation: 'h_n = h_1 (Gam_n/gam_n)^-s, s = 0.16 staggered, 0.22 in-line',
    symbols: flowSymbols,
    source: ['Wilson 1972 (0.16)', 'McNaught 1982 and Grant and Osment 1968 (0.22 to 0.223)'],
    range: { rows: [1, 30], filmReynolds: 'not stated' },
    rangeText:
      'No range is stated for the exponents; one value cannot serve vacuum steam and a refrigerant alike.',
    scatter: '±20 to 30 % on a row coefficient (from memory)',
    sigmaLn: 0.14,
    evidence: 'from memory, unverified',
    default: true,
    requires: [],
    available: true,
    notes: [
      '(Γ/γ)^−s and N^−s are different models with the same exponent: never copy one s into the other.',
    ],
  },
  {
    id: 'inundation.drainageMode',
    choice: 'inundation',
    methodId: 'drainageMode',
    name: 'Condensate-flow law with the exponent by drainage mode',
    equation:
      's = 0.13 in droplets and columns, 0.22 (staggered 0.16) in sheets; t = clip(ln(Re_f/Re_C)/ln(Re_S/Re_C), 0, 1), s = s_col + (s_sheet - s_col) t^2 (3 - 2 t); Re_C = 1.414 Ga^0.233, Re_S = 1.448 Ga^0.236, Ga = rho_l sigma^3/(mu_l^4 g)',
    symbols: {
      ...flowSymbols,
      Ga: 'modified Galileo number',
      Re_f: '2 Gam_n/mu_l of the flow leaving the row',
    },
    source: ['Hu and Jacobi 1996, J. Heat Transfer 118:616 (mode lines)', 'exponents by mode: assumption'],
    range: { outsideDiameter: [0.0095, 0.022], tubeGap: [0.005, 0.05], galileo: 'not stated' },
    rangeText: 'Mode map: plain tubes 9.5 to 22 mm, gaps 5 to 50 mm, no vapour flow (from memory).',
    scatter: 'mode lines ±20 % with hysteresis; row coefficient ±20 to 30 %',
    sigmaLn: 0.14,
    evidence: 'from memory, unverified',
    requires: ['surfaceTension'],
    available: true,
    notes: ['Strong vapour shear breaks columns up and spreads the rain; the map knows no vapour flow.'],
  },
  {
    id: 'inundation.nusselt',
    choice: 'inundation',
    methodId: 'nusselt',
    name: 'Nusselt and Jakob, ideal sheet',
    equation: 'h_N/h_1 = N^(-1/4)',
    symbols: rowSymbols,
    source: ['Jakob 1936', 'Nusselt 1916'],
    range: { rows: 'not stated' },
    scatter: '±25 to 30 %; data fill the space between N^0 and N^(−1/4) (from memory)',
    sigmaLn: 0.14,
    evidence: 'printed value checked',
    requires: [],
    available: true,
    notes: [lineNote],
  },
  {
    id: 'inundation.kern',
    choice: 'inundation',
    methodId: 'kern',
    name: 'Kern',
    equation: 'h_N/h_1 = N^(-1/6)',
    symbols: rowSymbols,
    source: ['Kern 1950, Process Heat Transfer'],
    range: { rows: 'not stated' },
    scatter: '±25 to 30 % (from memory)',
    sigmaLn: 0.14,
    evidence: 'formula seen',
    requires: [],
    available: true,
    notes: [lineNote, 'ASHRAE gives N^(−1/n) with n between 4 and 6; this is n = 6.'],
  },
  {
    id: 'inundation.eissenberg',
    choice: 'inundation',
    methodId: 'eissenberg',
    name: 'Eissenberg, side drainage',
    equation: 'h_N/h_1 = min(1, 0.60 + 0.42 N^(-1/4))',
    symbols: rowSymbols,
    source: ['Eissenberg 1972, ORNL-TM-4036'],
    range: { rows: 'not stated' },
    scatter: '±25 to 30 % (from memory)',
    sigmaLn: 0.14,
    evidence: 'from memory, unverified',
    requires: [],
    available: true,
    notes: [lineNote, 'The printed law gives 1.02 for a single tube and is clipped at 1.'],
  },
  {
    id: 'inundation.chen',
    choice: 'inundation',
    methodId: 'chen',
    name: 'Chen, condensation on the falling sheet',
    equation: 'h_N/h_1 = N^(-1/4) [1 + 0.2 Ja (N - 1)], Ja = cp dT/hfg',
    symbols: { ...rowSymbols, Ja: 'cp dT/hfg' },
    source: ['Chen 1961, J. Heat Transfer 83:55'],
    range: { rowsJakob: [0, 2] },
    rangeText: 'Valid for (N − 1) Ja < 2; the growth factor is held beyond.',
    scatter: '±25 to 30 % (from memory)',
    sigmaLn: 0.14,
    evidence: 'from memory, unverified',
    requires: ['liquidSpecificHeat'],
    available: true,
    notes: [lineNote],
  },
  {
    id: 'inundation.none',
    choice: 'inundation',
    methodId: 'none',
    name: 'No inundation',
    equation: 'h_n = h_1',
    symbols: {},
    source: ['upper bound; every row sees a clean tube'],
    range: {},
    scatter: 'optimistic below the first row',
    sigmaLn: null,
    evidence: 'assumption',
    requires: [],
    available: true,
  },
] as const satisfies readonly Card[]
