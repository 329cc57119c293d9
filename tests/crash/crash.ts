// `npm run crash`: everything a run has to survive, at length. Prints what was done and the hashes as JSON.
import { type Outcome, Scene, survived } from './scene.ts'

const kills = Number(process.argv[2] ?? 50)
for (const signal of ['SIGINT', 'SIGTERM'] as const) process.once(signal, () => process.exit(1))
const scene = await Scene.open((line) => console.error(line))
const outcomes: Outcome[] = []
try {
  outcomes.push(await scene.killWorkers(kills, Math.max(10, 1.5 * kills)))
  outcomes.push(await scene.killWeb(10))
  outcomes.push(await scene.freezeWorker(12))
  for (let k = 0; k < 3; k++) outcomes.push(await scene.restartDatabase(10))
  outcomes.push(await scene.cutConnections(10))
  outcomes.push(await scene.refuseWrites(10))
} finally {
  await scene.close()
}
console.log(JSON.stringify(outcomes, null, 2))
process.exit(outcomes.every(survived) ? 0 : 1)
