// The study command: every point of a study file on all cores, its finding as JSON, its points as CSV, JSON or workbook.
import { setMaxListeners } from 'node:events'
import { createWriteStream, readFileSync, renameSync, rmSync } from 'node:fs'
import { availableParallelism } from 'node:os'
import { finished } from 'node:stream/promises'
import { fileURLToPath } from 'node:url'
import { Piscina } from 'piscina'
import { csvLines } from '#app/modules/exports/csv.ts'
import {
  limitsNotMet,
  pointHeads,
  pointRow,
  type ReportedPoint,
  SLICE,
  type StudyReport,
} from '#app/modules/exports/report.ts'
import { writeWorkbook } from '#app/modules/exports/workbook.ts'
import { KEY_RESULT_INDEX, KEY_RESULTS, OUTCOMES } from '#engine/bundle/key-results.ts'
import { faultLine } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import { certify, type Swept } from '#engine/optimise/certificate.ts'
import { explainInfeasible } from '#engine/optimise/feasibility.ts'
import { createOptimiser, type Optimiser } from '#engine/optimise/optimise.ts'
import { runSearch } from '#engine/optimise/search.ts'
import { objectiveColumn } from '#engine/sweep/objective.ts'
import { planSweep, pointCase, pointInputs, type SweepPlan } from '#engine/sweep/plan.ts'
import { parseStudy } from '#engine/sweep/study.ts'
import { ENGINE_VERSION } from '#engine/version.ts'

const USAGE =
  'study FILE [--out FILE.csv|.json|.xlsx] [--workers N] [--optimise]: every point of a study file; the finding as JSON'

class Refusal extends Error {
  readonly lines: string[]
  constructor(...lines: string[]) {
    super(lines.join('\n'))
    this.lines = lines
  }
}

type Options = { file: string; out: string | null; workers: number; optimise: boolean }

function readOptions(args: readonly string[]): Options {
  const options: Options = { file: '', out: null, workers: availableParallelism(), optimise: false }
  for (let i = 0; i < args.length; i++) {
    const arg = args[i]
    if (arg === '--optimise') options.optimise = true
    else if (arg === '--workers') {
      const workers = Number(args[++i])
      if (!Number.isInteger(workers) || workers < 1 || workers > 256)
        throw new Refusal(
          `--workers: "${args[i] ?? ''}" is not a number of threads; give a whole number from 1 to 256`,
        )
      options.workers = workers
    } else if (arg === '--out') {
      options.out = args[++i] ?? null
      if (!options.out || !/\.(csv|json|xlsx)$/.test(options.out))
        throw new Refusal(
          `--out: "${options.out ?? ''}" has no known ending; give a .csv, .json or .xlsx file`,
        )
    } else if (arg.startsWith('--') || options.file !== '')
      throw new Refusal(`${arg}: is not known; ${USAGE}`)
    else options.file = arg
  }
  if (options.file === '') throw new Refusal(`study: no file is given; ${USAGE}`)
  return options
}

function readPlan(file: string): SweepPlan {
  let input: unknown
  try {
    input = JSON.parse(readFileSync(file, 'utf8'))
  } catch (error) {
    const { code, message } = error as NodeJS.ErrnoException
    throw new Refusal(`${file}: cannot be read as JSON (${code ?? message}); give a study file`)
  }
  const parsed = parseStudy(input)
  if (!parsed.ok) throw new Refusal(...parsed.faults.map(faultLine))
  for (const note of parsed.notes) process.stderr.write(`${note}\n`)
  return planSweep(parsed.study)
}

/** Points a task takes: enough to make the hand-over cheap, few enough to show progress. */
const TASK = 500

/** All key results, column by column over the whole study; interrupted, the points done so far. */
async function evaluateAll(plan: SweepPlan, workers: number, interrupted: AbortSignal) {
  const { points } = plan
  const columns = KEY_RESULTS.length
  const whole = new Float64Array(columns * points).fill(Number.NaN)
  const pool = new Piscina({
    filename: fileURLToPath(new URL('./study-task.ts', import.meta.url)),
    execArgv: ['--import', 'tsx'],
    minThreads: 1,
    maxThreads: workers,
    workerData: { study: plan.study },
  })
  let done = 0
  let said = Date.now()
  const tasks: Promise<void>[] = []
  for (let first = 0; first < points; first += TASK) {
    const count = Math.min(TASK, points - first)
    tasks.push(
      pool
        .run({ first, count }, { signal: interrupted })
        .then((table: Float64Array) => {
          for (let c = 0; c < columns; c++)
            whole.set(table.subarray(c * count, (c + 1) * count), c * points + first)
          done += count
          if (Date.now() - said < 1000) return
          said = Date.now()
          process.stderr.write(`${done} of ${points} points\n`)
        })
        .catch((error) => {
          if (!interrupted.aborted) throw error
        }),
    )
  }
  await Promise.all(tasks)
  await pool.close({ force: interrupted.aborted })
  return { whole, done }
}

function summarise(plan: SweepPlan, whole: Float64Array) {
  const { points } = plan
  const at = (id: string, i: number) => whole[KEY_RESULT_INDEX[id] * points + i]
  const objective = objectiveColumn(plan.study.objective) * points
  const outcomes: Record<string, number> = {}
  let best = -1
  let feasible = 0
  for (let i = 0; i < points; i++) {
    const outcome = at('outcome', i)
    const code = Number.isFinite(outcome) ? OUTCOMES[outcome].code : 'notComputed'
    outcomes[code] = (outcomes[code] ?? 0) + 1
    if (outcome !== 0 || at('limitsNotMet', i) !== 0 || !Number.isFinite(whole[objective + i])) continue
    feasible++
    if (best < 0 || whole[objective + i] < whole[objective + best]) best = i
  }
  return { best: best < 0 ? null : best, feasible, outcomes }
}

