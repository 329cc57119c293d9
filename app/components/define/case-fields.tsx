// The base case as an engineer thinks of it: duty and fluid, coolant or subcooling, tube, bundle, vapour, methods.
import type { ReactNode } from 'react'
import { CheckField, ChoiceField, SelectField, TextField } from '#app/components/ui/field.tsx'
import { Sheet } from '#app/components/ui/page.tsx'
import { type Dimension, type DisplayHint, formatQuantity } from '#engine/units.ts'
import { useForm } from './form-context.tsx'
import { isActive, METHOD_NAMES, varyMode } from './form-fields.ts'
import { CaseChoice, CaseQuantity } from './vary.tsx'

const COMMON = 'common practice'

/** SI values as the reader's units show them, for the sentences under the fields. */
function useSay() {
  const { units } = useForm()
  return (value: number, dimension: Dimension, hint?: DisplayHint) =>
    formatQuantity(value, dimension, units, { digits: 3, hint })
}

function Choice({
  name,
  label,
  options,
  help,
}: {
  name: string
  label: string
  options: { value: string; label: string }[]
  help?: ReactNode
}) {
  const { fields, set, fault } = useForm()
  return (
    <ChoiceField
      name={name}
      label={label}
      options={options}
      hint={help}
      fault={fault(name)}
      value={fields[name] ?? ''}
      onChange={(event) => set(name, event.target.value)}
    />
  )
}

function Fold({ title, open, children }: { title: ReactNode; open: boolean; children: ReactNode }) {
  return (
    <details className="define-fold" open={open || undefined}>
      <summary>{title}</summary>
      <div className="pt-3">{children}</div>
    </details>
  )
}

function Group({ title, id, children }: { title: string; id: string; children: ReactNode }) {
  return (
    <Sheet title={title}>
      <fieldset id={id} className="min-w-0" aria-label={title}>
        <div className="grid gap-5">{children}</div>
      </fieldset>
    </Sheet>
  )
}

export function DutyAndFluid() {
  const { fields, options } = useForm()
  const say = useSay()
  const fluid = options.fluids.find((entry) => entry.id === fields.fluid)
  const about = fluid
    ? [
        `Table from ${say(fluid.range[0], 'temperature')} to ${say(fluid.range[1], 'temperature')}.`,
        fluid.safety ? `Safety class ${fluid.safety} (ASHRAE 34).` : '',
        fluid.estimated ? 'Transport properties estimated.' : '',
      ]
        .filter(Boolean)
        .join(' ')
    : 'A library fluid, or properties held constant for a hand check.'
  return (
    <Group title="Duty and fluid" id="duty-and-fluid">
      <div className="define-grid">
        <CaseChoice
          name="fluid"
          label="Condensing fluid"
          help={about}
          empty={fields.fluid ? undefined : 'choose a fluid'}
          options={[
            ...options.fluids.map(({ id, label, safety }) => ({
              value: id,
              label: safety ? `${label}, ${safety}` : label,
            })),
            { value: 'given', label: 'properties given by hand' },
          ]}
        />
        <div className="grid gap-3">
          <Choice
            name="state"
            label="State at the bundle’s inlet by"
            options={[
              { value: 'temperature', label: 'saturation temperature' },
              { value: 'pressure', label: 'pressure' },
            ]}
          />
          {fields.state === 'pressure' ? (
            <CaseQuantity
              name="saturationPressure"
              label="Saturation pressure"
              symbol="pₛ"
              help="Total pressure of the vapour that enters the bundle."
            />
          ) : (
            <CaseQuantity
              name="saturationTemperature"
              label="Saturation temperature"
              symbol="Tₛ"
              help={`Water-cooled chillers ${say(308.15, 'temperature')} to ${say(318.15, 'temperature')}, steam surface condensers ${say(303.15, 'temperature')} to ${say(318.15, 'temperature')} (${COMMON}).`}
            />
          )}
        </div>
        <div className="grid gap-3">
          <Choice
            name="question"
            label="Question"
            options={[
              { value: 'size', label: 'size: the length for a duty' },
              { value: 'rate', label: 'rate: the duty of a length' },
            ]}
          />
          {fields.question === 'rate' ? (
            <CaseQuantity
              name="bundle.length"
              label="Tube length"
              symbol="L"
              help={`Standard lengths ${[2.438, 3.048, 3.658, 4.877, 6.096].map((length) => say(length, 'length')).join(', ')}.`}
            />
          ) : (
            <CaseQuantity
              name="duty"
              label="Duty"
              symbol="Q"
              help="Heat given up by the vapour, desuperheating included."
            />
          )}
        </div>
      </div>
      {fields.fluid === 'given' ? (
        <div className="define-grid">
          <CaseQuantity
            vary={false}
            name="fluid.properties.liquidDensity"
            label="Liquid density"
            symbol="ρₗ"
          />
          <CaseQuantity vary={false} name="fluid.properties.latentHeat" label="Latent heat" />
          <CaseQuantity
            vary={false}
            name="fluid.properties.liquidViscosity"
            label="Liquid viscosity"
            symbol="μₗ"
          />
          <CaseQuantity
            vary={false}
            name="fluid.properties.liquidConductivity"
            label="Liquid conductivity"
            symbol="kₗ"
          />
          <CaseQuantity
            vary={false}
            optional
            name="fluid.properties.vapourDensity"
            label="Vapour density"
            symbol="ρᵥ"
            help="Needed by the shear and vapour pressure drop methods."
          />
          <CaseQuantity
            vary={false}
            optional
            name="fluid.properties.liquidSpecificHeat"
            label="Liquid specific heat"
            help="Needed by the Rohsenow latent heat."
          />
          <CaseQuantity
            vary={false}
            optional
            name="fluid.properties.surfaceTension"
            label="Surface tension"
            symbol="σ"
            help="Needed by the drainage mode."
          />
          <CaseQuantity
            vary={false}
            optional
            name="fluid.properties.vapourViscosity"
            label="Vapour viscosity"
            symbol="μᵥ"
            help="Needed by the vapour pressure drop."
          />
          <CaseQuantity
            vary={false}
            optional
            name="fluid.properties.pressure"
            label="Pressure"
            help="Needed by the vapour pressure drop."
          />
          <CaseQuantity vary={false} optional name="fluid.properties.molarMass" label="Molar mass" />
        </div>
      ) : null}
    </Group>
  )
}

