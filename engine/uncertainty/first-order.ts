// First-order response of the required area to the factors on its parts, from the rows of one result.
import type { MultiplierGroup } from '#engine/bundle/multipliers.ts'
import type { Case } from '#engine/case.ts'
import { wallResistance } from '#engine/correlations/geometry.ts'
import { findMaterial } from '#engine/materials.ts'
import type { Result } from '#engine/result.ts'

/**
 * d ln area / d ln factor at a given duty. With a film law in x^(3/4) and w = x/T, the film's share of the whole temperature
 * difference, flux answers the film's factor by w/(w + 3/4 (1 − w)) and the resistances behind the film by the rest, each by
 * its share of them. What a factor does to the condensate falling on rows below is not in it.
 */
export function firstOrder(kase: Case, result: Result): Partial<Record<MultiplierGroup, number>> {
  if (kase.duty === undefined) return {}
  if (kase.drive.kind !== 'coolant') return { film: -1 }
  const { outsideDiameter, wallThickness, outsideFoulingResistance } = kase.tube
  if (wallThickness === undefined) return {}
  const bore = outsideDiameter - 2 * wallThickness
  const conductivity =
    kase.tube.conductivity ??
    (kase.tube.material ? findMaterial(kase.tube.material)?.conductivity : undefined)
  if (conductivity === undefined) return {}
  const wall = wallResistance(outsideDiameter, bore, conductivity)
  const inside = (outsideDiameter / bore) * kase.drive.foulingResistance
  const sums = { film: 0, tubeSide: 0, foulingInside: 0, foulingOutside: 0, wall: 0 }
  let tubes = 0
  for (const row of result.rows) {
    if (row.coolantTemperature === null) return {}
    const T = row.saturationTemperature - row.coolantTemperature
    const w = row.wallSubcooling / T
    const film = w / (w + 0.75 * (1 - w))
    const behind = (T - row.wallSubcooling) / row.heatFlux
    const rest = (1 - film) / behind
    tubes += row.tubes
    sums.film -= row.tubes * film
    sums.wall -= row.tubes * rest * wall
    sums.foulingInside += row.tubes * rest * inside
    sums.foulingOutside += row.tubes * rest * outsideFoulingResistance
    sums.tubeSide -= row.tubes * rest * (behind - wall - inside - outsideFoulingResistance)
  }
  return Object.fromEntries(Object.entries(sums).map(([id, sum]) => [id, sum / tubes]))
}
