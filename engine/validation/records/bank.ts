// Whole banks and whole condensers through the engine, as a case file would ask for them.
import { minimumAreaFraction, voidFraction } from '#engine/correlations/geometry.ts'
import { jakob, rowPressureDrop } from '#engine/correlations/vapour-drop.ts'
import type { Result } from '#engine/result.ts'
import {
  type CheckEvidence,
  evaluated,
  fixed,
  group,
  type Input,
  R134A_40,
  STEAM_50,
  type ValidationRecord,
} from './record.ts'

const STEAM = fixed(STEAM_50)
const R134A = fixed(R134A_40)
const WATER = { properties: { density: 995.6, viscosity: 7.97e-4, conductivity: 0.6155, specificHeat: 4179 } }
const STILL = { vapourShear: 'none', vapourPressureDrop: 'none' }

const ROUNDED =
  'same properties must give the printed figure; 0.725, 0.728 and 0.729 are printed for one constant'

type Printed = {
  id: string
  title: string
  source: string
  evidence: CheckEvidence
  Ts: number
  Tw: number
  D: number
  h: number
  rows?: number
  law?: string
  latent: 'rohsenow' | 'plain' | 'threeEighths'
  fluid: { latentHeat: number; liquidSpecificHeat?: number; [property: string]: number | undefined }
}

/** Mean coefficient of a tube or bank in still vapour, with the latent heat its source uses. */
function still({ Ts, Tw, D, rows = 1, law = 'none', latent, fluid }: Printed): number {
  const x = Ts - Tw
  const properties =
    latent === 'threeEighths'
      ? { ...fluid, latentHeat: fluid.latentHeat + 0.375 * (fluid.liquidSpecificHeat as number) * x }
      : fluid
  const { meanCoefficient } = evaluated({
    fluid: { properties },
    saturationTemperature: Ts,
    drive: { kind: 'wallSubcooling', wallSubcooling: x },
    tube: { outsideDiameter: D },
    bundle: { layout: 'square90', pitchRatio: 1.5, rows, tubesPerRow: 10, length: 1 },
    methods: { ...STILL, inundation: law, latentHeat: latent === 'rohsenow' ? 'rohsenow' : 'plain' },
  })
  return meanCoefficient as number
}

const PRINTED: Printed[] = [
  {
    id: 'tube-steam-40',
    title: 'Steam at 40 °C on a 30 mm tube at 30 °C',
    source: 'Çengel and Ghajar, Heat and Mass Transfer, example 10-6',
    evidence: 'printed value seen',
    Ts: 313.15,
    Tw: 303.15,
    D: 0.03,
    h: 9294,
    latent: 'rohsenow',
    fluid: {
      liquidDensity: 994,
      vapourDensity: 0.05,
      liquidConductivity: 0.623,
      liquidViscosity: 0.00072,
      liquidSpecificHeat: 4178,
      latentHeat: 2407000,
    },
  },
  {
    id: 'tube-steam-76',
    title: 'Steam at 349 K on a 13 mm tube at 325 K',
    source: 'Kreith, Manglik and Bohn, Principles of Heat Transfer, 7th ed., example 10.4',
    evidence: 'formula seen, value computed independently',
    Ts: 349,
    Tw: 325,
    D: 0.013,
    h: 10648,
    latent: 'threeEighths',
    fluid: {
      liquidDensity: 980.9,
      vapourDensity: 0.25,
      liquidConductivity: 0.661,
      liquidViscosity: 0.000448,
      liquidSpecificHeat: 4184,
      latentHeat: 2349000,
    },
  },
  {
    id: 'bank-20-rows',
    title: 'Steam at 54 °C on 20 rows of 6 mm tubes at 25 °C',
    source: 'Incropera et al., 6th ed., example 10.4',
    evidence: 'printed value, from memory',
    Ts: 327.15,
    Tw: 298.15,
    D: 0.006,
    h: 5194,
    rows: 20,
    law: 'nusselt',
    latent: 'rohsenow',
    fluid: {
      liquidDensity: 992,
      vapourDensity: 0.098,
      liquidConductivity: 0.631,
      liquidViscosity: 0.000663,
      liquidSpecificHeat: 4178,
      latentHeat: 2373000,
    },
  },
  {
    id: 'bank-10-rows',
    title: 'Steam at 1 atm on 10 rows of 12.7 mm tubes at 98 °C',
    source: 'Holman, Heat Transfer, example 9-2',
    evidence: 'printed value, from memory',
    Ts: 373.15,
    Tw: 371.15,
    D: 0.0127,
    h: 12540,
    rows: 10,
    law: 'nusselt',
    latent: 'plain',
    fluid: { liquidDensity: 960, liquidConductivity: 0.68, liquidViscosity: 0.000282, latentHeat: 2255000 },
  },
  {
    id: 'tube-steam-100f',
    title: 'Steam at 100 °F on a 2 in tube at 80 °F',
    source: 'Çengel, solutions, problem 10-76E',
    evidence: 'printed value seen',
    Ts: 310.928,
    Tw: 299.817,
    D: 0.0508,
    h: 7801.93,
    latent: 'rohsenow',
    fluid: {
      liquidDensity: 995.067,
      vapourDensity: 0.0458128,
      liquidConductivity: 0.619603,
      liquidViscosity: 0.000761444,
      liquidSpecificHeat: 4182.61,
      latentHeat: 2412060,
    },
  },
  {
    id: 'tube-steam-95f',
    title: 'Steam at 95 °F on a 1 in tube at 85 °F',
    source: 'Çengel, solutions, problem 10-47E',
    evidence: 'printed value seen',
    Ts: 308.15,
    Tw: 302.594,
    D: 0.0254,
    h: 11027.2,
    latent: 'rohsenow',
    fluid: {
      liquidDensity: 995.067,
      liquidConductivity: 0.619603,
      liquidViscosity: 0.000761444,
      liquidSpecificHeat: 4182.61,
      latentHeat: 2419040,
    },
  },
]