export function Drive() {
  const { fields, set, options } = useForm()
  const say = useSay()
  const subcooling = fields['drive.kind'] === 'wallSubcooling'
  const named = isActive('coolant.id', fields)
  const coolant = options.coolants.find((entry) => entry.id === fields['coolant.id'])
  const material = options.materials.find((entry) => entry.id === fields['tube.material'])
  const auto = (fields['bundle.tubesPerRow'] ?? '').trim().toLowerCase() === 'auto'
  return (
    <Group title={subcooling ? 'Wall subcooling' : 'Coolant'} id="drive">
      <Choice
        name="drive.kind"
        label="What holds the wall cold"
        options={[
          { value: 'coolant', label: 'a coolant: the wall follows' },
          { value: 'wallSubcooling', label: 'a given wall subcooling' },
        ]}
      />
      {subcooling ? (
        <div className="define-grid">
          <CaseQuantity
            name="drive.wallSubcooling"
            label="Wall subcooling"
            symbol="Tₛ − T_w"
            help={`The same in every row. Refrigerants ${say(2, 'temperatureDifference')} to ${say(8, 'temperatureDifference')}, steam ${say(5, 'temperatureDifference')} to ${say(15, 'temperatureDifference')} (${COMMON}).`}
          />
          <CheckField
            name="coolant.named"
            value="yes"
            label="Name the coolant that would hold it"
            hint="Its velocity, outlet temperature and pressure drop are then found, and may be limited."
            checked={fields['coolant.named'] === 'yes'}
            onChange={(event) => set('coolant.named', event.target.checked ? 'yes' : '')}
          />
        </div>
      ) : null}
      {named ? (
        <div className="define-grid">
          <CaseChoice
            name="coolant.id"
            label="Coolant"
            empty={fields['coolant.id'] ? undefined : 'choose a coolant'}
            help={
              coolant
                ? `Table from ${say(coolant.range[0], 'temperature')} to ${say(coolant.range[1], 'temperature')}; freezes at ${say(coolant.freezingTemperature, 'temperature')}.`
                : undefined
            }
            options={[
              ...options.coolants.map(({ id, label }) => ({ value: id, label })),
              { value: 'given', label: 'properties given by hand' },
            ]}
          />
          <CaseQuantity
            name="coolant.inletTemperature"
            label="Inlet temperature"
            symbol="T_c,in"
            help={`Cooling tower water ${say(298.15, 'temperature')} to ${say(305.15, 'temperature')} (${COMMON}).`}
          />
          {subcooling ? null : (
            <div className="grid gap-3">
              <Choice
                name="flow"
                label="Flow by"
                options={[
                  { value: 'velocity', label: 'velocity' },
                  { value: 'massFlow', label: 'mass flow' },
                  ...(fields.question === 'rate' ? [] : [{ value: 'outletTemperature', label: 'outlet' }]),
                ]}
              />
              {fields.flow === 'velocity' || auto ? (
                <CaseQuantity
                  name="drive.velocity"
                  label="Velocity in the tubes"
                  symbol="v_c"
                  help={
                    material
                      ? `Usual for ${material.label.toLowerCase()}: ${say(material.velocityRange[0], 'velocity')} to ${say(material.velocityRange[1], 'velocity')} (assumption of the material table).`
                      : 'At the inlet temperature’s density, in the first pass.'
                  }
                />
              ) : null}
              {fields.flow === 'massFlow' ? (
                <CaseQuantity
                  name="drive.massFlow"
                  label="Mass flow"
                  symbol="m_c"
                  help="Of the whole bundle."
                />
              ) : null}
              {fields.flow === 'outletTemperature' ? (
                <CaseQuantity
                  name="drive.outletTemperature"
                  label="Outlet temperature"
                  symbol="T_c,out"
                  help="Below the saturation temperature."
                />
              ) : null}
            </div>
          )}
          <CaseQuantity
            name="coolant.foulingResistance"
            label="Inside fouling resistance"
            symbol="R_f,i"
            help={`On the inside area. Treated tower water ${say(1.76e-4, 'foulingResistance')}, clean closed loops ${say(8.8e-5, 'foulingResistance')} (${COMMON}).`}
          />
        </div>
      ) : null}
      {named && fields['coolant.id'] === 'given' ? (
        <div className="define-grid">
          <CaseQuantity vary={false} name="coolant.properties.density" label="Coolant density" />
          <CaseQuantity vary={false} name="coolant.properties.specificHeat" label="Coolant specific heat" />
          <CaseQuantity vary={false} name="coolant.properties.viscosity" label="Coolant viscosity" />
          <CaseQuantity vary={false} name="coolant.properties.conductivity" label="Coolant conductivity" />
        </div>
      ) : null}
    </Group>
  )
}

