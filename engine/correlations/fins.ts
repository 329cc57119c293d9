/**
 * Film condensation on low integral fins. d is the root diameter, do = d + 2 hf, t the fin thickness, s the gap at the
 * root, p = s + t, β the half angle at the fin tip. Areas and coefficients refer to the root area π d L.
 */
import type { Card } from './card.ts'
import { GRAVITY } from './constants.ts'

/** Retention group a = 4 σ cos β/((ρl − ρv) g b do); the whole tube floods from 2. b is the gap at the tip, m. */
export function retentionGroup(
  surfaceTension: number,
  liquidDensity: number,
  vapourDensity: number,
  tipGap: number,
  outsideDiameter: number,
  tipHalfAngle = 0,
): number {
  return (
    (4 * surfaceTension * Math.cos(tipHalfAngle)) /
    ((liquidDensity - vapourDensity) * GRAVITY * tipGap * outsideDiameter)
  )
}

/** Retention angle from the TOP, arccos(a − 1), rad: π free of retention, 0 fully flooded; clipped, never a domain error. */
export function retentionAngle(group: number): number {
  return Math.acos(Math.max(-1, Math.min(1, group - 1)))
}

/** Rose's ξ(φ) of the roots, φ in rad. */
export function roseRootFunction(phi: number): number {
  return 0.874 + phi * (0.1991e-2 + phi * (-0.2642e-1 + phi * (0.553e-2 - phi * 0.1363e-2)))
}

function flankHeight(finHeight: number, phi: number): number {
  if (phi < 1e-6) return finHeight
  return phi <= Math.PI / 2 ? (finHeight * phi) / Math.sin(phi) : (finHeight * phi) / (2 - Math.sin(phi))
}

/** tan(φ/2)/φ, 1/2 at φ = 0. */
function halfTangent(phi: number): number {
  return phi < 1e-6 ? 0.5 : Math.tan(phi / 2) / phi
}

function wedge(tipHalfAngle: number): number {
  const t = Math.tan(tipHalfAngle / 2)
  return (1 - t) / (1 + t)
}

const clip01 = (x: number): number => Math.max(0, Math.min(1, x))

/** Fin geometry and liquid as Rose's equation takes them. */
export interface FinCase {
  rootDiameter: number
  finHeight: number
  finThickness: number
  finGap: number
  surfaceTension: number
  liquidDensity: number
  vapourDensity: number
  /** Half angle at the fin tip, rad; 0 for rectangular fins. */
  tipHalfAngle?: number
}

/** Retention angle of a fin case, rad from the top. */
export function finRetentionAngle(fin: FinCase): number {
  const outside = fin.rootDiameter + 2 * fin.finHeight
  const beta = fin.tipHalfAngle ?? 0
  const tipGap = fin.finGap + 2 * fin.finHeight * Math.tan(beta)
  return retentionAngle(
    retentionGroup(fin.surfaceTension, fin.liquidDensity, fin.vapourDensity, tipGap, outside, beta),
  )
}

/** Tip part of Rose's enhancement ratio: the whole circumference, flooded or not. */
export function roseTips(fin: FinCase): number {
  const d = fin.rootDiameter
  const out = d + 2 * fin.finHeight
  const t = fin.finThickness
  const weight = (fin.liquidDensity - fin.vapourDensity) * GRAVITY
  return (
    (((out / d) ** 0.75 * t) / (fin.finGap + t)) *
    ((0.281 + (0.143 * fin.surfaceTension * out) / (t ** 3 * weight)) ** 0.25 / 0.728)
  )
}

/** Flank part of Rose's enhancement ratio; 0 on the flooded branch. */
export function roseFlanks(fin: FinCase, phi: number): number {
  if (!(phi > 0)) return 0
  const d = fin.rootDiameter
  const hf = fin.finHeight
  const out = d + 2 * hf
  const beta = fin.tipHalfAngle ?? 0
  const weight = (fin.liquidDensity - fin.vapourDensity) * GRAVITY
  const hv = flankHeight(hf, phi)
  const covered = clip01(
    (wedge(beta) * 2 * fin.surfaceTension * Math.cos(beta) * halfTangent(phi)) /
      (fin.liquidDensity * GRAVITY * d * hf),
  )
  return (
    (((phi / Math.PI) * (1 - covered)) / Math.cos(beta)) *
    ((out * out - d * d) / (2 * hv ** 0.25 * d ** 0.75 * (fin.finGap + fin.finThickness))) *
    ((0.791 + (0.143 * fin.surfaceTension * hv) / (hf ** 3 * weight)) ** 0.25 / 0.728)
  )
}

