// The cards of the methods a point was computed with: those that had a part in it, in the order a reader meets them.
import type { Case } from '#engine/case.ts'
import type { Card } from '#engine/correlations/card.ts'
import { cardsFor, METHOD_CHOICES, methodCard } from '#engine/correlations/registry.ts'
import type { Result } from '#engine/result.ts'

export type SheetCard = Pick<
  Card,
  'id' | 'choice' | 'name' | 'equation' | 'symbols' | 'source' | 'rangeText' | 'scatter' | 'evidence'
>

const pick = ({
  id,
  choice,
  name,
  equation,
  symbols,
  source,
  rangeText,
  scatter,
  evidence,
}: Card): SheetCard => ({
  id,
  choice,
  name,
  equation,
  symbols,
  source,
  rangeText,
  scatter,
  evidence,
})

/** Whether a choice of method had a part in this case. */
function takesPart(choice: string, bundle: Case, result: Result): boolean {
  const surface = bundle.tube.surface.kind
  switch (choice) {
    case 'fins':
      return surface === 'integralFin'
    case 'dropwise':
      return surface === 'dropwise'
    case 'film':
      return surface !== 'dropwise'
    case 'gas':
      return bundle.vapour.gas !== undefined
    case 'tubeSide':
    case 'tubeFriction':
      return result.coolant !== null
    case 'twoPhase':
      return result.methods.vapourPressureDrop !== 'none'
    default:
      return true
  }
}

export function sheetCards(bundle: Case, result: Result): SheetCard[] {
  const chosen = METHOD_CHOICES.flatMap((choice) => {
    const card = methodCard(choice, result.methods[choice])
    return card && takesPart(choice, bundle, result) ? [pick(card)] : []
  })
  const always = [
    ...(result.coolant ? cardsFor('coolantPressureDrop') : []),
    ...(bundle.tube.wallThickness === undefined ? [] : cardsFor('wall')),
    ...cardsFor('geometry').filter(
      ({ id }) => id !== 'geometry.circular' || bundle.bundle.shape === 'circular',
    ),
  ]
  return [...chosen, ...always.map(pick)]
}
