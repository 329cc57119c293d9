/**
 * Film condensation with downward vapour flow over horizontal tubes.
 *
 * Every law is written with G4 and the two-phase Reynolds number Re~ = ρl U D/µl (VAPOUR velocity, LIQUID properties),
 * never with F = G4/Re~², so that nothing divides by the velocity. Flux forms take the film drive G4 ΔT instead of G4
 * and stay finite at ΔT = 0. Upward vapour is not covered: pass U = 0.
 */
import type { Card } from './card.ts'

/** Two-phase Reynolds number ρl U D/µl. */
export function twoPhaseReynolds(
  liquidDensity: number,
  vapourVelocity: number,
  diameter: number,
  liquidViscosity: number,
): number {
  return (liquidDensity * vapourVelocity * diameter) / liquidViscosity
}

/** Butterworth, Nu = 0.416 [Re~ + (Re~² + 9.47 G4)^(1/2)]^(1/2). */
export function butterworth(re: number, g4: number): number {
  return 0.416 * Math.sqrt(re + Math.sqrt(re * re + 9.47 * g4))
}

/** Butterworth as a flux, W/m²: (k/D) 0.416 [ΔT (Re~ ΔT + (Re~² ΔT² + 9.47 drive ΔT)^(1/2))]^(1/2). */
export function butterworthFlux(
  conductivityOverDiameter: number,
  re: number,
  drive: number,
  subcooling: number,
): number {
  if (!(subcooling > 0)) return 0
  const r = re * subcooling
  return (
    0.416 *
    conductivityOverDiameter *
    Math.sqrt(subcooling * (r + Math.sqrt(r * r + 9.47 * drive * subcooling)))
  )
}

/** Shekriladze and Gomelauri, Nu = 0.64 [Re~ + (Re~² + 1.69 G4)^(1/2)]^(1/2). */
export function shekriladzeGomelauri(re: number, g4: number): number {
  return 0.64 * Math.sqrt(re + Math.sqrt(re * re + 1.69 * g4))
}

/** Shekriladze and Gomelauri as a flux, W/m². */
export function shekriladzeGomelauriFlux(
  conductivityOverDiameter: number,
  re: number,
  drive: number,
  subcooling: number,
): number {
  if (!(subcooling > 0)) return 0
  const r = re * subcooling
  return (
    0.64 *
    conductivityOverDiameter *
    Math.sqrt(subcooling * (r + Math.sqrt(r * r + 1.69 * drive * subcooling)))
  )
}

/** Rose 1984, Nu = (c Re~ + 0.728 G4^(1/2))/(Re~² + 3.44 G4^(1/2) Re~ + G4)^(1/4); c = 0.9 unless given. */
export function rose(re: number, g4: number, shearConstant = 0.9): number {
  const root = Math.sqrt(g4)
  return (shearConstant * re + 0.728 * root) / Math.sqrt(Math.sqrt(re * re + 3.44 * root * re + g4))
}

/** Rose 1984 with c = 0.9 as a flux, W/m². */
export function roseFlux(
  conductivityOverDiameter: number,
  re: number,
  drive: number,
  subcooling: number,
): number {
  if (!(subcooling > 0)) return 0
  const x = Math.sqrt(subcooling)
  const root = Math.sqrt(drive)
  const r = re * x
  const ratio = (0.9 * r + 0.728 * root) / Math.sqrt(Math.sqrt(r * r + 3.44 * root * r + drive))
  return conductivityOverDiameter * ratio * x * Math.sqrt(x)
}

/**
 * Suction group Gc = (cp ΔT/hfg)/Pr_l (ρl µl/(ρv µv))^(1/2) per kelvin of subcooling, 1/K:
 * k/(hfg µl) (ρl µl/(ρv µv))^(1/2).
 */
