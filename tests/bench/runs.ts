// What threads gain, what storing costs on top of computing, and how fast stored points are read.
import { sql } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { EnginePool, shareStudy, stopFlag } from '#app/jobs/pool.server.ts'
import { JobWorker } from '#app/jobs/worker.server.ts'
import { readColumn } from '#app/modules/points/column-copy.server.ts'
import { pageOfPoints } from '#app/modules/points/points.server.ts'
import { chunkRange, summarise } from '#app/modules/runs/chunks.ts'
import { runProgress } from '#app/modules/runs/progress.server.ts'
import { measurePointCost } from '#app/modules/runs/run-plan.server.ts'
import { pointColumn, type Run, run, runChunk } from '#drizzle/schema/index.ts'
import { KEY_RESULT_INDEX, KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { COLUMNS } from '#engine/sweep/evaluate-range.ts'
import { planSweep, type SweepPlan } from '#engine/sweep/plan.ts'
import { uniform } from '#engine/sweep/random.ts'
import { parseStudy } from '#engine/sweep/study.ts'
import { plantRun } from '#tests/crash/fixtures.ts'
import { rateStudy, sizeStudy } from './cases.ts'
import { openBenchDatabase } from './database.ts'
import { median } from './engine.ts'

/** A named case with so many variants that it takes one core about so long. */
function lasting(study: (velocities: number) => unknown, seconds: number) {
  const planned = (velocities: number) => {
    const parsed = parseStudy(study(velocities))
    if (!parsed.ok) throw new Error('the engine refuses a named case')
    return planSweep(parsed.study)
  }
  const cost = measurePointCost(planned(10))
  const velocities = Math.max(10, Math.min(10_000, Math.round(seconds / cost / 100)))
  return { plan: planned(velocities), definition: study(velocities) as Record<string, unknown>, cost }
}

async function computeSeconds(pool: EnginePool, plan: SweepPlan, cost: number): Promise<number> {
  const study = shareStudy(String(plan.points), plan.study)
  const chunk = 5000
  const started = performance.now()
  // Two chunks under way, as a worker has them.
  let next = 0
  const lane = async () => {
    while (next < plan.points) {
      const first = next
      next += Math.min(chunk, plan.points - first)
      await pool.evaluate(study, first, next - first, cost, stopFlag())
    }
  }
  await Promise.all([lane(), lane()])
  return (performance.now() - started) / 1000
}

export async function benchPool() {
  const { plan, cost } = lasting(sizeStudy, 3)
  const seconds: number[] = []
  for (const threads of [1, 2]) {
    const pool = new EnginePool(threads)
    await computeSeconds(pool, lasting(sizeStudy, 1).plan, cost)
    const repeats: number[] = []
    for (let k = 0; k < 3; k++) repeats.push(await computeSeconds(pool, plan, cost))
    seconds.push(median(repeats))
    await pool.close()
  }
  return { twoOverOne: seconds[0] / seconds[1] }
}

/** A run of the rate case from being asked for to its last point being stored, beside computing it and no more. */
export async function benchEndToEnd() {
  await openBenchDatabase()
  const worker = new JobWorker({ log: (line) => console.error(line) })
  const work = worker.work()
  try {
    const { plan, definition, cost } = lasting(rateStudy, 10)
    const bare = new EnginePool()
    await computeSeconds(bare, lasting(rateStudy, 1).plan, cost)
    await allStored(await plantRun(lasting(rateStudy, 1).definition))
    // Alternating, so that both meet the same machine.
    const stored: number[] = []
    const computed: number[] = []
    let last: Run | undefined
    for (let k = 0; k < 3; k++) {
      computed.push(await computeSeconds(bare, plan, cost))
      const started = performance.now()
      last = await plantRun(definition)
      await allStored(last)
      stored.push((performance.now() - started) / 1000)
      await over(last)
    }
    await bare.close()
    const { rows } = await db.execute<{ bytes: number }>(sql`
      select sum(pg_total_relation_size(relid))::float8 / (select sum(points) from run where state = 'done') as bytes
      from pg_partition_tree('point_column') where isleaf`)
    return {
      points: plan.points,
      pointsPerSecond: plan.points / median(stored),
      storedOverCompute: median(computed) / median(stored),
      bytesPerPoint: rows[0].bytes,
    }
  } finally {
    worker.drain()
    await work
  }
}

async function allStored(of: Run): Promise<void> {
  while ((await runProgress(of.id)).done < of.points) await pause(10)
}

async function over(of: Run): Promise<void> {
  while ((await runProgress(of.id)).state !== 'done') await pause(20)
}

const pause = (ms: number) => new Promise((resolve) => setTimeout(resolve, ms))

const MILLION = 1_000_000
const QUERIES = 15

/** Questions about a million stored points. Their values are drawn at random: asking costs the same whatever they are. */
export async function benchPages() {
  await openBenchDatabase()
  const of = await plantRun(rateStudy(10_000) as Record<string, unknown>, 5000)
  await storeRandom(of)
  const filters = {
    ranges: { coolantPressureDrop: { max: 0.5 }, coolantVelocity: { min: 0.2, max: 0.9 } },
  }
  const page = async (k: number) => {
    const started = performance.now()
    const { rows } = await pageOfPoints(of.id, { sort: SORTED[k % SORTED.length], filters, limit: 100 })
    if (rows.length !== 100) throw new Error(`a page of ${rows.length}`)
    return performance.now() - started
  }
  const firstEver = await page(0)
  for (let k = 0; k < SORTED.length; k++) await page(k)
  const warm: number[] = []
  for (let k = 0; k < QUERIES; k++) warm.push(await page(k))
  const columns: number[] = []
  for (let k = 0; k < QUERIES; k++) {
    const started = performance.now()
    await Promise.all([readColumn(of, 'outside_area_m2'), readColumn(of, 'coolant_pressure_drop_pa')])
    columns.push(performance.now() - started)
  }
  return {
    points: MILLION,
    sortedFirstPageMs: median(warm),
    sortedFirstPageUncachedMs: firstEver,
    twoColumnsMs: median(columns),
  }
}

const SORTED = ['outsideArea', 'duty', 'tubeMass', 'pumpingPower', 'overallCoefficient']

async function storeRandom(of: Run): Promise<void> {
  for (let chunk = 0; chunk * of.chunkPoints < of.points; chunk++) {
    const { first, count } = chunkRange(of, chunk)
    const table = new Float64Array(COLUMNS * count)
    for (let c = 0; c < COLUMNS; c++)
      if (c !== KEY_RESULT_INDEX.outcome && c !== KEY_RESULT_INDEX.limitsNotMet)
        for (let k = 0; k < count; k++) table[c * count + k] = uniform(1, c, first + k)
    const summary = summarise(table, first, count, KEY_RESULT_INDEX.outsideArea)
    await db
      .insert(runChunk)
      .values({ runId: of.id, chunk, firstPoint: first, points: count, computeSeconds: 0, ...summary })
    await db.insert(pointColumn).values(
      KEY_RESULTS.map(({ column }, c) => ({
        plannedOn: of.plannedOn,
        runId: of.id,
        column,
        chunk,
        vals: table.subarray(c * count, (c + 1) * count),
      })),
    )
  }
  await db.update(run).set({ state: 'done' })
}
