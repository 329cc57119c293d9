// Analyses on a real database with a worker: the same answer as in one thread, cancelled, and taken up again.
import { eq, sql } from 'drizzle-orm'
import { afterAll, expect, test } from 'vitest'
import { db, pool } from '#app/db.server.ts'
import { queue } from '#app/jobs/queue.server.ts'
import { JobWorker } from '#app/jobs/worker.server.ts'
import { analysis } from '#drizzle/schema/index.ts'
import { DEFAULT_FRONT } from '#engine/optimise/front.ts'
import { createOptimiser, optimise } from '#engine/optimise/optimise.ts'
import { parseStudy } from '#engine/sweep/study.ts'
import { bandOf } from '#engine/uncertainty/bands.ts'
import { acting, definition, plantStudy, until } from '#tests/crash/fixtures.ts'
import { askAnalysis, cancelAnalysis, latestAnalysis } from './analyses.server.ts'

const given = definition({ velocities: 5, inlets: 5, rows: [8, 10, 12] })
const parsed = parseStudy(given)
if (!parsed.ok) throw new Error('the study does not parse')
const { study } = parsed

let worker: JobWorker | undefined
let work: Promise<void> | undefined
function employ(): void {
  if (worker) return
  worker = new JobWorker({ threads: 2, log: (line) => console.warn(line) })
  work = worker.work()
}

/** For an analysis that must be changed before a worker sees it. */
async function retire(): Promise<void> {
  worker?.drain()
  await work
  worker = undefined
}

afterAll(async () => {
  await retire()
  await (await queue()).stop({ close: false, graceful: false })
  await pool.end()
})

const ended = (studyId: string, kind: 'optimum' | 'front' | 'band') =>
  until('the analysis ends', async () => {
    const seen = await latestAnalysis(studyId, kind)
    return seen && !['queued', 'running'].includes(seen.state) ? seen : null
  })

/** What does not depend on how the work was shared. */
const plain = (value: unknown) => JSON.parse(JSON.stringify(value)) as unknown

test('an optimum is cancelled before a worker takes it, and asked for only once at a time', async () => {
  const of = await plantStudy(given)
  const id = await askAnalysis(of, 'optimum', {}, acting)
  await expect(askAnalysis(of, 'optimum', {}, acting)).rejects.toThrow(/already/)
  await cancelAnalysis(of.studyId, id, acting)
  await expect(cancelAnalysis(of.studyId, id, acting)).rejects.toThrow(/ended already/)
  expect((await latestAnalysis(of.studyId, 'optimum'))?.state).toBe('cancelled')
  const { rows } = await db.execute(sql`select from pgboss.job where data->>'analysisId' = ${id}`)
  expect(rows).toEqual([])
})

test('a worker finds the optimum that one thread finds, with certificate, reasons and band', async () => {
  const of = await plantStudy(given)
  await askAnalysis(of, 'optimum', {}, acting)
  employ()
  const done = await ended(of.studyId, 'optimum')
  expect(done.fault).toBeNull()
  expect(done).toMatchObject({ state: 'done', revision: 1 })
  const { result } = done as Extract<typeof done, { result: unknown }>
  if (!result || !('found' in result) || !result.found) throw new Error('nothing was found')
  expect(plain(result.optimum)).toEqual(plain(optimise(study)))
  expect(result.certificate.holds).toBe(true)
  expect(result.why.worth.length).toBeGreaterThan(0)
  expect(result.band?.p10).toBeLessThan(result.band?.p90 as number)
  // More length than without scatter, and so no less area.
  expect(result.robust?.margin).toBeGreaterThan(0)
  expect(result.robust?.objective).toBeGreaterThan(result.optimum.objective)
})

test('a search that another worker began goes on from where it stood', async () => {
  await retire()
  const of = await plantStudy(given)
  const optimiser = createOptimiser(study)
  let state = optimiser.begin()
  for (let step = 0; step < 2; step++)
    state = optimiser.advance(
      state,
      optimiser.tasks(state).map((task) => optimiser.run(state, task)),
    )
  expect(state.stage).not.toBe('done')
  // A mark that only the checkpoint carries shows that it was taken up.
  const marked = { ...state, spent: { ...state.spent, evaluations: state.spent.evaluations + 1_000_000 } }
  const id = await askAnalysis(of, 'optimum', {}, acting)
  await db
    .update(analysis)
    .set({ checkpoint: { state: marked } })
    .where(eq(analysis.id, id))
  employ()
  const done = await ended(of.studyId, 'optimum')
  const result = done.result as { optimum: { searched: { evaluations: number }; objective: number } } | null
  expect(result?.optimum.objective).toBe(optimise(study)?.objective)
  expect(result?.optimum.searched.evaluations).toBeGreaterThan(1_000_000)
})

test('where nothing meets every limit it says which one to relax, and that value does', async () => {
  const impossible = { ...given, limits: { coolantPressureDrop: { max: 500 } } }
  const of = await plantStudy(impossible)
  await askAnalysis(of, 'optimum', {}, acting)
  employ()
  const done = await ended(of.studyId, 'optimum')
  const result = done.result as { found: boolean; infeasibility: { relaxations: { to: number }[] } } | null
  expect(result?.found).toBe(false)
  const [first] = result?.infeasibility.relaxations ?? []
  const relaxed = parseStudy({ ...given, limits: { coolantPressureDrop: { max: first.to } } })
  expect(relaxed.ok && optimise(relaxed.study)).not.toBeNull()
})

test('a band is what the engine draws, and a front falls', async () => {
  const of = await plantStudy(given)
  employ()
  await askAnalysis(of, 'band', { case: study.case, samples: 200, seed: 1 }, acting)
  await askAnalysis(of, 'front', { axes: DEFAULT_FRONT, points: 4 }, acting)
  const band = await ended(of.studyId, 'band')
  expect(plain(band.result)).toEqual(
    plain({ band: bandOf(study.case, { samples: 200, seed: 1, sigmas: undefined }) }),
  )
  const front = (await ended(of.studyId, 'front')).result as { front: { x: number; y: number }[] } | null
  const points = front?.front ?? []
  expect(points.length).toBeGreaterThan(3)
  for (let k = 1; k < points.length; k++) {
    expect(points[k].x).toBeGreaterThan(points[k - 1].x)
    expect(points[k].y).toBeLessThan(points[k - 1].y)
  }
})
