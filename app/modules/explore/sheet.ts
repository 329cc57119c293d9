// A point's calculation as the sheet lists it: inputs in groups, results with symbol and equation, sums to check.
import type { Case } from '#engine/case.ts'
import { isStaggered } from '#engine/correlations/geometry.ts'
import type { Result, RowResult } from '#engine/result.ts'
import { type Dimension, type DisplayHint, toDisplay, type UnitSystem } from '#engine/units.ts'
import { type CaseNames, surfaceText } from './case-words.ts'

export type Entry = {
  label: string
  symbol?: string
  hint?: DisplayHint
  /** What stands behind the value: an equation, "given", "assumption". */
  from?: string
} & ({ value: number | null; dimension: Dimension } | { text: string })

export type EntryGroup = { title: string; entries: Entry[] }

const quantity = (
  label: string,
  symbol: string,
  value: number | null | undefined,
  dimension: Dimension,
  more: { hint?: DisplayHint; from?: string } = {},
): Entry => ({ label, symbol, value: value ?? null, dimension, ...more })

const LAYOUTS: Record<Case['bundle']['layout'], string> = {
  triangular30: '30° triangular',
  triangular60: '60° triangular',
  square90: '90° square',
  square45: '45° square',
}

/** Diameter that areas and coefficients stand on: the fin root of a finned tube, otherwise the outside. */
export function areaDiameter({ tube }: Case): number {
  return tube.surface.kind === 'integralFin'
    ? tube.outsideDiameter - 2 * tube.surface.finHeight
    : tube.outsideDiameter
}

export function sheetInputs(bundle: Case, names: CaseNames, units: UnitSystem): EntryGroup[] {
  const { tube, vapour, drive, economics } = bundle
  const field = bundle.bundle
  const coolantSide = drive.kind === 'coolant' ? drive : drive.coolant
  const inside = tube.wallThickness === undefined ? null : areaDiameter(bundle) - 2 * tube.wallThickness
  const safety = names.safetyClass ? `, ASHRAE 34 class ${names.safetyClass.value}` : ''
  return [
    {
      title: 'Fluid and duty',
      entries: [
        { label: 'Fluid', text: `${names.fluid}${safety}` },
        ...(bundle.saturationTemperature !== undefined
          ? [
              quantity(
                'Saturation temperature at the inlet',
                'T_s',
                bundle.saturationTemperature,
                'temperature',
              ),
            ]
          : [quantity('Saturation pressure at the inlet', 'p_s', bundle.saturationPressure, 'pressure')]),
        ...(bundle.duty !== undefined
          ? [quantity('Duty given', 'Q', bundle.duty, 'power')]
          : [quantity('Tube length given', 'L', field.length, 'length')]),
        ...(vapour.superheat > 0
          ? [quantity('Superheat', 'ΔT_sh', vapour.superheat, 'temperatureDifference')]
          : []),
        ...(vapour.gas
          ? [
              quantity('Air in the inlet mixture', 'y_g', vapour.gas.moleFraction, 'fraction'),
              quantity('Vapour vented with the gas', 'f_v', vapour.gas.ventFraction, 'fraction', {
                from: 'assumption',
              }),
            ]
          : []),
      ],
    },
    {
      title: drive.kind === 'coolant' ? 'Coolant given' : 'Wall subcooling given',
      entries: [
        ...(drive.kind === 'wallSubcooling'
          ? [quantity('Wall subcooling', 'x', drive.wallSubcooling, 'temperatureDifference')]
          : []),
        ...(coolantSide
          ? [
              { label: 'Coolant', text: names.coolant ?? '–' },
              quantity('Inlet temperature', 'T_c,in', coolantSide.inletTemperature, 'temperature'),
            ]
          : [{ label: 'Coolant', text: 'none named' }]),
        ...(drive.kind === 'coolant'
          ? [
              ...(drive.velocity === undefined
                ? []
                : [quantity('Velocity', 'v_c', drive.velocity, 'velocity')]),
              ...(drive.massFlow === undefined
                ? []
                : [quantity('Mass flow', 'm_c', drive.massFlow, 'massFlow')]),
              ...(drive.outletTemperature === undefined
                ? []
                : [quantity('Outlet temperature', 'T_c,out', drive.outletTemperature, 'temperature')]),
            ]
          : []),
        ...(coolantSide
          ? [
              quantity(
                'Fouling, on the inside area',
                'R_f,i',
                coolantSide.foulingResistance,
                'foulingResistance',
              ),
            ]
          : []),
      ],
    },
    {
      title: 'Tube',
      entries: [
        quantity('Outside diameter', 'D_o', tube.outsideDiameter, 'length', { hint: 'tube' }),
        ...(tube.wallThickness === undefined
          ? []
          : [quantity('Wall', 't_w', tube.wallThickness, 'length', { hint: 'tube' })]),
        ...(inside === null
          ? []
          : [
              quantity('Inside diameter', 'D_i', inside, 'length', {
                hint: 'tube',
                from: tube.surface.kind === 'integralFin' ? 'root − 2 t_w' : 'D_o − 2 t_w',
              }),
            ]),
        { label: 'Material', text: names.material ?? '–' },
        ...(tube.conductivity === undefined
          ? []
          : [quantity('Wall conductivity', 'k_w', tube.conductivity, 'conductivity')]),
        { label: 'Surface', text: surfaceText(bundle, units) },
        quantity('Inside roughness', 'ε', tube.roughness, 'length', { hint: 'roughness' }),
        quantity('Outside fouling', 'R_f,o', tube.outsideFoulingResistance, 'foulingResistance'),
      ],
    },
    {
      title: 'Bundle',
      entries: [
        { label: 'Shape', text: field.shape },
        { label: 'Layout', text: LAYOUTS[field.layout] },
        quantity('Pitch ratio', 'P/D_o', field.pitchRatio, 'none'),
        quantity('Pitch', 'P', field.pitchRatio * tube.outsideDiameter, 'length', { hint: 'tube' }),
        quantity('Rows', 'N_r', field.rows, 'count'),
        ...(field.shape === 'circular'
          ? [{ label: 'Tubes per row', text: 'as the chords of the circle' }]
          : field.tubesPerRow === 'auto'
            ? [{ label: 'Tubes per row', text: 'from the coolant flow and velocity' }]
            : [quantity('Tubes per row', 'N_t', field.tubesPerRow, 'count')]),
        quantity('Passes', 'N_p', field.passes, 'count'),
        { label: 'Coolant enters at the', text: field.coolantEntry },
        ...(isStaggered(field.layout) ? [{ label: 'Alternate rows', text: 'half a pitch aside' }] : []),
      ],
    },
    {
      title: 'Economics',
      entries: [
        quantity('Tube field, per outside area', 'c_A', economics.tubePrice, 'areaPrice'),
        quantity('Electricity', 'c_e', economics.energyPrice, 'energyPrice'),
        { label: 'Operating hours a year', text: String(economics.hoursPerYear) },
        { label: 'Years', text: String(economics.years) },
        quantity('Interest a year', 'i', economics.interest, 'fraction'),
        quantity('Pump efficiency', 'η', economics.pumpEfficiency, 'fraction'),
      ],
    },
  ]
}