export function suctionGroupPerKelvin(
  latentHeat: number,
  liquidConductivity: number,
  liquidDensity: number,
  liquidViscosity: number,
  vapourDensity: number,
  vapourViscosity: number,
): number {
  return (
    (liquidConductivity / (latentHeat * liquidViscosity)) *
    Math.sqrt((liquidDensity * liquidViscosity) / (vapourDensity * vapourViscosity))
  )
}

/** Shear factor X = 0.9 (1 + 1/Gc)^(1/3) from the suction group Gc > 0. */
export function suctionShearFactor(suctionGroup: number): number {
  return 0.9 * Math.cbrt(1 + 1 / suctionGroup)
}

/** Rose 1984 with c = X, the finite-suction form, from the suction group Gc > 0. */
export function roseWithSuction(re: number, g4: number, suctionGroup: number): number {
  return rose(re, g4, suctionShearFactor(suctionGroup))
}

/**
 * Fujii, Uehara and Kurata (VDI), Nu = [(Ca X)⁴ Re~² + 0.276 G4]^(1/4), Ca = 1 staggered, 0.8 in-line.
 * Ca acts on the shear part only, so that the law returns the quiescent tube at U = 0 in both arrangements; for Ca = 1
 * this is the printed Ca X (Re~² + 0.276 G4/X⁴)^(1/4).
 */
export function fujiiUeharaKurata(re: number, g4: number, suctionGroup: number, staggered: boolean): number {
  const x = (staggered ? 1 : 0.8) * suctionShearFactor(suctionGroup)
  const x2 = x * x
  return Math.sqrt(Math.sqrt(x2 * x2 * re * re + 0.276 * g4))
}

/**
 * Fujii, Uehara and Kurata as a flux, W/m²: X grows like ΔT^(−1/3) as ΔT → 0 but X ΔT does not, so the flux stays
 * finite. `suctionPerKelvin` is {@link suctionGroupPerKelvin}.
 */
export function fujiiUeharaKurataFlux(
  conductivityOverDiameter: number,
  re: number,
  drive: number,
  subcooling: number,
  suctionPerKelvin: number,
  staggered: boolean,
): number {
  if (!(subcooling > 0)) return 0
  // X ΔT = 0.9 (ΔT³ + ΔT²/g)^(1/3)
  const xT =
    (staggered ? 0.9 : 0.72) * Math.cbrt(subcooling * subcooling * (subcooling + 1 / suctionPerKelvin))
  const shear = xT * xT * re
  return (
    conductivityOverDiameter *
    Math.sqrt(Math.sqrt(shear * shear + 0.276 * drive * subcooling * subcooling * subcooling))
  )
}

/** Fujii and Honda, Nu = 0.96 F^0.2 Re~^0.5; only for 0.03 < F < 600 and never a default: it has no quiescent limit. */
export function fujiiHonda(re: number, shearGroup: number): number {
  return 0.96 * shearGroup ** 0.2 * Math.sqrt(re)
}

/** Pure shear limit of Butterworth's form, Nu = 0.416 (2 Re~)^(1/2) = 0.588 Re~^(1/2). */
export function butterworthShearLimit(re: number): number {
  return 0.416 * Math.sqrt(2 * re)
}

/** Largest vapour fraction handed to McNaught's law: X_tt and h_L both vanish at 1 (assumption). */
export const MCNAUGHT_MAX_QUALITY = 0.995

/** McNaught's row exponent: 0.13 triangular, 0.22 square in-line. */
export function mcnaughtExponent(staggered: boolean): number {
  return staggered ? 0.13 : 0.22
}

/** Lockhart–Martinelli parameter X_tt = ((1−x)/x)^0.9 (ρv/ρl)^0.5 (µl/µv)^0.1; x capped at 0.995. */
export function martinelli(
  quality: number,
  liquidDensity: number,
  vapourDensity: number,
  liquidViscosity: number,
  vapourViscosity: number,
): number {
  const x = Math.min(quality, MCNAUGHT_MAX_QUALITY)
  return (
    ((1 - x) / x) ** 0.9 *
    Math.sqrt(vapourDensity / liquidDensity) *
    (liquidViscosity / vapourViscosity) ** 0.1
  )
}