export function Tube() {
  const { fields, setAll, options, units, disabled } = useForm()
  const say = useSay()
  const byCatalogue = fields['vary.tube.catalogue'] === 'list'
  const chosen = (fields['vary.tube.catalogue.values'] ?? '').split(/\s+/).filter(Boolean)
  const tubes = options.tubes.map((tube) => ({
    ...tube,
    label: `${say(tube.outsideDiameter, 'length', 'tube')} × ${formatQuantity(tube.wallThickness, 'length', units, { digits: 3, hint: 'tube' })}`,
  }))
  const pick = (id: string) => {
    const tube = options.tubes.find((entry) => entry.id === id)
    if (!tube) return
    const mm = (metres: number) => `${Number((metres * 1000).toPrecision(6))} mm`
    setAll({ 'tube.outsideDiameter': mm(tube.outsideDiameter), 'tube.wallThickness': mm(tube.wallThickness) })
  }
  const tick = (id: string, on: boolean) =>
    setAll({
      'vary.tube.catalogue.values': options.tubes
        .map((tube) => tube.id)
        .filter((tube) => (tube === id ? on : chosen.includes(tube)))
        .join(' '),
    })
  return (
    <Group title="Tube" id="tube">
      <div className="grid gap-2">
        <CheckField
          name="vary.tube.catalogue"
          value="list"
          label="Vary over standard tubes"
          hint="Sets outside diameter and wall together, from the TEMA list of exchanger tubing."
          checked={byCatalogue}
          disabled={disabled}
          onChange={(event) =>
            setAll({
              'vary.tube.catalogue': event.target.checked ? 'list' : '',
              ...(event.target.checked
                ? { 'vary.tube.outsideDiameter': '', 'vary.tube.wallThickness': '' }
                : {}),
            })
          }
        />
        {byCatalogue ? (
          <div className="varied">
            <input type="hidden" name="vary.tube.catalogue.values" value={chosen.join(' ')} />
            {/* biome-ignore lint/a11y/useSemanticElements: a short group of ticks under the box that opens it */}
            <div role="group" aria-label="Standard tubes" className="ticks scroll-thin">
              {tubes.map((tube) => (
                <label key={tube.id} className="tick">
                  <input
                    type="checkbox"
                    checked={chosen.includes(tube.id)}
                    disabled={disabled}
                    onChange={(event) => tick(tube.id, event.target.checked)}
                  />
                  {tube.label}
                </label>
              ))}
            </div>
          </div>
        ) : null}
      </div>
      <div className="define-grid">
        <CaseQuantity
          name="tube.outsideDiameter"
          label="Outside diameter"
          symbol="D_o"
          vary={!byCatalogue}
          help={`Standard tubing ${say(0.009525, 'length', 'tube')} to ${say(0.03175, 'length', 'tube')} (TEMA).`}
        />
        <CaseQuantity
          name="tube.wallThickness"
          label="Wall thickness"
          symbol="t_w"
          vary={!byCatalogue}
          help="Under the fins, where there are any."
        />
        <SelectField
          label="Fill in a standard tube"
          name="standard-tube"
          disabled={disabled}
          value=""
          onChange={(event) => pick(event.target.value)}
          options={[
            { value: '', label: 'outside diameter × wall' },
            ...tubes.map(({ id, label }) => ({ value: id, label })),
          ]}
        />
        <div className="grid gap-3">
          <Choice
            name="wallBy"
            label="Wall by"
            options={[
              { value: 'material', label: 'material' },
              { value: 'conductivity', label: 'conductivity' },
            ]}
          />
          {fields.wallBy === 'conductivity' ? (
            <CaseQuantity name="tube.conductivity" label="Wall conductivity" symbol="k_w" />
          ) : (
            <CaseChoice
              name="tube.material"
              label="Material"
              empty="not named"
              options={options.materials.map(({ id, label }) => ({ value: id, label }))}
              help={(() => {
                const material = options.materials.find((entry) => entry.id === fields['tube.material'])
                return material
                  ? `Conductivity ${say(material.conductivity, 'conductivity')}, a handbook value from memory.`
                  : 'Needed with a coolant.'
              })()}
            />
          )}
        </div>
        <CaseQuantity
          name="tube.outsideFoulingResistance"
          label="Outside fouling resistance"
          symbol="R_f,o"
          optional
          help={`Ammonia with oil ${say(1.76e-4, 'foulingResistance')}; clean vapour none (${COMMON}).`}
        />
        <CaseQuantity
          name="tube.roughness"
          label="Inside roughness"
          symbol="ε"
          optional
          help={`Drawn tubing ${say(1.5e-6, 'length', 'roughness')}, commercial steel ${say(4.5e-5, 'length', 'roughness')}.`}
        />
      </div>
    </Group>
  )
}

