// Small disturbances; `npm run crash` does the same for longer and with fifty kills.
import { afterAll, beforeAll, expect, test } from 'vitest'
import { Scene, survived } from './scene.ts'

let scene: Scene
const lines: string[] = []

beforeAll(async () => {
  scene = await Scene.open((line) => lines.push(line))
}, 60_000)
afterAll(() => scene.close())

test.each([
  ['workers killed', () => scene.killWorkers(2, 4)],
  ['the web process killed', () => scene.killWeb(3)],
  ['a worker frozen', () => scene.freezeWorker(2)],
  ['PostgreSQL restarted', () => scene.restartDatabase(2)],
  ['connections cut', () => scene.cutConnections(2)],
  ['writes refused', () => scene.refuseWrites(2)],
])(
  'a run survives %s: same points, each once, same content',
  async (_, disturb) => {
    const outcome = await disturb()
    expect(survived(outcome), `${JSON.stringify(outcome, null, 2)}\n${lines.slice(-30).join('\n')}`).toBe(
      true,
    )
  },
  400_000,
)
