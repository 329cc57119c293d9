// What a sweep may vary: each path into the case with its label, dimension and kind.
import type { Dimension } from '#engine/units.ts'

export type SweepKind = 'number' | 'whole' | 'choice'

export interface SweepPathInfo {
  path: string
  label: string
  symbol: string
  dimension: Dimension
  kind: SweepKind
  /** Head of the column in files: snake case, the unit last. */
  column: string
  /** Tube-sized lengths read in millimetres or inches. */
  tubeSized?: boolean
  /** Paths of which the case may carry only one: this one takes their place only if they are absent. */
  insteadOf?: readonly string[]
  /** The drive under which the path exists. */
  drive?: 'wallSubcooling' | 'coolant'
}

const number = (
  path: string,
  label: string,
  symbol: string,
  dimension: Dimension,
  column: string,
  more: Partial<SweepPathInfo> = {},
): SweepPathInfo => ({ path, label, symbol, dimension, kind: 'number', column, ...more })

const whole = (path: string, label: string, symbol: string, column: string): SweepPathInfo => ({
  path,
  label,
  symbol,
  dimension: 'count',
  kind: 'whole',
  column,
})

const choice = (
  path: string,
  label: string,
  column: string,
  more: Partial<SweepPathInfo> = {},
): SweepPathInfo => ({ path, label, symbol: '', dimension: 'none', kind: 'choice', column, ...more })

const tubeSized = { tubeSized: true }
const coolantDrive = { drive: 'coolant' } as const
const subcoolingDrive = { drive: 'wallSubcooling' } as const

/** The path a tube catalogue variable stands under: outside diameter and wall together. */
export const CATALOGUE_PATH = 'tube'

