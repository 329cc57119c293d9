/** Heat and mass transfer in single-phase flow across a row of tubes (VDI, Gnielinski). */
import type { Card } from './card.ts'

/** Flow length of the cross-flow numbers, π D/2, m. */
export function crossflowLength(diameter: number): number {
  return (Math.PI * diameter) / 2
}

/** Void fraction of a row, 1 − π/(4a) for b ≥ 1, else 1 − π/(4ab). */
export function crossflowVoid(a: number, b: number): number {
  return b >= 1 ? 1 - Math.PI / (4 * a) : 1 - Math.PI / (4 * a * b)
}

/** Re over the flow length, U_front L ρ/(ψ µ). */
export function crossflowReynolds(
  frontalVelocity: number,
  diameter: number,
  density: number,
  viscosity: number,
  voidFraction: number,
): number {
  return (frontalVelocity * crossflowLength(diameter) * density) / (voidFraction * viscosity)
}

/** Arrangement factor f_A, 1 + 2/(3b) staggered, 1 + (0.7/ψ^1.5)(b/a − 0.3)/(b/a + 0.7)² in-line. */
export function crossflowArrangement(a: number, b: number, staggered: boolean): number {
  if (staggered) return 1 + 2 / (3 * b)
  const psi = crossflowVoid(a, b)
  const r = b / a
  return 1 + ((0.7 / (psi * Math.sqrt(psi))) * (r - 0.3)) / ((r + 0.7) * (r + 0.7))
}

/**
 * Single-row number 0.3 + (Nu_l² + Nu_t²)^(1/2) on the flow length, Nu_l = 0.664 Re^0.5 Pr^(1/3),
 * Nu_t = 0.037 Re^0.8 Pr/(1 + 2.443 Re^−0.1 (Pr^(2/3) − 1)). With Sc in place of Pr it is the Sherwood number.
 */
export function crossflowNumber(re: number, pr: number): number {
  if (!(re > 0)) return 0.3
  const c = Math.cbrt(pr)
  const laminar = 0.664 * Math.sqrt(re) * c
  const lnRe = Math.log(re)
  const turbulent = (0.037 * Math.exp(0.8 * lnRe) * pr) / (1 + 2.443 * Math.exp(-0.1 * lnRe) * (c * c - 1))
  return 0.3 + Math.sqrt(laminar * laminar + turbulent * turbulent)
}

/** Number of row `row` (1-based): the first row has no arrangement factor. */
export function crossflowRow(row: number, single: number, arrangement: number): number {
  return row <= 1 ? single : arrangement * single
}

/** Mean number of a bank: (1 + (n − 1) f_A)/n below ten rows, f_A from ten. */
export function crossflowMean(rows: number, single: number, arrangement: number): number {
  return rows >= 10 ? arrangement * single : ((1 + (rows - 1) * arrangement) / rows) * single
}

export const crossflowCards = [
  {
    id: 'vapourSide.crossflow',
    choice: 'vapourSide',
    name: 'Heat and mass transfer across a row (VDI, Gnielinski)',
    equation:
      'Nu_0 = 0.3 + (Nu_l^2 + Nu_t^2)^0.5, Nu_l = 0.664 Re^0.5 Pr^(1/3), Nu_t = 0.037 Re^0.8 Pr/(1 + 2.443 Re^-0.1 (Pr^(2/3)-1)); other rows f_A Nu_0, f_A = 1 + 2/(3b) staggered, 1 + (0.7/psi^1.5)(b/a-0.3)/(b/a+0.7)^2 in-line',
    symbols: {
      Re: 'U_front L rho/(psi mu)',
      L: 'pi D/2, m',
      psi: 'void fraction of the row',
      Pr: 'Sc for mass transfer',
    },
    source: ['VDI Heat Atlas, chapter Gg', 'Gnielinski 1975'],
    range: { crossflowReynolds: [10, 1e6], prandtlOrSchmidt: [0.6, 1000] },
    scatter: '±15 % (from memory)',
    sigmaLn: 0.11,
    evidence: 'formula seen',
    requires: [],
    available: true,
    notes: [
      'One formula for Nu and Sh: the Lewis number is handled by itself.',
      'Used by McNaught for the liquid alone.',
    ],
  },
] as const satisfies readonly Card[]