export function Bundle() {
  const { fields } = useForm()
  const circular = fields['bundle.shape'] === 'circular'
  return (
    <Group title="Bundle" id="bundle">
      <div className="define-grid">
        <CaseChoice
          name="bundle.shape"
          label="Shape"
          options={[
            { value: 'rectangular', label: 'rectangular' },
            { value: 'circular', label: 'circular: rows are chords' },
          ]}
        />
        <CaseChoice
          name="bundle.layout"
          label="Layout"
          options={[
            { value: 'triangular30', label: 'triangular, 30°' },
            { value: 'triangular60', label: 'triangular, 60°' },
            { value: 'square90', label: 'square in line, 90°' },
            { value: 'square45', label: 'square rotated, 45°' },
          ]}
          help="Vapour flows down; rows drain onto one another."
        />
        <CaseQuantity
          name="bundle.pitchRatio"
          label="Pitch ratio"
          symbol="P/D_o"
          help={`At least 1.25 for a rigid ligament, 1.25 to 1.5 usual (${COMMON}).`}
        />
        <CaseQuantity
          name="bundle.rows"
          label="Rows"
          symbol="N_r"
          help="Above 30 the row laws are extrapolated."
        />
        {circular ? null : (
          <CaseQuantity
            name="bundle.tubesPerRow"
            label="Tubes per row"
            symbol="N_t"
            help="Or “auto” when velocity is given together with a flow or an outlet temperature."
          />
        )}
        <CaseQuantity
          name="bundle.passes"
          label="Coolant passes"
          symbol="N_p"
          help="Horizontal bands of rows; at most one pass a row."
        />
        <CaseChoice
          name="bundle.coolantEntry"
          label="Coolant enters"
          options={[
            { value: 'bottom', label: 'at the bottom rows' },
            { value: 'top', label: 'at the top rows' },
          ]}
        />
      </div>
    </Group>
  )
}

