// Every case the engine takes, as fast-check arbitraries: plain tubes, both drives, both questions, all methods.
import * as fc from 'fast-check'
import { type CaseInput, METHOD_CHOICES } from '#engine/case.ts'
import { coolants, fluids } from '#engine/fluids/index.ts'
import { materials } from '#engine/materials.ts'

/** Left to itself fast-check prefers bounds; a quarter of that is enough. */
const real = (min: number, max: number) => {
  const any = fc.double({ min, max, noNaN: true })
  return fc.oneof(
    {
      arbitrary: fc.noBias(fc.integer({ min: 0, max: 1e6 })).map((n) => min + ((max - min) * n) / 1e6),
      weight: 3,
    },
    { arbitrary: any, weight: 1 },
  )
}
const logReal = (min: number, max: number) => real(Math.log(min), Math.log(max)).map(Math.exp)
const within = ([low, high]: readonly [number, number], share: number) => low + share * (high - low)

/** Vapour shear that this version evaluates. */
const SHEAR = METHOD_CHOICES.vapourShear.filter((id) => id !== 'mcnaught' && id !== 'honda')

export const methods = fc.record(
  {
    film: fc.constantFrom(...METHOD_CHOICES.film),
    latentHeat: fc.constantFrom(...METHOD_CHOICES.latentHeat),
    propertyTemperature: fc.constantFrom(...METHOD_CHOICES.propertyTemperature),
    inundation: fc.constantFrom(...METHOD_CHOICES.inundation),
    vapourShear: fc.constantFrom(...SHEAR),
    tubeSide: fc.constantFrom(...METHOD_CHOICES.tubeSide),
    tubeFriction: fc.constantFrom(...METHOD_CHOICES.tubeFriction),
    vapourPressureDrop: fc.constantFrom(...METHOD_CHOICES.vapourPressureDrop),
    twoPhase: fc.constantFrom(...METHOD_CHOICES.twoPhase),
  },
  { requiredKeys: [] },
)

const choice = fc.record({
  fluid: fc.constantFrom(...fluids),
  // Mostly where condensers work, sometimes the ends of the table.
  warmth: fc.oneof({ arbitrary: real(0.15, 0.7), weight: 4 }, { arbitrary: real(0, 1), weight: 1 }),
  coolant: fc.constantFrom(...coolants),
  below: logReal(1.5, 60),
  subcooling: logReal(0.1, 40),
  flowKind: fc.constantFrom('velocity', 'massFlow', 'outletTemperature', 'auto'),
  velocity: logReal(0.05, 6),
  approach: real(0.05, 0.98),
  drive: fc.constantFrom('coolant', 'coolant', 'wallSubcooling', 'both'),
  question: fc.constantFrom('rate', 'size'),
  length: logReal(0.2, 20),
  heatFlux: logReal(100, 3e5),
  diameter: logReal(0.006, 0.06),
  wall: real(0.02, 0.2),
  material: fc.constantFrom(...materials),
  fouling: fc.constantFrom(0, 1e-5, 1e-4, 5e-4),
  outsideFouling: fc.constantFrom(0, 0, 1e-4),
  roughness: fc.constantFrom(0, 1.5e-6, 4.5e-5),
  circular: fc.constantFrom(false, false, true),
  layout: fc.constantFrom('triangular30', 'triangular60', 'square90', 'square45'),
  pitchRatio: fc.oneof(real(1.2, 2), real(1.05, 3.5)),
  rows: fc.integer({ min: 1, max: 40 }),
  tubesPerRow: fc.integer({ min: 1, max: 120 }),
  passes: fc.integer({ min: 1, max: 8 }),
  entry: fc.constantFrom('bottom', 'top'),
  methods,
})

/** Cases that pass `parseCase`, most of them of sizes that are built. */
export const cases: fc.Arbitrary<CaseInput> = choice.map((c) => {
  const Ts = within(c.fluid.range, c.warmth)
  // Mostly above the condensing fluid's own lowest temperature.
  const coolest = Math.max(
    c.coolant.range[0],
    c.coolant.freezingTemperature + 0.5,
    c.warmth > 0.2 ? c.fluid.range[0] : 0,
  )
  const inletTemperature = Math.min(c.coolant.range[1] - 0.5, Math.max(coolest, Ts - c.below))
  const cooled = c.drive !== 'wallSubcooling' && inletTemperature < Ts - 0.2
  const byCoolant = cooled && c.drive === 'coolant'
  const flowKind = byCoolant && !(c.circular && c.flowKind === 'auto') ? c.flowKind : 'velocity'
  const size = c.question === 'size' || flowKind === 'outletTemperature' || flowKind === 'auto'
  const area = Math.PI * c.diameter * 3 * c.rows * c.tubesPerRow
  const duty = c.heatFlux * area
  const outletTemperature = inletTemperature + c.approach * (Ts - inletTemperature)
  const massFlow =
    (1000 * c.velocity * (Math.PI / 4) * (c.diameter * (1 - 2 * c.wall)) ** 2 * c.rows * c.tubesPerRow) /
    c.passes
  const side = { coolant: c.coolant.id, inletTemperature, foulingResistance: c.fouling }
  const flow =
    flowKind === 'velocity'
      ? { velocity: c.velocity }
      : flowKind === 'massFlow'
        ? { massFlow }
        : flowKind === 'outletTemperature'
          ? { outletTemperature }
          : { velocity: c.velocity, outletTemperature }
  return {
    fluid: c.fluid.id,
    saturationTemperature: Ts,
    ...(size ? { duty } : {}),
    drive: byCoolant
      ? { kind: 'coolant', ...side, ...flow }
      : {
          kind: 'wallSubcooling',
          wallSubcooling: Math.min(c.subcooling, Math.max(0.1, 0.9 * (Ts - c.fluid.range[0]))),
          ...(cooled ? { coolant: side } : {}),
        },
    tube: {
      outsideDiameter: c.diameter,
      wallThickness: c.diameter * c.wall,
      material: c.material.id,
      roughness: c.roughness,
      outsideFoulingResistance: c.outsideFouling,
    },
    bundle: {
      shape: c.circular ? 'circular' : 'rectangular',
      layout: c.layout as 'triangular30',
      pitchRatio: c.pitchRatio,
      rows: c.rows,
      ...(c.circular ? {} : { tubesPerRow: flowKind === 'auto' ? ('auto' as const) : c.tubesPerRow }),
      passes: Math.min(c.passes, c.rows),
      coolantEntry: c.entry as 'bottom',
      ...(size ? {} : { length: c.length }),
    },
    methods: c.methods,
  }
})
