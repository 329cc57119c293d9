// A worker process: `npm run worker`, any number of them on any number of hosts.
import { constants, setPriority } from 'node:os'
import { pool } from '#app/db.server.ts'
import { env, requireSettings } from '#app/env.server.ts'
import { ENGINE_VERSION } from '#engine/version.ts'
import { JobWorker } from './worker.server.ts'

/**
 * A connection cut without a word must not hold a job for ever: here an answer is waited for so long, and there a
 * transaction whose other end fell silent lets go of its locks.
 */
Object.assign(pool.options, {
  query_timeout: 10_000,
  connectionTimeoutMillis: 5000,
  idle_in_transaction_session_timeout: 8_000,
  keepAlive: true,
})

requireSettings('worker')
// Threads take it over: where web process and worker share a machine, people are served first.
setPriority(constants.priority.PRIORITY_BELOW_NORMAL)
const worker = new JobWorker({ threads: env.WORKER_THREADS, log: (line) => console.error(line) })

for (const signal of ['SIGTERM', 'SIGINT'] as const)
  process.once(signal, () => {
    console.log('Worker: finishing what it holds.')
    worker.drain()
  })

console.log(`Worker: ${worker.pool.threads} threads, engine ${ENGINE_VERSION}.`)
await worker.work()
await pool.end()
// Timers of answered queries would hold the process until their time.
process.exit(0)
