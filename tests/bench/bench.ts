// `npm run --silent bench -- --json [--only engine|pool|…]`: what things cost, measured in one run.

import { closeBenchDatabase } from './database.ts'

const SECTIONS = {
  engine: async () => (await import('./engine.ts')).benchEngine(),
  pool: async () => (await import('./runs.ts')).benchPool(),
  endToEnd: async () => (await import('./runs.ts')).benchEndToEnd(),
  pages: async () => (await import('./runs.ts')).benchPages(),
  transport: async () => ({ browserDecodeMs: null }),
  progressRoute: async () => (await import('./progress-route.ts')).benchProgressRoute(),
  optimiser: async () => (await import('./optimiser.ts')).benchOptimiser(),
  workbook: async () => (await import('./workbook.ts')).benchWorkbook(),
} satisfies Record<string, () => Promise<unknown>>

const names = Object.keys(SECTIONS) as (keyof typeof SECTIONS)[]
const { argv } = process
const only = argv.flatMap((word, k) => (argv[k - 1] === '--only' ? word.split(/[|,]/) : []))
const unknown = only.filter((name) => !(names as string[]).includes(name))
if (unknown.length > 0) {
  console.error(`--only: ${unknown.join(', ')} is nothing measured; measured: ${names.join(', ')}`)
  process.exit(2)
}

const figures: Record<string, unknown> = {}
try {
  for (const name of names) {
    if (only.length > 0 && !only.includes(name)) continue
    console.error(`Measuring ${name} …`)
    figures[name] = await SECTIONS[name]()
  }
} finally {
  await closeBenchDatabase()
}
console.log(JSON.stringify(figures, null, argv.includes('--json') ? undefined : 2))
