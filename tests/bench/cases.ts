// The named cases of the benchmark: fixed, so that its figures mean the same every time.

const RATE = {
  fluid: 'r134a',
  saturationTemperature: 313.15,
  drive: { kind: 'coolant', coolant: 'water', inletTemperature: 302.15, velocity: 2, foulingResistance: 0 },
  tube: {
    outsideDiameter: 0.01905,
    wallThickness: 0.00165,
    material: 'copper',
    surface: { kind: 'plain' },
  },
  bundle: { layout: 'triangular30', pitchRatio: 1.25, rows: 14, tubesPerRow: 17, passes: 2, length: 3 },
}

const { length: _, ...OPEN_BUNDLE } = RATE.bundle
const SIZE = { ...RATE, duty: 500_000, bundle: OPEN_BUNDLE }

/** Vacuum steam that loses a third of its pressure, under the methods whose rows cost most. */
const HEAVIEST = {
  ...SIZE,
  fluid: 'water',
  saturationTemperature: 318.15,
  drive: { ...RATE.drive, inletTemperature: 293.15 },
  duty: 2_000_000,
  bundle: { ...OPEN_BUNDLE, rows: 20, tubesPerRow: 40, passes: 1 },
  methods: {
    film: 'chen',
    inundation: 'drainageMode',
    vapourShear: 'fujiiUeharaKurata',
    tubeFriction: 'colebrook',
  },
}

const around = (base: { bundle: { rows: number } }, count: number) => ({
  name: 'Benchmark',
  case: base,
  sweep: {
    design: 'factorial',
    variables: [
      { path: 'bundle.rows', values: Array.from({ length: 10 }, (_, k) => base.bundle.rows - 5 + k) },
      { path: 'tube.outsideDiameter', from: 0.016, to: 0.0254, count: 10 },
      { path: 'drive.velocity', from: 1.2, to: 2.8, count },
    ],
  },
  objective: 'outsideArea',
  limits: { coolantPressureDrop: { max: 60_000 } },
})

/** Each case with variants around it, 100 for every velocity: nothing is computed twice. */
export const rateStudy = (velocities = 10) => around(RATE, velocities)
export const sizeStudy = (velocities = 10) => around(SIZE, velocities)
export const heaviestStudy = (velocities = 10) => around(HEAVIEST, velocities)