/** The optimum between and beside the swept points, with its certificate; or what would have to give way. */
function findOptimum(plan: SweepPlan, swept: Swept) {
  const { study } = plan
  let optimiser: Optimiser
  try {
    optimiser = createOptimiser(study)
  } catch (error) {
    throw new Refusal(`--optimise: ${(error as Error).message}`)
  }
  const state = runSearch(optimiser.problem, optimiser.begin())
  const optimum = optimiser.optimum(state)
  if (optimum === null) return { optimum, summary: { optimum: null, infeasible: explainInfeasible(study) } }
  const { result: _, ...found } = optimum
  return { optimum, summary: { optimum: { ...found, certificate: certify(optimiser, state, swept) } } }
}

async function writeOut(file: string, report: StudyReport, summary: unknown): Promise<void> {
  // Under another name until it is whole: an interruption never leaves half a file in the place of a good one.
  const fresh = `${file}.part`
  const stream = createWriteStream(fresh)
  try {
    if (file.endsWith('.xlsx')) await writeWorkbook(stream, report)
    else if (file.endsWith('.csv')) for await (const text of csvLines(report)) await write(stream, text)
    else {
      await write(
        stream,
        `{"summary":${JSON.stringify(summary)},"heads":${JSON.stringify(pointHeads(report.plan))},"points":[`,
      )
      for (let first = 0; first < report.points; first += SLICE) {
        const count = Math.min(SLICE, report.points - first)
        const table = await report.table(first, count)
        const rows = Array.from({ length: count }, (_, k) =>
          JSON.stringify(pointRow(report.plan, first + k, table, k, count)),
        )
        await write(stream, `${first === 0 ? '' : ','}\n${rows.join(',\n')}`)
      }
      await write(stream, '\n]}\n')
    }
    if (!file.endsWith('.xlsx')) stream.end()
    await finished(stream)
    renameSync(fresh, file)
  } catch (error) {
    rmSync(fresh, { force: true })
    throw new Refusal(
      `--out: ${file} cannot be written (${(error as NodeJS.ErrnoException).code ?? (error as Error).message}); give a folder that exists and may be written to`,
    )
  }
}

const write = (stream: NodeJS.WritableStream, text: string): Promise<void> =>
  new Promise((resolve, reject) => stream.write(text, (error) => (error ? reject(error) : resolve())))

async function main(): Promise<number> {
  const options = readOptions(process.argv.slice(2))
  const plan = readPlan(options.file)
  const interruption = new AbortController()
  // Every task in the queue listens.
  setMaxListeners(0, interruption.signal)
  for (const signal of ['SIGINT', 'SIGTERM'] as const) process.once(signal, () => interruption.abort())
  const { whole, done } = await evaluateAll(plan, options.workers, interruption.signal)
  const { best, feasible, outcomes } = summarise(plan, whole)
  const reported: ReportedPoint[] = []
  if (best !== null) {
    const found = pointCase(plan, best)
    reported.push({ label: 'Best point', point: best, case: found, result: evaluate(found) })
  }
  const optimised =
    options.optimise && !interruption.signal.aborted
      ? findOptimum(plan, {
          points: done,
          feasible,
          least: best === null ? null : whole[objectiveColumn(plan.study.objective) * plan.points + best],
        })
      : null
  if (optimised?.optimum) {
    const { case: found, result, statement } = optimised.optimum
    reported.push({ label: 'Optimum', point: null, case: found, result, statement })
  }
  const summary = {
    name: plan.study.name,
    engineVersion: ENGINE_VERSION,
    points: plan.points,
    evaluated: done,
    feasible,
    outcomes,
    best:
      best === null
        ? null
        : {
            point: best,
            inputs: Object.fromEntries(
              plan.variables.map(({ path }, j) => [path, pointInputs(plan, best)[j]]),
            ),
            results: Object.fromEntries(
              KEY_RESULTS.filter(({ id }) => id !== 'limitsNotMet' && id !== 'notes' && id !== 'outcome').map(
                ({ id }) => {
                  const value = whole[KEY_RESULT_INDEX[id] * plan.points + best]
                  return [id, Number.isFinite(value) ? value : null]
                },
              ),
            ),
            limitsNotMet: limitsNotMet(whole[KEY_RESULT_INDEX.limitsNotMet * plan.points + best]),
          },
    ...optimised?.summary,
  }
  if (options.out && !interruption.signal.aborted)
    await writeOut(
      options.out,
      {
        plan,
        invented: /invented/i.test(plan.study.description ?? ''),
        origin: [
          ['Study file', options.file],
          ['Engine version', ENGINE_VERSION],
          ['Units', 'SI: K, Pa, W, m, kg, s'],
        ],
        points: plan.points,
        table: async (first, count) => {
          const cut = new Float64Array(KEY_RESULTS.length * count)
          for (let c = 0; c < KEY_RESULTS.length; c++)
            cut.set(whole.subarray(c * plan.points + first, c * plan.points + first + count), c * count)
          return cut
        },
        best: reported,
      },
      summary,
    )
  const failed = Object.entries(outcomes).filter(([code]) => code !== 'evaluated')
  if (failed.length > 0)
    process.stderr.write(`Without results: ${failed.map(([code, n]) => `${n} ${code}`).join(', ')}\n`)
  process.stdout.write(`${JSON.stringify(summary, null, 2)}\n`)
  return interruption.signal.aborted ? 1 : 0
}

try {
  process.exitCode = await main()
} catch (error) {
  if (!(error instanceof Refusal)) throw error
  process.stderr.write(`${error.lines.join('\n')}\n`)
  process.exitCode = 2
}