const marched = (over: {
  velocity?: number
  passes?: number
  coolantEntry?: string
  inundation?: string
}): number =>
  evaluated({
    fluid: STEAM,
    saturationTemperature: 323.15,
    drive: {
      kind: 'coolant',
      coolant: WATER,
      inletTemperature: 298.15,
      velocity: over.velocity ?? 1,
      foulingResistance: 1e-4,
    },
    tube: { outsideDiameter: 0.01905, wallThickness: 0.001651, conductivity: 110 },
    bundle: {
      layout: 'triangular30',
      pitchRatio: 1.25,
      rows: 10,
      tubesPerRow: 10,
      passes: over.passes ?? 1,
      coolantEntry: over.coolantEntry ?? 'bottom',
      length: 4,
    },
    methods: { ...STILL, latentHeat: 'plain', inundation: over.inundation ?? 'condensateFlow' },
  }).duty as number

const r134Bank = (latentHeat: string): Result =>
  evaluated({
    fluid: R134A,
    saturationTemperature: 313.15,
    drive: { kind: 'wallSubcooling', wallSubcooling: 5 },
    tube: { outsideDiameter: 0.01905 },
    bundle: { layout: 'triangular30', pitchRatio: 1.25, rows: 10, tubesPerRow: 10, length: 1 },
    methods: { ...STILL, latentHeat },
  })

const PLAUSIBLE: { id: string; title: string; case: Input; length: number; U: number }[] = [
  {
    id: 'r134a',
    title: 'R134a, water-cooled, 300 kW',
    length: 5.19,
    U: 1046,
    case: {
      fluid: 'r134a',
      saturationTemperature: 313.15,
      duty: 300e3,
      drive: {
        kind: 'coolant',
        coolant: 'water',
        inletTemperature: 303.15,
        velocity: 1.5,
        foulingResistance: 1.76e-4,
      },
      tube: { outsideDiameter: 0.01905, wallThickness: 0.001245, conductivity: 385 },
      bundle: { layout: 'triangular30', pitchRatio: 1.25, rows: 12, tubesPerRow: 12, passes: 4 },
    },
  },
  {
    id: 'steam',
    title: 'Steam surface condenser, 40 MW at 7 kPa',
    length: 4.95,
    U: 3077,
    case: {
      fluid: 'water',
      saturationPressure: 7000,
      duty: 40e6,
      drive: {
        kind: 'coolant',
        coolant: 'water',
        inletTemperature: 293.15,
        velocity: 2.2,
        foulingResistance: 4.4e-5,
      },
      tube: { outsideDiameter: 0.0254, wallThickness: 0.000711, conductivity: 20.5 },
      bundle: { layout: 'triangular30', pitchRatio: 1.3, rows: 20, tubesPerRow: 100, passes: 1 },
    },
  },
  {
    id: 'ammonia',
    title: 'Ammonia, 250 kW',
    length: 4.59,
    U: 1455,
    case: {
      fluid: 'r717',
      saturationTemperature: 308.15,
      duty: 250e3,
      drive: {
        kind: 'coolant',
        coolant: 'water',
        inletTemperature: 300.15,
        velocity: 1.8,
        foulingResistance: 1.76e-4,
      },
      tube: {
        outsideDiameter: 0.03175,
        wallThickness: 0.00277,
        conductivity: 51,
        roughness: 4.5e-5,
        outsideFoulingResistance: 1.76e-4,
      },
      bundle: { layout: 'triangular30', pitchRatio: 1.25, rows: 8, tubesPerRow: 8, passes: 4 },
    },
  },
]

