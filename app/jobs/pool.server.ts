// The threads that evaluate points: one a core, fed with slices of a chunk.
import { availableParallelism } from 'node:os'
import { Piscina } from 'piscina'
import type { Part, PartAsked, Parts } from '#app/modules/analyses/tasks.ts'
import { slicePointsFor } from '#app/modules/runs/chunks.ts'
import { COLUMNS } from '#engine/sweep/evaluate-range.ts'
import type { Study } from '#engine/sweep/study.ts'
import type { Slice, SliceResult } from './engine-worker.ts'

/** A study as threads take it: encoded once, in memory that all of them share. */
export type SharedStudy = { key: string; bytes: Uint8Array }

export function shareStudy(key: string, study: Study): SharedStudy {
  const encoded = new TextEncoder().encode(JSON.stringify(study))
  const bytes = new Uint8Array(new SharedArrayBuffer(encoded.length))
  bytes.set(encoded)
  return { key, bytes }
}

/** Set its first number to another than zero to stop. */
export const stopFlag = () => new Int32Array(new SharedArrayBuffer(4))

export type Computed = { table: Float64Array; seconds: number }

/** Built JavaScript in production; in development and tests the TypeScript beside this file, through tsx. */
const task = import.meta.env?.PROD
  ? { filename: new URL('./engine-worker.js', import.meta.url).href }
  : { filename: new URL('./engine-worker.ts', import.meta.url).href, execArgv: ['--import', 'tsx'] }

export class EnginePool {
  readonly threads: number
  readonly #piscina: Piscina

  constructor(threads = availableParallelism()) {
    this.threads = threads
    this.#piscina = new Piscina({
      ...task,
      minThreads: threads,
      maxThreads: threads,
      // The next slice waits at the thread, so that it need not wait for this one to ask.
      concurrentTasksPerWorker: 2,
    })
  }

  /** Evaluates points on all threads; null when stopped before the end. */
  async evaluate(
    study: SharedStudy,
    first: number,
    count: number,
    secondsPerPoint: number,
    stop: Int32Array,
  ): Promise<Computed | null> {
    const size = slicePointsFor(secondsPerPoint)
    const table = new Float64Array(count * COLUMNS)
    let seconds = 0
    let evaluated = 0
    const slices: Promise<void>[] = []
    for (let from = 0; from < count; from += size) {
      const points = Math.min(size, count - from)
      const slice: Slice = { key: study.key, study: study.bytes, first: first + from, count: points, stop }
      slices.push(
        this.#piscina.run(slice).then((result: SliceResult) => {
          for (let column = 0; column < COLUMNS; column++)
            table.set(result.table.subarray(column * points, (column + 1) * points), column * count + from)
          seconds += result.seconds
          evaluated += result.evaluated
        }),
      )
    }
    const settled = await Promise.allSettled(slices)
    for (const slice of settled) if (slice.status === 'rejected') throw slice.reason
    return evaluated === count ? { table, seconds } : null
  }

  /** Has a part of an analysis computed by one thread. */
  part(asked: PartAsked): Promise<Parts[Part]['answer']> {
    return this.#piscina.run(asked, { name: 'computePart' })
  }

  async close(): Promise<void> {
    await this.#piscina.destroy()
  }
}
