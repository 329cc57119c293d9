// What must hold over the whole case space. `npm run soak` runs it on two hundred thousand cases.
import * as fc from 'fast-check'
import { afterAll, describe, expect, it } from 'vitest'
import { OUTCOMES } from '#engine/bundle/key-results.ts'
import { type Case, type CaseInput, parseCase } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import { COOLANT_CP, COOLANT_LENGTH, coolantModel, fillCoolant } from '#engine/fluids/index.ts'
import type { Result } from '#engine/result.ts'
import { cases } from './case-space.ts'
import { outsideDomain } from './physical-domain.ts'

const RUNS = Number(process.env.PROPERTY_RUNS ?? 5000)
const MINUTES = RUNS > 5000 ? 120 : 3
const SEED = 20261201

const REASONS = new Set(OUTCOMES.slice(1).map((outcome) => outcome.code))

function checked(input: CaseInput): Case {
  const parsed = parseCase(input)
  if (!parsed.ok) throw new Error(parsed.faults.map((f) => `${f.path}: ${f.problem}; ${f.remedy}`).join('\n'))
  return parsed.case
}
const reasonOf = (result: Result) => result.notes.find((note) => REASONS.has(note.code))?.code ?? null

/** Every number and null of a result by its path; row and pass numbers are left out of the path. */
function* leaves(value: unknown, path: string): Generator<[string, number | null]> {
  if (typeof value === 'number' || value === null) yield [path, value]
  else if (Array.isArray(value)) for (const item of value) yield* leaves(item, path)
  else if (typeof value === 'object')
    for (const [name, item] of Object.entries(value as object))
      yield* leaves(item, path ? `${path}.${name}` : name)
}

/** Which notes account for a null in a point that was evaluated. */
const ACCOUNTS: Record<string, string[]> = {
  overallCoefficient: ['noCoolantState', 'coolantApproachSmall'],
  meanTemperatureDifference: ['noCoolantState', 'coolantApproachSmall'],
  coolant: ['noCoolantState'],
  pumpingPower: ['noCoolantState'],
  yearlyCost: ['noCoolantState'],
  'rows.coolantTemperature': ['noCoolantState'],
  'bundle.tubeMass': ['noTubeMass'],
}

const accounted = (path: string, reason: string | null, codes: Set<string>): boolean =>
  reason !== null || (ACCOUNTS[path]?.some((code) => codes.has(code)) ?? false)

class Tally {
  total = 0
  private readonly counts = new Map<string, number>()
  count(what: string): void {
    this.total++
    this.counts.set(what, this.of(what) + 1)
  }
  of(what: string): number {
    return this.counts.get(what) ?? 0
  }
  toString(): string {
    return [...this.counts]
      .sort((a, b) => b[1] - a[1])
      .map(([what, n]) => `${what} ${((100 * n) / this.total).toFixed(3)} %`)
      .join(', ')
  }
}

