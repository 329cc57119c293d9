// What a point costs: the reference workload beside C, and the engine's own named cases.
import { execFileSync } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { COLUMNS, evaluateRange } from '#engine/sweep/evaluate-range.ts'
import { planSweep, type SweepPlan } from '#engine/sweep/plan.ts'
import { parseStudy } from '#engine/sweep/study.ts'
import { heaviestStudy, rateStudy, sizeStudy } from './cases.ts'
import { compileKernel, KERNEL_RESULTS, kernelInputs } from './kernel.ts'

const POINTS = 20_000
const REPEATS = 9

export function benchEngine() {
  const c = compileReference()
  try {
    return {
      workloadB: workload('B', c),
      workloadF: workload('F', c),
      rateCase: { ...rate(rateStudy()), ratioToPython: null },
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
