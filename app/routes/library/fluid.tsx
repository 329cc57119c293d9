// One condensing fluid: its saturation properties, at a state asked for and along the whole line, and their sources.
import { Form } from 'react-router'
import { LineChart } from '#app/components/charts/line-chart.tsx'
import { GRADE_WORDS, SAFETY_WORDS } from '#app/components/library/words.ts'
import { Button } from '#app/components/ui/button.tsx'
import { TextField } from '#app/components/ui/field.tsx'
import { MarginNote } from '#app/components/ui/margin-note.tsx'
import { Quantity, useUnits } from '#app/components/ui/number.tsx'
import { MarginPage, PageHead, Scroll, Sheet } from '#app/components/ui/page.tsx'
import { readQuantity } from '#app/components/ui/quantity-input.ts'
import { viewerContext } from '#app/http/context.ts'
import { AppError } from '#app/http/errors.ts'
import {
  findFluid,
  fluidModel,
  properties,
  type SaturationState,
  saturationPressure,
  saturationTemperature,
} from '#engine/fluids/index.ts'
import {
  type Dimension,
  type DisplayHint,
  displayUnit,
  formatQuantity,
  toDisplay,
  type UnitSystem,
} from '#engine/units.ts'
import type { Route } from './+types/fluid'

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData ? titleOf(loaderData.fluid) : 'Fluid'} · Rowfall` },
]

export const handle = {
  crumbs: ({ fluid }: Route.ComponentProps['loaderData']) => [
    { label: 'Library', to: '/library' },
    { label: titleOf(fluid), to: `/library/fluids/${fluid.id}` },
  ],
}

const titleOf = ({ name, ashrae }: { name: string; ashrae?: string }) => ashrae ?? name

const CHART_POINTS = 49
const TABLE_ROWS = 13

export function loader({ params, request, context }: Route.LoaderArgs) {
  const fluid = findFluid(params.fluidId)
  if (!fluid) throw new AppError('not-found', `There is no fluid "${params.fluidId}" in the library.`)
  const { units } = context.get(viewerContext)
  const asked = new URL(request.url).searchParams.get('at')?.trim() ?? ''
  return {
    fluid,
    line: properties(fluid.id, spread(fluid.range, CHART_POINTS)),
    table: properties(fluid.id, roundStates(fluid.range)),
    asked,
    state: asked === '' ? null : stateAt(fluid.id, asked, units),
  }
}

function spread([low, high]: [number, number], count: number): number[] {
  return Array.from({ length: count }, (_, i) =>
    i === count - 1 ? high : low + ((high - low) * i) / (count - 1),
  )
}

/** Round Celsius temperatures inside the range, its two ends included. */
function roundStates([low, high]: [number, number]): number[] {
  const rough = (high - low) / TABLE_ROWS
  const step = [5, 10, 20, 25, 50].find((size) => size >= rough) ?? 100
  const found: number[] = []
  for (let c = Math.ceil((low - 273.15) / step) * step; c + 273.15 <= high; c += step) found.push(c + 273.15)
  return [low, ...found.filter((T) => T - low > step / 5 && high - T > step / 5), high]
}

type State = { ok: true; values: SaturationState } | { ok: false; problem: string }

/** The state at a temperature or pressure as typed. */
function stateAt(id: string, text: string, units: UnitSystem): State {
  const model = fluidModel(id)
  const asTemperature = readQuantity(text, 'temperature', units)
  const asPressure = asTemperature.ok ? null : readQuantity(text, 'pressure', units)
  const range = [model.minTemperature, model.maxTemperature] as const
  const within = (dimension: Dimension, [low, high]: readonly [number, number]): State => ({
    ok: false,
    problem: `${text} is outside the table; give ${formatQuantity(low, dimension, units)} to ${formatQuantity(high, dimension, units)}.`,
  })
  if (asTemperature.ok) {
    const T = asTemperature.value
    return T >= range[0] && T <= range[1]
      ? { ok: true, values: properties(id, [T])[0] }
      : within('temperature', range)
  }
  if (asPressure?.ok) {
    const bounds = [saturationPressure(model, range[0]), saturationPressure(model, range[1])] as const
    return asPressure.value >= bounds[0] && asPressure.value <= bounds[1]
      ? { ok: true, values: properties(id, [saturationTemperature(model, asPressure.value)])[0] }
      : within('pressure', bounds)
  }
  return { ok: false, problem: `"${text}" is neither a temperature nor a pressure; write 40 °C or 10 bar.` }
}

type Property = { id: keyof SaturationState; label: string; dimension: Dimension; hint?: DisplayHint }

const PROPERTIES: Property[] = [
  { id: 'temperature', label: 'Temperature', dimension: 'temperature' },
  { id: 'pressure', label: 'Pressure', dimension: 'pressure' },
  { id: 'liquidDensity', label: 'Liquid density', dimension: 'density' },
  { id: 'vapourDensity', label: 'Vapour density', dimension: 'density' },
  { id: 'latentHeat', label: 'Latent heat', dimension: 'specificEnthalpy' },
  { id: 'liquidSpecificHeat', label: 'Liquid specific heat', dimension: 'specificHeat' },
  { id: 'vapourSpecificHeat', label: 'Vapour specific heat', dimension: 'specificHeat' },
  { id: 'liquidViscosity', label: 'Liquid viscosity', dimension: 'viscosity' },
  { id: 'vapourViscosity', label: 'Vapour viscosity', dimension: 'viscosity', hint: 'small' },
  { id: 'liquidConductivity', label: 'Liquid conductivity', dimension: 'conductivity' },
  { id: 'vapourConductivity', label: 'Vapour conductivity', dimension: 'conductivity' },
  { id: 'surfaceTension', label: 'Surface tension', dimension: 'surfaceTension' },
]
const propertyOf = (id: keyof SaturationState) => PROPERTIES.find((one) => one.id === id) as Property

/** Pairs share a plot where their sizes do. */
const PLOTS: { name: string; of: (keyof SaturationState)[] }[] = [
  { name: 'Pressure', of: ['pressure'] },
  { name: 'Latent heat', of: ['latentHeat'] },
  { name: 'Liquid density', of: ['liquidDensity'] },
  { name: 'Vapour density', of: ['vapourDensity'] },
  { name: 'Liquid viscosity', of: ['liquidViscosity'] },
  { name: 'Vapour viscosity', of: ['vapourViscosity'] },
  { name: 'Conductivity', of: ['liquidConductivity', 'vapourConductivity'] },
  { name: 'Specific heat', of: ['liquidSpecificHeat', 'vapourSpecificHeat'] },
  { name: 'Surface tension', of: ['surfaceTension'] },
]

export default function Fluid({ loaderData }: Route.ComponentProps) {
  const { fluid, line, table, asked, state } = loaderData
  const units = useUnits()
  const show = (id: keyof SaturationState, value: number) => {
    const { dimension, hint } = propertyOf(id)
    return toDisplay(value, dimension, units, hint).value
  }
  const temperatures = line.map(({ temperature }) => show('temperature', temperature))
  const [low, high] = fluid.range.map((T) => formatQuantity(T, 'temperature', units, { digits: 4 }))
  return (
    <MarginPage marginLabel="About this fluid" margin={<About fluid={fluid} />}>
      <PageHead
        over={fluid.ashrae ? `${fluid.name}, ${fluid.formula}` : fluid.formula}
        title={`${titleOf(fluid)} condenses here from ${low} to ${high}`}
        reason={`The table begins at its ${reasonText(fluid.rangeReason[0])} and ends at ${reasonText(fluid.rangeReason[1])}.`}
      />
      <Sheet title="One state">
        <Form method="get" className="flex max-w-xl flex-wrap items-start gap-3" preventScrollReset>
          <TextField
            label="Saturation temperature or pressure"
            name="at"
            defaultValue={asked}
            hint={`A bare number is ${displayUnit('temperature', units)}; "10 bar" or "150 psi" asks by pressure.`}
            fault={state && !state.ok ? state.problem : null}
            className="grow basis-64"
          />
          <Button type="submit" className="mt-6">
            Show the state
          </Button>
        </Form>
        {state?.ok ? (
          <dl className="mt-3 grid gap-x-10 sm:grid-cols-2">
            {PROPERTIES.map(({ id, label, dimension, hint }) => (
              <div key={id} className="flex justify-between gap-4 border-t border-line py-1">
                <dt className="text-soft">{label}</dt>
                <dd className="font-semibold">
                  <Quantity value={state.values[id]} dimension={dimension} hint={hint} digits={5} />
                </dd>
              </div>
            ))}
          </dl>
        ) : null}
      </Sheet>
      <Sheet title="Along the saturation line" flush>
        <Scroll label="Saturation properties">
          <table className="data-table">
            <caption className="visually-hidden">Saturation properties of {titleOf(fluid)}</caption>
            <thead>
              <tr>
                {PROPERTIES.map(({ id, label, dimension, hint }) => (
                  <th key={id} scope="col" className="numeric">
                    {label}, {displayUnit(dimension, units, hint)}
                  </th>
                ))}
              </tr>
            </thead>
            <tbody>
              {table.map((row) => (
                <tr key={row.temperature}>
                  {PROPERTIES.map(({ id, dimension, hint }) => (
                    <td key={id} className="numeric">
                      <Quantity value={row[id]} dimension={dimension} hint={hint} digits={4} unit={false} />
                    </td>
                  ))}
                </tr>
              ))}
            </tbody>
          </table>
        </Scroll>
      </Sheet>
      <div className="grid gap-5 md:grid-cols-2">
        {PLOTS.map(({ name, of }) => (
          <Sheet key={name} title={name}>
            <LineChart
              name={`${name} of ${titleOf(fluid)} along the saturation line`}
              x={{ label: 'Saturation temperature', unit: displayUnit('temperature', units) }}
              y={{
                label: name,
                unit: displayUnit(propertyOf(of[0]).dimension, units, propertyOf(of[0]).hint),
              }}
              lines={of.map((id) => ({
                label: propertyOf(id).label,
                x: temperatures,
                y: line.map((row) => show(id, row[id])),
              }))}
            />
          </Sheet>
        ))}
      </div>
    </MarginPage>
  )
}

/** "0.98*T_crit" and the like, as a sentence goes on. */
function reasonText(reason: string): string {
  return reason
    .replace(/(\d[\d.]*)\*T_crit/g, '$1 of the critical temperature')
    .replace(/T_triple/g, 'triple point')
}

function About({ fluid }: { fluid: Route.ComponentProps['loaderData']['fluid'] }) {
  const danger = SAFETY_WORDS[fluid.safetyClass?.value ?? '']
  return (
    <>
      <div className="grid gap-3.5">
        {danger ? (
          <MarginNote
            tone="attention"
            title={`Safety class ${fluid.safetyClass?.value}: ${danger}.`}
            source={`ASHRAE 34, ${fluid.safetyClass?.basis}`}
          >
            Charge, ventilation and siting follow local codes and licensed practice.
          </MarginNote>
        ) : null}
        {(['viscosity', 'conductivity'] as const).map((of) => {
          const { tone, meaning } = GRADE_WORDS[fluid.grades[of]]
          return (
            <MarginNote
              key={of}
              tone={tone === 'attention' ? 'attention' : 'sound'}
              title={`${of === 'viscosity' ? 'Viscosity' : 'Conductivity'}: ${fluid.grades[of]}.`}
              source={fluid.sources[of]}
            >
              {meaning}
            </MarginNote>
          )
        })}
        <MarginNote
          title="Density, latent and specific heat, pressure."
          source={fluid.sources.equationOfState}
        />
        <MarginNote title="Surface tension." source={fluid.sources.surfaceTension} />
        {fluid.note ? (
          <MarginNote tone={/suspect|wrong|expect/i.test(fluid.note) ? 'attention' : 'sound'} title="Note.">
            {fluid.note}
          </MarginNote>
        ) : null}
      </div>
      <dl className="facts">
        {fluid.safetyClass && !danger ? (
          <>
            <dt>Safety class</dt>
            <dd>{fluid.safetyClass.value}</dd>
          </>
        ) : null}
        <dt>Molar mass</dt>
        <dd>
          <Quantity value={fluid.molarMass} dimension="molarMass" digits={5} />
        </dd>
        <dt>Critical temperature</dt>
        <dd>
          <Quantity value={fluid.criticalTemperature} dimension="temperature" digits={5} />
        </dd>
        <dt>Critical pressure</dt>
        <dd>
          <Quantity value={fluid.criticalPressure} dimension="pressure" hint="large" digits={4} />
        </dd>
        <dt>Triple point</dt>
        <dd>
          <Quantity value={fluid.tripleTemperature} dimension="temperature" digits={4} />
        </dd>
        <dt>CAS number</dt>
        <dd>{fluid.cas}</dd>
      </dl>
    </>
  )
}