/** Root part of Rose's enhancement ratio; 0 on the flooded branch. */
export function roseRoots(fin: FinCase, phi: number): number {
  if (!(phi > 0)) return 0
  const d = fin.rootDiameter
  const s = fin.finGap
  const beta = fin.tipHalfAngle ?? 0
  const weight = (fin.liquidDensity - fin.vapourDensity) * GRAVITY
  const covered = clip01(
    (wedge(beta) * 4 * fin.surfaceTension * halfTangent(phi)) / (fin.liquidDensity * GRAVITY * d * s),
  )
  const xi = roseRootFunction(phi)
  return (
    ((phi / Math.PI) *
      (1 - covered) *
      2.96 *
      s *
      (xi ** 3 + (0.143 * fin.surfaceTension * d) / (s ** 3 * weight)) ** 0.25) /
    (0.728 * (s + fin.finThickness))
  )
}

/** Fin height below which the ratio is blended to 1, m (assumption: the equation has no plain-tube limit). */
export const FIN_BLEND_HEIGHT = 3e-4

/**
 * Rose 1994 enhancement ratio h_fin/h_plain at equal ΔT on the root area, `efficiency` on tips and flanks.
 * Continuous through full flooding (tips only) and blended linearly to 1 below 0.3 mm fins.
 */
export function roseFinRatio(fin: FinCase, efficiency = 1): number {
  if (!(fin.finHeight > 0)) return 1
  const phi = finRetentionAngle(fin)
  const ratio = efficiency * (roseTips(fin) + roseFlanks(fin, phi)) + roseRoots(fin, phi)
  if (fin.finHeight >= FIN_BLEND_HEIGHT) return ratio
  return 1 + ((ratio - 1) * fin.finHeight) / FIN_BLEND_HEIGHT
}

/** Coefficient on the unflooded flanks, W/(m² K), from their part of the ratio and the plain-tube coefficient. */
export function flankCoefficient(
  fin: FinCase,
  flankRatio: number,
  phi: number,
  plainCoefficient: number,
): number {
  if (!(phi > 0)) return 0
  const d = fin.rootDiameter
  const out = d + 2 * fin.finHeight
  const flank = (out * out - d * d) / 2
  return (flankRatio * plainCoefficient * d * (fin.finGap + fin.finThickness)) / (flank * (phi / Math.PI))
}

/** Schmidt's annular fin efficiency, tanh(m r F)/(m r F), F = (R/r − 1)(1 + 0.35 ln(R/r)), m = (2 h/(k t))^(1/2). */
export function schmidtFinEfficiency(
  rootRadius: number,
  tipRadius: number,
  finThickness: number,
  finConductivity: number,
  coefficient: number,
): number {
  const ratio = tipRadius / rootRadius
  const x =
    Math.sqrt((2 * coefficient) / (finConductivity * finThickness)) *
    rootRadius *
    (ratio - 1) *
    (1 + 0.35 * Math.log(ratio))
  return x < 1e-8 ? 1 : Math.tanh(x) / x
}

/** Mean condensing length of a fin side, π (do² − d²)/(4 do), m (one transcription loses the 4). */
export function beattyKatzLength(rootDiameter: number, outsideDiameter: number): number {
  return (Math.PI * (outsideDiameter * outsideDiameter - rootDiameter * rootDiameter)) / (4 * outsideDiameter)
}

/**
 * Beatty and Katz coefficient on the effective area A_eff = η Af + Au, W/(m² K). `finArea` and `rootGapArea` per metre
 * of tube (or any common length), m²; `liquidGroup` is ρl² k³ g hfg'/(µ ΔT), so that h = 0.689 (group/De)^(1/4).
 */
