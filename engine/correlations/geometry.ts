/** Tube-field geometry: layouts, flow areas, circular bundles, tube mass and wall resistance. */
import type { Card } from './card.ts'

export const LAYOUTS = ['triangular30', 'triangular60', 'square90', 'square45'] as const
export type Layout = (typeof LAYOUTS)[number]

/** True where alternate rows stand half a transverse pitch aside (30°, 60°, 45°). */
export function isStaggered(layout: Layout): boolean {
  return layout !== 'square90'
}

/** Transverse pitch over tube pitch, sT/P: 1, √3, 1, √2. */
export function transversePitchFactor(layout: Layout): number {
  if (layout === 'triangular60') return Math.sqrt(3)
  if (layout === 'square45') return Math.SQRT2
  return 1
}

/** Row spacing over tube pitch, sL/P: √3/2, 1/2, 1, √2/2. */
export function rowPitchFactor(layout: Layout): number {
  if (layout === 'triangular30') return Math.sqrt(3) / 2
  if (layout === 'triangular60') return 0.5
  if (layout === 'square45') return Math.SQRT1_2
  return 1
}

/** Vertical distance between tubes of one line over tube pitch: √3, 1, 1, √2. */
export function verticalRepeatFactor(layout: Layout): number {
  return (isStaggered(layout) ? 2 : 1) * rowPitchFactor(layout)
}

/**
 * Narrowest flow area over frontal area from pitch ratio P/D. 30° and 90°: (P − D)/P. 60°: two diagonal gaps,
 * 2 (P − D)/(√3 P). 45°: the smaller of the transverse gap and two diagonal gaps.
 */
export function minimumAreaFraction(layout: Layout, pitchRatio: number): number {
  const gap = pitchRatio - 1
  if (layout === 'triangular60')
    return Math.min((2 * gap) / (Math.sqrt(3) * pitchRatio), 1 - 1 / (Math.sqrt(3) * pitchRatio))
  if (layout === 'square45') {
    const sT = Math.SQRT2 * pitchRatio
    return Math.min(sT - 1, 2 * gap) / sT
  }
  return gap / pitchRatio
}

/** Mean void fraction of the tube field, 1 − π D²/(4 sT sL), the area for the velocity in the shear laws. */
export function voidFraction(layout: Layout, pitchRatio: number): number {
  const a = transversePitchFactor(layout) * pitchRatio
  const b = rowPitchFactor(layout) * pitchRatio
  return 1 - Math.PI / (4 * a * b)
}

/** Width of a rectangular bundle, (tubesPerRow + ½ if staggered) sT, m. */
export function rectangularWidth(layout: Layout, tubePitch: number, tubesPerRow: number): number {
  return (tubesPerRow + (isStaggered(layout) ? 0.5 : 0)) * transversePitchFactor(layout) * tubePitch
}

/** Height of a bundle over its tubes, (rows − 1) sL + Do, m. */
export function bundleHeight(
  layout: Layout,
  tubePitch: number,
  rows: number,
  outsideDiameter: number,
): number {
  return (rows - 1) * rowPitchFactor(layout) * tubePitch + outsideDiameter
}

/** Diameter of a circular bundle: its height. */
export function circularDiameter(
  layout: Layout,
  tubePitch: number,
  rows: number,
  outsideDiameter: number,
): number {
  return bundleHeight(layout, tubePitch, rows, outsideDiameter)
}

/**
 * Tubes of row `row` (1 = top) of a circular bundle: lattice sites whose centres lie on the chord of the circle through
 * the centres of the first and last row. In staggered layouts even rows stand half a pitch aside. At least one tube.
 */
export function circularRowTubes(layout: Layout, rows: number, row: number): number {
  const sL = rowPitchFactor(layout)
  const sT = transversePitchFactor(layout)
  const radius = ((rows - 1) * sL) / 2
  const y = (row - 1) * sL - radius
  // 1e-9 keeps a site that lies on the circle from being lost to rounding.
  const half = Math.sqrt(Math.max(0, radius * radius - y * y)) / sT + 1e-9
  const aside = isStaggered(layout) && row % 2 === 0
  const sites = aside ? 2 * Math.floor(half + 0.5) : 1 + 2 * Math.floor(half)
  return Math.max(1, sites)
}

/** HEDH count of a one-pass circular bundle, 0.78 (Db − D)²/(C1 P²), C1 = 13/15 (30°, 60°) or 1 (45°, 90°). */
export function hedhTubeCount(
  layout: Layout,
  bundleDiameter: number,
  outsideDiameter: number,
  tubePitch: number,
): number {
  const d = bundleDiameter - outsideDiameter
  return (0.78 * d * d) / (hedhConstant(layout) * tubePitch * tubePitch)
}

