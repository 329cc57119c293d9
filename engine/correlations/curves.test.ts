import { describe, expect, it } from 'vitest'
import { curvePlot } from './curves.ts'
import { cards, METHOD_CHOICES, methodIds } from './registry.ts'

/** Laws that need a whole bundle have no curve, nor has the choice of none. */
const ALONE = ['vapourShear.mcnaught', 'vapourShear.honda']

const at = (id: string, x: number): number => {
  const choice = cards.find((card) => card.id === id)?.choice
  const curve = choice && curvePlot(choice)?.curves.find((each) => each.id === id)
  if (!curve) throw new Error(`${id} has no curve`)
  const k = curve.x.reduce(
    (best, value, i) => (Math.abs(value - x) < Math.abs(curve.x[best] - x) ? i : best),
    0,
  )
  expect(curve.x[k] / x).toBeCloseTo(1, 2)
  return curve.y[k]
}

describe('curves', () => {
  it('stand for every card of a choice with alternatives that a case can make', () => {
    for (const choice of METHOD_CHOICES) {
      if (methodIds(choice).length < 2) continue
      const drawn = curvePlot(choice)?.curves.map(({ id }) => id) ?? []
      const expected = methodIds(choice).map((id) => `${choice}.${id}`)
      expect(drawn, choice).toEqual(
        expect.arrayContaining(expected.filter((id) => !ALONE.includes(id) && !id.endsWith('.none'))),
      )
    }
  })

  it('are finite, as long as their grid, and of cards that exist', () => {
    for (const choice of METHOD_CHOICES)
      for (const { id, x, y } of curvePlot(choice)?.curves ?? []) {
        expect(y).toHaveLength(x.length)
        expect(y.every(Number.isFinite), id).toBe(true)
        expect(
          cards.some((card) => card.id === id),
          id,
        ).toBe(true)
      }
  })

  // Values of a calculation made independently of this engine, with the reference case's rounded properties.
  it.each([
    ['vapourShear.shekriladzeGomelauri', 20, 735.1],
    ['vapourShear.butterworth', 20, 513.7],
    ['vapourShear.rose', 20, 740.2],
    ['vapourShear.fujiiUeharaKurata', 20, 781.9],
    ['film.nusselt', 5, 1993.3],
    ['tubeSide.gnielinski', 39_810, 243.55],
  ])('%s passes through the value calculated elsewhere', (id, x, value) => {
    // The coolant's grid passes by the calculated Reynolds number, 39 344, at a hundredth.
    const near = id.startsWith('tubeSide') ? 0.015 : 2e-4
    expect(Math.abs(at(id, x) / value - 1), `${at(id, x)}`).toBeLessThan(near)
  })

  it('begin at the first row, whatever the law', () => {
    for (const { id, y } of curvePlot('inundation')?.curves ?? []) expect(y[0], id).toBeCloseTo(1, 12)
  })
})