/** McNaught shear part h_sh = 1.26 X_tt^(−0.78) h_L, W/(m² K); h_L for the liquid part flowing alone across the bank. */
export function mcnaughtShear(martinelliParameter: number, liquidAloneCoefficient: number): number {
  return 1.26 * martinelliParameter ** -0.78 * liquidAloneCoefficient
}

/**
 * McNaught bundle coefficient (h_sh² + h_gr²)^(1/2), W/(m² K). Its gravity part already carries the row factor
 * (Γn/γn)^(−s): no further inundation law may be applied.
 */
export function mcnaught(shearCoefficient: number, gravityCoefficient: number): number {
  return Math.sqrt(shearCoefficient * shearCoefficient + gravityCoefficient * gravityCoefficient)
}

/**
 * Honda gravity part, Nu_g = (g D³/νl²)^(1/3) [(1.2 Re_f^−0.3)⁴ + (0.072 Re_f^0.2)⁴]^(1/4).
 * `lengthRatio` is (g D³/νl²)^(1/3) = D over the film length. Re_f > 0.
 */
export function hondaGravity(lengthRatio: number, filmReynoldsNumber: number): number {
  const a = 1.2 * filmReynoldsNumber ** -0.3
  const b = 0.072 * filmReynoldsNumber ** 0.2
  const a2 = a * a
  const b2 = b * b
  return lengthRatio * Math.sqrt(Math.sqrt(a2 * a2 + b2 * b2))
}

/**
 * Honda bundle number for downflow. Inundation acts through Re_f: no further row factor.
 *
 * `condensationVelocity` is q/(ρv hfg), m/s. U multiplies the bracket inside the root, so that U = 0 gives Nu_g.
 */
export function honda(
  gravityNumber: number,
  filmReynoldsNumber: number,
  vapourVelocity: number,
  condensationVelocity: number,
  diameter: number,
  liquidDensity: number,
  vapourDensity: number,
  liquidViscosity: number,
  vapourViscosity: number,
  liquidPrandtl: number,
  transverseOverRowPitch: number,
  staggered: boolean,
): number {
  const u = vapourVelocity
  const common =
    Math.sqrt(vapourDensity / liquidDensity) *
    ((liquidDensity * diameter) / liquidViscosity) *
    liquidPrandtl ** 0.4 *
    filmReynoldsNumber ** -0.2
  const reG = (vapourDensity * u * diameter) / vapourViscosity
  const g2 = gravityNumber * gravityNumber
  if (staggered) {
    const inner = (u > 0 ? u * u * reG ** -0.4 : 0) + 1.83 * condensationVelocity * u
    const f = 0.165 * transverseOverRowPitch ** 0.7 * Math.sqrt(inner) * common
    const f2 = f * f
    return Math.sqrt(Math.sqrt(g2 * g2 + g2 * f2 + f2 * f2))
  }
  const inner = (u > 0 ? u * u * reG ** -0.2 : 0) + 18 * condensationVelocity * u
  const f = 0.053 * Math.sqrt(inner) * common
  const f2 = f * f
  return Math.sqrt(Math.sqrt(g2 * g2 + f2 * f2))
}

const shearSymbols = {
  Nu: 'h D/k',
  'Re~': 'rho_l U D/mu_l: liquid properties, vapour velocity',
  G4: "g rho_l (rho_l - rho_v) D^3 hfg'/(mu_l k dT)",
  U: 'row-mean vapour velocity on the mean void area of the bundle, m/s',
}

const shearRange = { twoPhaseReynolds: 'not stated', shearGroup: 'not stated' } as const

