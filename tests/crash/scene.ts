// A database cluster of its own, worker processes to kill, and a line to cut: what runs have to survive.
import { type ChildProcess, spawn } from 'node:child_process'
import { existsSync, mkdirSync, readdirSync, rmSync } from 'node:fs'
import net from 'node:net'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { eq } from 'drizzle-orm'
import pg from 'pg'
import { db, pool } from '#app/db.server.ts'
import { queue } from '#app/jobs/queue.server.ts'
import { cookie } from '#app/modules/accounts/cookies.server.ts'
import { beginSession } from '#app/modules/accounts/sessions.server.ts'
import { runProgress } from '#app/modules/runs/progress.server.ts'
import type { RunProgress } from '#app/modules/runs/progress.ts'
import { measurePointCost } from '#app/modules/runs/run-plan.server.ts'
import { hashOfColumns } from '#app/modules/runs/store.server.ts'
import { migrateDatabase } from '#app/start/migrate.ts'
import { type Cluster, startCluster } from '#drizzle/local-postgres/cluster.mjs'
import { freePort } from '#drizzle/local-postgres/processes.mjs'
import { person, projectMember, type Run, study } from '#drizzle/schema/index.ts'
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { COLUMNS, evaluateRange } from '#engine/sweep/evaluate-range.ts'
import { planSweep, type SweepPlan } from '#engine/sweep/plan.ts'
import { parseStudy } from '#engine/sweep/study.ts'
import { definition, ended, plantRun, storedOnce, until } from './fixtures.ts'

const ROOT = fileURLToPath(new URL('../..', import.meta.url))
const PRIVATE = join(ROOT, '.data')

export type Outcome = {
  what: string
  times: number
  seconds: number
  points: number
  state: string
  eachPointOnce: boolean
  progressTrue: boolean
  hash: string | null
  undisturbed: string
}

export const survived = (outcome: Outcome): boolean =>
  outcome.state === 'done' &&
  outcome.eachPointOnce &&
  outcome.progressTrue &&
  outcome.hash === outcome.undisturbed

/** A TCP line to the database that can fall silent without either end being told. */
class Line {
  readonly #server: net.Server
  #pairs: { from: net.Socket; to: net.Socket; silent: boolean }[] = []

