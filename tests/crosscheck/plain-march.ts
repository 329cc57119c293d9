// A second, deliberately plain solution of the bundle: every tube row cut into axial segments, every equation solved by
// bisection, nothing lagged, nothing accelerated. It shares the correlations and property functions with the engine,
// and none of the engine's solution: what both agree on does not hang on how it was solved. Slow; for tests only.
import type { Case } from '#engine/case.ts'
import {
  FILM_SUBCOOLING,
  filmDrive,
  nusseltTubeFlux,
  ROHSENOW_COEFFICIENT,
} from '#engine/correlations/film.ts'
import { churchill, coolantPressureDrop } from '#engine/correlations/friction.ts'
import {
  isStaggered,
  minimumAreaFraction,
  rectangularWidth,
  rowPitchFactor,
  transversePitchFactor,
  voidFraction,
  wallResistance,
} from '#engine/correlations/geometry.ts'
import { condensateFlowExponent, inundatedFlux } from '#engine/correlations/inundation.ts'
import { butterworthFlux } from '#engine/correlations/shear.ts'
import { gnielinski, wallPrandtlFactor } from '#engine/correlations/tube-side.ts'
import { gaddisGnielinski, ishihara, rowPressureDrop } from '#engine/correlations/vapour-drop.ts'
import {
  COOLANT_CP,
  COOLANT_K,
  COOLANT_LENGTH,
  COOLANT_MU,
  COOLANT_RHO,
  CP_L,
  coolantModel,
  fillCoolant,
  fillSaturation,
  fixedCoolant,
  fixedFluid,
  fluidModel,
  H_FG,
  K_L,
  MU_L,
  MU_V,
  RHO_L,
  RHO_V,
  SATURATION_LENGTH,
  saturationPressure,
  saturationTemperature,
} from '#engine/fluids/index.ts'
import { findMaterial } from '#engine/materials.ts'

export type PlainResult = {
  duty: number
  length: number
  area: number
  condensate: number
  coolantOutlet: number
  coolantDrop: number
  vapourDrop: number
  rowFlux: number[]
  rowDuty: number[]
}

/** Root of a function that changes sign between `low` and `high`, by halving to a billionth of the interval. */
function bisect(f: (x: number) => number, low: number, high: number): number {
  let a = low
  let b = high
  const rising = f(b) > 0
  while (b - a > 1e-9 * (high - low)) {
    const m = 0.5 * (a + b)
    if (f(m) > 0 === rising) b = m
    else a = m
  }
  return 0.5 * (a + b)
}

