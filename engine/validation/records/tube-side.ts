// The coolant's side, the wall, the bundle's geometry and its cost.
import { capitalRecoveryFactor, pumpingPower } from '#engine/correlations/economics.ts'
import {
  churchill,
  colebrook,
  colebrookTurbulent,
  coolantPressureDrop,
  konakov,
  passPressureDrop,
} from '#engine/correlations/friction.ts'
import {
  hedhBundleDiameter,
  hedhTubeCount,
  innerResistance,
  LAYOUTS,
  minimumAreaFraction,
  tubeMass,
  voidFraction,
  wallResistance,
} from '#engine/correlations/geometry.ts'
import {
  dittusBoelterTurbulent,
  entryFactor,
  gnielinski,
  gnielinskiFromFriction,
  gnielinskiTurbulent,
  hausen,
  laminarUniformFlux,
  laminarUniformTemperature,
  petukhovFromFriction,
  siederTateLaminar,
} from '#engine/correlations/tube-side.ts'
import { group, NOTES, SIX_DIGITS, type ValidationRecord } from './record.ts'

const SEEN = 'formula seen, value computed independently' as const
const LIBRARY = 'value held by a public formula library' as const
const GRAETZ = 1000 * 5.41 * 0.00394
const AREA = { triangular30: 0.2, triangular60: 0.231, square45: 0.283, square90: 0.2 }
const VOID = { triangular30: 0.42, triangular60: 0.42, square45: 0.497, square90: 0.497 }