const MARCH = 'independent row march, 64 segments a tube, constant properties'
const ONE_STEP = 'one integrated step a tube against 64 segments'

/** One tube with isothermal vapour, constant properties and no inundation, which has a closed form. */
const singleTube = (velocity: number, length: number, inletTemperature: number): number =>
  evaluated({
    fluid: STEAM,
    saturationTemperature: 323.15,
    drive: { kind: 'coolant', coolant: WATER, inletTemperature, velocity, foulingResistance: 1e-4 },
    tube: { outsideDiameter: 0.01905, wallThickness: 0.001651, conductivity: 110 },
    bundle: { layout: 'square90', pitchRatio: 1.25, rows: 1, tubesPerRow: 1, length },
    methods: { ...STILL, latentHeat: 'plain', inundation: 'none' },
  }).duty as number

/**
 * Vapour pressure drop of N rows of equal flux over N times the first row's loss at the inlet's flow, with a loss that goes
 * as velocity^(2 - m): the sum of ((n - 1/2)/N)^(2 - m)/N.
 */
const fallingVelocity = (rows: number): number => {
  const { vapour, rows: list } = evaluated({
    fluid: { properties: { ...STEAM.properties, vapourViscosity: 1.06e-5, pressure: 12_350 } },
    saturationTemperature: 323.15,
    drive: { kind: 'wallSubcooling', wallSubcooling: 5 },
    tube: { outsideDiameter: 0.01905 },
    bundle: { layout: 'square90', pitchRatio: 1.5, rows, tubesPerRow: 20, length: 2 },
    methods: { vapourShear: 'none', inundation: 'none', vapourPressureDrop: 'jakob', twoPhase: 'none' },
  })
  // The loss of a row follows from the last one: its flow is half a row's condensate.
  const last = list[rows - 1].vapourVelocity as number
  const inlet = 2 * rows * last
  const gap = voidFraction('square90', 1.5) / minimumAreaFraction('square90', 1.5)
  const velocity = inlet * gap
  const xi = jakob((0.0831 * velocity * 0.01905) / 1.06e-5, 1.5, 1.5, false)
  return (vapour.pressureDrop as number) / (rows * rowPressureDrop(xi, 0.0831, velocity))
}