export function beattyKatz(
  liquidGroup: number,
  finArea: number,
  rootGapArea: number,
  efficiency: number,
  rootDiameter: number,
  outsideDiameter: number,
): number {
  const fins = efficiency * finArea
  const effective = fins + rootGapArea
  const length = beattyKatzLength(rootDiameter, outsideDiameter)
  const inverse =
    (1.3 * fins) / (effective * length ** 0.25) + rootGapArea / (effective * rootDiameter ** 0.25)
  return 0.689 * liquidGroup ** 0.25 * inverse
}

/** Row exponent on fins: 0.10 for water, 0.05 for other fluids (assumption). */
export function finRowExponent(isWater: boolean): number {
  return isWater ? 0.1 : 0.05
}

/** Fin film with vapour shear, (h_fin⁴ + h_shear⁴)^(1/4), h_shear the pure shear limit on the plain tube (assumption). */
export function finWithShear(finCoefficient: number, shearCoefficient: number): number {
  const a = finCoefficient * finCoefficient
  const b = shearCoefficient * shearCoefficient
  return Math.sqrt(Math.sqrt(a * a + b * b))
}

const symbols = {
  d: 'root diameter, m',
  do: 'diameter over the fins, m',
  hf: 'fin height, m',
  t: 'fin thickness, m',
  s: 'gap between fins, m',
  p: 's + t, m',
  phi_f: 'retention angle from the top, rad',
}

export const finCards = [
  {
    id: 'fins.rose',
    choice: 'fins',
    methodId: 'rose',
    name: 'Rose 1994 with retention and fin efficiency',
    equation:
      'ER = (do/d)^(3/4)(t/p)[0.281 + 0.143 sigma do/(t^3 rg)]^(1/4)/0.728 + (phi_f/pi)((1-ff)/cos beta)(do^2-d^2)/(2 hv^(1/4) d^(3/4) p)[0.791 + 0.143 sigma hv/(hf^3 rg)]^(1/4)/0.728 + (phi_f/pi)(1-fs) 2.96 (s/p)[xi^3 + 0.143 sigma d/(s^3 rg)]^(1/4)/0.728; cos(phi_f) = 4 sigma cos(beta)/((rho_l-rho_v) g b do) - 1',
    symbols: {
      ...symbols,
      ER: 'h on the root area over the plain tube of diameter d at equal dT',
      rg: '(rho_l-rho_v) g',
    },
    source: [
      'Rose 1994, Int. J. Heat Mass Transfer 37:865',
      'Briggs and Rose 1994, Int. J. Heat Mass Transfer 37 Suppl. 1:457',
      'Honda, Nozu and Mitsumori 1983 (retention)',
    ],
    range: { finSpacing: [1e-4, 2e-3], finHeight: [3e-4, 2e-3] },
    rangeText:
      'No plain-tube limit: outside these gaps and heights the ratio is noted, and blended to 1 below 0.3 mm.',
    scatter: '±20 % (steam, ethylene glycol, R-113; from memory); tends to be high for refrigerants',
    sigmaLn: 0.18,
    evidence: 'plausibility checked, from memory',
    default: true,
    requires: ['vapourDensity', 'surfaceTension'],
    available: false,
  },
  {
    id: 'fins.beattyKatz',
    choice: 'fins',
    methodId: 'beattyKatz',
    name: 'Beatty and Katz',
    equation:
      "h = 0.689 [rho_l^2 k^3 g hfg'/(mu dT De)]^(1/4) on A_eff = eta Af + Au; De^(-1/4) = 1.30 eta Af/(A_eff Lb^(1/4)) + Au/(A_eff d^(1/4)); Lb = pi(do^2-d^2)/(4 do)",
    symbols: { ...symbols, Af: 'fin area, m2', Au: 'root area between the fins, m2', eta: 'fin efficiency' },
    source: ['Beatty and Katz 1948, Chem. Eng. Prog. 44:55'],
    range: { floodedFraction: [0, 0.2] },
    rangeText: 'Organic fluids of low surface tension with little flooding; twice too high on water.',
    scatter: '±7 to 10 % on its own fluids',
    sigmaLn: 0.11,
    evidence: 'formula seen',
    requires: ['vapourDensity', 'surfaceTension'],
    available: false,
  },
] as const satisfies readonly Card[]