/** Which method stands behind a group of results, as the choices whose cards explain it. */
export type ResultGroup = EntryGroup & { choices: readonly string[] }

export function sheetResults(bundle: Case, result: Result): ResultGroup[] {
  const finned = bundle.tube.surface.kind === 'integralFin'
  const { coolant, vapour } = result
  return [
    {
      title: 'Size and heat',
      choices: [],
      entries: [
        quantity('Duty', 'Q', result.duty, 'power', { from: 'Q = Σ q A over the rows' }),
        quantity('Condensate', 'm_l', result.condensateRate, 'massFlow', {
          from: 'Σ q A / Δh over the rows',
        }),
        quantity('Outside area', 'A', result.outsideArea, 'area', {
          from: finned ? 'A = π D_root L N, on the fin root' : 'A = π D_o L N',
        }),
        quantity('Tube length', 'L', result.tubeLength, 'length', {
          from: result.question === 'size' ? 'from the duty' : 'given',
        }),
        quantity('Tubes', 'N', result.tubeCount, 'count', { from: 'Σ tubes of the rows' }),
        quantity('Overall coefficient', 'U', result.overallCoefficient, 'heatTransferCoefficient', {
          from: 'U = Q / (A ΔT_m)',
        }),
        quantity(
          'Mean temperature difference',
          'ΔT_m',
          result.meanTemperatureDifference,
          'temperatureDifference',
          {
            from: 'log mean of T_s − T_c,in and T_s − T_c,out',
          },
        ),
      ],
    },
    {
      title: 'Condensing side',
      choices: [
        'film',
        'inundation',
        'vapourShear',
        'fins',
        'dropwise',
        'gas',
        'latentHeat',
        'propertyTemperature',
      ],
      entries: [
        quantity('Mean outside coefficient', 'h_o', result.meanCoefficient, 'heatTransferCoefficient', {
          from: 'h_o = Q / Σ A x',
        }),
        quantity('Mean heat flux', 'q', result.meanHeatFlux, 'heatFlux', { from: 'q = Q / A' }),
        ...(result.filmModeArea === undefined
          ? []
          : [
              quantity('Area if the surface wets', 'A_film', result.filmModeArea, 'area', {
                from: 'the same bundle with film condensation',
              }),
            ]),
      ],
    },
    ...(coolant
      ? [
          {
            title: 'Coolant side',
            choices: ['tubeSide', 'tubeFriction', 'coolantPressureDrop'],
            entries: [
              quantity('Mass flow', 'm_c', coolant.massFlow, 'massFlow', {
                from: 'm_c = ρ v_c π D_i²/4 · N/N_p',
              }),
              quantity('Velocity', 'v_c', coolant.velocity, 'velocity'),
              quantity('Reynolds number', 'Re_c', coolant.reynolds, 'none', { from: 'Re = ρ v_c D_i / μ' }),
              quantity('Inside coefficient', 'h_i', coolant.coefficient, 'heatTransferCoefficient'),
              quantity('Inlet temperature', 'T_c,in', coolant.inletTemperature, 'temperature'),
              quantity('Outlet temperature', 'T_c,out', coolant.outletTemperature, 'temperature', {
                from: 'Q = m_c c_p (T_c,out − T_c,in)',
              }),
              quantity('Pressure drop', 'Δp_c', coolant.pressureDrop, 'pressure', {
                from: 'friction, ends and turns of all passes',
              }),
              quantity('Pumping power', 'P_p', result.pumpingPower, 'power', {
                hint: 'small',
                from: 'P_p = m_c Δp_c / (ρ η)',
              }),
            ],
          },
        ]
      : []),
    {
      title: 'Vapour side',
      choices: ['vapourPressureDrop', 'twoPhase'],
      entries: [
        quantity('Inlet velocity, frontal', 'u_v', vapour.inletVelocity, 'velocity'),
        quantity('Pressure drop across the rows', 'Δp_v', vapour.pressureDrop, 'pressure', { hint: 'small' }),
        quantity(
          'Saturation temperature lost',
          'ΔT_s',
          vapour.saturationTemperatureDrop,
          'temperatureDifference',
        ),
        ...(vapour.ventFlow === undefined
          ? []
          : [quantity('Vapour vented', 'm_vent', vapour.ventFlow, 'massFlow')]),
      ],
    },
    {
      title: 'Bundle and cost',
      choices: ['geometry', 'economics'],
      entries: [
        quantity('Width', 'W', result.bundle.width, 'length'),
        quantity('Height', 'H', result.bundle.height, 'length'),
        quantity('Tube mass', 'M_t', result.bundle.tubeMass, 'mass'),
        quantity('Yearly cost', 'C', result.yearlyCost, 'moneyPerYear', {
          from: 'tube field as an annuity, and pumping',
        }),
      ],
    },
  ]
}

