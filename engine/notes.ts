// The notes a result may carry: codes in storage order, with severity and source.

export type Severity = 'info' | 'caution' | 'outOfRange' | 'notMet'

export type Note = { code: string; severity: Severity; text: string; source: string }

/** Every note code; the position is the bit in a point's notes mask (at most 53). Append only: stored masks keep their meaning. */
export const NOTE_CODES = [
  'filmReynoldsHigh',
  'jakobNumberHigh',
  'nearCritical',
  'referenceTemperatureOutsideTable',
  'sheetUnderFixedExponent',
  'manyRows',
  'chenBeyondRange',
  'eissenbergClipped',
  'drainageModeArea',
  'rowLawCountsVerticalLine',
  'coolantTransition',
  'coolantVelocityOutsideWindow',
  'coolantApproachSmall',
  'coolantOutletNearWall',
  'innerWallNearFreezing',
  'coolantMethodRange',
  'vapourReynoldsRange',
  'fewRows',
  'pitchRatioWide',
  'vapourPressureDropHigh',
  'vapourMomentumHigh',
  'vapourSonic',
  'vibrationNotCovered',
  'unevenPasses',
  'noCoolantState',
  'noTubeMass',
  'economicsAssumed',
  'vacuumSteamWithoutGas',
  'ammoniaWithoutFouling',
  'fluidSafety',
  'propertyGrade',
  'methodUnverified',
  'desuperheatingDry',
  'idleRows',
  'shearRange',
  'circularFlowWidth',
  'noVapourState',
  'noSurfaceTension',
  'tubesPerRowChosen',
  'gasReynoldsLow',
  'rowBlanketed',
  'gasMoleFractionHigh',
  'ventAssumed',
  'finsFlooded',
  'finSpacingWide',
  'beattyKatzRange',
  'finMethodsDisagree',
  'dropwiseSubcooling',
  'dropwiseTemperature',
  'dropwiseLife',
  'layoutRange',
  'corrected',
] as const

export type NoteCode = (typeof NOTE_CODES)[number]

export const NOTE_BIT: Readonly<Record<NoteCode, number>> = Object.fromEntries(
  NOTE_CODES.map((code, bit) => [code, bit]),
) as Record<NoteCode, number>

/** Short labels for lists and filters. */
export const NOTE_LABELS: Readonly<Record<NoteCode, string>> = {
  filmReynoldsHigh: 'Film beyond laminar',
  jakobNumberHigh: 'High Jakob number',
  nearCritical: 'Near the critical point',
  referenceTemperatureOutsideTable: 'Film temperature outside the table',
  sheetUnderFixedExponent: 'Sheet drainage under a fixed exponent',
  manyRows: 'More than 30 rows',
  chenBeyondRange: 'Chen row law beyond its range',
  eissenbergClipped: 'Eissenberg row law clipped',
  drainageModeArea: 'Area by the drainage-mode law',
  rowLawCountsVerticalLine: 'Row law counts tubes in a vertical line',
  coolantTransition: 'Coolant in transition',
  coolantVelocityOutsideWindow: "Coolant velocity outside the material's window",
  coolantApproachSmall: 'Coolant leaves close to saturation',
  coolantOutletNearWall: 'Coolant leaves close to the wall temperature',
  innerWallNearFreezing: 'Inner wall near freezing',
  coolantMethodRange: 'Tube-side method outside its range',
  vapourReynoldsRange: 'Vapour Reynolds number outside the range',
  fewRows: 'Fewer than 5 rows',
  pitchRatioWide: 'Wide pitch',
  vapourPressureDropHigh: 'Vapour pressure drop above 10 %',
  vapourMomentumHigh: 'Vapour momentum high',
  vapourSonic: 'Vapour above 0.3 of sonic speed',
  vibrationNotCovered: 'Vibration not covered',
  unevenPasses: 'Uneven passes',
  noCoolantState: 'No coolant state',
  noTubeMass: 'No tube mass',
  economicsAssumed: 'Assumed economics',
  vacuumSteamWithoutGas: 'Vacuum steam without gas',
  ammoniaWithoutFouling: 'Ammonia without outside fouling',
  fluidSafety: 'Flammable or toxic fluid',
  propertyGrade: 'Transport properties estimated',
  methodUnverified: 'Method from memory, unverified',
  desuperheatingDry: 'Dry wall under superheat',
  idleRows: 'Idle rows',
  shearRange: 'Vapour shear outside its range',
  circularFlowWidth: 'Vapour path in a round bundle',
  noVapourState: 'No vapour state',
  noSurfaceTension: 'No surface tension',
  tubesPerRowChosen: 'Tubes per row chosen',
  gasReynoldsLow: 'Gas-side Reynolds number low',
  rowBlanketed: 'Row blanketed by gas',
  gasMoleFractionHigh: 'Gas fraction high at the exit',
  ventAssumed: 'Vent fraction assumed',
  finsFlooded: 'Fins flooded',
  finSpacingWide: 'Fin spacing outside the range',
  beattyKatzRange: 'Beatty-Katz outside its range',
  finMethodsDisagree: 'Fin methods disagree',
  dropwiseSubcooling: 'Dropwise subcooling high',
  dropwiseTemperature: 'Dropwise outside its temperatures',
  dropwiseLife: 'Dropwise promotion is short-lived',
  layoutRange: 'Layout outside the loss method',
  corrected: 'Corrected from bench data',
}

/** The codes in a notes mask, in storage order. */
export function noteCodes(mask: number): NoteCode[] {
  if (!(mask > 0)) return []
  const codes: NoteCode[] = []
  let rest = mask
  for (let bit = 0; rest > 0 && bit < NOTE_CODES.length; bit++) {
    if (rest % 2 === 1) codes.push(NOTE_CODES[bit])
    rest = Math.floor(rest / 2)
  }
  return codes
}
