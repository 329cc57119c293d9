// A large workbook's memory, in a process of its own so that nothing else is counted.
import { execFileSync } from 'node:child_process'
import { Writable } from 'node:stream'
import { fileURLToPath } from 'node:url'
import { writeWorkbook } from '#app/modules/exports/workbook.ts'
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { rateStudy } from './cases.ts'
import { planOf } from './engine.ts'

const POINTS = 250_000
const SELF = fileURLToPath(import.meta.url)

export function benchWorkbook(): { points: number; peakMiB: number } {
  const reply = execFileSync(process.execPath, ['--import', 'tsx', SELF], { encoding: 'utf8' })
  return { points: POINTS, peakMiB: Number(reply) }
}

async function write(): Promise<number> {
  const plan = planOf(rateStudy(POINTS / 100))
  if (!plan) throw new Error('the engine refuses the rate case')
  const nowhere = new Writable({ write: (_chunk, _encoding, done) => setImmediate(done) })
  await writeWorkbook(nowhere, {
    plan,
    invented: false,
    origin: [],
    points: plan.points,
    best: [],
    // Numbers with as many digits as results have; outcome, mask and notes are zero.
    table: async (first, count) =>
      Float64Array.from({ length: KEY_RESULTS.length * count }, (_, at) =>
        at < 2 * count || at >= (KEY_RESULTS.length - 1) * count ? 0 : Math.sqrt(first + at + 2),
      ),
  })
  return process.resourceUsage().maxRSS / 1024
}

if (process.argv[1] === SELF) console.log(await write())
