// An analysis as a worker does it: parts on the pool's threads, a checkpoint after each step, and its end once.
import { and, eq, inArray, sql } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import type { AnalysisOf } from '#app/modules/analyses/analyses.server.ts'
import type { Part, Parts } from '#app/modules/analyses/tasks.ts'
import { planOfRevision } from '#app/modules/runs/run-plan.server.ts'
import { type Analysis, type AnalysisProgress, analysis, run } from '#drizzle/schema/index.ts'
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { frontSteps, joinFront } from '#engine/optimise/front.ts'
import { createOptimiser, type Optimiser } from '#engine/optimise/optimise.ts'
import type { SearchState } from '#engine/optimise/search.ts'
import { isSizing } from '#engine/optimise/space.ts'
import { objectiveColumn } from '#engine/sweep/objective.ts'
import type { Study } from '#engine/sweep/study.ts'
import { joinRobust } from '#engine/uncertainty/robust.ts'
import { ENGINE_VERSION } from '#engine/version.ts'
import type { EnginePool } from './pool.server.ts'
import { holdJob, type Lease, queue, within } from './queue.server.ts'

export type AnalysisUnit = { lease: Lease; analysisId: string; stop: Int32Array; pool: EnginePool }

/** Thrown where the analysis is not ours to go on with: cancelled, or taken over by another worker. */
class NotOurs extends Error {}

const OPEN: Analysis['state'][] = ['queued', 'running']

/** Works an analysis out, from its checkpoint on; answers whether its end was kept. */
export async function handleAnalysis(unit: AnalysisUnit): Promise<boolean> {
  const [open] = await db
    .update(analysis)
    .set({ state: 'running', startedAt: sql`coalesce(${analysis.startedAt}, now())` })
    .where(and(eq(analysis.id, unit.analysisId), inArray(analysis.state, OPEN)))
    .returning()
  if (!open) return false
  const { study } = await planOfRevision(open.revisionId)
  const work = new Work(unit, open, study)
  try {
    const result = await KINDS[open.kind](work)
    return await finish(unit, { state: 'done', result: result as Record<string, unknown> })
  } catch (error) {
    if (error instanceof NotOurs) return false
    throw error
  }
}

/** Gives an analysis up; for people, `fault` says why. */
export async function failAnalysis(analysisId: string, fault: string): Promise<void> {
  await db
    .update(analysis)
    .set({ state: 'failed', fault, endedAt: sql`now()`, checkpoint: null })
    .where(and(eq(analysis.id, analysisId), inArray(analysis.state, OPEN)))
}

/** Gives up what was planned with an engine that no worker has any more. */
export async function failOrphans(): Promise<void> {
  await db.execute(sql`
    update analysis set state = 'failed', ended_at = now(), checkpoint = null,
      fault = 'Planned with engine ' || engine_version || '; the workers now have ' || ${ENGINE_VERSION}::text || '. Ask again.'
    where state in ('queued', 'running') and engine_version <> ${ENGINE_VERSION}
      and asked_at < now() - interval '1 minute'
      and not exists (
        select from worker
        where worker.engine_version = analysis.engine_version and worker.seen_at > now() - interval '1 minute')`)
}

async function finish(
  { lease, analysisId }: AnalysisUnit,
  end: { state: 'done'; result: Record<string, unknown> },
): Promise<boolean> {
  const boss = await queue()
  return db.transaction(async (tx) => {
    if (!(await holdJob(tx, lease))) return false
    const [ended] = await tx
      .update(analysis)
      .set({ ...end, endedAt: sql`now()`, checkpoint: null })
      .where(and(eq(analysis.id, analysisId), inArray(analysis.state, OPEN)))
      .returning({ id: analysis.id })
    if (!ended) return false
    await boss.complete(lease.queue, lease.id, {}, { db: within(tx) })
    return true
  })
}

/** Progress is written at most this often. */
const WRITE_MS = 500

class Work {
  readonly #unit: AnalysisUnit
  readonly open: Analysis
  readonly study: Study
  readonly #text: string
  #written = 0

  constructor(unit: AnalysisUnit, open: Analysis, study: Study) {
    this.#unit = unit
    this.open = open
    this.study = study
    this.#text = JSON.stringify(study)
  }

  get threads(): number {
    return this.#unit.pool.threads
  }

  /** Has one part computed on a thread. */
  async part<P extends Part>(part: P, ask: Parts[P]['ask']): Promise<Parts[P]['answer']> {
    this.#goOn()
    const answer = await this.#unit.pool.part({ part, study: this.#text, ...ask } as never)
    this.#goOn()
    return answer as Parts[P]['answer']
  }

