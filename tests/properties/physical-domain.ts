// Where a condenser can exist at all, told without the solved point: outside, a case may rightly have no answer.
import type { Case } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import {
  COOLANT_CP,
  COOLANT_LENGTH,
  COOLANT_RHO,
  coolantModel,
  fillCoolant,
  fluidModel,
} from '#engine/fluids/index.ts'
import type { Result } from '#engine/result.ts'

const water = new Float64Array(COOLANT_LENGTH)
/** Faster coolant than this is not asked for to hold a wall [m/s]. */
const FASTEST = 100

/** What puts a case of library fluids outside the physical domain, or null. `result` gives the heat a held wall asks for. */
export function outsideDomain(kase: Case, result: Result): string | null {
  const Ts = kase.saturationTemperature as number
  const fluid = fluidModel(kase.fluid as string)
  const { drive, tube, bundle } = kase
  if (drive.kind === 'wallSubcooling') {
    const wall = Ts - drive.wallSubcooling
    if (wall < fluid.minTemperature) return 'wall below the fluid’s table'
    if (!drive.coolant) return null
    const coolant = coolantModel(drive.coolant.coolant as string)
    if (drive.coolant.inletTemperature >= wall) return 'coolant warmer than the wall it is to hold'
    if (wall > coolant.maxTemperature) return 'coolant’s table ends below the wall'
    const length = result.tubeLength
    if (length === null || length > 1e6) return null
    const { duty: _, ...open } = kase
    const fastest = evaluate({
      ...open,
      drive: { kind: 'coolant', ...drive.coolant, velocity: FASTEST },
      bundle: { ...bundle, length },
    })
    return fastest.duty !== null && fastest.duty < (result.duty as number)
      ? 'wall and fouling alone resist more than the wall asked for allows'
      : null
  }
  const coolant = coolantModel(drive.coolant as string)
  const Tin = drive.inletTemperature
  if (Tin >= Ts) return 'coolant warmer than saturation'
  if (Tin < fluid.minTemperature) return 'coolant below the fluid’s table'
  if (kase.duty === undefined || drive.outletTemperature !== undefined) {
    const warmest = drive.outletTemperature ?? Ts
    return warmest > coolant.maxTemperature ? 'coolant’s table ends below saturation' : null
  }
  fillCoolant(coolant, Tin, water)
  const bore = (Math.PI / 4) * (tube.outsideDiameter - 2 * (tube.wallThickness as number)) ** 2
  const tubes = result.tubeCount as number
  const flow =
    drive.massFlow ?? (water[COOLANT_RHO] * (drive.velocity as number) * bore * tubes) / bundle.passes
  fillCoolant(coolant, 0.5 * (Tin + Math.min(Ts, coolant.maxTemperature)), water)
  const outlet = Tin + kase.duty / (flow * water[COOLANT_CP])
  if (outlet >= Ts) return 'duty beyond the coolant’s capacity'
  return outlet > coolant.maxTemperature ? 'coolant’s table ends below its outlet' : null
}
