// Fins, dropwise condensation and gas: laws that stand as functions and that no case may choose yet.
import {
  griffith,
  interfaceCoefficient,
  largestDrop,
  leFevreRoseFlux,
  roseDropwiseFlux,
  smallestDrop,
} from '#engine/correlations/dropwise.ts'
import {
  beattyKatz,
  type FinCase,
  finRetentionAngle,
  retentionAngle,
  retentionGroup,
  roseFinRatio,
  roseRootFunction,
  schmidtFinEfficiency,
} from '#engine/correlations/fins.ts'
import { dehbi, dryWallTemperature, fullerDiffusivity, uchida } from '#engine/correlations/gas.ts'
import {
  group,
  type Properties,
  R113_48,
  R134A_40,
  REMEMBERED,
  STEAM_50,
  STEAM_100,
  type ValidationRecord,
} from './record.ts'

const MEMORY = 'formula from memory, value computed independently' as const
const SEEN = 'formula seen, value computed independently' as const
const DEGREES = 180 / Math.PI

const fin = (of: Properties, gap = 5e-4, thickness = 5e-4, height = 1e-3): FinCase => ({
  rootDiameter: 0.01905,
  finHeight: height,
  finThickness: thickness,
  finGap: gap,
  surfaceTension: of.surfaceTension,
  liquidDensity: of.liquidDensity,
  vapourDensity: of.vapourDensity,
})

const drops = (of: Properties, x: number, points = 200) =>
  leFevreRoseFlux(
    of.Ts,
    x,
    of.surfaceTension,
    of.liquidDensity,
    of.vapourDensity,
    of.liquidConductivity,
    of.latentHeat,
    0,
    points,
  )

/** Beatty and Katz without fin tips in the area, efficiency 1, as handbooks tabulate it. */
function tabulatedBeattyKatz(): number {
  const [d, out, t, p] = [0.0159, 0.0189, 0.0003, 0.0013369]
  const sides = (Math.PI * (out * out - d * d)) / (2 * p)
  const between = (Math.PI * d * (p - t)) / p
  return beattyKatz((1147 ** 2 * 0.0747 ** 3 * 9.80665 * 163000) / (0.0001614 * 5), sides, between, 1, d, out)
}

