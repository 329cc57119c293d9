// Starts a PostgreSQL cluster of this test run's own, with a migrated template database, and removes it at the end.
import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import pg from 'pg'
import type { TestProject } from 'vitest/node'
import { migrateDatabase } from '#app/start/migrate.ts'
import { type Cluster, startCluster } from '#drizzle/local-postgres/cluster.mjs'
import { readLock, takeLock } from '#drizzle/local-postgres/processes.mjs'

export const TEMPLATE = 'rowfall_template'

const privateFolder = fileURLToPath(new URL('../../.data', import.meta.url))
const runs = join(privateFolder, 'test')

declare module 'vitest' {
  export interface ProvidedContext {
    /** The test cluster's maintenance database. */
    postgresUrl: string
  }
}

type Shared = { users: number; cluster: Promise<Cluster>; folder: string }
// Several projects of one run share the cluster; each loads this file for itself.
const kept = globalThis as typeof globalThis & { rowfallTestCluster?: Shared }

export default async function setup(project: TestProject) {
  kept.rowfallTestCluster ??= begin()
  const shared = kept.rowfallTestCluster
  shared.users += 1
  const cluster = await shared.cluster
  project.provide('postgresUrl', cluster.url)
  return async () => {
    shared.users -= 1
    if (shared.users > 0) return
    kept.rowfallTestCluster = undefined
    await cluster.stop('immediate')
    remove(shared.folder)
  }
}

function begin(): Shared {
  const folder = join(runs, String(process.pid))
  return { users: 0, folder, cluster: start(folder) }
}

async function start(folder: string): Promise<Cluster> {
  mkdirSync(runs, { recursive: true })
  for (const name of readdirSync(runs)) await clearAbandoned(join(runs, name))
  takeLock(join(folder, 'lock'))
  const cluster = await open(folder)
  const server = new pg.Client({ connectionString: cluster.url })
  await server.connect()
  await server.query(`create database ${TEMPLATE}`)
  await server.end()
  await migrateDatabase(databaseUrl(cluster.url, TEMPLATE))
  return cluster
}

const open = (folder: string) =>
  startCluster({ folder, packages: join(privateFolder, 'postgresql'), durable: false })

/** Ends and removes the cluster of a run that was killed before it could. */
async function clearAbandoned(folder: string): Promise<void> {
  if (readLock(join(folder, 'lock'))) return
  const record = join(folder, 'cluster.json')
  if (existsSync(record) && existsSync(JSON.parse(readFileSync(record, 'utf8')).dataFolder)) {
    const cluster = await open(folder)
    await cluster.stop('immediate')
  }
  remove(folder)
}

function remove(folder: string): void {
  const record = join(folder, 'cluster.json')
  if (existsSync(record)) {
    const { dataFolder } = JSON.parse(readFileSync(record, 'utf8'))
    rmSync(dataFolder, { recursive: true, force: true })
    // Outside the checkout, the folder above was made for this run alone.
    if (dirname(dataFolder) !== folder) rmSync(dirname(dataFolder), { recursive: true, force: true })
  }
  rmSync(folder, { recursive: true, force: true })
}

export function databaseUrl(server: string, database: string): string {
  const url = new URL(server)
  url.pathname = `/${database}`
  return url.href
}
