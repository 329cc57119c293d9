// The key results kept for every point of a sweep, and the reasons a point may have none.
import type { Dimension } from '#engine/units.ts'

export type KeyResult = {
  id: string
  label: string
  symbol: string
  dimension: Dimension
  /** Head of the column in files: snake case, the unit last. */
  column: string
}

const key = (id: string, label: string, symbol: string, dimension: Dimension, column: string) => ({
  id,
  label,
  symbol,
  dimension,
  column,
})

/** Columns in storage order, Float64 each, NaN for null. Append only: stored columns keep their place. */
export const KEY_RESULTS: readonly KeyResult[] = [
  key('outcome', 'Outcome', '', 'none', 'outcome'),
  key('limitsNotMet', 'Limits not met', '', 'none', 'limits_not_met'),
  key('outsideArea', 'Outside area', 'A', 'area', 'outside_area_m2'),
  key('tubeLength', 'Tube length', 'L', 'length', 'tube_length_m'),
  key('duty', 'Duty', 'Q', 'power', 'duty_w'),
  key(
    'overallCoefficient',
    'Overall coefficient',
    'U',
    'heatTransferCoefficient',
    'overall_coefficient_w_m2k',
  ),
  key(
    'meanCoefficient',
    'Mean outside coefficient',
    'h_o',
    'heatTransferCoefficient',
    'mean_coefficient_w_m2k',
  ),
  key('coolantPressureDrop', 'Coolant pressure drop', 'Δp_c', 'pressure', 'coolant_pressure_drop_pa'),
  key('vapourPressureDrop', 'Vapour pressure drop', 'Δp_v', 'pressure', 'vapour_pressure_drop_pa'),
  key(
    'saturationTemperatureDrop',
    'Saturation temperature drop',
    'ΔT_s',
    'temperatureDifference',
    'saturation_temperature_drop_k',
  ),
  key('coolantVelocity', 'Coolant velocity', 'v_c', 'velocity', 'coolant_velocity_m_s'),
  key('coolantMassFlow', 'Coolant mass flow', 'm_c', 'massFlow', 'coolant_mass_flow_kg_s'),
  key(
    'coolantOutletTemperature',
    'Coolant outlet temperature',
    'T_c,out',
    'temperature',
    'coolant_outlet_temperature_k',
  ),
  key('meanWallSubcooling', 'Mean wall subcooling', 'x', 'temperatureDifference', 'mean_wall_subcooling_k'),
  key('tubeCount', 'Tubes', 'N', 'count', 'tube_count'),
  key('tubeMass', 'Tube mass', 'M_t', 'mass', 'tube_mass_kg'),
  key('pumpingPower', 'Pumping power', 'P_p', 'power', 'pumping_power_w'),
  key('yearlyCost', 'Yearly cost', 'C', 'money', 'yearly_cost'),
  key('bundleWidth', 'Bundle width', 'W', 'length', 'bundle_width_m'),
  key('bundleHeight', 'Bundle height', 'H', 'length', 'bundle_height_m'),
  key('notes', 'Notes', '', 'none', 'notes'),
]

/** Column of a key result by id. */
export const KEY_RESULT_INDEX: Readonly<Record<string, number>> = Object.fromEntries(
  KEY_RESULTS.map((result, column) => [result.id, column]),
)

export type Outcome = { code: string; text: string; remedy: string }

/** What became of a point; the position is the number stored. 0 is the only one that may be chosen. Append only. */
export const OUTCOMES: readonly Outcome[] = [
  { code: 'evaluated', text: 'evaluated', remedy: '' },
  {
    code: 'inputInvalid',
    text: 'the combination of inputs describes no bundle (wall, rows, passes or tubes)',
    remedy:
      'a wall thinner than the tube radius, whole rows and tubes of at least 1, no more passes than rows',
  },
  {
    code: 'propertyMissing',
    text: 'a chosen method needs a property that the fluid given by hand does not have',
    remedy: 'give the property or choose a method that does without it',
  },
  {
    code: 'saturationOutsideTable',
    text: "the saturation temperature is outside the fluid's table",
    remedy: "choose a state inside the fluid's range",
  },
  {
    code: 'coolantOutsideRange',
    text: "the coolant's inlet temperature is beyond freezing or outside its table",
    remedy: "choose an inlet temperature inside the coolant's range, or another coolant",
  },
  {
    code: 'coolantOutletOutsideRange',
    text: "the coolant's outlet temperature leaves its table",
    remedy: 'more coolant, or another coolant',
  },
  {
    code: 'coolantTooWarm',
    text: 'the coolant enters at or above the saturation temperature: nothing condenses',
    remedy: 'colder coolant or a higher saturation temperature',
  },
  {
    code: 'wallBelowRange',
    text: "the wall is below the condensing fluid's property range or freezing point",
    remedy: 'less wall subcooling or warmer coolant',
  },
  {
    code: 'vapourPressureExhausted',
    text: 'the vapour loses more than half its pressure across the rows',
    remedy: 'a wider or more open bundle, fewer rows, more length per duty, or less duty',
  },
  {
    code: 'vapourTooFast',
    text: 'the vapour between the tubes exceeds 0.7 of the speed of sound',
    remedy: 'a wider or more open bundle, more length, or less duty',
  },
  {
    code: 'dutyNotReached',
    text: 'no length is enough: the duty is beyond what the coolant can take up',
    remedy: 'a higher coolant velocity, more tubes, fewer passes, colder coolant or less duty',
  },
  {
    code: 'noVelocityHoldsWall',
    text: 'no coolant velocity holds this wall temperature',
    remedy: 'colder coolant, less fouling, a more conductive wall or less wall subcooling',
  },
  {
    code: 'outletNotReachable',
    text: 'the coolant outlet temperature asked for is not between its inlet and the saturation temperature',
    remedy: 'an outlet temperature between the two, or another flow',
  },
  {
    code: 'notSolved',
    text: 'the equations could not be brought to the required closeness',
    remedy: 'report the case; a neighbouring point usually solves',
  },
  {
    code: 'betweenStates',
    text: 'the duty lies between two steady states, one with the coolant laminar and one with it faster and warmer, and neither has it',
    remedy: 'a coolant flow clear of the laminar limit: a higher velocity, more passes or a thinner coolant',
  },
]

export const OUTCOME_INDEX: Readonly<Record<string, number>> = Object.fromEntries(
  OUTCOMES.map((outcome, index) => [outcome.code, index]),
)