/** Heat of a row, q A of its tubes. */
export function rowHeat(row: RowResult, bundle: Case, length: number | null): number | null {
  return length === null ? null : row.heatFlux * row.tubes * Math.PI * areaDiameter(bundle) * length
}

export type Check = { left: string; right: string; differs: number }

const digits = (value: number, count = 6) => String(Number(value.toPrecision(count)))

/** Sums that can be done again by calculator from what the sheet prints, in the reader's units. */
export function sheetChecks(bundle: Case, result: Result, units: UnitSystem): Check[] {
  const checks: Check[] = []
  const { duty, overallCoefficient, outsideArea, meanTemperatureDifference, tubeLength } = result
  if (duty === null) return checks
  const power = (watts: number) => toDisplay(watts, 'power', units)
  const q = power(duty)
  if (overallCoefficient !== null && outsideArea !== null && meanTemperatureDifference !== null) {
    const u = toDisplay(overallCoefficient, 'heatTransferCoefficient', units)
    const a = toDisplay(outsideArea, 'area', units)
    const dt = toDisplay(meanTemperatureDifference, 'temperatureDifference', units)
    const product = overallCoefficient * outsideArea * meanTemperatureDifference
    // U in W/(m²·K) gives watts; the page shows kilowatts.
    const scale = units === 'si' ? ' / 1000' : ''
    checks.push({
      left: `U A ΔT_m = ${digits(u.value)} × ${digits(a.value)} × ${digits(dt.value)}${scale} = ${digits(power(product).value)}\u00a0${q.unit}`,
      right: `Q = ${digits(q.value)}\u00a0${q.unit}`,
      differs: product / duty - 1,
    })
  }
  const rows = result.rows.map((row) => rowHeat(row, bundle, tubeLength))
  if (rows.length > 0 && rows.every((heat) => heat !== null)) {
    const sum = rows.reduce((a, b) => a + b, 0)
    checks.push({
      left: `Σ q A over ${rows.length} ${rows.length === 1 ? 'row' : 'rows'} = ${digits(power(sum).value)}\u00a0${q.unit}`,
      right: `Q = ${digits(q.value)}\u00a0${q.unit}`,
      differs: sum / duty - 1,
    })
  }
  return checks
}
