// Sleep that ends when something is queued, at the latest after the time given.
import pg from 'pg'
import { env } from '#app/env.server.ts'
import { WAKE_CHANNEL } from './queue.server.ts'

export class WakeUp {
  #woken = false
  #rise: () => void = () => {}
  #client: pg.Client | undefined

  /** Ends the sleep under way, or else the next one. */
  wake(): void {
    this.#woken = true
    this.#rise()
  }

  async sleep(ms: number): Promise<void> {
    if (!this.#woken) {
      await new Promise<void>((resolve) => {
        const timer = setTimeout(resolve, ms)
        this.#rise = () => {
          clearTimeout(timer)
          resolve()
        }
      })
    }
    this.#woken = false
  }

  /** Keeps a connection on which PostgreSQL says that work was queued; call again at will, it makes one at a time. */
  async listen(): Promise<void> {
    if (this.#client) return
    const client = new pg.Client({
      connectionString: env.DATABASE_URL,
      application_name: 'rowfall worker listens',
      keepAlive: true,
    })
    this.#client = client
    const gone = () => {
      if (this.#client === client) this.#client = undefined
    }
    client.on('error', gone)
    client.on('end', gone)
    client.on('notification', () => this.wake())
    try {
      await client.connect()
      await client.query(`listen ${WAKE_CHANNEL}`)
    } catch {
      gone()
      await client.end().catch(() => {})
    }
  }

  async close(): Promise<void> {
    await this.#client?.end().catch(() => {})
  }
}
