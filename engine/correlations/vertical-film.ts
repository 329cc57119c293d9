/** Film condensation on vertical walls: the reference laws for header walls and for the textbook checks. */
import type { Card } from './card.ts'
import { GRAVITY } from './constants.ts'

/** Exact plate constant 2√2/3 (textbooks round to 0.943). */
export const PLATE_CONSTANT = (2 * Math.SQRT2) / 3

/**
 * Mean laminar coefficient of a plate of height L at sine of its inclination from the horizontal (1 = vertical),
 * h = (2√2/3) [g sinθ ρl (ρl − ρv) k³ hfg'/(µ ΔT L)]^(1/4), W/(m² K).
 */
export function verticalPlate(
  height: number,
  subcooling: number,
  liquidDensity: number,
  vapourDensity: number,
  liquidViscosity: number,
  liquidConductivity: number,
  latentHeat: number,
  sineOfInclination = 1,
): number {
  const k = liquidConductivity
  const group =
    (GRAVITY * sineOfInclination * liquidDensity * (liquidDensity - vapourDensity) * k * k * k * latentHeat) /
    (liquidViscosity * subcooling * height)
  return PLATE_CONSTANT * Math.sqrt(Math.sqrt(group))
}

/** Smooth laminar mean h* = 1.47 Re^(−1/3), Re = 4 Γ_b/µ with Γ_b the flow per breadth at the bottom. */
export function plateLaminar(re: number): number {
  return 1.47 / Math.cbrt(re)
}

/** Kutateladze, wavy laminar mean h* = Re/(1.08 Re^1.22 − 5.2); negative below Re of about 3.6. */
export function kutateladze(re: number): number {
  return re / (1.08 * re ** 1.22 - 5.2)
}

/** Labuntsov, turbulent mean h* = Re/(8750 + 58 Pr^−0.5 (Re^0.75 − 253)). */
export function labuntsov(re: number, pr: number): number {
  return re / (8750 + (58 / Math.sqrt(pr)) * (re ** 0.75 - 253))
}

/** Three-regime plate law with its edges at 30 and 1800; it jumps up by 3 to 8 % at 1800. */
export function plateThreeRegimes(re: number, pr: number): number {
  if (re <= 30) return plateLaminar(re)
  if (re <= 1800) return kutateladze(re)
  return labuntsov(re, pr)
}

/** Chen, Gerner and Tien mean h* = [Re^−0.44 + 5.82e-6 Re^0.8 Pr^1.3]^(1/2): smooth over all regimes. */
export function chenGernerTien(re: number, pr: number): number {
  return Math.sqrt(re ** -0.44 + 5.82e-6 * re ** 0.8 * pr ** 1.3)
}

/** Chen, Gerner and Tien local h* = [(0.31 Re^−1.32 + Re^2.4 Pr^3.9/2.37e14)^(1/3)]^(1/2), without interfacial shear. */
export function chenGernerTienLocal(re: number, pr: number): number {
  return Math.sqrt(Math.cbrt(0.31 * re ** -1.32 + (re ** 2.4 * pr ** 3.9) / 2.37e14))
}

/** Film Reynolds number of a plate from its own mean flux under Kutateladze's law, closed form. */
export function kutateladzeReynolds(
  height: number,
  subcooling: number,
  liquidDensity: number,
  vapourDensity: number,
  liquidViscosity: number,
  liquidConductivity: number,
  latentHeat: number,
): number {
  const length = Math.cbrt(
    (liquidViscosity * liquidViscosity) / (liquidDensity * (liquidDensity - vapourDensity) * GRAVITY),
  )
  // Re = 4 h ΔT L/(µ hfg') and h = (k/length) Re/(1.08 Re^1.22 − 5.2) leave Re^1.22 alone.
  const load = (4 * height * liquidConductivity * subcooling) / (liquidViscosity * latentHeat * length)
  return ((load + 5.2) / 1.08) ** (1 / 1.22)
}

/**
 * Film thickness at the distance x from the top under downward interfacial stress τ, Pa, from
 * δ⁴ + (4/3) τ δ³/((ρl − ρv) g) = 4 µ k ΔT x/(ρl (ρl − ρv) g hfg'), m. NaN for an upward stress: the film may flood.
 */
export function plateFilmThickness(
  distance: number,
  subcooling: number,
  liquidDensity: number,
  vapourDensity: number,
  liquidViscosity: number,
  liquidConductivity: number,
  latentHeat: number,
  interfacialStress = 0,
): number {
  if (interfacialStress < 0) return Number.NaN
  const weight = (liquidDensity - vapourDensity) * GRAVITY
  const right =
    (4 * liquidViscosity * liquidConductivity * subcooling * distance) / (liquidDensity * weight * latentHeat)
  const c = ((4 / 3) * interfacialStress) / weight
  let delta = Math.sqrt(Math.sqrt(right)) // the root without stress lies on the right
  for (let i = 0; i < 60; i++) {
    const d2 = delta * delta
    const step = (d2 * d2 + c * d2 * delta - right) / (4 * d2 * delta + 3 * c * d2)
    delta -= step
    if (Math.abs(step) <= 1e-14 * delta) break
  }
  return delta
}

