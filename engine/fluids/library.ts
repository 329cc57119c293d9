/** The library's fluids and coolants: what people read (cards) and what the solver holds (models). */
import { coolantCoefficients, fluidCoefficients } from './coefficients.ts'
import type { CoolantModel, FluidModel } from './model.ts'
import { COOLANT_STRIDE, STRIDE } from './model.ts'
import coolantTable from './tables/coolants.json' with { type: 'json' }
import fluidTable from './tables/fluids.json' with { type: 'json' }

/** How the transport properties of a fluid came about, as its source says. */
export type Grade = 'correlation of data' | 'fitted ECS' | 'entropy scaling, estimated LJ' | 'suspect'

/** What a person reads about a fluid; SI units. */
export type FluidCard = {
  id: string
  name: string
  formula: string
  /** Refrigerant number of ASHRAE 34, e.g. "R-134a". */
  ashrae?: string
  cas: string
  /** [kg/mol] */
  molarMass: number
  /** [K], [Pa] */
  criticalTemperature: number
  criticalPressure: number
  tripleTemperature: number
  /** Temperatures the data covers [K], and why it ends there. */
  range: [number, number]
  rangeReason: [string, string]
  safetyClass?: { value: string; basis: string }
  grades: { viscosity: Grade; conductivity: Grade }
  sources: { equationOfState: string; viscosity: string; conductivity: string; surfaceTension: string }
  note?: string
}

/** What a person reads about a coolant; SI units. */
export type CoolantCard = {
  id: string
  name: string
  model: string
  /** Temperatures the data covers [K]. */
  range: [number, number]
  freezingTemperature: number
  massFraction?: number
  /** Pressure the table was computed at [Pa], where it matters. */
  pressure?: number
  note?: string
  sources: string[]
}

export const fluids: readonly FluidCard[] = fluidTable.fluids.map((f) => ({
  id: f.id,
  name: f.common_name,
  formula: f.formula,
  ...(f.ashrae_number ? { ashrae: f.ashrae_number } : {}),
  cas: f.cas,
  molarMass: f.molar_mass_kg_mol,
  criticalTemperature: f.T_crit_K,
  criticalPressure: f.p_crit_Pa,
  tripleTemperature: f.T_triple_K,
  range: [f.T_range_K[0], f.T_range_K[1]],
  rangeReason: [f.T_min_reason, f.T_max_reason],
  ...(f.safety_class_ashrae34 ? { safetyClass: f.safety_class_ashrae34 } : {}),
  grades: { viscosity: f.grades.viscosity as Grade, conductivity: f.grades.conductivity as Grade },
  sources: {
    equationOfState: f.sources.equation_of_state,
    viscosity: f.sources.viscosity,
    conductivity: f.sources.conductivity,
    surfaceTension: f.sources.surface_tension,
  },
  ...(f.note ? { note: f.note } : {}),
}))

export const coolants: readonly CoolantCard[] = coolantTable.coolants.map((c) => {
  const note = [c.note, c.T_freeze_note].filter(Boolean).join('. ')
  return {
    id: c.id,
    name: c.name,
    model: c.model,
    range: [c.T_range_K[0], c.T_range_K[1]],
    freezingTemperature: c.T_freeze_K,
    ...(c.mass_fraction === undefined ? {} : { massFraction: c.mass_fraction }),
    ...(c.pressure_Pa === undefined ? {} : { pressure: c.pressure_Pa }),
    ...(note ? { note } : {}),
    sources: [...Object.values(c.sources), ...(c.T_freeze_source ? [c.T_freeze_source] : [])],
  }
})

/** Other names a case may use for a coolant. */
export const coolantAliases: Readonly<Record<string, string>> = { seawater: 'seawater-35' }

const fluidCards = new Map(fluids.map((card) => [card.id, card]))
const coolantCards = new Map(coolants.map((card) => [card.id, card]))

const fluidModels = new Map<string, FluidModel>(
  fluidCoefficients.map(({ id, range, data }) => {
    const card = fluidCards.get(id)
    if (!card) throw new Error(`coefficients.ts holds ${id}, which tables/fluids.json lacks: run npm run fit`)
    return [
      id,
      {
        id,
        data: Float64Array.from(data),
        segments: data.length / STRIDE,
        minTemperature: range[0],
        maxTemperature: range[1],
        criticalTemperature: card.criticalTemperature,
        criticalPressure: card.criticalPressure,
        molarMass: card.molarMass,
        fixed: false,
      },
    ]
  }),
)

const coolantModels = new Map<string, CoolantModel>(
  coolantCoefficients.map(({ id, range, data }) => {
    const card = coolantCards.get(id)
    if (!card)
      throw new Error(`coefficients.ts holds ${id}, which tables/coolants.json lacks: run npm run fit`)
    return [
      id,
      {
        id,
        data: Float64Array.from(data),
        segments: data.length / COOLANT_STRIDE,
        minTemperature: range[0],
        maxTemperature: range[1],
        freezingTemperature: card.freezingTemperature,
        fixed: false,
      },
    ]
  }),
)

/** The card of a library fluid. */
export function findFluid(id: string): FluidCard | undefined {
  return fluidCards.get(id)
}

/** The card of a library coolant; aliases are understood. */
export function findCoolant(id: string): CoolantCard | undefined {
  return coolantCards.get(coolantAliases[id] ?? id)
}

/** The numeric record of a library fluid. Throws on an unknown id: ask `findFluid` first. */
export function fluidModel(id: string): FluidModel {
  const model = fluidModels.get(id)
  if (!model) throw new RangeError(`there is no fluid ${id}`)
  return model
}

/** The numeric record of a library coolant; aliases are understood. Throws on an unknown id. */
export function coolantModel(id: string): CoolantModel {
  const model = coolantModels.get(coolantAliases[id] ?? id)
  if (!model) throw new RangeError(`there is no coolant ${id}`)
  return model
}