export const bankRecords: readonly ValidationRecord[] = [
  ...PRINTED.flatMap((printed) =>
    group(
      {
        source: printed.source,
        evidence: printed.evidence,
        cards: [
          'film.nusselt',
          `latentHeat.${printed.latent === 'rohsenow' ? 'rohsenow' : 'plain'}`,
          ...(printed.law ? [`inundation.${printed.law}`] : []),
        ],
        unit: 'W/(m² K)',
        tolerance: 0.007,
        why: ROUNDED,
      },
      [{ id: printed.id, title: printed.title, expected: printed.h, obtained: () => still(printed) }],
    ),
  ),
  ...group(
    {
      source: MARCH,
      evidence: 'independent calculation',
      cards: ['film.nusselt', 'inundation.condensateFlow'],
      unit: 'W',
      tolerance: 5e-4,
      why: ONE_STEP,
    },
    [
      {
        id: 'march-clean',
        title: 'Bank of 10 × 10, no inundation',
        cards: ['film.nusselt', 'inundation.none', 'wall.resistance'],
        expected: 998773,
        obtained: () => marched({ inundation: 'none' }),
      },
      {
        id: 'march-inundated',
        title: 'Bank of 10 × 10 with condensate flow',
        expected: 960570,
        obtained: () => marched({}),
      },
      {
        id: 'march-bottom',
        title: 'Two passes, coolant from the bottom',
        expected: 1138983,
        obtained: () => marched({ velocity: 2, passes: 2 }),
      },
      {
        id: 'march-top',
        title: 'Two passes, coolant from the top',
        expected: 1130447,
        obtained: () => marched({ velocity: 2, passes: 2, coolantEntry: 'top' }),
      },
    ],
  ),
  ...group(
    {
      source: MARCH,
      evidence: 'independent calculation',
      cards: ['film.nusselt', 'latentHeat.rohsenow', 'inundation.condensateFlow'],
      unit: 'W/m',
      tolerance: 1e-5,
      why: 'same equations, printed to six digits',
    },
    [
      {
        id: 'r134a-bank',
        title: 'R134a at 5 K on 10 × 10 tubes, a metre',
        expected: 46404.5,
        obtained: () => r134Bank('rohsenow').duty as number,
      },
      {
        id: 'r134a-bank-plain',
        title: 'The same with the plain latent heat',
        cards: ['latentHeat.plain'],
        expected: 46048.9,
        obtained: () => r134Bank('plain').duty as number,
      },
      {
        id: 'r134a-last-row',
        title: 'Its tenth row',
        unit: 'W/(m² K)',
        expected: 1348.54,
        obtained: () => r134Bank('rohsenow').rows[9].coefficient,
      },
    ],
  ),
  ...group(
    {
      source:
        'closed form of the isothermal tube, A = m cp [(4/C)(x₁^(1/4) − x₂^(1/4)) + (3/(4 U)) ln(x₁/x₂)]',
      evidence: 'independent calculation',
      cards: ['film.nusselt', 'wall.resistance'],
      unit: 'W',
      tolerance: 5e-4,
      why: 'one integrated step a tube against the exact integral',
    },
    [
      {
        id: 'closed-form-4',
        title: 'One tube of 4 m, 1 m/s from 25 °C',
        expected: 9987.7301,
        obtained: () => singleTube(1, 4, 298.15),
      },
      {
        id: 'closed-form-6',
        title: 'One tube of 6 m, 1 m/s from 25 °C',
        expected: 12980.865,
        obtained: () => singleTube(1, 6, 298.15),
      },
      {
        id: 'closed-form-3',
        title: 'One tube of 3 m, 2 m/s from 20 °C',
        expected: 13399.689,
        obtained: () => singleTube(2, 3, 293.15),
      },
    ],
  ),
  ...group(
    {
      source: 'sum of ((n − 1/2)/N)^1.85/N, uniform condensation and a loss that goes as Re^−0.15',
      evidence: 'independent calculation',
      cards: ['vapourPressureDrop.jakob'],
      tolerance: 1e-3,
      why: 'saturation falls with pressure and condensation with it',
    },
    [5, 20].map((rows) => ({
      id: `falling-velocity-${rows}`,
      title: `Vapour pressure drop of ${rows} rows over ${rows} rows at the inlet’s flow`,
      expected: Array.from({ length: rows }, (_, n) => ((n + 0.5) / rows) ** 1.85 / rows).reduce(
        (a, b) => a + b,
      ),
      obtained: () => fallingVelocity(rows),
    })),
  ),
  ...PLAUSIBLE.flatMap(({ id, title, case: kase, length, U }) =>
    group(
      {
        source: 'independent march; common practice, no published source',
        evidence: 'common practice',
        cards: [],
        tolerance: 0.02,
        why: 'agreed to three digits',
      },
      [
        {
          id: `plausible-${id}-length`,
          title: `${title}: length`,
          unit: 'm',
          expected: length,
          obtained: () => evaluated(kase).tubeLength as number,
        },
        {
          id: `plausible-${id}-u`,
          title: `${title}: overall coefficient`,
          unit: 'W/(m² K)',
          expected: U,
          obtained: () => evaluated(kase).overallCoefficient as number,
        },
      ],
    ),
  ),
]
