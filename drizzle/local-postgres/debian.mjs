// Getting a program from Debian's packages: installed as root, unpacked into a private folder otherwise.
import { cpSync, existsSync, mkdirSync, readdirSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { run, SetUpError, say } from './processes.mjs'

export const isRoot = process.getuid?.() === 0

const quietly = { ...process.env, DEBIAN_FRONTEND: 'noninteractive', LC_ALL: 'C.UTF-8' }

/**
 * The command an administrator would type.
 * @param {string[]} packages
 */
export const installCommand = (packages) =>
  `apt-get update && apt-get install -y --no-install-recommends ${packages.join(' ')}`

/**
 * Installs packages system-wide. Needs root.
 * @param {string[]} packages
 */
async function install(packages) {
  const once = () =>
    run(
      'apt-get',
      [
        'install',
        '-y',
        '--no-install-recommends',
        '-o',
        'Dpkg::Options::=--force-confold',
        '-o',
        'DPkg::Lock::Timeout=300',
        ...packages,
      ],
      { env: quietly, output: 'quiet' },
    )
  // Package lists may be absent or out of date; fetching them is only worth it then.
  let result = await once()
  if (result.code !== 0) {
    const update = await run('apt-get', ['update'], { env: quietly, output: 'quiet' })
    result =
      update.code === 0 ? await once() : { code: update.code, output: `${update.output}\n${result.output}` }
  }
  if (result.code !== 0) {
    throw new SetUpError(
      `${packages.join(', ')}: could not be installed.\n${result.output.trim().split('\n').slice(-8).join('\n')}\nInstall by hand, then repeat: ${installCommand(packages)}`,
    )
  }
}

/**
 * Downloads packages with what they need beyond the installed ones, and unpacks them under `folder`.
 * apt keeps its lists and cache there too, so that no privilege is needed.
 * @param {string[]} packages
 * @param {string} folder
 */
async function unpack(packages, folder) {
  const apt = join(folder, 'apt')
  for (const path of ['state/lists/partial', 'cache/archives/partial', 'log'])
    mkdirSync(join(apt, path), { recursive: true })
  // apt insists on writing beside the record of installed packages.
  if (existsSync('/var/lib/dpkg/status')) cpSync('/var/lib/dpkg/status', join(apt, 'state', 'status'))
  const options = Object.entries({
    'Dir::State': join(apt, 'state'),
    'Dir::State::status': join(apt, 'state', 'status'),
    'Dir::State::extended_states': join(apt, 'state', 'extended_states'),
    'Dir::Cache': join(apt, 'cache'),
    'Dir::Log': join(apt, 'log'),
    'Debug::NoLocking': 'true',
    'APT::Sandbox::User': '',
  }).flatMap(([name, value]) => ['-o', `${name}=${value}`])
  const refuse = (/** @type {string} */ output) => {
    throw new SetUpError(
      `${packages.join(', ')}: could not be downloaded from Debian as an ordinary user.\n${output.trim().split('\n').slice(-4).join('\n')}\nRun this once as root, then repeat: ${installCommand(packages)}`,
    )
  }
  const update = await run('apt-get', [...options, 'update'], { env: quietly, output: 'quiet' })
  if (update.code !== 0) refuse(update.output)
  const download = await run(
    'apt-get',
    [...options, 'install', '-y', '--no-install-recommends', '--download-only', ...packages],
    { env: quietly, output: 'quiet' },
  )
  if (download.code !== 0) refuse(download.output)
  const root = join(folder, 'root')
  const archives = join(apt, 'cache', 'archives')
  for (const file of readdirSync(archives).filter((name) => name.endsWith('.deb'))) {
    const result = await run('dpkg-deb', ['-x', join(archives, file), root], { output: 'quiet' })
    if (result.code !== 0) refuse(result.output)
  }
  writeFileSync(join(folder, 'complete'), packages.join(' '))
  rmSync(apt, { recursive: true, force: true })
}

/**
 * Makes packages available: system-wide as root, otherwise under `folder`.
 * @param {{ packages: string[], folder: string, what: string }} wanted
 */
export async function provide({ packages, folder, what }) {
  if (!existsSync('/usr/bin/apt-get')) {
    throw new SetUpError(
      `${what}: is not installed, and this system has no apt-get to install it with; install it, then repeat.`,
    )
  }
  if (isRoot) {
    say(`Installing ${what} from Debian's packages …`)
    await install(packages)
  } else {
    say(`Fetching ${what} from Debian's packages into ${folder} …`)
    rmSync(folder, { recursive: true, force: true })
    await unpack(packages, folder)
  }
}

/**
 * The environment in which unpacked programs find their libraries.
 * @param {string} root folder that packages were unpacked into
 */
export function unpackedEnvironment(root) {
  const machine = process.arch === 'arm64' ? 'aarch64-linux-gnu' : 'x86_64-linux-gnu'
  const libraries = [join(root, 'usr/lib', machine), join(root, 'lib', machine), join(root, 'usr/lib')]
  return { LD_LIBRARY_PATH: [...libraries, process.env.LD_LIBRARY_PATH].filter(Boolean).join(':') }
}
