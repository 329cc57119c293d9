// Before anything else of `npm start`, `npm test` and `npm run worker`: packages, Debian's programs, the build.
// Node's built-ins only, as the packages may be missing.
import { createHash } from 'node:crypto'
import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { postgresBinaries } from '../../drizzle/local-postgres/binaries.mjs'
import { provide } from '../../drizzle/local-postgres/debian.mjs'
import {
  endOnSignal,
  pause,
  run,
  SetUpError,
  say,
  takeLock,
} from '../../drizzle/local-postgres/processes.mjs'

const root = fileURLToPath(new URL('../..', import.meta.url))
const data = join(root, process.env.DATA_FOLDER || '.data')

/** @param {...string} parts */
const hash = (...parts) => createHash('sha256').update(parts.join('\n')).digest('hex')

/** @param {string} file */
const read = (file) => (existsSync(file) ? readFileSync(file, 'utf8') : '')

function checkNode() {
  const [major, minor] = process.versions.node.split('.').map(Number)
  if (major === 20 && minor >= 19) return
  throw new SetUpError(
    `Node.js: this is ${process.versions.node} and Rowfall runs on 20.19 or later of Node.js 20; install that, then repeat.`,
  )
}

/** Installs the packages when the lock file is another than the one they were installed from. */
async function packages() {
  const mark = join(root, 'node_modules', '.rowfall')
  const wanted = hash(read(join(root, 'package-lock.json')), process.versions.modules)
  if (read(mark) === wanted) return
  say('Installing packages …')
  const result = await run('npm', ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'], {
    cwd: root,
    output: 'quiet',
    env: { ...process.env, NODE_ENV: 'development' },
  })
  if (result.code !== 0)
    throw new SetUpError(
      `Packages: npm ci failed.\n${result.output.trim().split('\n').slice(-12).join('\n')}\nCheck that the npm registry can be reached, then repeat.`,
    )
  writeFileSync(mark, wanted)
}

const SOURCES = ['app', 'engine', 'drizzle', 'studies', 'public']
const CONFIGURATION = ['package-lock.json', 'vite.config.ts', 'react-router.config.ts', 'tsconfig.json']

/** Names, sizes and contents of what the build is made from. */
function sources() {
  const state = createHash('sha256')
  /** @param {string} folder */
  const walk = (folder) => {
    for (const entry of readdirSync(join(root, folder), { withFileTypes: true }).sort((a, b) =>
      a.name < b.name ? -1 : 1,
    )) {
      const path = `${folder}/${entry.name}`
      if (entry.isDirectory()) walk(path)
      else if (!/\.test\.tsx?$/.test(path)) state.update(path).update(readFileSync(join(root, path)))
    }
  }
  for (const folder of SOURCES) if (existsSync(join(root, folder))) walk(folder)
  for (const file of CONFIGURATION) state.update(file).update(read(join(root, file)))
  return state.digest('hex')
}

/** Builds when the sources are others than those of the last build. Two at once take turns. */
async function build() {
  const mark = join(root, 'build', '.sources')
  const wanted = sources()
  if (read(mark) === wanted) return
  const lock = join(data, 'build.lock')
  for (let waited = 0; takeLock(lock) && waited < 600; waited += 1) await pause(500)
  try {
    if (read(mark) === wanted) return
    say('Building …')
    rmSync(join(root, 'build'), { recursive: true, force: true })
    const result = await run(
      process.execPath,
      [join(root, 'node_modules/@react-router/dev/bin.js'), 'build'],
      {
        cwd: root,
        output: 'quiet',
        env: { ...process.env, NODE_ENV: 'production' },
      },
    )
    if (result.code !== 0 || !existsSync(join(root, 'build/server/web.js')))
      throw new SetUpError(`Build: it failed.\n${result.output.trim().split('\n').slice(-30).join('\n')}`)
    writeFileSync(mark, wanted)
  } finally {
    rmSync(lock, { force: true })
  }
}

/** Debian's Chromium for the browser tests. */
async function chromium() {
  const file = join(data, 'chromium.path')
  const unpacked = join(data, 'chromium')
  const places = ['/usr/bin/chromium', join(unpacked, 'root/usr/bin/chromium')]
  const present = () => places.find((place) => existsSync(place))
  if (!present()) await provide({ packages: ['chromium'], folder: unpacked, what: 'Chromium' })
  const found = present()
  if (!found)
    throw new SetUpError('Chromium: the package brought no /usr/bin/chromium; install chromium, then repeat.')
  mkdirSync(data, { recursive: true })
  writeFileSync(file, found)
}

async function main() {
  const purpose = process.argv[2]
  checkNode()
  endOnSignal()
  if (existsSync(data) && !statSync(data).isDirectory())
    throw new SetUpError(
      `${data}: is a file; move it away, as private files are kept in a folder of that name.`,
    )
  await packages()
  const ownDatabase = purpose === 'test' || (purpose !== 'worker' && !process.env.DATABASE_URL)
  if (ownDatabase) await postgresBinaries({ folder: join(data, 'postgresql') })
  if (purpose === 'test') await chromium()
  if (purpose !== 'dev') await build()
}

main().catch((error) => {
  say(error instanceof SetUpError ? error.message : (error?.stack ?? String(error)))
  process.exit(1)
})