export const tubeSideRecords: readonly ValidationRecord[] = [
  ...group(
    {
      source: NOTES,
      evidence: SEEN,
      cards: ['tubeSide.gnielinski'],
      tolerance: 5e-4,
      why: 'printed to four or five digits',
    },
    [
      {
        id: 'konakov',
        title: 'Smooth friction of the heat transfer, Re 39 344',
        expected: 0.02181,
        obtained: () => konakov(39344),
      },
      {
        id: 'gnielinski',
        title: 'Water at 30 °C, 2 m/s, 15.748 mm bore, 4 m',
        expected: 243.55,
        obtained: () => gnielinski(39344, 5.411, 0.015748 / 4),
      },
      {
        id: 'dittus-boelter-water',
        title: 'The same after Dittus and Boelter',
        cards: ['tubeSide.dittusBoelter'],
        expected: 214.3,
        obtained: () => dittusBoelterTurbulent(39344, 5.411),
      },
      {
        id: 'gnielinski-2300',
        title: 'End of laminar flow, Pr 5.41',
        expected: 6.17,
        tolerance: 1e-3,
        why: 'printed to three digits',
        obtained: () => gnielinski(2300, 5.41, 0.00394),
      },
      {
        id: 'gnielinski-transition',
        title: 'Transition at Re 3000, Pr 5.41',
        source: 'Gnielinski 2013, Int. J. Heat Mass Transfer 63:134 (first page seen)',
        expected: 15.62,
        obtained: () => gnielinski(3000, 5.41, 0.00394),
      },
      {
        id: 'gnielinski-4000',
        title: 'Start of turbulent flow, Pr 5.41',
        expected: 29.12,
        obtained: () => gnielinski(4000, 5.41, 0.00394),
      },
      {
        id: 'gnielinski-unblended',
        title: 'Turbulent law without transition at Re 2301',
        expected: 14.26,
        obtained: () => gnielinskiTurbulent(2301, 5.41, 0.00394),
      },
      {
        id: 'laminar',
        title: 'Laminar, Re 1000, Pr 5.41',
        expected: 4.876,
        obtained: () => laminarUniformTemperature(1000, 5.41, 0.00394),
      },
      { id: 'hausen', title: 'Hausen, the same', cards: [], expected: 4.749, obtained: () => hausen(GRAETZ) },
      {
        id: 'sieder-tate',
        title: 'Sieder and Tate, the same',
        cards: ['tubeSide.siederTate'],
        expected: 5.156,
        obtained: () => siederTateLaminar(GRAETZ),
      },
      {
        id: 'laminar-long',
        title: 'Laminar in a long tube, wall of one temperature',
        source: 'Graetz, 3.66',
        expected: 3.66,
        tolerance: 1e-3,
        why: 'exact 3.6568',
        obtained: () => laminarUniformTemperature(100, 5, 1e-12),
      },
      {
        id: 'laminar-long-flux',
        title: 'Laminar in a long tube, one flux',
        source: '48/11',
        cards: [],
        expected: 48 / 11,
        tolerance: 1e-3,
        why: 'exact',
        obtained: () => laminarUniformFlux(100, 5, 1e-12),
      },
      {
        id: 'entry',
        title: 'Entry of the mean at D/L 0.01',
        source: 'Gnielinski; VDI Heat Atlas',
        expected: 1.0464,
        tolerance: 1e-4,
        why: 'arithmetic; the local form has a third of it',
        obtained: () => entryFactor(0.01),
      },
    ],
  ),
  ...group(
    {
      source: 'Sukhatme, A Textbook on Heat Transfer, example 8.3 (Fanning factor 0.005635)',
      evidence: 'printed value seen',
      cards: ['tubeSide.gnielinski'],
      tolerance: 5e-4,
      why: 'same properties and friction factor',
    },
    [
      {
        id: 'gnielinski-printed',
        title: 'Water at 50 °C, 25 kg/min in a 25 mm bore, from the friction factor',
        expected: 198.39,
        obtained: () =>
          gnielinskiFromFriction((4 * (25 / 60)) / (Math.PI * 0.025 * 988.1 * 5.56e-7), 3.54, 4 * 0.005635),
      },
    ],
  ),
  ...group(
    {
      source: 'Incropera et al., 6th ed., example 11.5',
      evidence: 'printed value, from memory',
      cards: ['tubeSide.dittusBoelter'],
      tolerance: 3e-3,
      why: 'printed to three digits',
    },
    [
      {
        id: 'dittus-boelter',
        title: 'Water at 300 K, 1 kg/s in 25 mm',
        expected: 308,
        obtained: () => dittusBoelterTurbulent(59567, 5.83),
      },
    ],
  ),
  ...group(
    {
      source: 'public formula library (ht)',
      evidence: LIBRARY,
      cards: ['tubeSide.gnielinski'],
      tolerance: 1e-4,
      why: 'held to six digits',
    },
    [
      {
        id: 'petukhov',
        title: 'Petukhov, Kirillov and Popov, Re 1e5, Pr 1.2, f 0.0185',
        expected: 250.119,
        obtained: () => petukhovFromFriction(1e5, 1.2, 0.0185),
      },
    ],
  ),
  ...group(
    {
      source: NOTES,
      evidence: SEEN,
      cards: ['tubeFriction.churchill'],
      tolerance: 2e-4,
      why: 'printed to four or five digits',
    },
    [
      {
        id: 'churchill',
        title: 'Churchill at Re 1e5, e/D 1e-4',
        expected: 0.018463,
        tolerance: 1e-4,
        obtained: () => churchill(1e5, 1e-4),
      },
      {
        id: 'churchill-rough',
        title: 'Churchill at Re 39 345 in a fouled tube',
        expected: 0.02925,
        obtained: () => churchill(39345, 45e-6 / 0.015748),
      },
      {
        id: 'colebrook-rough',
        title: 'Colebrook, the same',
        cards: ['tubeFriction.colebrook'],
        expected: 0.02892,
        obtained: () => colebrookTurbulent(39345, 45e-6 / 0.015748),
      },
      {
        id: 'churchill-drawn',
        title: 'Churchill at Re 39 344 in a drawn tube',
        expected: 0.02228,
        tolerance: 3e-4,
        obtained: () => churchill(39344, 1.5e-6 / 0.015748),
      },
      {
        id: 'coolant-drop',
        title: 'Two passes of 4 m at 2 m/s',
        cards: ['coolantPressureDrop.heads'],
        unit: 'Pa',
        expected: 29510,
        obtained: () => coolantPressureDrop(churchill(39344, 1.5e-6 / 0.015748), 4, 0.015748, 995.6, 2, 2),
      },
      {
        id: 'coolant-heads',
        title: 'Its heads alone',
        cards: ['coolantPressureDrop.heads'],
        unit: 'Pa',
        expected: 6969,
        obtained: () => coolantPressureDrop(0, 4, 0.015748, 995.6, 2, 2),
      },
    ],
  ),
  ...group(
    {
      source: 'public formula library (fluids)',
      evidence: LIBRARY,
      cards: ['tubeFriction.colebrook'],
      tolerance: 2e-4,
      why: 'held to six digits',
    },
    [
      {
        id: 'colebrook',
        title: 'Colebrook at Re 1e5, e/D 1e-4',
        expected: 0.0185139,
        tolerance: 1e-5,
        obtained: () => colebrookTurbulent(1e5, 1e-4),
      },
      {
        id: 'colebrook-smooth',
        title: 'Colebrook at Re 1e5, smooth',
        expected: 0.0179898,
        obtained: () => colebrookTurbulent(1e5, 0),
      },
      {
        id: 'colebrook-laminar',
        title: 'Laminar at Re 128',
        expected: 0.5,
        obtained: () => colebrook(128, 0),
      },
      {
        id: 'churchill-laminar',
        title: 'Churchill there',
        cards: ['tubeFriction.churchill'],
        expected: 0.5,
        obtained: () => churchill(128, 0),
      },
      {
        id: 'pipe-drop',
        title: '10 kg/s in a smooth pipe of 0.1 m, 1 m, Re 1.27e7',
        cards: ['tubeFriction.colebrook'],
        unit: 'Pa',
        expected: 63.4345,
        tolerance: 3e-3,
        why: 'the library picks an explicit friction fit',
        obtained: () => {
          const velocity = 10 / (1000 * Math.PI * 0.0025)
          return passPressureDrop(
            colebrookTurbulent((1000 * velocity * 0.1) / 1e-5, 0),
            1,
            0.1,
            1000,
            velocity,
            0,
          )
        },
      },
    ],
  ),
  ...group(
    {
      source: NOTES,
      evidence: SEEN,
      cards: ['wall.resistance'],
      tolerance: 3e-4,
      why: 'printed to four digits',
    },
    [
      {
        id: 'wall',
        title: 'Wall of 19.05/15.748 mm, 110 W/(m K)',
        unit: 'm² K/W',
        expected: 1.648e-5,
        obtained: () => wallResistance(0.01905, 0.015748, 110),
      },
      {
        id: 'inner',
        title: 'Everything behind the film, 9000 W/(m² K) inside',
        unit: 'W/(m² K)',
        expected: 3678.4,
        tolerance: 1e-4,
        obtained: () => 1 / innerResistance(0.01905, 0.015748, 110, 1e-4, 0, 9000),
      },
    ],
  ),
  ...LAYOUTS.flatMap((layout) =>
    group(
      {
        source: NOTES,
        evidence: 'independent calculation',
        cards: ['geometry.layout'],
        tolerance: 2e-3,
        why: 'printed to three digits',
      },
      [
        {
          id: `gap-${layout}`,
          title: `Smallest area at P = 1.25 D, ${layout}`,
          expected: AREA[layout],
          obtained: () => minimumAreaFraction(layout, 1.25),
        },
        {
          id: `void-${layout}`,
          title: `Void fraction at P = 1.25 D, ${layout}`,
          expected: VOID[layout],
          obtained: () => voidFraction(layout, 1.25),
        },
      ],
    ),
  ),
  ...group(
    {
      source: 'public formula library (ht), HEDH',
      evidence: LIBRARY,
      cards: ['geometry.circular'],
      tolerance: 1e-9,
      why: 'one of four published counts: 1285, 1272, 1340, 1297',
    },
    [
      {
        id: 'tube-count',
        title: 'Tubes in a 1.2 m circle, 25 mm on 31.25 mm, triangular',
        expected: 1272,
        obtained: () => Math.floor(hedhTubeCount('triangular30', 1.2, 0.025, 0.03125)),
      },
      {
        id: 'tube-count-phadke',
        title: 'Tubes in a 1.184 m circle, 28 mm on 36 mm, square turned',
        source: 'public formula library (ht), Phadke 1984',
        expected: 805,
        tolerance: 0.03,
        why: 'another method of counting',
        obtained: () => hedhTubeCount('square45', 1.184, 0.028, 0.036),
      },
      {
        id: 'tube-count-30',
        title: 'Tubes in a 0.6 m circle, triangular',
        source: NOTES,
        evidence: SEEN,
        expected: 535.7,
        tolerance: 2e-4,
        why: 'printed to four digits',
        obtained: () => hedhTubeCount('triangular30', 0.6, 0.01905, 0.02381),
      },
      {
        id: 'tube-count-90',
        title: 'Tubes in a 0.6 m circle, square',
        source: NOTES,
        evidence: SEEN,
        expected: 464.3,
        tolerance: 2e-4,
        why: 'printed to four digits',
        obtained: () => hedhTubeCount('square90', 0.6, 0.01905, 0.02381),
      },
      {
        id: 'tube-circle',
        title: 'Circle of 400 tubes, triangular',
        source: NOTES,
        evidence: SEEN,
        unit: 'm',
        expected: 0.5211,
        tolerance: 2e-4,
        why: 'printed to four digits',
        obtained: () => hedhBundleDiameter('triangular30', 400, 0.01905, 0.02381),
      },
    ],
  ),
  ...group(
    { source: NOTES, evidence: 'independent calculation', cards: [], tolerance: 1e-4, why: SIX_DIGITS },
    [
      {
        id: 'recovery',
        cards: ['economics.yearlyCost'],
        title: 'Capital recovery at 8 % in 15 years',
        expected: 0.11683,
        obtained: () => capitalRecoveryFactor(0.08, 15),
      },
      {
        id: 'mass',
        cards: ['geometry.tubeMass'],
        title: '400 tubes of 4 m, 19.05 × 1.651 mm, 8940 kg/m³',
        unit: 'kg',
        expected: 1290.9,
        obtained: () => tubeMass(400, 4, 8940, 0.01905, 0.015748),
      },
      {
        id: 'pump',
        cards: ['economics.yearlyCost'],
        title: '50 kPa at 40 kg/s, 0.7 of it',
        unit: 'W',
        expected: 2870,
        tolerance: 5e-4,
        why: 'printed to three digits',
        obtained: () => pumpingPower(5e4, 40, 995.6, 0.7),
      },
    ],
  ),
]
