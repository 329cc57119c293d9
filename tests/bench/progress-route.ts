// The progress route over HTTP, as the built application answers it: ten runs in flight, fifty pages polling.
import { type ChildProcess, spawn } from 'node:child_process'
import { existsSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { eq } from 'drizzle-orm'
import { db } from '#app/db.server.ts'
import { env } from '#app/env.server.ts'
import { cookie } from '#app/modules/accounts/cookies.server.ts'
import { beginSession } from '#app/modules/accounts/sessions.server.ts'
import { cancelRun } from '#app/modules/runs/runs.server.ts'
import { person, projectMember, study } from '#drizzle/schema/index.ts'
import { acting, plantRun } from '#tests/crash/fixtures.ts'
import { sizeStudy } from './cases.ts'
import { openBenchDatabase } from './database.ts'

const ROOT = fileURLToPath(new URL('../..', import.meta.url))
const RUNS = 10
const PAGES = 50
const WARM_UP_SECONDS = 5
const SECONDS = 20
const POLL_MS = 1000

export async function benchProgressRoute(): Promise<{ p95Ms: number | null }> {
  const built = ['web', 'job-worker'].map((name) => join(ROOT, 'build', 'server', `${name}.js`))
  if (!built.every(existsSync)) {
    console.error('Not measured: the application is not built (npm run build).')
    return { p95Ms: null }
  }
  await openBenchDatabase()
  const base = env.BASE_URL
  const processes = built.map((file) => spawn(process.execPath, [file], { cwd: ROOT, stdio: 'ignore' }))
  const runs: string[] = []
  try {
    const [{ id: personId }] = await db
      .insert(person)
      .values({
        name: 'Bench',
        email: 'bench@example.com',
        issuer: 'bench',
        subject: 'bench',
        role: 'engineer',
      })
      .returning()
    const token = await beginSession(personId, { userAgent: 'bench' })
    const headers = { cookie: cookie('session', token, 3600).split(';')[0] }
    for (let k = 0; k < RUNS; k++) {
      const planned = await plantRun(sizeStudy(10_000))
      await letIn(personId, planned.studyId)
      runs.push(planned.id)
    }
    await answering(`${base}/health`)
    const waits: number[] = []
    // A web process that has just begun compiles its first answers; what is measured is one that serves.
    const since = performance.now() + WARM_UP_SECONDS * 1000
    const until = since + SECONDS * 1000
    await Promise.all(
      Array.from({ length: PAGES }, async (_, page) => {
        await pause((page / PAGES) * POLL_MS)
        while (performance.now() < until) {
          const started = performance.now()
          const response = await fetch(`${base}/runs/${runs[page % RUNS]}/progress`, { headers })
          const progress = (await response.json()) as { points: number }
          if (!response.ok || progress.points !== 1_000_000)
            throw new Error(`answered ${response.status}: ${JSON.stringify(progress)}`)
          if (started >= since) waits.push(performance.now() - started)
          await pause(POLL_MS)
        }
      }),
    )
    waits.sort((a, b) => a - b)
    return { p95Ms: waits[Math.floor(waits.length * 0.95)] }
  } finally {
    for (const id of runs) await cancelRun(id, acting)
    await Promise.all(processes.map(ended))
  }
}

async function letIn(personId: string, studyId: string): Promise<void> {
  const [{ projectId }] = await db
    .select({ projectId: study.projectId })
    .from(study)
    .where(eq(study.id, studyId))
  await db.insert(projectMember).values({ projectId, personId })
}

async function answering(url: string): Promise<void> {
  for (let k = 0; k < 300; k++) {
    if (
      await fetch(url).then(
        ({ ok }) => ok,
        () => false,
      )
    )
      return
    await pause(100)
  }
  throw new Error(`${url} does not answer`)
}

async function ended(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return
  const gone = new Promise((resolve) => child.once('exit', resolve))
  child.kill('SIGTERM')
  await gone
}

const pause = (ms: number) => new Promise((resolve) => setTimeout(resolve, ms))
