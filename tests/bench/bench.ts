// `npm run --silent bench -- --json [--only engine|pool|…]`: what things cost, measured in one run.

const SECTIONS = {
  engine: async () => (await import('./engine.ts')).benchEngine(),
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
for (const name of names) {
  if (only.length > 0 && !only.includes(name)) continue
  console.error(`Measuring ${name} …`)
  figures[name] = await SECTIONS[name]()
}
console.log(JSON.stringify(figures, null, argv.includes('--json') ? undefined : 2))