/**
 * Mean coefficient of a laminar film under downward interfacial stress, h = Γ hfg'/(ΔT x) with
 * Γ = (ρl/µ)[(ρl − ρv) g δ³/3 + τ δ²/2], W/(m² K). NaN for an upward stress.
 */
export function shearedPlate(
  height: number,
  subcooling: number,
  liquidDensity: number,
  vapourDensity: number,
  liquidViscosity: number,
  liquidConductivity: number,
  latentHeat: number,
  interfacialStress: number,
): number {
  const delta = plateFilmThickness(
    height,
    subcooling,
    liquidDensity,
    vapourDensity,
    liquidViscosity,
    liquidConductivity,
    latentHeat,
    interfacialStress,
  )
  const weight = (liquidDensity - vapourDensity) * GRAVITY
  const flow =
    (liquidDensity / liquidViscosity) *
    ((weight * delta * delta * delta) / 3 + (interfacialStress * delta * delta) / 2)
  return (flow * latentHeat) / (subcooling * height)
}

/** Sadasivan and Lienhard's latent-heat coefficient 0.683 − 0.228/Pr of a film without vapour drag. */
export function sadasivanLienhard(liquidPrandtl: number): number {
  return 0.683 - 0.228 / liquidPrandtl
}

/**
 * Chen's factor on h of a PLATE, [(1 + 0.68 ζ + 0.02 ζ ξ)/(1 + 0.85 ξ − 0.15 ζ ξ)]^(1/4); the tube has 0.95 in place of
 * 0.85. With the plain latent heat.
 */
export function chenPlateFactor(zeta: number, xi: number): number {
  return ((1 + 0.68 * zeta + 0.02 * zeta * xi) / (1 + 0.85 * xi - 0.15 * zeta * xi)) ** 0.25
}

const symbols = {
  'h*': '(h/k)(nu^2 rho_l/((rho_l - rho_v) g))^(1/3), mean over the height',
  Re: '4 Gam_b/mu, Gam_b the flow per breadth at the bottom',
}

export const verticalFilmCards = [
  {
    id: 'filmReference.plate',
    choice: 'filmReference',
    name: 'Vertical plate or tube, three regimes',
    equation:
      'Re <= 30: h* = 1.47 Re^(-1/3); 30..1800: Re/(1.08 Re^1.22 - 5.2); > 1800: Re/(8750 + 58 Pr^-0.5 (Re^0.75 - 253))',
    symbols,
    source: ['Nusselt 1916', 'Kutateladze 1963', 'Labuntsov 1957, Teploenergetika 4:72'],
    range: { plateFilmReynolds: [0, 1e5] },
    scatter: '±20 % (from memory)',
    sigmaLn: null,
    evidence: 'printed value checked',
    requires: [],
    available: false,
    notes: ['Reference law for walls and checks; jumps by 3 to 8 % at Re 1800.'],
  },
  {
    id: 'filmReference.chenGernerTien',
    choice: 'filmReference',
    name: 'Chen, Gerner and Tien, smooth over all regimes',
    equation: 'h* = [Re^-0.44 + 5.82e-6 Re^0.8 Pr^1.3]^(1/2)',
    symbols,
    source: ['Chen, Gerner and Tien 1987, Int. Comm. Heat Mass Transfer 14:1'],
    range: { plateFilmReynolds: 'not stated', liquidPrandtl: 'not stated' },
    scatter: '±20 % (from memory)',
    sigmaLn: null,
    evidence: 'limit-checked, from memory',
    requires: [],
    available: false,
    notes: ['The local form integrates to the mean within 3.5 %, which confirms the exponent 1.3 on Pr.'],
  },
  {
    id: 'filmReference.shearedPlate',
    choice: 'filmReference',
    name: 'Laminar film under interfacial stress',
    equation:
      "d^4 + (4/3) tau d^3/((rho_l-rho_v) g) = 4 mu k dT x/(rho_l (rho_l-rho_v) g hfg'); h = Gam hfg'/(dT x)",
    symbols: { d: 'film thickness at x, m', tau: 'downward interfacial stress, Pa' },
    source: ['two-term momentum balance'],
    range: {},
    scatter: 'not stated',
    sigmaLn: null,
    evidence: 'derived',
    requires: [],
    available: false,
    notes: ['An upward stress may leave no film: refused.'],
  },
  {
    id: 'filmReference.filmSubcooling',
    choice: 'filmReference',
    name: 'Film subcooling and vapour drag on a plate',
    equation:
      "hfg' = hfg + (0.683 - 0.228/Pr) cp dT without drag; with drag h/h_Nusselt = [(1 + 0.68 z + 0.02 z x)/(1 + 0.85 x - 0.15 z x)]^(1/4)",
    symbols: { z: 'cp dT/hfg', x: 'k dT/(mu hfg)' },
    source: ['Sadasivan and Lienhard 1987, J. Heat Transfer 109:545', 'Chen 1961, J. Heat Transfer 83:48'],
    range: { liquidPrandtl: 'not stated', jakob: [0, 2] },
    scatter: 'within 0.7 % of the boundary-layer similarity solution',
    sigmaLn: null,
    evidence: 'limit-checked, from memory',
    requires: ['liquidSpecificHeat'],
    available: false,
    notes: ['The plate has 0.85 where the tube has 0.95.'],
  },
] as const satisfies readonly Card[]