  constructor(port: () => number) {
    this.#server = net.createServer((from) => {
      const pair = { from, to: net.connect(port(), '127.0.0.1'), silent: false }
      this.#pairs.push(pair)
      const relay = (source: net.Socket, target: net.Socket) => {
        source.on('data', (data) => {
          if (!pair.silent) target.write(data)
        })
        source.on('error', () => {})
        source.on('close', () => {
          if (!pair.silent) target.destroy()
        })
      }
      relay(pair.from, pair.to)
      relay(pair.to, pair.from)
    })
  }

  async open(): Promise<number> {
    await new Promise<void>((resolve) => this.#server.listen(0, '127.0.0.1', resolve))
    return (this.#server.address() as net.AddressInfo).port
  }

  /** Connections under way go silent; new ones work. */
  cut(): void {
    for (const pair of this.#pairs) pair.silent = true
  }

  close(): void {
    for (const { from, to } of this.#pairs) {
      from.destroy()
      to.destroy()
    }
    this.#server.close()
  }
}

export class Scene {
  readonly #folder: string
  readonly #log: (line: string) => void
  #cluster: Cluster
  readonly #workers = new Set<ChildProcess>()

  private constructor(folder: string, cluster: Cluster, log: (line: string) => void) {
    this.#folder = folder
    this.#cluster = cluster
    this.#log = log
  }

  /** Has to come before anything uses the application's database. */
  static async open(log: (line: string) => void): Promise<Scene> {
    const scenes = join(PRIVATE, 'crash')
    mkdirSync(scenes, { recursive: true })
    for (const name of readdirSync(scenes)) if (!lives(Number(name))) await clearAway(join(scenes, name))
    const folder = join(scenes, String(process.pid))
    mkdirSync(folder, { recursive: true })
    const cluster = await startCluster(settings(folder))
    process.env.DATABASE_URL = cluster.url
    process.env.SESSION_SECRET ??= 'only-for-tests-only-for-tests-only-for-tests'
    process.env.BASE_URL ??= 'http://127.0.0.1:3000'
    await migrateDatabase(cluster.url)
    await queue()
    return new Scene(folder, cluster, log)
  }

  async close(): Promise<void> {
    await this.#dismiss()
    await (await queue()).stop({ close: false, graceful: false })
    await pool.end()
    await remove(this.#cluster, this.#folder)
  }

  /** SIGKILL at random moments; a new worker takes each one's place. */
  async killWorkers(times: number, seconds: number): Promise<Outcome> {
    return this.#disturb('worker killed (SIGKILL)', times, seconds, async (under) => {
      for (let k = 0; k < times; k++) {
        await pause(100 + Math.random() * ((seconds * 1000) / times))
        if (await this.#over(under)) throw new Error(`the run ended after ${k} of ${times} kills`)
        const worker = any(this.#workers)
        worker.kill('SIGKILL')
        this.#workers.delete(worker)
        this.#log(`killed worker ${worker.pid}, kill ${k + 1}`)
        this.#employ()
      }
    })
  }

  /** SIGSTOP until the lease is lost, then SIGCONT: what the worker held is stored by another meanwhile. */
  async freezeWorker(seconds: number): Promise<Outcome> {
    return this.#disturb('worker frozen, back after its lease', 1, seconds, async (under) => {
      const held = await until('a worker holds chunks', async () => {
        const { rows } = await db.execute<{ process_id: number; chunks: number[] }>(
          `select process_id, array(select (h->>'chunk')::int from jsonb_array_elements(holding) h) as chunks
           from worker where jsonb_array_length(holding) > 0 and seen_at > now() - interval '2 seconds'`,
        )
        return rows[0]
      })
      process.kill(held.process_id, 'SIGSTOP')
      this.#log(`froze worker ${held.process_id}, which held chunks ${held.chunks.join(', ')}`)
      await pause(9000)
      process.kill(held.process_id, 'SIGCONT')
      this.#log(`worker ${held.process_id} is back${(await this.#over(under)) ? '; the run has ended' : ''}`)
      await pause(2000)
    })
  }

  /** PostgreSQL stopped in immediate mode, away for a while, and started again. */
  async restartDatabase(seconds: number): Promise<Outcome> {
    return this.#disturb('PostgreSQL stopped (immediate) and restarted', 1, seconds, async () => {
      await this.#cluster.stop('immediate')
      this.#log('PostgreSQL is away')
      await pause(2000)
      this.#cluster = await startCluster(settings(this.#folder))
      this.#log('PostgreSQL is back')
    })
  }

  /** SIGKILL of the web process while a page polls it; another takes its place and answers where the run is. */
  async killWeb(seconds: number): Promise<Outcome> {
    return this.#disturb('web process killed (SIGKILL)', 1, seconds, async (under) => {
      const cookie = await visitorOf(under)
      const first = await this.#serve()
      const before = await askProgress(first.address, under.id, cookie)
      first.web.kill('SIGKILL')
      this.#log(`killed the web process ${first.web.pid} at ${before.done} of ${before.points} points`)
      const second = await this.#serve()
      try {
        const after = await askProgress(second.address, under.id, cookie)
        this.#log(`the next web process says ${after.done} of ${after.points} points`)
        if (after.points !== under.points || after.done < before.done || after.runId !== under.id)
          throw new Error(`the web process came back with ${JSON.stringify(after)}`)
      } finally {
        second.web.kill('SIGKILL')
      }
    })
  }

  async #serve(): Promise<{ web: ChildProcess; address: string }> {
    const built = join(ROOT, 'build', 'server', 'web.js')
    if (!existsSync(built)) throw new Error('The application is not built; npm test and npm start build it.')
    const port = (await freePort(0)) as number
    const address = `http://127.0.0.1:${port}`
    const web = spawn(process.execPath, [built], {
      cwd: ROOT,
      env: {
        ...process.env,
        NODE_ENV: 'production',
        DATABASE_URL: this.#cluster.url,
        BASE_URL: address,
        HOST: '127.0.0.1',
        PORT: String(port),
        OIDC_ISSUER: 'http://127.0.0.1:9',
        OIDC_CLIENT_ID: 'none',
        OIDC_CLIENT_SECRET: 'none',
        ROLE_GROUPS: 'none=engineer',
        SMTP_URL: '',
        MAIL_FROM: '',
        LOCAL_DEMO: '1',
      },
      stdio: ['ignore', 'ignore', 'pipe'],
    })
    web.stderr?.on('data', (data) => this.#log(`web ${web.pid}: ${String(data).trimEnd()}`))
    const orphaned = () => web.kill('SIGKILL')
    process.once('exit', orphaned)
    web.once('exit', () => process.off('exit', orphaned))
    await until('the web process answers', async () => (await fetch(`${address}/health`)).ok)
    return { web, address }
  }

  async refuseWrites(seconds: number): Promise<Outcome> {
    return this.#disturb('database refuses writes for 4 s', 1, seconds, async () => {
      await this.#readOnly(true)
      this.#log('the database refuses writes')
      await pause(4000)
      await this.#readOnly(false)
      this.#log('the database takes writes again')
    })
  }

  /** The workers' connections fall silent in the middle; nobody closes them. */
  async cutConnections(seconds: number): Promise<Outcome> {
    const line = new Line(() => this.#cluster.record.port)
    const port = await line.open()
    const through = new URL(this.#cluster.url)
    through.port = String(port)
    try {
      return await this.#disturb(
        'connections cut half-open',
        1,
        seconds,
        async () => {
          line.cut()
          this.#log('the workers’ connections are silent')
        },
        through.href,
      )
    } finally {
      line.close()
    }
  }

  /** Starts a run that takes two workers about so long, disturbs it once it is under way, and looks at what comes out. */
  async #disturb(
    what: string,
    times: number,
    seconds: number,
    disturb: (run: Run) => Promise<void>,
    url = this.#cluster.url,
  ): Promise<Outcome> {
    const { given, plan } = sized(seconds)
    const undisturbed = await hashInOneGo(plan)
    this.#employ(url)
    this.#employ(url)
    try {
      return await this.#observe(what, times, disturb, given, plan, undisturbed)
    } finally {
      await this.#dismiss()
    }
  }

  async #observe(
    what: string,
    times: number,
    disturb: (run: Run) => Promise<void>,
    given: ReturnType<typeof definition>,
    plan: SweepPlan,
    undisturbed: string,
  ): Promise<Outcome> {
    const started = Date.now()
    const chunks = Math.max(CHUNKS, CHUNKS_A_KILL * times)
    const planned = await plantRun(given, Math.max(10, Math.round(plan.points / chunks)))
    this.#log(`${what}: run of ${planned.points} points in chunks of ${planned.chunkPoints}`)
    await until('the run is under way', async () => (await runProgress(planned.id)).done > 0, 120_000)
    await disturb(planned)
    const done = await endedUnlessStuck(planned.id)
    return {
      what,
      times,
      seconds: (Date.now() - started) / 1000,
      points: done.points,
      state: done.fault ? `${done.state}: ${done.fault}` : done.state,
      eachPointOnce: await storedOnce(done),
      progressTrue: (await runProgress(done.id)).done === done.points,
      hash: done.contentHash,
      undisturbed,
    }
  }

  async #over(of: Run): Promise<boolean> {
    return (await runProgress(of.id)).state !== 'running'
  }

  #employ(url = this.#cluster.url): void {
    const worker = spawn(process.execPath, ['--import', 'tsx', 'app/jobs/job-worker.ts'], {
      cwd: ROOT,
      env: { ...process.env, NODE_ENV: 'test', DATABASE_URL: url, WORKER_THREADS: '1' },
      stdio: ['ignore', 'ignore', 'pipe'],
    })
    worker.once('exit', (code) => {
      if (code) this.#log(`worker ${worker.pid} ended with code ${code}`)
    })
    worker.stderr?.on('data', (data) => this.#log(`worker ${worker.pid}: ${String(data).trimEnd()}`))
    this.#workers.add(worker)
    const orphaned = () => worker.kill('SIGKILL')
    process.once('exit', orphaned)
    worker.once('exit', () => process.off('exit', orphaned))
  }

  async #dismiss(): Promise<void> {
    for (const worker of this.#workers) {
      const gone = new Promise((resolve) => worker.once('exit', resolve))
      if (worker.exitCode === null && worker.signalCode === null) {
        worker.kill('SIGKILL')
        await gone
      }
    }
    this.#workers.clear()
  }

  async #readOnly(on: boolean): Promise<void> {
    const admin = new pg.Client({ connectionString: this.#cluster.url })
    await admin.connect()
    await admin.query('set default_transaction_read_only = off')
    await admin.query(`alter system set default_transaction_read_only = ${on ? 'on' : 'off'}`)
    await admin.query('select pg_reload_conf()')
    await admin.end()
  }
}

