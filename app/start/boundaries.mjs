// Checks that imports point one way: routes -> modules -> { tables, database, queue, engine }, and the engine to itself
// and three libraries. Node's built-ins only; part of `npm run check`.
import { readdirSync, readFileSync } from 'node:fs'
import { dirname, join, normalize, relative } from 'node:path'
import { fileURLToPath } from 'node:url'

const root = fileURLToPath(new URL('../..', import.meta.url))
const LIBRARIES_OF_THE_ENGINE = ['zod', 'ml-matrix', 'fmin']

/**
 * Folder by folder, what a file may import from; the first folder that matches a file decides. Folders not named
 * here are free.
 * @type {[string, readonly string[]][]}
 */
const ALLOWED = [
  ['engine/', ['engine/']],
  ['app/components/', ['app/components/', 'engine/', 'drizzle/schema/', 'app/http/']],
  [
    'app/modules/',
    [
      'app/modules/',
      'app/http/',
      'app/db.server',
      'app/env.server',
      'app/settings',
      'app/jobs/queue',
      'app/components/',
      'drizzle/schema/',
      'engine/',
    ],
  ],
  [
    'app/jobs/',
    [
      'app/jobs/',
      'app/modules/',
      'app/db.server',
      'app/env.server',
      'app/settings',
      'app/http/errors',
      'drizzle/schema/',
      'engine/',
    ],
  ],
  [
    'app/routes/',
    [
      'app/routes/',
      'app/modules/',
      'app/http/',
      'app/components/',
      'app/db.server',
      'app/env.server',
      'engine/',
      'drizzle/schema/',
      'studies/',
    ],
  ],
  ['app/http/', ['app/http/', 'app/modules/accounts/', 'app/db.server', 'app/env.server', 'drizzle/schema/']],
  ['studies/', ['studies/', 'engine/', 'app/modules/exports/']],
  ['drizzle/schema/', ['drizzle/schema/', 'engine/']],
]
/** Within studies' reach only the builders that touch neither database nor web. */
const PURE = /^app\/modules\/exports\/[\w-]+\.ts$/
/** What the engine must not touch, however it is spelled. */
const IMPURE = /\b(Math\.random|Date\.now|new Date\(\)|process\.env|performance\.now)\b/

/** @type {string[]} */
const faults = []

/** @param {string} folder */
function walk(folder) {
  for (const entry of readdirSync(join(root, folder), { withFileTypes: true })) {
    const path = join(folder, entry.name)
    if (entry.isDirectory()) walk(path)
    else if (/\.tsx?$/.test(entry.name)) check(path)
  }
}

/** @param {string} path */
function check(path) {
  const isTest = /\.test\.tsx?$/.test(path)
  const isCommand = /\/cli-[\w-]+\.ts$/.test(path)
  const text = readFileSync(join(root, path), 'utf8')
  if (path.startsWith('engine/') && !isTest && !isCommand) {
    const found = IMPURE.exec(text.replace(/\/\*[\s\S]*?\*\/|\/\/.*$/gm, ''))
    if (found) faults.push(`${path}: uses ${found[0]}; the engine's answers depend on their inputs alone`)
  }
  if (isTest || isCommand) return
  const rule = ALLOWED.find(([folder]) => path.startsWith(folder))
  if (!rule) return
  const specifiers = [
    ...text.matchAll(/^(?:import|export)\s[^'"]*?from '([^']+)'/gm),
    ...text.matchAll(/^import '([^']+)'/gm),
    ...text.matchAll(/\bimport\('([^']+)'\)/g),
  ]
  for (const [, specifier] of specifiers) {
    const target = resolve(path, specifier)
    if (target === null) {
      if (
        rule[0] === 'engine/' &&
        !LIBRARIES_OF_THE_ENGINE.some((name) => specifier === name || specifier.startsWith(`${name}/`))
      )
        faults.push(
          `${path}: imports ${specifier}; the engine imports itself, ${LIBRARIES_OF_THE_ENGINE.join(', ')} and nothing else`,
        )
      continue
    }
    const allowed = rule[1].some((folder) => target.startsWith(folder))
    const pure =
      rule[0] !== 'studies/' ||
      !target.startsWith('app/') ||
      (PURE.test(target) && !target.includes('.server'))
    if (!allowed || !pure) faults.push(`${path}: imports ${target}; allowed are ${rule[1].join(', ')}`)
  }
}

/**
 * A file of ours as a path from the root, null for a package.
 * @param {string} from
 * @param {string} specifier
 */
function resolve(from, specifier) {
  if (specifier.startsWith('#')) return specifier.slice(1)
  if (specifier.startsWith('.')) {
    const target = normalize(relative(root, join(root, dirname(from), specifier)))
    return target.includes('+types') ? `${dirname(from)}/` : target
  }
  return null
}

for (const folder of ['app', 'engine', 'studies', 'drizzle']) walk(folder)
if (faults.length > 0) {
  console.error(faults.join('\n'))
  process.exit(1)
}
