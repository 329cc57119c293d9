// A case in the few words that set one point apart from another.
import type { Case } from '#engine/case.ts'
import { toDisplay, type UnitSystem } from '#engine/units.ts'

export type CaseNames = {
  fluid: string
  fluidFormula: string | null
  safetyClass: { value: string; basis: string } | null
  coolant: string | null
  material: string | null
}

const plain = (value: number) => String(Number(value.toPrecision(4)))

/** A tube's diameter or wall in the unit tubes are bought in. */
export function tubeSize(metres: number, units: UnitSystem): string {
  const { value, unit } = toDisplay(metres, 'length', units, 'tube')
  return `${plain(value)}\u00a0${unit}`
}

/** "19.05 mm tubes in 14 rows"; with the fluid where the study compares fluids. */
export function describeCase(
  bundle: Case,
  names: CaseNames,
  swept: readonly string[],
  units: UnitSystem,
): string {
  const { rows } = bundle.bundle
  const words = `${tubeSize(bundle.tube.outsideDiameter, units)} tubes in ${rows} ${rows === 1 ? 'row' : 'rows'}`
  return swept.includes('fluid') ? `${words}, ${names.fluid}` : words
}

/** "19.05 × 1.65 mm" */
export function tubeText({ tube }: Case, units: UnitSystem): string {
  if (tube.wallThickness === undefined) return tubeSize(tube.outsideDiameter, units)
  const outside = toDisplay(tube.outsideDiameter, 'length', units, 'tube')
  const wall = toDisplay(tube.wallThickness, 'length', units, 'tube')
  return `${plain(outside.value)} × ${plain(wall.value)}\u00a0${outside.unit}`
}

export function surfaceText({ tube }: Case, units: UnitSystem): string {
  const { surface } = tube
  if (surface.kind === 'plain') return 'plain'
  if (surface.kind === 'dropwise') return `dropwise promoted (${surface.promoter})`
  const per = toDisplay(surface.finsPerMetre, 'perLength', units)
  return `integral fins, ${plain(per.value)} ${per.unit}, ${tubeSize(surface.finHeight, units)} high, ${tubeSize(surface.finThickness, units)} thick`
}