/** However slow the machine: a run is stuck when nothing of it was stored for so long. */
const STUCK_MS = 90_000

async function endedUnlessStuck(runId: string): Promise<Run> {
  for (let before = -1; ; ) {
    const { done } = await runProgress(runId)
    if (done === before) throw new Error(`the run is stuck at ${done} points`)
    before = done
    const run = await ended(runId, STUCK_MS).catch(() => null)
    if (run) return run
  }
}

/** Someone who may read the run, as their cookie. */
async function visitorOf(of: Run): Promise<string> {
  const subject = crypto.randomUUID()
  const [{ id }] = await db
    .insert(person)
    .values({ name: 'Visitor', email: `${subject}@example.com`, issuer: 'crash', subject, role: 'engineer' })
    .returning()
  const [{ projectId }] = await db
    .select({ projectId: study.projectId })
    .from(study)
    .where(eq(study.id, of.studyId))
  await db.insert(projectMember).values({ projectId, personId: id })
  return cookie('session', await beginSession(id, { userAgent: 'crash' }), 3600).split(';')[0]
}

async function askProgress(address: string, runId: string, cookie: string): Promise<RunProgress> {
  const answer = await fetch(`${address}/runs/${runId}/progress`, { headers: { cookie } })
  if (!answer.ok) throw new Error(`the progress route answered ${answer.status}: ${await answer.text()}`)
  return (await answer.json()) as RunProgress
}