/** HEDH bundle diameter for N tubes, D + P (C1 N/0.78)^0.5, m. */
export function hedhBundleDiameter(
  layout: Layout,
  tubes: number,
  outsideDiameter: number,
  tubePitch: number,
): number {
  return outsideDiameter + tubePitch * Math.sqrt((hedhConstant(layout) * tubes) / 0.78)
}

function hedhConstant(layout: Layout): number {
  return layout === 'triangular30' || layout === 'triangular60' ? 13 / 15 : 1
}

/** Mass of plain tubes, N L ρ (π/4)(Do² − Di²), kg. */
export function tubeMass(
  tubes: number,
  length: number,
  density: number,
  outsideDiameter: number,
  insideDiameter: number,
): number {
  return (
    (tubes *
      length *
      density *
      Math.PI *
      (outsideDiameter - insideDiameter) *
      (outsideDiameter + insideDiameter)) /
    4
  )
}

/** Wall resistance on the outside area, Do ln(Do/Di)/(2 k), m² K/W. */
export function wallResistance(
  outsideDiameter: number,
  insideDiameter: number,
  conductivity: number,
): number {
  return (outsideDiameter * Math.log(outsideDiameter / insideDiameter)) / (2 * conductivity)
}

/**
 * Resistance of everything but the film on the outside area, R_fo + Do ln(Do/Di)/(2k) + (Do/Di)(R_fi + 1/h_i), m² K/W.
 * Its inverse is U_in; 1/U = 1/h_o + 1/U_in at one place of one row.
 */
export function innerResistance(
  outsideDiameter: number,
  insideDiameter: number,
  conductivity: number,
  insideFouling: number,
  outsideFouling: number,
  insideCoefficient: number,
): number {
  return (
    outsideFouling +
    wallResistance(outsideDiameter, insideDiameter, conductivity) +
    (outsideDiameter / insideDiameter) * (insideFouling + 1 / insideCoefficient)
  )
}

export const geometryCards = [
  {
    id: 'geometry.layout',
    choice: 'geometry',
    name: 'Layouts, narrowest area and mean void fraction',
    equation:
      'sT/P = 1, 1.732, 1.414, 1; sL/P = 0.866, 0.5, 0.7071, 1 (30, 60, 45, 90 deg); fmin = (P-D)/P (30, 90), 2(P-D)/(1.732 P) (60), min(1.414P-D, 2(P-D))/(1.414 P) (45); eps = 1 - pi D^2/(4 sT sL)',
    symbols: {
      P: 'tube pitch, m',
      D: 'outside diameter, m',
      sT: 'transverse pitch, m',
      sL: 'row spacing, m',
    },
    source: ['plane geometry', 'Nobbs and Mayhew 1976 (mean void area with shear laws, from memory)'],
    range: { pitchRatio: [1.25, 2.5] },
    rangeText: 'Rigid ligaments need a pitch ratio of 1.25; 1.25 to 1.5 is usual.',
    scatter: 'exact',
    sigmaLn: null,
    evidence: 'derived',
    requires: [],
    available: true,
  },
  {
    id: 'geometry.circular',
    choice: 'geometry',
    name: 'Circular bundle by chords',
    equation:
      'tubes of row n = lattice sites on the chord at its height; N = 0.78 (Db-D)^2/(C1 P^2) as a check',
    symbols: { Db: 'bundle diameter over the tubes, m', C1: '13/15 (30, 60 deg), 1 (45, 90 deg)' },
    source: ['lattice count', 'Heat Exchanger Design Handbook (count formula)'],
    range: { rows: [3, 400] },
    scatter: 'published count methods differ by 5 %',
    sigmaLn: null,
    evidence: 'derived',
    requires: [],
    available: true,
    notes: ['No pass lanes are deducted: 2 to 5 % for two passes, 5 to 10 % for four (assumption).'],
  },
  {
    id: 'geometry.tubeMass',
    choice: 'geometry',
    name: 'Tube mass',
    equation: 'm = N L rho (pi/4)(Do^2 - Di^2)',
    symbols: { N: 'tubes', L: 'length, m', rho: 'density of the tube material, kg/m3' },
    source: ['definition'],
    range: {},
    scatter: 'exact',
    sigmaLn: null,
    evidence: 'definition',
    requires: [],
    available: true,
  },
  {
    id: 'wall.resistance',
    choice: 'wall',
    name: 'Resistances inside the film',
    equation: '1/U_in = R_fo + Do ln(Do/Di)/(2 k_w) + (Do/Di)(R_fi + 1/h_i)',
    symbols: { R_fo: 'outside fouling, m2 K/W', R_fi: 'inside fouling on the inside area, m2 K/W' },
    source: ['definition'],
    range: {},
    scatter: 'conductivity ±5 %; fouling a factor of 2',
    sigmaLn: null,
    evidence: 'definition',
    requires: [],
    available: true,
    notes: [
      'Outside fouling lies inside the film temperature: Tw of the film laws is the film-side surface.',
    ],
  },
] as const satisfies readonly Card[]
