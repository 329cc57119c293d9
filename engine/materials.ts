/** Tube materials and the economic defaults, each number with where it comes from. */

/** A tube material; SI units. */
export type Material = {
  id: string
  name: string
  /** At about 40 °C [W/(m·K)]. */
  conductivity: number
  /** [kg/m³] */
  density: number
  /** Usual water velocity in the tubes [m/s]: below it fouling, above it erosion. An assumption, not a limit of nature. */
  velocityRange: [number, number]
  velocityBasis: string
  /** Relative scatter of the conductivity. */
  scatter: number
  evidence: string
  source: string
}

const evidence = 'from memory, unverified'
const velocityBasis = 'assumption'
const handbook = 'handbook value at about 40 °C, from memory'

const material = (
  id: string,
  name: string,
  conductivity: number,
  density: number,
  highestVelocity: number,
  scatter: number,
): Material => ({
  id,
  name,
  conductivity,
  density,
  velocityRange: [1, highestVelocity],
  velocityBasis,
  scatter,
  evidence,
  source: handbook,
})

export const materials: readonly Material[] = [
  material('copper', 'Copper', 385, 8940, 2.2, 0.05),
  material('aluminium-brass', 'Aluminium brass', 100, 8500, 2.2, 0.1),
  material('admiralty', 'Admiralty brass', 111, 8530, 2.2, 0.1),
  material('cuni-90-10', 'Copper-nickel 90/10', 47, 8940, 2.75, 0.1),
  material('cuni-70-30', 'Copper-nickel 70/30', 29, 8940, 3.5, 0.1),
  material('titanium', 'Titanium grade 2', 20.5, 4510, 4.5, 0.05),
  material('stainless-304', 'Stainless steel 304', 15, 7930, 4, 0.1),
  material('stainless-316', 'Stainless steel 316', 14.5, 7930, 4, 0.1),
  material('duplex-2205', 'Duplex stainless steel 2205', 16, 7850, 4, 0.1),
  material('super-ferritic', 'Super-ferritic stainless steel', 17, 7850, 4, 0.1),
  material('carbon-steel', 'Carbon steel', 51, 7850, 3, 0.05),
  material('aluminium', 'Aluminium', 200, 2700, 2, 0.05),
]

/** The material with this id. */
export function findMaterial(id: string): Material | undefined {
  return materials.find((item) => item.id === id)
}

/** Defaults for a case's `economics`; every one an assumption. */
export const economicsDefaults = {
  /** Price of tube field per outside area, plain tubes [money/m²]. */
  tubePrice: 120,
  /** [money/kWh] */
  energyPrice: 0.1,
  hoursPerYear: 8000,
  years: 15,
  /** Yearly interest as a fraction. */
  interest: 0.08,
  /** Pump and motor together, as a fraction. */
  pumpEfficiency: 0.7,
} as const

/** What each economic default means and rests on. */
export const economicsBasis: Readonly<
  Record<keyof typeof economicsDefaults, { label: string; unit: string; evidence: string; source: string }>
> = {
  tubePrice: {
    label: 'Tube field price per outside area',
    unit: '1/m²',
    evidence: 'assumption',
    source: 'round figure for plain tubes; enter your own',
  },
  energyPrice: {
    label: 'Electricity price',
    unit: '1/kWh',
    evidence: 'assumption',
    source: 'round figure; enter your own',
  },
  hoursPerYear: {
    label: 'Operating hours per year',
    unit: 'h',
    evidence: 'assumption',
    source: 'continuous duty with stops',
  },
  years: { label: 'Years of service', unit: 'a', evidence: 'assumption', source: 'common for tube bundles' },
  interest: {
    label: 'Yearly interest',
    unit: '1',
    evidence: 'assumption',
    source: 'round figure; enter your own',
  },
  pumpEfficiency: {
    label: 'Pump efficiency',
    unit: '1',
    evidence: 'assumption',
    source: 'common for centrifugal pumps with motor',
  },
}

/** Low-finned tube field costs this many times the plain price [min, max]; an assumption. */
export const finnedPriceFactor: readonly [number, number] = [1.3, 1.6]
