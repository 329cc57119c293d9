import { expect, it } from 'vitest'
import { type Case, parseCase } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import { definition } from '#tests/crash/fixtures.ts'
import { byOtherMethods } from './alternatives.ts'

const read = (given: unknown): Case => {
  const parsed = parseCase(given)
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
  return parsed.case
}
const base = read(definition({ velocities: 1, inlets: 1 }).case)
const by = (bundle: Case) => byOtherMethods(bundle, evaluate(bundle))

it('gives what a case with the other method gives', () => {
  const found = by(base)
  const rows = found?.choices.find(({ choice }) => choice === 'inundation')
  const none = rows?.others.find(({ id }) => id === 'none')
  const direct = evaluate(read({ ...base, methods: { ...base.methods, inundation: 'none' } }))
  expect(none?.value).toBe(direct.outsideArea)
  // Without condensate from above every lower row does better, and the first is nearly as it was.
  expect(none?.change).toBeLessThan(-0.05)
  expect(none?.rows.at(-1)?.after).toBeGreaterThan(none?.rows.at(-1)?.before as number)
  expect(rows?.spread?.greatest).toBeGreaterThan(rows?.spread?.least as number)
})

it('names what comes and goes with a method', () => {
  const strict = by(read({ ...base, bundle: { ...base.bundle, rows: 40, tubesPerRow: 6 } }))
  const notes = strict?.choices.flatMap(({ others }) =>
    others.flatMap(({ appear, vanish }) => [...appear, ...vanish]),
  )
  expect(notes?.length).toBeGreaterThan(0)
})

it('says why a method is refused instead of leaving it out', () => {
  const held = read({
    ...base,
    fluid: {
      properties: {
        liquidDensity: 1146.7,
        latentHeat: 1.63e5,
        liquidViscosity: 1.614e-4,
        liquidConductivity: 0.0747,
        liquidSpecificHeat: 1498,
      },
    },
    methods: {
      ...base.methods,
      inundation: 'condensateFlow',
      vapourShear: 'none',
      vapourPressureDrop: 'none',
      twoPhase: 'none',
    },
  })
  const refused = by(held)?.choices.flatMap(({ others }) => others.filter((other) => other.refused !== null))
  expect(refused?.map(({ id }) => id)).toContain('drainageMode')
  expect(refused?.every(({ refused: why }) => (why ?? '').length > 10)).toBe(true)
})
