// What a point costs: the reference workload beside C, and the engine's own named cases.
import { execFileSync, spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { KEY_RESULT_INDEX } from '#engine/bundle/key-results.ts'
import { coolantModel, fluidModel } from '#engine/fluids/index.ts'
import { findMaterial } from '#engine/materials.ts'
import { COLUMNS, evaluateRange } from '#engine/sweep/evaluate-range.ts'
import { planSweep, pointCase, type SweepPlan } from '#engine/sweep/plan.ts'
import { parseStudy } from '#engine/sweep/study.ts'
import { heaviestStudy, rateStudy, sizeStudy } from './cases.ts'
import { compileKernel, KERNEL_RESULTS, kernelInputs } from './kernel.ts'

const POINTS = 20_000
const REPEATS = 9

export function benchEngine() {
  const c = compileReference()
  try {
    const rateCase = rate(rateStudy())
    return {
      workloadB: workload('B', c),
      workloadF: workload('F', c),
      rateCase: { ...rateCase, ratioToPython: ratioToPython(rateCase.pointsPerSecondPerCore) },
      sizeCase: rate(sizeStudy()),
      heaviestCase: rate(heaviestStudy()),
    }
  } finally {
    if (c) rmSync(c.folder, { recursive: true, force: true })
  }
}

type Reference = { folder: string; program: string }

/** The reference in C, or null on a machine without a compiler. */
function compileReference(): Reference | null {
  const folder = mkdtempSync(join(tmpdir(), 'rowfall-bench-'))
  const source = fileURLToPath(new URL('./reference/cbench.c', import.meta.url))
  const program = join(folder, 'cbench')
  try {
    execFileSync('gcc', ['-O3', '-march=native', '-DNAME="c"', source, '-o', program, '-lm'], {
      stdio: 'pipe',
    })
    return { folder, program }
  } catch {
    rmSync(folder, { recursive: true, force: true })
    return null
  }
}

/** Processor time a point, and over C's in the same minute; refused when the two do not compute the same. */
function workload(mode: 'B' | 'F', c: Reference | null) {
  const kernel = compileKernel(mode)
  const inputs = kernelInputs(POINTS)
  const results = new Float64Array(KERNEL_RESULTS * POINTS)
  kernel(inputs, results, POINTS)
  const nsPerPoint =
    median(
      Array.from({ length: REPEATS }, () => processorSeconds(() => kernel(inputs, results, POINTS)) / POINTS),
    ) * 1e9
  if (!c) return { nsPerPoint, ratioToC: null }
  const reply = execFileSync(c.program, [mode, String(POINTS), String(REPEATS)], { encoding: 'utf8' })
  const { ns_cpu, chk } = JSON.parse(reply) as { ns_cpu: number; chk: number }
  let check = 0
  for (let i = 0; i < POINTS; i++) check += results[KERNEL_RESULTS * i + 1]
  if (Math.abs(check / chk - 1) > 1e-9) throw new Error(`workload ${mode}: ${check} here, ${chk} in C`)
  return { nsPerPoint, ratioToC: nsPerPoint / ns_cpu }
}

/** null when the engine does not know the case. */
export function planOf(definition: unknown): SweepPlan | null {
  const parsed = parseStudy(definition)
  return parsed.ok ? planSweep(parsed.study) : null
}

/** Points of the rate case that plain Python is given. */
const PYTHON_POINTS = 60

/** How many times as long plain Python takes for a point, null without python3; refused when the two disagree by 0.1 %. */
function ratioToPython(pointsPerSecond: number | null): number | null {
  const plan = planOf(rateStudy())
  if (!plan || pointsPerSecond === null) return null
  const every = Math.floor(plan.points / PYTHON_POINTS)
  const chosen = Array.from({ length: PYTHON_POINTS }, (_, k) => k * every)
  const points = chosen.map((i) => {
    const { saturationTemperature, drive, tube, bundle } = pointCase(plan, i)
    if (drive.kind !== 'coolant') throw new Error('the rate case is driven by its coolant')
    return {
      saturationTemperature,
      inletTemperature: drive.inletTemperature,
      velocity: drive.velocity,
      insideFouling: drive.foulingResistance,
      outsideFouling: tube.outsideFoulingResistance,
      outsideDiameter: tube.outsideDiameter,
      wallThickness: tube.wallThickness,
      conductivity: findMaterial(tube.material as string)?.conductivity,
      roughness: tube.roughness,
      rows: bundle.rows,
      tubesPerRow: bundle.tubesPerRow,
      passes: bundle.passes,
      length: bundle.length,
      pitchRatio: bundle.pitchRatio,
    }
  })
  const script = fileURLToPath(new URL('./reference/rate_case.py', import.meta.url))
  const { case: kase } = plan.study
  const coolant = kase.drive.kind === 'coolant' ? (kase.drive.coolant as string) : ''
  const input = JSON.stringify({
    fluid: [...fluidModel(kase.fluid as string).data],
    coolant: [...coolantModel(coolant).data],
    points,
  })
  const python = spawnSync('python3', [script], { input, encoding: 'utf8', maxBuffer: 1e8 })
  if (python.error) return null
  if (python.status !== 0) throw new Error(`the reference in Python failed: ${python.stderr}`)
  const reply = JSON.parse(python.stdout) as {
    secondsPerPoint: number
    results: Record<string, number>[]
  }
  const key = new Float64Array(COLUMNS)
  for (const [k, i] of chosen.entries()) {
    evaluateRange(plan, i, 1, key)
    for (const [name, value] of Object.entries(reply.results[k])) {
      const here = key[KEY_RESULT_INDEX[name]]
      if (!(Math.abs(value / here - 1) < 1e-3))
        throw new Error(`point ${i}, ${name}: ${here} here, ${value} in plain Python`)
    }
  }
  return reply.secondsPerPoint * pointsPerSecond
}

function rate(definition: unknown): { pointsPerSecondPerCore: number | null } {
  const plan = planOf(definition)
  if (!plan) return { pointsPerSecondPerCore: null }
  const out = new Float64Array(plan.points * COLUMNS)
  const once = () => processorSeconds(() => evaluateRange(plan, 0, plan.points, out)) / plan.points
  const warmUntil = performance.now() + 1000
  while (performance.now() < warmUntil) once()
  const until = performance.now() + 2000
  const seconds: number[] = []
  while (seconds.length < 3 || (performance.now() < until && seconds.length < 200)) seconds.push(once())
  return { pointsPerSecondPerCore: 1 / median(seconds) }
}

function processorSeconds(work: () => void): number {
  const before = process.cpuUsage()
  work()
  const { user, system } = process.cpuUsage(before)
  return (user + system) / 1e6
}

export const median = (values: number[]): number => values.sort((a, b) => a - b)[values.length >> 1]