const settings = (folder: string) => ({ folder, packages: join(PRIVATE, 'postgresql'), durable: false })

/** Ends and removes the cluster of a scene that was killed before it could. */
async function clearAway(folder: string): Promise<void> {
  if (existsSync(join(folder, 'cluster.json'))) await remove(await startCluster(settings(folder)), folder)
  else rmSync(folder, { recursive: true, force: true })
}

async function remove(cluster: Cluster, folder: string): Promise<void> {
  await cluster.stop('immediate')
  const { dataFolder } = cluster.record
  rmSync(dataFolder, { recursive: true, force: true })
  if (dirname(dataFolder) !== folder) rmSync(dirname(dataFolder), { recursive: true, force: true })
  rmSync(folder, { recursive: true, force: true })
}

function lives(pid: number): boolean {
  try {
    process.kill(pid, 0)
    return true
  } catch {
    return false
  }
}

const pause = (ms: number) => new Promise((resolve) => setTimeout(resolve, ms))
const any = <T>(set: Set<T>): T => [...set][Math.floor(Math.random() * set.size)]

/** Many, so that there are many moments to be disturbed at. */
const CHUNKS = 80
const CHUNKS_A_KILL = 12
const ROWS = [8, 10, 12, 14]
const INLETS = 25

/** A study that takes two threads about so long, whatever the engine's speed. */
function sized(seconds: number): { given: ReturnType<typeof definition>; plan: SweepPlan } {
  const planned = (velocities: number) => {
    const given = definition({ rows: ROWS, inlets: INLETS, velocities })
    const parsed = parseStudy(given)
    if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
    return { given, plan: planSweep(parsed.study) }
  }
  const points = (2 * seconds) / measurePointCost(planned(40).plan)
  return planned(Math.max(10, Math.min(9000, Math.round(points / ROWS.length / INLETS))))
}

/** The content hash of the same points evaluated in one go, with no database in between. */
async function hashInOneGo(plan: SweepPlan): Promise<string> {
  const table = new Float64Array(plan.points * COLUMNS)
  evaluateRange(plan, 0, plan.points, table)
  return hashOfColumns(
    KEY_RESULTS.map((_, c) => () => table.subarray(c * plan.points, (c + 1) * plan.points)),
  )
}
