/**
 * Each method beside its neighbours: the laws of one choice drawn over the same quantity, for one stated reference case.
 * The curves are the correlation functions themselves; what they assume is said with them.
 */
import type { CardChoice } from './card.ts'
import {
  balanceLatentHeat,
  chenTubeFactor,
  filmDrive,
  filmReferenceTemperature,
  nusseltTubeNumber,
  plainLatentHeat,
  rohsenowLatentHeat,
} from './film.ts'
import { churchill, colebrook, filonenko, konakov } from './friction.ts'
import {
  chenRowLocal,
  columnSheetToSheet,
  columnToColumnSheet,
  condensateFlowExponent,
  drainageModeFlux,
  eissenbergRowLocal,
  galileo,
  inundatedFlux,
  kernRowLocal,
  nusseltRowLocal,
} from './inundation.ts'
import { findCard } from './registry.ts'
import {
  butterworth,
  fujiiHonda,
  fujiiUeharaKurata,
  rose,
  shekriladzeGomelauri,
  suctionGroupPerKelvin,
  twoPhaseReynolds,
} from './shear.ts'
import { dittusBoelter, gnielinski, siederTate } from './tube-side.ts'
import { gaddisGnielinski, ishihara, jakob, zukauskas } from './vapour-drop.ts'

export type Curve = { id: string; name: string; x: number[]; y: number[] }

export type CurvePlot = {
  choice: CardChoice
  title: string
  /** What all curves share. */
  reference: string
  x: { label: string; unit: string; whole?: boolean }
  y: { label: string; unit: string }
  curves: Curve[]
}

/** Saturated R134a at 313.15 K and steam at 323.15 K, rounded, film near 5 K under saturation. */
const R134A = {
  name: 'R134a at 40 °C',
  saturation: 313.15,
  latentHeat: 1.63e5,
  vapourDensity: 50.09,
  liquidDensity: 1146.7,
  conductivity: 0.0747,
  viscosity: 1.614e-4,
  specificHeat: 1498,
  surfaceTension: 6.13e-3,
  vapourViscosity: 1.24e-5,
}
const STEAM = {
  name: 'steam at 50 °C',
  saturation: 323.15,
  latentHeat: 2.382e6,
  vapourDensity: 0.0831,
  liquidDensity: 990.2,
  conductivity: 0.6375,
  viscosity: 5.96e-4,
  specificHeat: 4180,
  surfaceTension: 0.0679,
  vapourViscosity: 1.06e-5,
}
type Fluid = typeof R134A

const TUBE = 0.01905
const TUBE_WORDS = 'one 19.05 mm tube'
/** Water at 30 °C in a tube of 15.748 mm inside and 4 m length. */
const PRANDTL = 5.411
const DIAMETER_OVER_LENGTH = 0.00394
const BANK = { a: 1.5, b: 1.299 }

const steps = (from: number, to: number, count: number): number[] =>
  Array.from({ length: count }, (_, k) => from + ((to - from) * k) / (count - 1))
const octaves = (from: number, to: number, count: number): number[] =>
  Array.from({ length: count }, (_, k) => from * (to / from) ** (k / (count - 1)))

/** G4 of a fluid at a film temperature difference, with the latent heat given. */
const filmGroup = (fluid: Fluid, subcooling: number, latentHeat: number): number =>
  filmDrive(TUBE, fluid.liquidDensity, fluid.vapourDensity, fluid.viscosity, fluid.conductivity, latentHeat) /
  subcooling

type Law = (x: number) => number
type Plot = Omit<CurvePlot, 'choice' | 'curves'> & { grid: number[]; laws: () => Record<string, Law> }

/** Flux of each row over that of the first, rows at one subcooling: every row's condensate falls on the next. */
function rowByRow(fluxOf: (arriving: number) => number, rows: number): number[] {
  const first = fluxOf(0)
  let arriving = 0
  return Array.from({ length: rows }, () => {
    const flux = fluxOf(arriving)
    arriving += flux
    return flux / first
  })
}

const ROWS = 30
const SUBCOOLING = 5

