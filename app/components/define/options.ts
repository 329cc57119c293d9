// What the Define form offers to choose from, read from the engine's registries; sent by the loader, so that the page
// needs none of the engine's tables.
import { METHOD_CHOICES, type MethodChoice } from '#engine/case.ts'
import { cards } from '#engine/correlations/registry.ts'
import { coolants, fluids } from '#engine/fluids/index.ts'
import { materials } from '#engine/materials.ts'
import { tubeCatalogue } from '#engine/tubes.ts'

export type FormOptions = ReturnType<typeof formOptions>

export function formOptions() {
  return {
    fluids: fluids.map(({ id, name, formula, ashrae, safetyClass, range, criticalTemperature, grades }) => ({
      id,
      label: fluidLabel(name, formula, ashrae),
      safety: safetyClass?.value ?? '',
      range,
      criticalTemperature,
      estimated: [grades.viscosity, grades.conductivity].some(
        (grade) => grade.startsWith('entropy') || grade === 'suspect',
      ),
    })),
    coolants: coolants.map(({ id, name, range, freezingTemperature }) => ({
      id,
      label: name,
      range,
      freezingTemperature,
    })),
    materials: materials.map(({ id, name, conductivity, velocityRange }) => ({
      id,
      label: name,
      conductivity,
      velocityRange,
    })),
    tubes: tubeCatalogue.map(({ id, outsideDiameter, wallThickness, gauge }) => ({
      id,
      outsideDiameter,
      wallThickness,
      gauge,
    })),
    methods: Object.fromEntries(
      Object.entries(METHOD_CHOICES).map(([choice, ids]) => [
        choice,
        ids.map((id, i) => {
          const card = cards.find((card) => card.choice === choice && card.methodId === id)
          return {
            id,
            label: card?.name ?? id,
            evidence: card?.evidence ?? '',
            isDefault: i === 0,
            available: card?.available ?? true,
          }
        }),
      ]),
    ) as Record<
      MethodChoice,
      { id: string; label: string; evidence: string; isDefault: boolean; available: boolean }[]
    >,
  }
}

/** Halogenated fluids go by their refrigerant number, all others by name with the number behind it. */
function fluidLabel(name: string, formula: string, ashrae: string | undefined): string {
  const number = ashrae?.replace('-', '')
  if (!number) return name
  return /F|Cl/.test(formula) ? number : `${name} (${number})`
}
