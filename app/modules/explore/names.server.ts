// Names of the ids in a case, looked up on the server: the library behind them has no place in a page's script.

import type { Case } from '#engine/case.ts'
import type { MethodChoice } from '#engine/correlations/card.ts'
import { METHOD_CHOICES, methodCard } from '#engine/correlations/registry.ts'
import { findCoolant, findFluid } from '#engine/fluids/index.ts'
import { findMaterial } from '#engine/materials.ts'
import type { SweptValue } from '#engine/sweep/study.ts'
import { tubeCatalogue } from '#engine/tubes.ts'
import type { CaseNames } from './case-words.ts'

const LAYOUTS: Record<string, string> = {
  triangular30: '30° triangular',
  triangular60: '60° triangular',
  square90: '90° square',
  square45: '45° square',
}

const mm = (metres: number) => Number((metres * 1000).toPrecision(6))

/** Halogenated fluids go by their refrigerant number in the trade, the others by their name. */
export function fluidName(id: string): string {
  const card = findFluid(id)
  if (!card) return id
  return card.ashrae && /fluoro/i.test(card.name) ? card.ashrae.replace('-', '') : card.name
}

/** The name of a swept choice's value, by the variable's path. */
export function choiceName(path: string, id: string): string {
  if (path === 'fluid') return fluidName(id)
  if (path === 'tube.material') return findMaterial(id)?.name ?? id
  if (path === 'bundle.layout') return LAYOUTS[id] ?? id
  if (path.endsWith('coolant')) return findCoolant(id)?.name ?? id
  if (path === 'tube') {
    const tube = tubeCatalogue.find((entry) => entry.id === id)
    return tube ? `${mm(tube.outsideDiameter)} × ${mm(tube.wallThickness)} mm` : id
  }
  const choice = path.startsWith('methods.') ? path.slice('methods.'.length) : ''
  if (METHOD_CHOICES.some((known) => known === choice))
    return methodCard(choice as MethodChoice, id)?.name ?? id
  return id
}

/** Names of every text value of some variables, by path. */
export function choiceNames(
  variables: readonly { path: string; values: readonly SweptValue[] }[],
): Record<string, Record<string, string>> {
  const names: Record<string, Record<string, string>> = {}
  for (const { path, values } of variables)
    for (const value of values)
      if (typeof value === 'string') {
        names[path] ??= {}
        names[path][value] = choiceName(path, value)
      }
  return names
}

export function caseNames(bundle: Case): CaseNames {
  const { fluid, drive, tube } = bundle
  const coolant = drive.kind === 'coolant' ? drive.coolant : drive.coolant?.coolant
  const card = typeof fluid === 'string' ? findFluid(fluid) : undefined
  return {
    fluid: typeof fluid === 'string' ? fluidName(fluid) : 'Fluid given by hand',
    fluidFormula: card?.formula ?? null,
    safetyClass: card?.safetyClass ?? null,
    coolant:
      coolant === undefined
        ? null
        : typeof coolant === 'string'
          ? (findCoolant(coolant)?.name ?? coolant)
          : 'Coolant given by hand',
    material: tube.material ? (findMaterial(tube.material)?.name ?? tube.material) : null,
  }
}