describe('every case', () => {
  const seen = new Tally()
  /** The cases without an answer whose inputs put them outside the physical domain, by what does. */
  const outside = new Tally()
  /** Outcomes of the cases inside it. */
  const inside = new Tally()
  afterAll(() => {
    console.log(`${seen.total} cases: ${seen}`)
    console.log(`outside the physical domain ${outside.total}: ${outside}`)
    console.log(`inside it ${inside.total}: ${inside}`)
  })

  it(
    `answers finite numbers, or null with a note that says why, and closes its balances (${RUNS} cases)`,
    () => {
      fc.assert(
        fc.property(cases, (input) => {
          const kase = checked(input)
          const result = evaluate(kase)
          const reason = reasonOf(result)
          seen.count(reason ?? 'evaluated')
          const why = reason === null ? null : outsideDomain(kase, result)
          if (why === null) inside.count(reason ?? 'evaluated')
          else outside.count(why)
          const codes = new Set(result.notes.map((note) => note.code))
          for (const [path, value] of leaves(result, '')) {
            if (value === null ? !accounted(path, reason, codes) : !Number.isFinite(value))
              throw new Error(`${path} is ${value}`)
          }
          expect(reason).not.toBe('inputInvalid')
          if (reason === null) balances(kase, result)
        }),
        { numRuns: RUNS, seed: SEED, endOnFailure: true },
      )
      // What the solver itself leaves: steady states that lie too close together, and Chen's row law far beyond its range.
      expect(seen.of('notSolved')).toBeLessThanOrEqual(RUNS / 2500)
      for (const reason of REASONS) expect(inside.of(reason) / inside.total, reason).toBeLessThan(0.01)
    },
    MINUTES * 60_000,
  )

  const water = new Float64Array(COOLANT_LENGTH)
  function balances(kase: Case, r: Result): void {
    const duty = r.duty as number
    const perTube = (r.outsideArea as number) / (r.tubeCount as number)
    const rows = r.rows.reduce((sum, row) => sum + row.heatFlux * perTube * row.tubes, 0)
    expect(Math.abs(rows / duty - 1)).toBeLessThan(1e-9)
    if (!r.coolant || r.overallCoefficient === null) return
    const U = r.overallCoefficient
    expect(
      Math.abs((U * (r.outsideArea as number) * (r.meanTemperatureDifference as number)) / duty - 1),
    ).toBeLessThan(1e-12)
    const { drive } = kase
    const coolant = (drive.kind === 'coolant' ? drive.coolant : drive.coolant?.coolant) as string
    const model = coolantModel(coolant)
    let gained = 0
    for (const pass of r.passes) {
      fillCoolant(model, (pass.inletTemperature + pass.outletTemperature) / 2, water)
      gained +=
        (r.coolant.massFlow as number) * water[COOLANT_CP] * (pass.outletTemperature - pass.inletTemperature)
    }
    expect(Math.abs(gained / duty - 1)).toBeLessThan(1e-9)
  }

  it(
    'gives the same bytes again, whatever was evaluated in between',
    () => {
      fc.assert(
        fc.property(cases, cases, (one, other) => {
          const first = JSON.stringify(evaluate(checked(one)))
          evaluate(checked(other))
          expect(JSON.stringify(evaluate(checked(one)))).toBe(first)
        }),
        { numRuns: Math.ceil(RUNS / 10), seed: SEED, endOnFailure: true },
      )
    },
    MINUTES * 60_000,
  )

  it(
    'rates the length it sized to the duty it was asked for',
    () => {
      fc.assert(
        fc.property(cases, (input) => {
          const kase = checked(input)
          // Chen's row factor grows with subcooling: two states may share one length.
          fc.pre(
            kase.duty !== undefined && kase.drive.kind === 'coolant' && kase.methods.inundation !== 'chen',
          )
          const sized = evaluate(kase)
          fc.pre(reasonOf(sized) === null && (sized.coolant?.massFlow as number) < 1e6)
          fc.pre(sized.rows[0].tubes <= 2000)
          const { duty, drive, bundle, ...rest } = kase
          const { velocity, outletTemperature, ...side } = drive as Extract<
            Case['drive'],
            { kind: 'coolant' }
          >
          const back = evaluate(
            checked({
              ...rest,
              drive: { ...side, massFlow: sized.coolant?.massFlow as number },
              bundle: {
                ...bundle,
                ...(bundle.tubesPerRow === 'auto' ? { tubesPerRow: sized.rows[0].tubes } : {}),
                length: sized.tubeLength as number,
              },
            }),
          )
          // Vapour that takes a fifth of its pressure, or coolant that leaves at saturation, answers to length so
          // steeply that the closeness of the length is that of the duty no longer.
          const close = steep(sized) ? 1e-6 : 1e-8
          expect(Math.abs((back.duty as number) / (duty as number) - 1)).toBeLessThan(close)
        }),
        { numRuns: Math.ceil(RUNS / 10), seed: SEED, endOnFailure: true },
      )
    },
    MINUTES * 60_000,
  )

  it(
    'holds a wall with a coolant flow that brings the same duty in the coolant drive',
    () => {
      fc.assert(
        fc.property(cases, (input) => {
          const kase = checked(input)
          fc.pre(kase.drive.kind === 'wallSubcooling' && kase.drive.coolant !== undefined)
          const held = evaluate(kase)
          fc.pre(reasonOf(held) === null && (held.coolant?.massFlow as number) < 1e6)
          const { duty, drive, ...rest } = kase
          const side = (drive as Extract<Case['drive'], { kind: 'wallSubcooling' }>).coolant
          const back = evaluate(
            checked({
              ...rest,
              drive: {
                kind: 'coolant',
                ...(side as NonNullable<typeof side>),
                massFlow: held.coolant?.massFlow as number,
              },
              bundle: { ...rest.bundle, length: held.tubeLength as number },
            }),
          )
          expect(Math.abs((back.duty as number) / (held.duty as number) - 1)).toBeLessThan(1e-6)
        }),
        { numRuns: Math.ceil(RUNS / 10), seed: SEED, endOnFailure: true },
      )
    },
    MINUTES * 60_000,
  )
})

const steep = (r: Result) =>
  r.notes.some((note) => note.code === 'vapourPressureDropHigh' || note.code === 'coolantApproachSmall')