  /** Says how far it is, and from where to go on if this worker should die. */
  async reached(progress: AnalysisProgress, checkpoint?: Record<string, unknown>): Promise<void> {
    this.#goOn()
    if (performance.now() - this.#written < WRITE_MS) return
    this.#written = performance.now()
    const kept = await db.transaction(async (tx) => {
      if (!(await holdJob(tx, this.#unit.lease))) return []
      return tx
        .update(analysis)
        .set({ progress, ...(checkpoint ? { checkpoint } : {}) })
        .where(and(eq(analysis.id, this.open.id), eq(analysis.state, 'running')))
        .returning({ id: analysis.id })
    })
    if (kept.length === 0) throw new NotOurs()
  }

  #goOn(): void {
    if (Atomics.load(this.#unit.stop, 0) !== 0) throw new NotOurs()
  }
}

const KINDS: {
  [kind in Analysis['kind']]: (work: Work) => Promise<AnalysisOf[kind]['result']>
} = { optimum, front, band }

/** How many samples the band of an optimum is made from. */
const BAND_SAMPLES = 500

async function optimum(work: Work): Promise<AnalysisOf['optimum']['result']> {
  const optimiser = createOptimiser(work.study)
  let state = (work.open.checkpoint as { state?: SearchState } | null)?.state ?? optimiser.begin()
  while (state.stage !== 'done') {
    const { among } = state
    const tasks = optimiser.tasks(state)
    const shares = Array.from({ length: Math.min(work.threads, tasks.length) }, (_, t) =>
      tasks.filter((_, k) => k % work.threads === t),
    )
    const results = await Promise.all(shares.map((share) => work.part('search', { among, tasks: share })))
    // In the order of the tasks, whoever did them.
    const byTask = tasks.map((_, k) => results[k % work.threads][Math.floor(k / work.threads)])
    state = optimiser.advance(state, byTask)
    await work.reached({ stage: 'search', ...optimiser.progress(state) }, { state })
  }
  const found = optimiser.optimum(state)
  if (found === null) {
    await work.reached({ stage: 'infeasible', done: 0, of: 1 })
    return { found: false, infeasibility: await work.part('infeasible', {}) }
  }
  await work.reached({ stage: 'certificate', done: 0, of: 1 })
  const swept = await sweptLeast(work)
  const [certificate, why, band] = await Promise.all([
    work.part('certificate', { state, swept }),
    work.part('why', { state }),
    work.part('band', { case: found.case, options: { samples: BAND_SAMPLES, ...work.study.uncertainty } }),
  ])
  const robust = isSizing(work.study) ? await robustOf(work, optimiser, state) : null
  return { found: true, optimum: found, certificate, why, band, robust }
}

/** The probability with which a robust optimum meets the duty. */
const ENOUGH = 0.9

async function robustOf(work: Work, optimiser: Optimiser, state: SearchState) {
  const { samples, seed, sigmas } = {
    samples: undefined,
    seed: undefined,
    sigmas: undefined,
    ...work.study.uncertainty,
  }
  const options = { probability: ENOUGH, samples, seed, sigmas }
  let done = 0
  await work.reached({ stage: 'robust', done, of: state.leaders.length })
  const candidates = await Promise.all(
    state.leaders.map(async ({ combination }) => {
      const candidate = await work.part('robust', { combination, options })
      done += 1
      await work.reached({ stage: 'robust', done, of: state.leaders.length })
      return candidate
    }),
  )
  return joinRobust(optimiser, candidates, options)
}

/** What a finished run of the same revision by the same engine found: it saves sweeping the study again. */
async function sweptLeast({ open, study }: Work) {
  const [of] = await db
    .select({ id: run.id, points: run.points })
    .from(run)
    .where(
      and(
        eq(run.revisionId, open.revisionId),
        eq(run.state, 'done'),
        eq(run.engineVersion, open.engineVersion),
      ),
    )
    .limit(1)
  if (!of) return undefined
  const { column } = KEY_RESULTS[objectiveColumn(study.objective)]
  const { rows } = await db.execute<{ feasible: number; least: number | null }>(sql`
    select coalesce(sum(meeting_limits), 0)::int as feasible, min(best_objective)::float8 as least
    from run_chunk where run_id = ${of.id}`)
  return column ? { points: of.points, feasible: rows[0].feasible, least: rows[0].least } : undefined
}

async function front(work: Work): Promise<AnalysisOf['front']['result']> {
  const { axes, points } = work.open.request as AnalysisOf['front']['request']
  const begun = performance.now()
  const ends = await work.part('frontEnds', { axes })
  if (ends === null) return { front: [], seconds: (performance.now() - begun) / 1000 }
  const bounds = frontSteps(ends, points)
  const between: Parts['frontPoint']['answer'][] = new Array(bounds.length).fill(null)
  let next = 0
  let done = 0
  const go = async () => {
    while (next < bounds.length) {
      const k = next++
      between[k] = await work.part('frontPoint', { axes, bound: bounds[k] })
      done += 1
      await work.reached({ stage: 'front', done, of: bounds.length })
    }
  }
  await Promise.all(Array.from({ length: work.threads }, go))
  const joined = await Promise.all(
    joinFront(ends, between, axes).map(async (point) => ({
      ...point,
      band: await work.part('band', { case: point.case, options: { ...work.study.uncertainty } }),
    })),
  )
  return { front: joined, seconds: (performance.now() - begun) / 1000 }
}

async function band(work: Work): Promise<AnalysisOf['band']['result']> {
  const { case: bundle, samples, seed } = work.open.request as AnalysisOf['band']['request']
  return {
    band: await work.part('band', {
      case: bundle,
      options: { samples, seed, sigmas: work.study.uncertainty?.sigmas },
    }),
  }
}