export const shearCards = [
  {
    id: 'vapourShear.butterworth',
    choice: 'vapourShear',
    methodId: 'butterworth',
    name: 'Butterworth, early separation',
    equation: 'Nu = 0.416 [Re~ + (Re~^2 + 9.47 G4)^(1/2)]^(1/2)',
    symbols: shearSymbols,
    source: ['Butterworth 1977, condenser design review', 'after Shekriladze and Gomelauri 1966'],
    range: shearRange,
    scatter: 'steam ±20 %; spread between the shear laws is a factor of 1.5 at 20 m/s (from memory)',
    sigmaLn: 0.15,
    evidence: 'limit-checked, from memory',
    default: true,
    requires: ['vapourDensity'],
    available: true,
    notes: [
      'About 0.65 of Shekriladze and Gomelauri in the shear limit: on the safe side.',
      'Gravity limit 0.7298 G4^(1/4), shear limit 0.588 Re~^(1/2).',
    ],
  },
  {
    id: 'vapourShear.shekriladzeGomelauri',
    choice: 'vapourShear',
    methodId: 'shekriladzeGomelauri',
    name: 'Shekriladze and Gomelauri, asymptotic suction shear',
    equation: 'Nu = 0.64 [Re~ + (Re~^2 + 1.69 G4)^(1/2)]^(1/2)',
    symbols: shearSymbols,
    source: ['Shekriladze and Gomelauri 1966, Int. J. Heat Mass Transfer 9:581'],
    range: shearRange,
    scatter: 'steam ±20 %; fast low-pressure steam falls below (from memory)',
    sigmaLn: 0.15,
    evidence: 'limit-checked, from memory',
    requires: ['vapourDensity'],
    available: true,
  },
  {
    id: 'vapourShear.rose',
    choice: 'vapourShear',
    methodId: 'rose',
    name: 'Rose 1984, interpolation of the numerical solution',
    equation: 'Nu = (0.9 Re~ + 0.728 G4^(1/2))/(Re~^2 + 3.44 G4^(1/2) Re~ + G4)^(1/4)',
    symbols: shearSymbols,
    source: ['Rose 1984, Int. J. Heat Mass Transfer 27:39'],
    range: shearRange,
    scatter: 'steam ±20 %; R-113 at high velocity up to 30 % above (from memory)',
    sigmaLn: 0.15,
    evidence: 'limit-checked, from memory',
    requires: ['vapourDensity'],
    available: true,
    notes: [
      'The finite-suction form replaces 0.9 by X = 0.9 (1 + 1/Gc)^(1/3) and lies higher; the plain 0.9 is used.',
    ],
  },
  {
    id: 'vapourShear.fujiiUeharaKurata',
    choice: 'vapourShear',
    methodId: 'fujiiUeharaKurata',
    name: 'Fujii, Uehara and Kurata (VDI Heat Atlas)',
    equation:
      'Nu = [(Ca X)^4 Re~^2 + 0.276 G4]^(1/4), X = 0.9 (1 + 1/Gc)^(1/3), Gc = (cp dT/hfg)/Pr_l (rho_l mu_l/(rho_v mu_v))^(1/2), Ca = 1 staggered, 0.8 in-line',
    symbols: { ...shearSymbols, Gc: 'suction group', Ca: 'arrangement factor on the shear part' },
    source: [
      'Fujii, Uehara and Kurata 1972, Int. J. Heat Mass Transfer 15:235',
      'VDI Heat Atlas 9th ed., Ja 7 eq. 43',
    ],
    range: { twoPhaseReynolds: [3e5, 1e6], shearGroup: 'not stated' },
    rangeText: 'Stated as validated for 3e5 < Re~ < 1e6; deviation below 5 % claimed above 5e5.',
    scatter: '5 to 10 % against its own test data',
    sigmaLn: 0.15,
    evidence: 'formula seen',
    requires: ['vapourDensity', 'liquidSpecificHeat', 'vapourViscosity'],
    available: true,
    notes: [
      'Ca = 0.8 acts on the shear part only, so that still vapour gives the Nusselt tube in both arrangements.',
    ],
  },
  {
    id: 'vapourShear.fujiiHonda',
    choice: 'vapourShear',
    name: 'Fujii and Honda, power law',
    equation: 'Nu = 0.96 F^0.2 Re~^0.5',
    symbols: { ...shearSymbols, F: 'G4/Re~^2' },
    source: ['Fujii, Honda and Oda 1979'],
    range: { shearGroup: [0.03, 600] },
    scatter: 'not stated',
    sigmaLn: null,
    evidence: 'from memory, unverified',
    requires: ['vapourDensity'],
    available: false,
    notes: ['No quiescent limit (4 % low at F = 600, 17 % at 1e4): kept for comparison, not selectable.'],
  },
  {
    id: 'vapourShear.mcnaught',
    choice: 'vapourShear',
    methodId: 'mcnaught',
    name: 'McNaught, bundle',
    equation:
      'h = (h_sh^2 + h_gr^2)^(1/2), h_sh = 1.26 X_tt^-0.78 h_L, h_gr = h_Nusselt (Gam_n/gam_n)^-s, s = 0.13 triangular, 0.22 square in-line',
    symbols: {
      X_tt: '((1-x)/x)^0.9 (rho_v/rho_l)^0.5 (mu_l/mu_v)^0.1',
      h_L: 'coefficient of the liquid part alone across the bank, W/(m2 K)',
      x: 'local vapour mass fraction, capped at 0.995',
    },
    source: ['McNaught 1982, 7th Int. Heat Transfer Conf. 5:125'],
    range: { vapourQuality: 'not stated', martinelli: 'not stated' },
    scatter: '90 % of one set of steam data within ±25 % (from memory)',
    sigmaLn: 0.15,
    evidence: 'from memory, unverified',
    requires: ['vapourDensity', 'vapourViscosity', 'liquidSpecificHeat'],
    available: true,
    notes: ['Replaces the row law: an inundation method given with it is refused.'],
  },
  {
    id: 'vapourShear.honda',
    choice: 'vapourShear',
    methodId: 'honda',
    name: 'Honda and co-workers, smooth-tube bundle in downflow',
    equation:
      'Nu_g = (g D^3/nu_l^2)^(1/3) [(1.2 Re_f^-0.3)^4 + (0.072 Re_f^0.2)^4]^(1/4); staggered Nu = [Nu_g^4 + (Nu_g Nu_f)^2 + Nu_f^4]^(1/4), Nu_f = 0.165 (pt/pl)^0.7 [Re_g^-0.4 + 1.83 q/(rho_v hfg U)]^(1/2) (rho_v/rho_l)^(1/2) Re~ Pr_l^0.4 Re_f^-0.2; in-line Nu = [Nu_g^4 + Nu_f^4]^(1/4), Nu_f = 0.053 [Re_g^-0.2 + 18 q/(rho_v hfg U)]^(1/2) (rho_v/rho_l)^(1/2) Re~ Pr_l^0.4 Re_f^-0.2',
    symbols: { ...shearSymbols, Re_f: '2 Gam/mu at the bottom of the row', Re_g: 'rho_v U D/mu_v' },
    source: ['Honda, Uchima, Nozu, Nakata and Torigoe 1988–89, Heat Transfer – Japanese Research'],
    range: { filmReynolds: 'not stated', vapourReynolds: 'not stated' },
    scatter: '±20 % for most row data (from memory); R-113, R-12, R-21, steam',
    sigmaLn: 0.15,
    evidence: 'from memory, unverified',
    requires: ['vapourDensity', 'vapourViscosity', 'liquidSpecificHeat'],
    available: true,
    notes: [
      'Replaces the row law: an inundation method given with it is refused.',
      'Above Re_f of about 500 the gravity part rises with inundation.',
      'Only the gravity part is limit-checked.',
    ],
  },
  {
    id: 'vapourShear.none',
    choice: 'vapourShear',
    methodId: 'none',
    name: 'Still vapour',
    equation: 'h = quiescent film coefficient',
    symbols: {},
    source: ['conservative choice'],
    range: {},
    scatter: 'none of its own',
    sigmaLn: null,
    evidence: 'assumption',
    requires: [],
    available: true,
  },
] as const satisfies readonly Card[]
