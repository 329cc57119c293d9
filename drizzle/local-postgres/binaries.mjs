// Finds PostgreSQL's programs, and fetches them when there are none.
import { existsSync, mkdirSync, readdirSync, writeFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { isRoot, provide, unpackedEnvironment } from './debian.mjs'
import { SetUpError } from './processes.mjs'

const OLDEST = 13

/**
 * @typedef {{ bin: string, version: number, env: Record<string, string> }} Binaries
 */

/**
 * Every usable installation, newest first.
 * @param {string} folder where packages may have been unpacked
 * @returns {Binaries[]}
 */
function installations(folder) {
  const unpacked = join(folder, 'root')
  const found = []
  for (const [base, env] of /** @type {const} */ ([
    ['/usr/lib/postgresql', {}],
    [join(unpacked, 'usr/lib/postgresql'), unpackedEnvironment(unpacked)],
  ])) {
    if (!existsSync(base) || (base.startsWith(unpacked) && !existsSync(join(folder, 'complete')))) continue
    for (const version of readdirSync(base)) {
      const bin = join(base, version, 'bin')
      const whole = ['postgres', 'initdb', 'pg_ctl', 'createdb'].every((name) => existsSync(join(bin, name)))
      if (whole && Number(version) >= OLDEST) found.push({ bin, version: Number(version), env })
    }
  }
  return found.sort((a, b) => b.version - a.version)
}

/**
 * PostgreSQL's programs, of the given major version when a cluster already has one.
 * @param {{ folder: string, version?: number }} wanted `folder` is where an ordinary user's packages are unpacked
 * @returns {Promise<Binaries>}
 */
export async function postgresBinaries({ folder, version }) {
  const choose = () => installations(folder).find((one) => version === undefined || one.version === version)
  const present = choose()
  if (present) return present
  const packages = version === undefined ? ['postgresql'] : [`postgresql-${version}`]
  if (isRoot) {
    // The package would otherwise make and start a cluster of its own.
    const file = '/etc/postgresql-common/createcluster.conf'
    mkdirSync(dirname(file), { recursive: true })
    if (!existsSync(file)) writeFileSync(file, 'create_main_cluster = false\n')
  }
  await provide({ packages, folder, what: 'PostgreSQL' })
  const fetched = choose()
  if (!fetched)
    throw new SetUpError(
      `PostgreSQL: ${packages.join(', ')} did not bring the server programs; install PostgreSQL ${version ?? OLDEST} or newer.`,
    )
  return fetched
}
