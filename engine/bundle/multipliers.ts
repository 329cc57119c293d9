// Factors on the parts of a point that are not known exactly: sampled for uncertainty bands, given for corrections
// from bench data. One factor a group, the same in every row and pass.
import type { Card, MethodChoice } from '#engine/correlations/card.ts'
import { LAMINAR_LIMIT, TURBULENT_START } from '#engine/correlations/friction.ts'
import { findCard } from '#engine/correlations/registry.ts'

/** Published scatter of a group: sigma of the logarithm of its factor, null where the part is absent or by definition. */
export type Scatter = { sigmaLn: number | null; published: string; source: string }

type GroupInfo = {
  id: string
  label: string
  /** What the factor multiplies. */
  multiplies: string
  /** The method choice whose card carries the scatter, the card that does, or the scatter itself. */
  scatter: { choice: MethodChoice } | { card: string } | Scatter
}

const FOULING = {
  sigmaLn: 0.5,
  published: 'a factor of 2; a fixed design value may be policy instead',
  source: 'assumption of the uncertainty study',
} as const

/** The groups in their one order. */
export const MULTIPLIER_GROUPS = [
  {
    id: 'film',
    label: 'Film, quiescent vapour',
    multiplies: 'the coefficient of a clean tube in still vapour',
    scatter: { choice: 'film' },
  },
  {
    id: 'shear',
    label: 'Vapour shear',
    multiplies: 'what vapour flow adds to the coefficient in still vapour',
    scatter: { choice: 'vapourShear' },
  },
  {
    id: 'inundation',
    label: 'Inundation',
    multiplies: 'the row factor of every row below the first',
    scatter: { choice: 'inundation' },
  },
  {
    id: 'tubeSide',
    label: 'Coolant coefficient',
    multiplies: 'the coefficient inside the tubes',
    scatter: { choice: 'tubeSide' },
  },
  {
    id: 'coolantFriction',
    label: 'Coolant friction',
    multiplies: 'the friction factor inside the tubes',
    scatter: { choice: 'tubeFriction' },
  },
  {
    id: 'coolantLosses',
    label: 'Coolant end and return losses',
    multiplies: 'the velocity heads lost at tube ends and returns',
    scatter: { card: 'coolantPressureDrop.heads' },
  },
  {
    id: 'vapourDrop',
    label: 'Vapour pressure drop',
    multiplies: 'the loss coefficient of a row',
    scatter: { choice: 'vapourPressureDrop' },
  },
  {
    id: 'twoPhase',
    label: 'Two-phase multiplier',
    multiplies: 'a row’s loss over that of its vapour alone',
    scatter: { choice: 'twoPhase' },
  },
  {
    id: 'foulingInside',
    label: 'Inside fouling',
    multiplies: 'the fouling resistance inside',
    scatter: FOULING,
  },
  {
    id: 'foulingOutside',
    label: 'Outside fouling',
    multiplies: 'the fouling resistance outside',
    scatter: FOULING,
  },
  {
    id: 'wall',
    label: 'Wall conductivity',
    multiplies: 'the conductivity of the tube wall',
    scatter: { sigmaLn: 0.03, published: '±5 %', source: 'assumption of the material table' },
  },
] as const satisfies readonly GroupInfo[]

export type MultiplierGroup = (typeof MULTIPLIER_GROUPS)[number]['id']

export const MULTIPLIER_IDS = MULTIPLIER_GROUPS.map((group) => group.id) as [
  MultiplierGroup,
  ...MultiplierGroup[],
]

export type Multipliers = { [group in MultiplierGroup]: number }

/** A fresh set in which every factor is 1. */
export const unitMultipliers = (): Multipliers =>
  Object.fromEntries(MULTIPLIER_IDS.map((id) => [id, 1])) as Multipliers

/** Sigma of ln of a coolant coefficient blended between laminar and turbulent flow. */
const TRANSITION_SIGMA = 0.15

/** Whether a coolant is between laminar and turbulent flow at this Reynolds number. */
export const inTransition = (reynolds: number): boolean =>
  reynolds > LAMINAR_LIMIT && reynolds < TURBULENT_START

/** Scatter of a group under the methods of a case; `transition` where the coolant is between laminar and turbulent. */
export function scatterOf(
  id: MultiplierGroup,
  methods: Readonly<Record<MethodChoice, string>>,
  transition = false,
): Scatter {
  const { scatter } = MULTIPLIER_GROUPS.find((group) => group.id === id) as GroupInfo
  if ('sigmaLn' in scatter) return scatter
  const card = findCard(
    'card' in scatter ? scatter.card : `${scatter.choice}.${methods[scatter.choice]}`,
  ) as Card
  const sigmaLn =
    id === 'tubeSide' && transition ? Math.max(TRANSITION_SIGMA, card.sigmaLn ?? 0) : card.sigmaLn
  return { sigmaLn, published: card.scatter, source: card.source.join('; ') }
}