/** Coolant drive with a given velocity; plain tubes, rectangular bundle, default methods or the plain ones named here. */
export function plainMarch(c: Case, options: { segments: number; length: number }): PlainResult {
  if (c.drive.kind !== 'coolant' || c.drive.velocity === undefined)
    throw new Error('the plain march takes a coolant velocity')
  if (c.bundle.shape !== 'rectangular' || typeof c.bundle.tubesPerRow !== 'number')
    throw new Error('the plain march takes a rectangle')
  const drive = c.drive
  const velocity = c.drive.velocity
  const { rows, passes, layout, pitchRatio } = c.bundle
  const perRow = c.bundle.tubesPerRow
  const fluid = typeof c.fluid === 'string' ? fluidModel(c.fluid) : fixedFluid(c.fluid.properties)
  const coolant =
    typeof drive.coolant === 'string' ? coolantModel(drive.coolant) : fixedCoolant(drive.coolant.properties)
  const Do = c.tube.outsideDiameter
  const Di = Do - 2 * (c.tube.wallThickness as number)
  const k = c.tube.conductivity ?? findMaterial(c.tube.material as string)?.conductivity ?? Number.NaN
  const L = options.length
  const staggered = isStaggered(layout)
  const width = rectangularWidth(layout, Do * pitchRatio, perRow)
  const eps = voidFraction(layout, pitchRatio)
  const fmin = minimumAreaFraction(layout, pitchRatio)
  const exponent = c.methods.inundation === 'none' ? 0 : condensateFlowExponent(staggered)
  const sheared = c.methods.vapourShear === 'butterworth'
  const dropped = c.methods.vapourPressureDrop === 'gaddisGnielinski'
  const rohsenow = c.methods.latentHeat === 'rohsenow'
  const weight = { oneThird: 0.33, mean: 0.5, saturation: 1 }[c.methods.propertyTemperature]

  const at = new Float64Array(COOLANT_LENGTH)
  const water = (T: number) => {
    fillCoolant(coolant, T, at)
    return { rho: at[COOLANT_RHO], cp: at[COOLANT_CP], mu: at[COOLANT_MU], k: at[COOLANT_K] }
  }
  const state = new Float64Array(SATURATION_LENGTH)
  const film = new Float64Array(SATURATION_LENGTH)

  const band = (row: number) => {
    for (let j = 0; j < passes; j++) if (row < Math.floor(((j + 1) * rows) / passes)) return j
    return passes - 1
  }
  const passOf = (row: number) => (c.bundle.coolantEntry === 'top' ? band(row) : passes - 1 - band(row))
  const rowsOf = Array.from({ length: passes }, (_, j) =>
    Array.from({ length: rows }, (_, r) => r).filter((r) => passOf(r) === j),
  )
  const bore = (Math.PI / 4) * Di * Di
  const inletDensity = water(drive.inletTemperature).rho
  const massFlow = (inletDensity * velocity * bore * rows * perRow) / passes
  const Ts0 = c.saturationTemperature as number
  const pIn = fluid.fixed ? Number.NaN : saturationPressure(fluid, Ts0)

  /** One march of all rows from given pass inlets, pass means, wall states and inlet vapour. */
  const march = (vapourIn: number, inlets: number[], means: number[], wallTemperatures: number[]) => {
    let vapour = vapourIn
    let pressure = pIn
    const gamma = new Float64Array(options.segments)
    const heat = new Array<number>(passes).fill(0)
    const rowFlux: number[] = []
    const rowDuty: number[] = []
    let condensed = 0
    for (let row = 0; row < rows; row++) {
      const j = passOf(row)
      const w = water(means[j])
      const inBand = rowsOf[j].length * perRow
      const v = massFlow / (w.rho * bore * inBand)
      const re = (w.rho * v * Di) / w.mu
      const pr = (w.mu * w.cp) / w.k
      const wall = water(wallTemperatures[j])
      const hi = (gnielinski(re, pr, Di / L, wallPrandtlFactor(pr, (wall.mu * wall.cp) / wall.k)) * w.k) / Di
      const inner =
        1 /
        (c.tube.outsideFoulingResistance +
          wallResistance(Do, Di, k) +
          (Do / Di) * (drive.foulingResistance + 1 / hi))
      const capacity = (massFlow / inBand) * w.cp
      const Ts = fluid.fixed ? Ts0 : saturationTemperature(fluid, pressure)
      fillSaturation(fluid, Ts, state)
      const rhoV = state[RHO_V]
      const hfg = state[H_FG]
      const piece = L / options.segments

      // The row with the vapour flow at its middle: condensate c and the flow it implies, by bisection.
      const walk = (middle: number, keep: boolean) => {
        const velocity = sheared ? Math.max(0, middle) / (rhoV * L * width * eps) : 0
        let made = 0
        let q = 0
        let Tc = inlets[j]
        const forward = j % 2 === 0
        for (let n = 0; n < options.segments; n++) {
          const z = forward ? n : options.segments - 1 - n
          const arriving = gamma[z]
          // Segment outlet so that the flux at the segment's mean temperature heats the coolant by as much.
          const fluxAt = (mean: number) => {
            const T = Ts - mean
            if (T <= 0) return { q: 0, x: 0, dh: hfg }
            const filmFlux = (x: number) => {
              const reference = Ts - x + weight * x
              fillSaturation(fluid, reference, film)
              const cp = film[CP_L]
              const latent = rohsenow ? hfg + ROHSENOW_COEFFICIENT * cp * x : hfg
              const dh = rohsenow ? hfg + FILM_SUBCOOLING * cp * x : hfg
              const factor = filmDrive(
                Do,
                film[RHO_L],
                Number.isNaN(rhoV) ? 0 : rhoV,
                film[MU_L],
                film[K_L],
                latent,
              )
              const single = sheared
                ? butterworthFlux(film[K_L] / Do, (film[RHO_L] * velocity * Do) / film[MU_L], factor, x)
                : nusseltTubeFlux(film[K_L] / Do, factor, x)
              return { q: inundatedFlux(single, (arriving * dh) / (Math.PI * Do), exponent), dh }
            }
            const x = bisect((x) => filmFlux(x).q - inner * (T - x), T * 1e-9, T)
            return { ...filmFlux(x), x }
          }
          const area = Math.PI * Do * piece
          const rise = bisect((dT) => dT * capacity - fluxAt(Tc + 0.5 * dT).q * area, 0, Ts - Tc)
          const found = fluxAt(Tc + 0.5 * rise)
          made += (found.q * area * perRow) / found.dh
          q += found.q * area
          if (keep) gamma[z] += (found.q * Math.PI * Do) / found.dh
          Tc += rise
        }
        return { made, q, outlet: Tc }
      }
      let middle = vapour
      for (let i = 0; i < 12; i++) {
        const next = vapour - 0.5 * walk(middle, false).made
        const moved = Math.abs(next - middle)
        middle = next
        if (moved <= 1e-7 * vapour || !(sheared || dropped)) break
      }
      const result = walk(middle, true)
      condensed += result.made
      heat[j] += result.q * perRow
      rowFlux.push(result.q / (Math.PI * Do * L))
      rowDuty.push(result.q * perRow)
      if (dropped) {
        const fastest = middle / (rhoV * L * width * fmin)
        const a = transversePitchFactor(layout) * pitchRatio
        const b = rowPitchFactor(layout) * pitchRatio
        const loss = (u: number, rho: number, mu: number) =>
          u > 0 ? rowPressureDrop(gaddisGnielinski((rho * u * Do) / mu, a, b, staggered, rows), rho, u) : 0
        const liquid = condensed - 0.5 * result.made
        const dpVapour = loss(fastest, rhoV, state[MU_V])
        const dpLiquid = loss(liquid / (state[RHO_L] * L * width * fmin), state[RHO_L], state[MU_L])
        pressure -= c.methods.twoPhase === 'ishihara' ? ishihara(dpVapour, dpLiquid) : dpVapour
      }
      vapour = Math.max(0, vapour - result.made)
    }
    return { heat, rowFlux, rowDuty, condensed, pressure }
  }

  const settled = (vapourIn: number) => {
    const inlets = new Array<number>(passes).fill(drive.inletTemperature)
    let means = [...inlets]
    let walls = [...inlets]
    let result = march(vapourIn, inlets, means, walls)
    for (let i = 0; i < 40; i++) {
      let T = drive.inletTemperature
      let change = 0
      const nextMeans: number[] = []
      const nextWalls: number[] = []
      for (let j = 0; j < passes; j++) {
        change = Math.max(change, Math.abs(inlets[j] - T))
        inlets[j] = T
        const rise = result.heat[j] / (massFlow * water(means[j]).cp)
        nextMeans.push(T + rise / 2)
        const w = water(means[j])
        const v = massFlow / (w.rho * bore * rowsOf[j].length * perRow)
        const pr = (w.mu * w.cp) / w.k
        const wall = water(walls[j])
        const hi =
          (gnielinski(
            (w.rho * v * Di) / w.mu,
            pr,
            Di / L,
            wallPrandtlFactor(pr, (wall.mu * wall.cp) / wall.k),
          ) *
            w.k) /
          Di
        nextWalls.push(T + rise / 2 + result.heat[j] / (rowsOf[j].length * perRow * Math.PI * Di * L) / hi)
        change = Math.max(change, Math.abs(nextMeans[j] - means[j]), Math.abs(nextWalls[j] - walls[j]))
        T += rise
      }
      means = nextMeans
      walls = nextWalls
      result = march(vapourIn, inlets, means, walls)
      if (change < 1e-5) break
    }
    return { ...result, inlets, means }
  }

  let vapourIn = settled(0).condensed
  let last = settled(vapourIn)
  for (let i = 0; i < 40 && Math.abs(last.condensed / vapourIn - 1) > 1e-5; i++) {
    vapourIn = Math.sqrt(vapourIn * last.condensed)
    last = settled(vapourIn)
  }
  const duty = last.rowDuty.reduce((sum, q) => sum + q, 0)
  let drop = 0
  for (let j = 0; j < passes; j++) {
    const w = water(last.means[j])
    const v = massFlow / (w.rho * bore * rowsOf[j].length * perRow)
    drop += coolantPressureDrop(churchill((w.rho * v * Di) / w.mu, c.tube.roughness / Di), L, Di, w.rho, v, 1)
    if (j > 0) drop += (0.5 * w.rho * v * v) / 2
  }
  const lastPass = passes - 1
  return {
    duty,
    length: L,
    area: rows * perRow * Math.PI * Do * L,
    condensate: last.condensed,
    coolantOutlet: last.inlets[lastPass] + last.heat[lastPass] / (massFlow * water(last.means[lastPass]).cp),
    coolantDrop: drop,
    vapourDrop: pIn - last.pressure,
    rowFlux: last.rowFlux,
    rowDuty: last.rowDuty,
  }
}