const METHOD_LABELS: Record<(typeof METHOD_NAMES)[number], string> = {
  film: 'Film',
  latentHeat: 'Latent heat',
  propertyTemperature: 'Property temperature',
  inundation: 'Inundation',
  vapourShear: 'Vapour shear',
  fins: 'Fins',
  dropwise: 'Dropwise',
  gas: 'Gas',
  tubeSide: 'Tube side',
  tubeFriction: 'Tube friction',
  vapourPressureDrop: 'Vapour pressure drop',
  twoPhase: 'Two-phase multiplier',
}

export function Methods() {
  const { fields, options } = useForm()
  // A choice that cannot matter for any case yet is not offered.
  const offered = METHOD_NAMES.filter(
    (name) => options.methods[name].filter((method) => method.available).length > 1,
  )
  const changed = offered.filter(
    (name) => fields[`methods.${name}`] || varyMode(`methods.${name}`, fields) !== '',
  )
  return (
    <Sheet title="Methods">
      <Fold
        open={changed.length > 0}
        title={
          changed.length === 0
            ? 'The default methods'
            : `${changed.map((name) => METHOD_LABELS[name]).join(', ')} changed from the default`
        }
      >
        <div className="define-grid">
          {offered.map((name) => {
            const methods = options.methods[name].filter((method) => method.available)
            const current = methods.find(
              (method) => method.id === (fields[`methods.${name}`] || methods[0].id),
            )
            return (
              <CaseChoice
                key={name}
                name={`methods.${name}`}
                label={METHOD_LABELS[name]}
                empty={`${methods[0].label} (default)`}
                options={methods.map(({ id, label }) => ({ value: id, label }))}
                help={current ? `Evidence: ${current.evidence}.` : undefined}
              />
            )
          })}
        </div>
      </Fold>
    </Sheet>
  )
}

const ECONOMICS: [string, string, string][] = [
  ['tubePrice', 'Tube field price per m²', '120 when left empty'],
  ['energyPrice', 'Electricity price', '0.10 per kWh when left empty'],
  ['hoursPerYear', 'Hours a year', '8000 when left empty'],
  ['years', 'Years of service', '15 when left empty'],
  ['interest', 'Yearly interest', '8 % when left empty'],
  ['pumpEfficiency', 'Pump efficiency', '70 % when left empty'],
]

export function Economics() {
  const { fields } = useForm()
  return (
    <Sheet title="Costs">
      <Fold
        open={ECONOMICS.some(([id]) => fields[`economics.${id}`])}
        title="Prices and hours behind the yearly cost"
      >
        <div className="define-grid">
          {ECONOMICS.map(([id, label, help]) => (
            <CaseQuantity
              key={id}
              name={`economics.${id}`}
              label={label}
              optional
              vary={id === 'tubePrice' || id === 'energyPrice'}
              help={`${help}: an assumption.`}
            />
          ))}
        </div>
      </Fold>
    </Sheet>
  )
}

export function NameAndDescription() {
  const { fields, set, fault, leave, disabled } = useForm()
  const control = (name: string) => ({
    name,
    value: fields[name] ?? '',
    disabled,
    fault: fault(name),
    onChange: (event: { target: { value: string } }) => set(name, event.target.value),
    onBlur: () => leave(name),
  })
  return (
    <div className="define-grid">
      <TextField label="Study name" maxLength={200} {...control('name')} />
      <TextField
        label="What it is to settle"
        maxLength={4000}
        placeholder="optional"
        {...control('description')}
      />
    </div>
  )
}
