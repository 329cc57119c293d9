import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { KEY_RESULT_INDEX, KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { evaluateRange } from '#engine/sweep/evaluate-range.ts'
import { planSweep, pointCase } from '#engine/sweep/plan.ts'
import { parseStudy, type Study } from '#engine/sweep/study.ts'
import { refineBest } from './refine.ts'

function study(change: (raw: Record<string, Record<string, unknown>> & { limits: unknown }) => void): Study {
  const raw = JSON.parse(
    readFileSync(new URL('../../studies/ammonia-condenser.json', import.meta.url), 'utf8'),
  )
  change(raw)
  const parsed = parseStudy(raw)
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.faults))
  return parsed.study
}

function bestOf(of: Study) {
  const plan = planSweep(of)
  const out = new Float64Array(plan.points * KEY_RESULTS.length)
  evaluateRange(plan, 0, plan.points, out)
  const at = (id: string, i: number) => out[KEY_RESULT_INDEX[id] * plan.points + i]
  let best = -1
  for (let i = 0; i < plan.points; i++)
    if (
      at('outcome', i) === 0 &&
      at('limitsNotMet', i) === 0 &&
      (best < 0 || at('outsideArea', i) < at('outsideArea', best))
    )
      best = i
  return { plan, best, area: best < 0 ? Number.NaN : at('outsideArea', best) }
}

describe('refining the best point of a sweep', () => {
  const coarse = study((raw) => {
    raw.sweep.variables = [
      { path: 'bundle.rows', values: [8, 12] },
      { path: 'drive.velocity', from: 1, to: 3, count: 5 },
    ]
    raw.limits = { coolantPressureDrop: { max: 40_000 }, length: { max: 8 } }
  })

  it('reaches what a dense sweep of the same variable reaches, and no less than its limit allows', () => {
    const { plan, best } = bestOf(coarse)
    const refined = refineBest(coarse, pointCase(plan, best))
    const dense = bestOf({
      ...coarse,
      sweep: {
        ...coarse.sweep,
        variables: [
          { path: 'bundle.rows', values: [refined.case.bundle.rows] },
          { path: 'drive.velocity', from: 1, to: 3, count: 2001 },
        ],
      },
    })
    expect(refined.improved).toBe(true)
    expect(refined.objective).toBeLessThanOrEqual(dense.area)
    expect(refined.objective / dense.area).toBeGreaterThan(0.9995)
    expect(refined.binding).toContain('coolantPressureDrop')
    expect(refined.result.coolant?.pressureDrop).toBeLessThanOrEqual(40_000)
    expect(refined.result.outsideArea).toBeCloseTo(refined.objective, 9)
    expect(refined.statement).toContain('coolant pressure drop')
  })

  it('keeps the point when nothing between the swept values is less', () => {
    const fixed = study((raw) => {
      raw.sweep.variables = [{ path: 'bundle.rows', values: [8, 12] }]
    })
    const { plan, best, area } = bestOf(fixed)
    const refined = refineBest(fixed, pointCase(plan, best))
    expect(refined.improved).toBe(false)
    expect(refined.result.outsideArea).toBeCloseTo(area, 9)
  })

  it('moves two variables along a limit that binds, as far as a dense grid of both does', () => {
    const two = study((raw) => {
      raw.sweep.variables = [
        { path: 'drive.velocity', from: 1, to: 3, count: 4 },
        { path: 'bundle.pitchRatio', from: 1.25, to: 1.6, count: 3 },
      ]
      raw.limits = { coolantPressureDrop: { max: 40_000 } }
    })
    const { plan, best } = bestOf(two)
    const refined = refineBest(two, pointCase(plan, best))
    const dense = bestOf({
      ...two,
      sweep: {
        ...two.sweep,
        variables: [
          { path: 'drive.velocity', from: 1, to: 3, count: 201 },
          { path: 'bundle.pitchRatio', from: 1.25, to: 1.6, count: 36 },
        ],
      },
    })
    expect(refined.objective).toBeLessThanOrEqual(dense.area * (1 + 1e-9))
    expect(refined.objective / dense.area).toBeGreaterThan(0.995)
    expect(refined.result.coolant?.pressureDrop).toBeLessThanOrEqual(40_000)
  })
})
