// The library's own words: what choices, evidence and safety classes are called on its pages.
import type { Tone } from '../ui/tag.tsx'

export const CHOICE_LABELS: Record<string, string> = {
  film: 'Film on one tube',
  latentHeat: 'Latent heat in the film',
  propertyTemperature: 'Temperature of the film properties',
  inundation: 'Inundation',
  vapourShear: 'Vapour shear',
  fins: 'Integral fins',
  dropwise: 'Dropwise condensation',
  gas: 'Non-condensable gas',
  tubeSide: 'Heat transfer in the tubes',
  tubeFriction: 'Friction in the tubes',
  coolantPressureDrop: 'Coolant pressure drop',
  vapourPressureDrop: 'Vapour pressure drop',
  twoPhase: 'Condensate in the vapour passage',
  vapourSide: 'Vapour side',
  filmReference: 'Film references',
  wall: 'Wall and fouling',
  geometry: 'Geometry',
  economics: 'Yearly cost',
}

/** How far a card's numbers can be leaned on: seen and checked, or from memory. */
export function evidenceTone(evidence: string): Tone {
  if (/^printed value|^formula seen|^derived|^definition/.test(evidence)) return 'sound'
  return evidence === 'assumption' ? 'neutral' : 'attention'
}

/** ASHRAE 34 safety classes in words; undefined for those that need no caution. */
export const SAFETY_WORDS: Record<string, string | undefined> = {
  A2L: 'mildly flammable',
  A2: 'flammable',
  A3: 'highly flammable',
  B1: 'toxic',
  B2L: 'toxic, mildly flammable',
  B2: 'toxic, flammable',
  B3: 'toxic, highly flammable',
}

export const GRADE_WORDS: Record<string, { label: string; tone: Tone; meaning: string }> = {
  'correlation of data': { label: 'data', tone: 'sound', meaning: 'A correlation of measurements.' },
  'fitted ECS': {
    label: 'fitted',
    tone: 'sound',
    meaning: 'Extended corresponding states, fitted to measurements of this fluid.',
  },
  'entropy scaling, estimated LJ': {
    label: 'estimated',
    tone: 'attention',
    meaning: 'Entropy scaling with estimated molecular parameters: expect errors of 5 to 10 %.',
  },
  suspect: {
    label: 'suspect',
    tone: 'attention',
    meaning: 'Disagrees with handbook values; the note says how far.',
  },
}