/** Every path a sweep may vary, in the order a form lists them. */
export const SWEEP_PATHS: readonly SweepPathInfo[] = [
  choice('fluid', 'Fluid', 'fluid'),
  number(
    'saturationTemperature',
    'Saturation temperature',
    'T_s',
    'temperature',
    'saturation_temperature_k',
    { insteadOf: ['saturationPressure'] },
  ),
  number('saturationPressure', 'Saturation pressure', 'p_s', 'pressure', 'saturation_pressure_pa', {
    insteadOf: ['saturationTemperature'],
  }),
  number('duty', 'Duty', 'Q', 'power', 'duty_given_w', { insteadOf: ['bundle.length'] }),

  number(
    'drive.wallSubcooling',
    'Wall subcooling',
    'x',
    'temperatureDifference',
    'wall_subcooling_k',
    subcoolingDrive,
  ),
  choice('drive.coolant', 'Coolant', 'coolant', coolantDrive),
  number(
    'drive.inletTemperature',
    'Coolant inlet temperature',
    'T_c,in',
    'temperature',
    'coolant_inlet_temperature_k',
    coolantDrive,
  ),
  number('drive.velocity', 'Coolant velocity', 'v_c', 'velocity', 'coolant_velocity_given_m_s', {
    ...coolantDrive,
    insteadOf: ['drive.massFlow', 'drive.outletTemperature'],
  }),
  number('drive.massFlow', 'Coolant mass flow', 'm_c', 'massFlow', 'coolant_mass_flow_given_kg_s', {
    ...coolantDrive,
    insteadOf: ['drive.velocity', 'drive.outletTemperature'],
  }),
  number(
    'drive.outletTemperature',
    'Coolant outlet temperature',
    'T_c,out',
    'temperature',
    'coolant_outlet_temperature_given_k',
    { ...coolantDrive, insteadOf: ['drive.velocity', 'drive.massFlow'] },
  ),
  number(
    'drive.foulingResistance',
    'Inside fouling resistance',
    'R_f,i',
    'foulingResistance',
    'inside_fouling_resistance_m2k_w',
    coolantDrive,
  ),
  choice('drive.coolant.coolant', 'Coolant', 'coolant', subcoolingDrive),
  number(
    'drive.coolant.inletTemperature',
    'Coolant inlet temperature',
    'T_c,in',
    'temperature',
    'coolant_inlet_temperature_k',
    subcoolingDrive,
  ),
  number(
    'drive.coolant.foulingResistance',
    'Inside fouling resistance',
    'R_f,i',
    'foulingResistance',
    'inside_fouling_resistance_m2k_w',
    subcoolingDrive,
  ),

  number(
    'tube.outsideDiameter',
    'Tube outside diameter',
    'D_o',
    'length',
    'tube_outside_diameter_m',
    tubeSized,
  ),
  number('tube.wallThickness', 'Tube wall thickness', 't_w', 'length', 'tube_wall_thickness_m', tubeSized),
  choice('tube.material', 'Tube material', 'tube_material', { insteadOf: ['tube.conductivity'] }),
  number('tube.conductivity', 'Wall conductivity', 'k_w', 'conductivity', 'wall_conductivity_w_mk', {
    insteadOf: ['tube.material'],
  }),
  number('tube.roughness', 'Inside roughness', 'ε', 'length', 'inside_roughness_m', tubeSized),
  number(
    'tube.outsideFoulingResistance',
    'Outside fouling resistance',
    'R_f,o',
    'foulingResistance',
    'outside_fouling_resistance_m2k_w',
  ),
  number('tube.surface.finsPerMetre', 'Fins per metre', 'n_f', 'perLength', 'fins_per_metre'),
  number('tube.surface.finHeight', 'Fin height', 'h_f', 'length', 'fin_height_m', tubeSized),
  number('tube.surface.finThickness', 'Fin thickness', 't_f', 'length', 'fin_thickness_m', tubeSized),
  number('tube.surface.contactAngle', 'Contact angle', 'θ', 'angle', 'contact_angle_rad'),
  number('tube.surface.degradation', 'Dropwise share kept', 'f_d', 'fraction', 'dropwise_degradation'),

  choice('bundle.layout', 'Layout', 'layout'),
  number('bundle.pitchRatio', 'Pitch ratio', 'P/D_o', 'none', 'pitch_ratio'),
  whole('bundle.rows', 'Rows', 'N_r', 'rows'),
  whole('bundle.tubesPerRow', 'Tubes per row', 'N_t', 'tubes_per_row'),
  whole('bundle.passes', 'Passes', 'N_p', 'passes'),
  choice('bundle.coolantEntry', 'Coolant entry', 'coolant_entry'),
  choice('bundle.shape', 'Bundle shape', 'bundle_shape'),
  number('bundle.length', 'Tube length', 'L', 'length', 'tube_length_given_m', { insteadOf: ['duty'] }),

  number('vapour.superheat', 'Superheat', 'ΔT_sh', 'temperatureDifference', 'superheat_k'),
  number('vapour.gas.moleFraction', 'Gas mole fraction', 'y_g', 'fraction', 'gas_mole_fraction'),
  number('vapour.gas.ventFraction', 'Vent fraction', 'f_v', 'fraction', 'vent_fraction'),

  ...(
    [
      ['film', 'Film method'],
      ['latentHeat', 'Latent heat method'],
      ['propertyTemperature', 'Property temperature'],
      ['inundation', 'Inundation method'],
      ['vapourShear', 'Vapour shear method'],
      ['fins', 'Fin method'],
      ['dropwise', 'Dropwise method'],
      ['gas', 'Gas method'],
      ['tubeSide', 'Tube side method'],
      ['tubeFriction', 'Tube friction method'],
      ['vapourPressureDrop', 'Vapour pressure drop method'],
      ['twoPhase', 'Two-phase multiplier'],
    ] as const
  ).map(([key, label]) =>
    choice(`methods.${key}`, label, `${key.replace(/[A-Z]/g, (c) => `_${c.toLowerCase()}`)}_method`),
  ),

  number('economics.tubePrice', 'Tube price', 'c_A', 'money', 'tube_price_per_m2'),
  number('economics.energyPrice', 'Energy price', 'c_e', 'energyPrice', 'energy_price_per_kwh'),
]

const byPath = new Map(SWEEP_PATHS.map((info) => [info.path, info]))

export const findSweepPath = (path: string): SweepPathInfo | undefined => byPath.get(path)
