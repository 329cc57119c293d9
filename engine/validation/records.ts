// What the engine is checked against: each record with its source, how good that source is, what it prints and what the
// engine obtains. The tests, the report in the repository and the Library's page all walk this one list.
import { parseCase } from '#engine/case.ts'
import { NUSSELT_TUBE_CONSTANT, nusseltTube } from '#engine/correlations/film.ts'
import { churchill, colebrookTurbulent } from '#engine/correlations/friction.ts'
import { hedhTubeCount } from '#engine/correlations/geometry.ts'
import {
  columnSheetToSheet,
  dropletToDropletColumn,
  eissenbergRowMean,
  galileo,
  kernRowLocal,
  kernRowMean,
  nusseltRowLocal,
  nusseltRowMean,
} from '#engine/correlations/inundation.ts'
import { butterworth, rose, shekriladzeGomelauri } from '#engine/correlations/shear.ts'
import {
  dittusBoelterTurbulent,
  gnielinski,
  gnielinskiFromFriction,
  petukhovFromFriction,
} from '#engine/correlations/tube-side.ts'
import { gaddisGnielinski, ishihara, zukauskas } from '#engine/correlations/vapour-drop.ts'
import { evaluate } from '#engine/evaluate.ts'
import type { Result } from '#engine/result.ts'

/** How good the expected value is, best first. */
export const EVIDENCE = [
  'printed value seen',
  'printed value, from memory',
  'formula seen, value computed independently',
  'value held by a public formula library',
  'independent calculation',
  'common practice',
] as const
export type CheckEvidence = (typeof EVIDENCE)[number]

export type ValidationRecord = {
  id: string
  title: string
  source: string
  evidence: CheckEvidence
  /** Card ids that the record speaks for. */
  cards: readonly string[]
  unit: string
  expected: number
  obtained: () => number
  /** Relative. */
  tolerance: number
  why: string
}

type Input = Record<string, unknown>

function evaluated(input: Input): Result {
  const parsed = parseCase(input)
  if (!parsed.ok) throw new Error(parsed.faults.map(({ path, problem }) => `${path}: ${problem}`).join('; '))
  return evaluate(parsed.case)
}

// Fixed property sets of the numeric checks: steam near 50 °C, R134a near 40 °C, water near 30 °C.
const STEAM = {
  properties: {
    liquidDensity: 990.2,
    latentHeat: 2.382e6,
    liquidViscosity: 5.96e-4,
    liquidConductivity: 0.6375,
    vapourDensity: 0.0831,
    liquidSpecificHeat: 4180,
  },
}
const R134A = {
  properties: {
    liquidDensity: 1146.7,
    latentHeat: 1.63e5,
    liquidViscosity: 1.614e-4,
    liquidConductivity: 0.0747,
    vapourDensity: 50.09,
    liquidSpecificHeat: 1498,
    surfaceTension: 6.13e-3,
  },
}
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

const check = (
  id: string,
  title: string,
  source: string,
  evidence: CheckEvidence,
  cards: string[],
  unit: string,
  expected: number,
  obtained: () => number,
  tolerance: number,
  why: string,
): ValidationRecord => ({ id, title, source, evidence, cards, unit, expected, obtained, tolerance, why })

const MARCH = 'independent row march, 64 segments a tube, constant properties'
const NOTES = 'independent double-precision calculation from the printed formula'