const PLOTS: Partial<Record<CardChoice, Plot>> = {
  film: {
    title: 'Coefficient of a tube in still vapour',
    reference: `${R134A.name}, ${TUBE_WORDS}, properties held constant`,
    x: { label: 'film temperature difference', unit: 'K' },
    y: { label: 'coefficient', unit: 'W/(m²·K)' },
    grid: steps(1, 20, 39),
    laws: () => {
      const k = R134A.conductivity / TUBE
      return {
        'film.nusselt': (dt) =>
          k *
          nusseltTubeNumber(
            filmGroup(R134A, dt, rohsenowLatentHeat(R134A.latentHeat, R134A.specificHeat, dt)),
          ),
        'film.chen': (dt) =>
          k *
          nusseltTubeNumber(filmGroup(R134A, dt, R134A.latentHeat)) *
          chenTubeFactor(
            (R134A.specificHeat * dt) / R134A.latentHeat,
            (R134A.conductivity * dt) / (R134A.viscosity * R134A.latentHeat),
          ),
      }
    },
  },
  latentHeat: {
    title: 'Heat given up by a kilogram of condensate',
    reference: `${R134A.name}, no superheat`,
    x: { label: 'film temperature difference', unit: 'K' },
    y: { label: 'heat', unit: 'kJ/kg' },
    grid: steps(0, 20, 21),
    laws: () => ({
      'latentHeat.rohsenow': (dt) => balanceLatentHeat(R134A.latentHeat, R134A.specificHeat, dt) / 1000,
      'latentHeat.plain': () => plainLatentHeat(R134A.latentHeat) / 1000,
    }),
  },
  propertyTemperature: {
    title: 'Where the film’s properties are taken',
    reference: `saturation at 40 °C`,
    x: { label: 'film temperature difference', unit: 'K' },
    y: { label: 'reference temperature under saturation', unit: 'K' },
    grid: steps(0, 20, 21),
    laws: () => ({
      'propertyTemperature.oneThird': (dt) => 313.15 - filmReferenceTemperature(313.15 - dt, 313.15, 0.33),
      'propertyTemperature.mean': (dt) => 313.15 - filmReferenceTemperature(313.15 - dt, 313.15, 0.5),
      'propertyTemperature.saturation': (dt) => 313.15 - filmReferenceTemperature(313.15 - dt, 313.15, 1),
    }),
  },
  inundation: {
    title: 'Flux of a row over that of the first',
    reference: `${R134A.name}, staggered ${(TUBE * 1000).toFixed(2)} mm tubes, every row ${SUBCOOLING} K under saturation, no shear`,
    x: { label: 'row', unit: '', whole: true },
    y: { label: 'flux over the first row’s', unit: '' },
    grid: steps(1, ROWS, ROWS),
    laws: () => {
      const g4 = filmGroup(
        R134A,
        SUBCOOLING,
        rohsenowLatentHeat(R134A.latentHeat, R134A.specificHeat, SUBCOOLING),
      )
      const single = (nusseltTubeNumber(g4) * R134A.conductivity * SUBCOOLING) / TUBE
      const ga = galileo(R134A.liquidDensity, R134A.surfaceTension, R134A.viscosity)
      const perFlux =
        (2 * Math.PI * TUBE) /
        (R134A.viscosity * balanceLatentHeat(R134A.latentHeat, R134A.specificHeat, SUBCOOLING))
      const jakobNumber = (R134A.specificHeat * SUBCOOLING) / R134A.latentHeat
      const local = rowByRow(
        (arriving) => inundatedFlux(single, arriving, condensateFlowExponent(true)),
        ROWS,
      )
      const modes = rowByRow(
        (arriving) =>
          drainageModeFlux(single, arriving, perFlux, columnToColumnSheet(ga), columnSheetToSheet(ga), true),
        ROWS,
      )
      return {
        'inundation.condensateFlow': (n) => local[n - 1],
        'inundation.drainageMode': (n) => modes[n - 1],
        'inundation.nusselt': nusseltRowLocal,
        'inundation.kern': kernRowLocal,
        'inundation.eissenberg': eissenbergRowLocal,
        'inundation.chen': (n) => chenRowLocal(n, jakobNumber),
      }
    },
  },
  vapourShear: {
    title: 'Nusselt number of a tube under falling vapour',
    reference: `${STEAM.name}, ${TUBE_WORDS}, film temperature difference 10 K, plain latent heat`,
    x: { label: 'vapour velocity', unit: 'm/s' },
    y: { label: 'Nusselt number', unit: '' },
    grid: steps(1, 60, 60),
    laws: () => {
      const dt = 10
      const g4 = filmGroup(STEAM, dt, STEAM.latentHeat)
      const re = (u: number) => twoPhaseReynolds(STEAM.liquidDensity, u, TUBE, STEAM.viscosity)
      const suction =
        dt *
        suctionGroupPerKelvin(
          STEAM.latentHeat,
          STEAM.conductivity,
          STEAM.liquidDensity,
          STEAM.viscosity,
          STEAM.vapourDensity,
          STEAM.vapourViscosity,
        )
      return {
        'vapourShear.butterworth': (u) => butterworth(re(u), g4),
        'vapourShear.shekriladzeGomelauri': (u) => shekriladzeGomelauri(re(u), g4),
        'vapourShear.rose': (u) => rose(re(u), g4),
        'vapourShear.fujiiUeharaKurata': (u) => fujiiUeharaKurata(re(u), g4, suction, true),
        'vapourShear.fujiiHonda': (u) => fujiiHonda(re(u), g4 / re(u) ** 2),
      }
    },
  },
  tubeSide: {
    title: 'Nusselt number inside the tube',
    reference: 'water at 30 °C (Pr 5.4), diameter over length 0.0039, wall as warm as the water',
    x: { label: 'Reynolds number', unit: '' },
    y: { label: 'Nusselt number', unit: '' },
    grid: octaves(1000, 100_000, 61),
    laws: () => ({
      'tubeSide.gnielinski': (re) => gnielinski(re, PRANDTL, DIAMETER_OVER_LENGTH),
      'tubeSide.siederTate': (re) => siederTate(re, PRANDTL, DIAMETER_OVER_LENGTH),
      'tubeSide.dittusBoelter': (re) => dittusBoelter(re, PRANDTL, DIAMETER_OVER_LENGTH),
    }),
  },
  tubeFriction: {
    title: 'Darcy friction factor inside the tube',
    reference: 'roughness over diameter 1e-4; Konakov and Filonenko are for smooth tubes',
    x: { label: 'Reynolds number', unit: '' },
    y: { label: 'friction factor', unit: '' },
    grid: octaves(4000, 200_000, 41),
    laws: () => ({
      'tubeFriction.churchill': (re) => churchill(re, 1e-4),
      'tubeFriction.colebrook': (re) => colebrook(re, 1e-4),
      'tubeFriction.konakov': konakov,
      'tubeFriction.filonenko': filonenko,
    }),
  },
  vapourPressureDrop: {
    title: 'Loss coefficient of a row',
    reference: 'staggered bank of 20 rows, pitch ratios 1.5 across and 1.299 along the flow',
    x: { label: 'Reynolds number in the narrowest gap', unit: '' },
    y: { label: 'loss of a row, in velocity heads', unit: '' },
    grid: octaves(100, 300_000, 61),
    laws: () => ({
      'vapourPressureDrop.gaddisGnielinski': (re) => gaddisGnielinski(re, BANK.a, BANK.b, true, 20),
      'vapourPressureDrop.zukauskas': (re) => zukauskas(re, BANK.a, BANK.b, true),
      'vapourPressureDrop.jakob': (re) => jakob(re, BANK.a, BANK.b, true),
    }),
  },
  twoPhase: {
    title: 'Loss of a row over that of its vapour alone',
    reference: 'by the loss that the liquid alone would have in the same passage',
    x: { label: 'liquid-alone loss over vapour-alone loss', unit: '' },
    y: { label: 'multiplier', unit: '' },
    grid: octaves(1e-5, 1e-1, 41),
    laws: () => ({
      'twoPhase.ishihara': (ratio) => ishihara(1, ratio),
    }),
  },
}

/** The plot of a choice's laws; null where the choice has none to compare. */
export function curvePlot(choice: CardChoice): CurvePlot | null {
  const plot = PLOTS[choice]
  if (!plot) return null
  const { grid, laws, ...words } = plot
  const curves = Object.entries(laws()).map(([id, law]) => ({
    id,
    name: findCard(id)?.name ?? id,
    x: grid,
    y: grid.map(law),
  }))
  return { choice, ...words, curves }
}
