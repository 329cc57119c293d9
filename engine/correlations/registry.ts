/** The one registry of correlation cards: listings, documentation, validation and tests all walk it. */
import type { Card, CardChoice, FluidProperty, MethodChoice } from './card.ts'
import { crossflowCards } from './crossflow.ts'
import { dropwiseCards } from './dropwise.ts'
import { economicsCards } from './economics.ts'
import { filmCards } from './film.ts'
import { finCards } from './fins.ts'
import { frictionCards } from './friction.ts'
import { gasCards } from './gas.ts'
import { geometryCards } from './geometry.ts'
import { inundationCards } from './inundation.ts'
import { shearCards } from './shear.ts'
import { tubeSideCards } from './tube-side.ts'
import { vapourDropCards } from './vapour-drop.ts'
import { verticalFilmCards } from './vertical-film.ts'

/** Every card, in the order a reader meets them. */
export const cards: readonly Card[] = [
  ...filmCards,
  ...inundationCards,
  ...shearCards,
  ...finCards,
  ...dropwiseCards,
  ...gasCards,
  ...tubeSideCards,
  ...frictionCards,
  ...vapourDropCards,
  ...crossflowCards,
  ...verticalFilmCards,
  ...geometryCards,
  ...economicsCards,
]

/** The method choices of a case in the order they are listed. */
export const METHOD_CHOICES = [
  'film',
  'latentHeat',
  'propertyTemperature',
  'inundation',
  'vapourShear',
  'fins',
  'dropwise',
  'gas',
  'tubeSide',
  'tubeFriction',
  'vapourPressureDrop',
  'twoPhase',
] as const satisfies readonly MethodChoice[]

/** Card with this id, e.g. `inundation.condensateFlow`; undefined when there is none. */
export function findCard(id: string): Card | undefined {
  return cards.find((card) => card.id === id)
}

/** Cards whose id is `id`, or failing that whose method id is `id` (`nusselt` is both a film and a row law). */
export function findCards(id: string): readonly Card[] {
  const exact = findCard(id)
  return exact ? [exact] : cards.filter((card) => card.methodId === id)
}

/** All cards of a choice, selectable or not. */
export function cardsFor(choice: CardChoice): readonly Card[] {
  return cards.filter((card) => card.choice === choice)
}

/** Method ids of a choice that a case may name today, default first. */
export function methodIds(choice: MethodChoice): readonly string[] {
  return cardsFor(choice)
    .filter((card) => card.methodId !== undefined && card.available)
    .sort((a, b) => Number(b.default ?? false) - Number(a.default ?? false))
    .map((card) => card.methodId as string)
}

/** Id of the default method of a choice. */
export function defaultMethod(choice: MethodChoice): string {
  const card = cardsFor(choice).find((one) => one.default)
  if (card?.methodId === undefined) throw new Error(`The registry names no default for ${choice}.`)
  return card.methodId
}

/** Card of a chosen method, e.g. `methodCard('film', 'chen')`. */
export function methodCard(choice: MethodChoice, methodId: string): Card | undefined {
  return cards.find((card) => card.choice === choice && card.methodId === methodId)
}

/** Fluid properties a set of chosen methods needs, each with the choice and method that asks for it first. */
export function requiredProperties(
  methods: Readonly<Partial<Record<MethodChoice, string>>>,
): readonly { property: FluidProperty; choice: MethodChoice; methodId: string }[] {
  const needed = new Map<FluidProperty, { property: FluidProperty; choice: MethodChoice; methodId: string }>()
  for (const choice of METHOD_CHOICES) {
    const methodId = methods[choice]
    if (methodId === undefined) continue
    for (const property of methodCard(choice, methodId)?.requires ?? []) {
      if (!needed.has(property)) needed.set(property, { property, choice, methodId })
    }
  }
  return [...needed.values()]
}