export const validationRecords: readonly ValidationRecord[] = [
  ...PRINTED.map((printed) =>
    check(
      printed.id,
      printed.title,
      printed.source,
      printed.evidence,
      [
        'film.nusselt',
        `latentHeat.${printed.latent === 'rohsenow' ? 'rohsenow' : 'plain'}`,
        ...(printed.law ? [`inundation.${printed.law}`] : []),
      ],
      'W/(m² K)',
      printed.h,
      () => still(printed),
      0.007,
      ROUNDED,
    ),
  ),
  check(
    'march-clean',
    'Bank of 10 × 10, no inundation',
    MARCH,
    'independent calculation',
    ['film.nusselt', 'inundation.none', 'wall.resistance'],
    'W',
    998773,
    () => marched({ inundation: 'none' }),
    5e-4,
    'one integrated step a tube against 64 segments',
  ),
  check(
    'march-inundated',
    'Bank of 10 × 10 with condensate flow',
    MARCH,
    'independent calculation',
    ['film.nusselt', 'inundation.condensateFlow'],
    'W',
    960570,
    () => marched({}),
    5e-4,
    'one integrated step a tube against 64 segments',
  ),
  check(
    'march-bottom',
    'Two passes, coolant from the bottom',
    MARCH,
    'independent calculation',
    ['inundation.condensateFlow'],
    'W',
    1138983,
    () => marched({ velocity: 2, passes: 2 }),
    5e-4,
    'one integrated step a tube against 64 segments',
  ),
  check(
    'march-top',
    'Two passes, coolant from the top',
    MARCH,
    'independent calculation',
    ['inundation.condensateFlow'],
    'W',
    1130447,
    () => marched({ velocity: 2, passes: 2, coolantEntry: 'top' }),
    5e-4,
    'one integrated step a tube against 64 segments',
  ),
  check(
    'r134a-bank',
    'R134a at 5 K on 10 × 10 tubes, a metre',
    MARCH,
    'independent calculation',
    ['film.nusselt', 'latentHeat.rohsenow', 'inundation.condensateFlow'],
    'W/m',
    46404.5,
    () => r134Bank('rohsenow').duty as number,
    1e-5,
    'same equations, printed to six digits',
  ),
  check(
    'r134a-bank-plain',
    'The same with the plain latent heat',
    MARCH,
    'independent calculation',
    ['latentHeat.plain'],
    'W/m',
    46048.9,
    () => r134Bank('plain').duty as number,
    1e-5,
    'same equations, printed to six digits',
  ),
  check(
    'r134a-last-row',
    'Its tenth row',
    MARCH,
    'independent calculation',
    ['inundation.condensateFlow'],
    'W/(m² K)',
    1348.54,
    () => r134Bank('rohsenow').rows[9].coefficient,
    1e-5,
    'same equations, printed to six digits',
  ),
  check(
    'nusselt-constant',
    'Constant of the horizontal tube',
    'quadrature of ∫ sin^(1/3), 2.587110',
    'independent calculation',
    ['film.nusselt'],
    '',
    0.72802,
    () => NUSSELT_TUBE_CONSTANT,
    1e-4,
    '0.728 is the rounded constant in use',
  ),
  check(
    'nusselt-steam',
    'Steam at 50 °C, 19.05 mm, 10 K',
    NOTES,
    'formula seen, value computed independently',
    ['film.nusselt'],
    'W/(m² K)',
    11039.8,
    () => nusseltTube(0.01905, 10, 990.2, 0.0831, 5.96e-4, 0.6375, 2.382e6 + 0.68 * 4180 * 10),
    1e-4,
    'printed to six digits',
  ),
  check(
    'shear-butterworth',
    'Shear limit of Butterworth’s form',
    'limit of the printed formula',
    'independent calculation',
    ['vapourShear.butterworth'],
    '',
    0.5883,
    () => butterworth(1e8, 1) / 1e4,
    1e-3,
    'a limit',
  ),
  check(
    'still-butterworth',
    'Its limit in still vapour',
    'limit of the printed formula',
    'independent calculation',
    ['vapourShear.butterworth'],
    '',
    0.7298,
    () => butterworth(0, 1e8) / 100,
    1e-3,
    'a limit',
  ),
  check(
    'shear-sg',
    'Shekriladze and Gomelauri at F = 1',
    'Shekriladze and Gomelauri 1966, Int. J. Heat Mass Transfer 9:581',
    'formula seen, value computed independently',
    ['vapourShear.shekriladzeGomelauri'],
    '',
    1.0399,
    () => shekriladzeGomelauri(1e6, 1e12) / 1e3,
    2e-4,
    'printed to five digits',
  ),
  check(
    'shear-rose',
    'Rose at F = 1',
    'Rose 1984, Int. J. Heat Mass Transfer 27:39',
    'formula seen, value computed independently',
    ['vapourShear.rose'],
    '',
    1.06599,
    () => rose(1e6, 1e12) / 1e3,
    2e-4,
    'printed to five digits',
  ),
  check(
    'rows-nusselt',
    'Mean of ten tubes in a line, Nusselt',
    'quoted in handbooks',
    'formula seen, value computed independently',
    ['inundation.nusselt'],
    '',
    0.562341,
    () => nusseltRowMean(10),
    1e-5,
    'printed to six digits',
  ),
  check(
    'rows-kern',
    'Mean of ten tubes in a line, Kern',
    'Kern 1950, quoted in handbooks',
    'formula seen, value computed independently',
    ['inundation.kern'],
    '',
    0.681292,
    () => kernRowMean(10),
    1e-5,
    'printed to six digits',
  ),
  check(
    'rows-eissenberg',
    'Mean of ten tubes in a line, Eissenberg',
    'Eissenberg 1972, quoted in handbooks',
    'formula seen, value computed independently',
    ['inundation.eissenberg'],
    '',
    0.836183,
    () => eissenbergRowMean(10),
    1e-5,
    'printed to six digits',
  ),
  check(
    'row-10-nusselt',
    'Tenth tube alone, Nusselt',
    NOTES,
    'formula seen, value computed independently',
    ['inundation.nusselt'],
    '',
    0.427261,
    () => nusseltRowLocal(10),
    1e-5,
    'printed to six digits',
  ),
  check(
    'row-10-kern',
    'Tenth tube alone, Kern',
    NOTES,
    'formula seen, value computed independently',
    ['inundation.kern'],
    '',
    0.572669,
    () => kernRowLocal(10),
    1e-5,
    'printed to six digits',
  ),
  check(
    'galileo-water-25',
    'Modified Galileo number of water at 25 °C',
    'Hu and Jacobi 1996, J. Heat Transfer 118:616 (constants from memory)',
    'formula seen, value computed independently',
    ['inundation.drainageMode'],
    '',
    60400500000,
    () => galileo(997.004, 0.0719722, 0.000890036),
    1e-4,
    'printed to six digits',
  ),
  check(
    'mode-first-columns',
    'First columns, water at 25 °C',
    'Hu and Jacobi 1996 (constants from memory)',
    'formula seen, value computed independently',
    ['inundation.drainageMode'],
    '',
    133.385,
    () => dropletToDropletColumn(60400500000),
    1e-4,
    'printed to six digits',
  ),
  check(
    'mode-sheet',
    'Sheet, water at 25 °C',
    'Hu and Jacobi 1996 (constants from memory)',
    'formula seen, value computed independently',
    ['inundation.drainageMode'],
    '',
    507.101,
    () => columnSheetToSheet(60400500000),
    1e-4,
    'printed to six digits',
  ),
  check(
    'gnielinski',
    'Water at 30 °C, 2 m/s, 15.748 mm bore, 4 m',
    NOTES,
    'formula seen, value computed independently',
    ['tubeSide.gnielinski'],
    '',
    243.55,
    () => gnielinski(39344, 5.411, 0.015748 / 4),
    5e-4,
    'printed to five digits',
  ),
  check(
    'gnielinski-printed',
    'Water at 50 °C, 25 kg/min in a 25 mm bore, from the friction factor',
    'Sukhatme, A Textbook on Heat Transfer, example 8.3 (Fanning factor 0.005635)',
    'printed value seen',
    ['tubeSide.gnielinski'],
    '',
    198.39,
    () => gnielinskiFromFriction((4 * (25 / 60)) / (Math.PI * 0.025 * 988.1 * 5.56e-7), 3.54, 4 * 0.005635),
    1e-3,
    'same properties and friction factor',
  ),
  check(
    'gnielinski-transition',
    'Transition at Re 3000, Pr 5.41',
    'Gnielinski 2013, Int. J. Heat Mass Transfer 63:134 (first page seen)',
    'formula seen, value computed independently',
    ['tubeSide.gnielinski'],
    '',
    15.62,
    () => gnielinski(3000, 5.41, 0.00394),
    1e-3,
    'printed to four digits',
  ),
  check(
    'dittus-boelter',
    'Water at 300 K, 1 kg/s in 25 mm',
    'Incropera et al., 6th ed., example 11.5',
    'printed value, from memory',
    ['tubeSide.dittusBoelter'],
    '',
    308,
    () => dittusBoelterTurbulent(59567, 5.83),
    5e-3,
    'printed to three digits',
  ),
  check(
    'petukhov',
    'Petukhov, Kirillov and Popov, Re 1e5, Pr 1.2, f 0.0185',
    'public formula library (ht)',
    'value held by a public formula library',
    ['tubeSide.gnielinski'],
    '',
    250.119,
    () => petukhovFromFriction(1e5, 1.2, 0.0185),
    1e-4,
    'held to six digits',
  ),
  check(
    'churchill',
    'Churchill at Re 1e5, e/D 1e-4',
    NOTES,
    'formula seen, value computed independently',
    ['tubeFriction.churchill'],
    '',
    0.018463,
    () => churchill(1e5, 1e-4),
    1e-4,
    'printed to five digits',
  ),
  check(
    'colebrook',
    'Colebrook at Re 1e5, e/D 1e-4',
    'public formula library (fluids)',
    'value held by a public formula library',
    ['tubeFriction.colebrook'],
    '',
    0.0185139,
    () => colebrookTurbulent(1e5, 1e-4),
    1e-5,
    'held to six digits',
  ),
  check(
    'gaddis-1e3',
    'Gaddis and Gnielinski, staggered 1.25, Re 1e3',
    NOTES,
    'formula seen, value computed independently',
    ['vapourPressureDrop.gaddisGnielinski'],
    '',
    0.968,
    () => gaddisGnielinski(1e3, 1.25, 1.25 * Math.sqrt(0.75), true, 20),
    2e-3,
    'printed to three digits',
  ),
  check(
    'zukauskas-1e3',
    'Zukauskas, staggered 1.5, Re 1e4',
    'two independent transcriptions',
    'formula seen, value computed independently',
    ['vapourPressureDrop.zukauskas'],
    '',
    0.385,
    () => zukauskas(1e4, 1.5, 1.5 * Math.sqrt(0.75), true),
    2e-3,
    'printed to three digits',
  ),
  check(
    'ishihara',
    'Two-phase multiplier at X 0.0137',
    NOTES,
    'formula seen, value computed independently',
    ['twoPhase.ishihara'],
    '',
    1.1098,
    () => ishihara(1, 0.0137 ** 2),
    2e-4,
    'X printed to three digits',
  ),
  check(
    'tube-count',
    'Tubes in a 1.2 m circle, 25 mm on 31.25 mm, triangular',
    'public formula library (ht), HEDH',
    'value held by a public formula library',
    ['geometry.circular'],
    '',
    1272,
    () => Math.floor(hedhTubeCount('triangular30', 1.2, 0.025, 0.03125)),
    1e-9,
    'one of four published counts: 1285, 1272, 1340, 1297',
  ),
  ...PLAUSIBLE.flatMap(({ id, title, case: kase, length, U }) => [
    check(
      `plausible-${id}-length`,
      `${title}: length`,
      'independent march; common practice, no published source',
      'common practice',
      [],
      'm',
      length,
      () => evaluated(kase).tubeLength as number,
      0.02,
      'agreed to three digits',
    ),
    check(
      `plausible-${id}-u`,
      `${title}: overall coefficient`,
      'independent march; common practice, no published source',
      'common practice',
      [],
      'W/(m² K)',
      U,
      () => evaluated(kase).overallCoefficient as number,
      0.02,
      'agreed to three digits',
    ),
  ]),
]

export type ValidationRow = Omit<ValidationRecord, 'obtained'> & {
  obtained: number
  deviation: number
  within: boolean
}

/** Every record evaluated now; a few milliseconds. */
export function validationReport(): ValidationRow[] {
  return validationRecords.map(({ obtained, ...record }) => {
    const value = obtained()
    const deviation = value / record.expected - 1
    return { ...record, obtained: value, deviation, within: Math.abs(deviation) <= record.tolerance }
  })
}