export const surfaceRecords: readonly ValidationRecord[] = [
  ...group(
    {
      source: REMEMBERED,
      evidence: MEMORY,
      cards: ['fins.rose'],
      tolerance: 1e-3,
      why: 'printed to three digits',
    },
    [
      {
        id: 'fin-r113',
        title: 'Enhancement of R113, gap 0.5 mm, fin 0.5 × 1 mm',
        expected: 6.88,
        obtained: () => roseFinRatio(fin(R113_48)),
      },
      {
        id: 'fin-r113-narrow',
        title: 'The same, gap 0.25 mm',
        expected: 6.97,
        obtained: () => roseFinRatio(fin(R113_48, 2.5e-4)),
      },
      {
        id: 'fin-r134a',
        title: 'Enhancement of R134a',
        expected: 7.43,
        obtained: () => roseFinRatio(fin(R134A_40)),
      },
      {
        id: 'fin-steam',
        title: 'Enhancement of steam at 100 °C, flooded',
        expected: 2.59,
        tolerance: 2e-3,
        obtained: () => roseFinRatio(fin(STEAM_100)),
      },
      {
        id: 'fin-steam-wide',
        title: 'Enhancement of steam at 100 °C, gap 1.5 mm, fin 1 × 1 mm',
        expected: 2.88,
        tolerance: 2e-3,
        obtained: () => roseFinRatio(fin(STEAM_100, 1.5e-3, 1e-3)),
      },
      {
        id: 'fin-r134a-angle',
        title: 'Retention angle of R134a',
        unit: '°',
        expected: 141.6,
        obtained: () => DEGREES * finRetentionAngle(fin(R134A_40)),
      },
      {
        id: 'fin-steam-group',
        title: 'Retention group of steam at 100 °C',
        expected: 2.375,
        obtained: () => retentionGroup(0.0589, 961.9, 0.598, 5e-4, 0.02105),
      },
      {
        id: 'fin-748-angle',
        title: 'Retention angle of R134a between 748 fins a metre',
        source: 'Honda, Nozu and Mitsumori 1983; Rudy and Webb 1985 (from memory)',
        unit: '°',
        expected: 152.791,
        obtained: () => DEGREES * retentionAngle(retentionGroup(0.0061, 1147, 0, 0.0010369, 0.0189)),
      },
      {
        id: 'fin-root',
        title: 'Rose’s ξ(π)³',
        expected: 0.2851,
        obtained: () => roseRootFunction(Math.PI) ** 3,
      },
    ],
  ),
  ...group(
    {
      source: 'Marto, Zebrowski, Wanniarachchi and Rose 1990: up to about 7, best gap 0.2 to 0.5 mm',
      evidence: 'printed band seen',
      cards: ['fins.rose'],
      tolerance: 0.07,
      why: 'the measurements’ uncertainty',
    },
    [2e-4, 5e-4].map((gap) => ({
      id: `fin-marto-${gap}`,
      title: `Enhancement of R113 at a gap of ${gap * 1e3} mm`,
      expected: 7,
      obtained: () => roseFinRatio(fin(R113_48, gap)),
    })),
  ),
  ...group(
    {
      source: 'public formula library (ht), Bessel functions: 0.841259',
      evidence: 'value held by a public formula library',
      cards: ['fins.rose'],
      tolerance: 0.013,
      why: 'Schmidt’s tanh is 1.2 % low on tall fins',
    },
    [
      {
        id: 'fin-efficiency',
        title: 'Efficiency of an annular fin, R/r 2.25',
        expected: 0.841259,
        obtained: () => schmidtFinEfficiency(0.0127, 0.028575, 3.8e-4, 200, 58),
      },
      {
        id: 'fin-efficiency-schmidt',
        title: 'The same after Schmidt',
        source: REMEMBERED,
        evidence: SEEN,
        tolerance: 1e-5,
        why: 'printed to six digits',
        expected: 0.83132,
        obtained: () => schmidtFinEfficiency(0.0127, 0.028575, 3.8e-4, 200, 58),
      },
    ],
  ),
  ...group(
    {
      source: 'Beatty and Katz 1948, as tabulated in handbooks',
      evidence: SEEN,
      cards: ['fins.beattyKatz'],
      unit: 'W/(m² K)',
      tolerance: 1e-3,
      why: 'fin tips left out of the area, as tabulated',
    },
    [
      {
        id: 'beatty-katz',
        title: '748 fins a metre, R134a, 5 K',
        expected: 3183.48,
        obtained: tabulatedBeattyKatz,
      },
    ],
  ),
  ...group(
    {
      source: 'Rose 2002, Proc. IMechE A 216:115, as remembered',
      evidence: MEMORY,
      cards: ['dropwise.rose'],
      unit: 'W/m²',
      tolerance: 5e-4,
      why: 'printed to four digits',
    },
    [
      [100, 1, 211e3],
      [100, 3, 704.6e3],
      [50, 1, 121.2e3],
      [30, 1, 80.5e3],
    ].map(([t, x, expected]) => ({
      id: `dropwise-rose-${t}-${x}`,
      title: `Rose, steam at ${t} °C, ${x} K`,
      expected,
      tolerance: t === 30 ? 7e-4 : 5e-4,
      obtained: () => roseDropwiseFlux(t + 273.15, x),
    })),
  ),
  ...group(
    {
      source: 'Griffith, Handbook of Heat Transfer, as remembered',
      evidence: MEMORY,
      cards: ['dropwise.griffith'],
      unit: 'W/(m² K)',
      tolerance: 1e-4,
      why: 'arithmetic',
    },
    [
      [22, 96072],
      [30, 112424],
      [40, 132864],
      [50, 153304],
      [60, 173744],
      [100, 255504],
    ].map(([t, expected]) => ({
      id: `dropwise-griffith-${t}`,
      title: `Griffith, steam at ${t} °C`,
      expected,
      obtained: () => griffith(t + 273.15),
    })),
  ),
  ...group(
    {
      source: 'Le Fevre and Rose 1966, as remembered; quadrature of 4000 points',
      evidence: MEMORY,
      cards: ['dropwise.leFevreRose'],
      unit: 'W/m²',
      tolerance: 5e-4,
      why: 'quadrature',
    },
    [
      {
        id: 'drops-100-1',
        title: 'Population of drops, steam at 100 °C, 1 K',
        expected: 253e3,
        obtained: () => drops(STEAM_100, 1),
      },
      {
        id: 'drops-100-3',
        title: 'Population of drops, steam at 100 °C, 3 K',
        expected: 1067.1e3,
        obtained: () => drops(STEAM_100, 3),
      },
      {
        id: 'drops-50-1',
        title: 'Population of drops, steam at 50 °C, 1 K',
        expected: 129.7e3,
        obtained: () => drops(STEAM_50, 1),
      },
      {
        id: 'drops-50-3',
        title: 'Population of drops, steam at 50 °C, 3 K',
        expected: 468.1e3,
        obtained: () => drops(STEAM_50, 3),
      },
      {
        id: 'drops-smallest',
        title: 'Smallest drop, 100 °C, 1 K',
        unit: 'm',
        expected: 20.2e-9,
        tolerance: 5e-3,
        why: 'printed to three digits',
        obtained: () => smallestDrop(373.15, 1, 0.0589, 961.9, 2.2565e6),
      },
      {
        id: 'drops-largest',
        title: 'Largest drop, 100 °C',
        unit: 'm',
        expected: 1e-3,
        tolerance: 1e-3,
        why: 'printed to four digits',
        obtained: () => largestDrop(0.0589, 961.9, 0.598),
      },
      {
        id: 'interface-100',
        title: 'Coefficient of the interface, 100 °C',
        source: 'Schrage, form in a public formula library (ht)',
        evidence: SEEN,
        unit: 'W/(m² K)',
        expected: 1.5689e7,
        tolerance: 2e-4,
        why: 'molar mass in place of 461.5 J/(kg K)',
        obtained: () => interfaceCoefficient(373.15, 0.598, 2.2565e6, 0.01801528),
      },
      {
        id: 'interface-50',
        title: 'Coefficient of the interface, 50 °C',
        source: 'Schrage, form in a public formula library (ht)',
        evidence: SEEN,
        unit: 'W/(m² K)',
        expected: 3.0146e6,
        tolerance: 2e-4,
        why: 'molar mass in place of 461.5 J/(kg K)',
        obtained: () => interfaceCoefficient(323.15, 0.0831, 2.382e6, 0.01801528),
      },
    ],
  ),
  ...group(
    {
      source: 'Fuller, Schettler and Giddings 1966',
      evidence: SEEN,
      cards: ['gas.fuller'],
      unit: 'm²/s',
      tolerance: 5e-4,
      why: 'molar masses to four digits',
    },
    [
      {
        id: 'diffusivity-25',
        title: 'Steam in air, 25 °C, 101 325 Pa',
        expected: 2.5084e-5,
        obtained: () => fullerDiffusivity(298.15, 101325, 0.018015, 0.02896, 13.1, 19.7),
      },
      {
        id: 'diffusivity-50',
        title: 'Steam in air, 50 °C, 12.35 kPa',
        expected: 2.3694e-4,
        obtained: () => fullerDiffusivity(323.15, 12350, 0.018015, 0.02896, 13.1, 19.7),
      },
    ],
  ),
  ...group(
    {
      source: 'arithmetic of the balance',
      evidence: 'independent calculation',
      cards: [],
      unit: '°C',
      tolerance: 2e-4,
      why: 'printed to four digits',
    },
    [
      {
        id: 'dry-wall',
        title: 'Dry wall under vapour at 80 °C, coolant at 30 °C',
        expected: 30.74,
        obtained: () => dryWallTemperature(30, 80, 60, 4000),
      },
      {
        id: 'dry-wall-limit',
        title: 'Dry wall under vapour at 1383 °C: the saturation temperature',
        expected: 50,
        obtained: () => dryWallTemperature(30, 1383, 60, 4000),
      },
    ],
  ),
  ...group(
    {
      source: 'Uchida 1965',
      evidence: SEEN,
      cards: ['gas.uchida'],
      unit: 'W/(m² K)',
      tolerance: 1e-4,
      why: 'arithmetic, mass fractions',
    },
    [
      ...[
        [0.01, 9545.17],
        [0.1, 1904.51],
        [0.5, 617.312],
        [1, 380],
      ].map(([ratio, expected]) => ({
        id: `uchida-${ratio}`,
        title: `Uchida, ${ratio} kg of air per kg of steam`,
        expected,
        obtained: () => uchida(ratio / (1 + ratio)),
      })),
      {
        id: 'uchida-005',
        title: 'Uchida, 5 % of air by mass',
        expected: 2984.8,
        obtained: () => uchida(0.05),
      },
      {
        id: 'dehbi',
        title: 'Dehbi, half air, 1.5 atm, 20 K, 1 m',
        source: 'Dehbi 1991, as remembered',
        evidence: MEMORY,
        cards: ['gas.dehbi'],
        expected: 467,
        tolerance: 1e-3,
        why: 'printed to three digits',
        obtained: () => dehbi(0.5, 1.5, 20, 1),
      },
    ],
  ),
]
