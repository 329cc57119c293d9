import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { parseStudy } from './study.ts'

function faultsOf(variables: unknown): string[] {
  const raw = JSON.parse(
    readFileSync(new URL('../../studies/ammonia-condenser.json', import.meta.url), 'utf8'),
  )
  const parsed = parseStudy({ ...raw, optimise: { variables } })
  return parsed.ok ? [] : parsed.faults.map(({ path, problem, remedy }) => `${path}: ${problem}; ${remedy}`)
}

describe('bounds for the optimiser', () => {
  it('are taken for a swept variable, another one and a count', () => {
    expect(
      faultsOf([
        { path: 'drive.velocity', from: '0.8 m/s', to: '2 m/s' },
        { path: 'bundle.pitchRatio', from: 1.25, to: 1.5 },
        { path: 'bundle.rows', from: 4, to: 30 },
      ]),
    ).toEqual([])
  })

  it.each([
    [
      'a misspelt path',
      { path: 'drive.velocty', from: 1, to: 2 },
      /^optimise\.variables\.0\.path: .*drive\.velocity/,
    ],
    [
      'ends the wrong way round',
      { path: 'drive.velocity', from: 2, to: 1 },
      /^optimise\.variables\.0: from 2 is not under/,
    ],
    [
      'a path whose place another one has',
      { path: 'drive.massFlow', from: 1, to: 2 },
      /^optimise\.variables\.0\.path: "drive\.massFlow"/,
    ],
    [
      'a path of the other drive',
      { path: 'drive.wallSubcooling', from: 1, to: 2 },
      /^optimise\.variables\.0\.path: .*belongs to the drive wallSubcooling/,
    ],
    [
      'an end that no case may have',
      { path: 'bundle.pitchRatio', from: 0.5, to: 1.5 },
      /^optimise\.variables\.0\.from: 0\.5/,
    ],
    [
      'a choice',
      { path: 'fluid', from: 1, to: 2 },
      /^optimise\.variables\.0\.path: "fluid" is nothing with bounds/,
    ],
    ['a negative end', { path: 'drive.velocity', from: -1, to: 2 }, /^optimise\.variables\.0\.from: -1/],
    [
      'half a row',
      { path: 'bundle.rows', from: 4.5, to: 8 },
      /^optimise\.variables\.0\.from: 4\.5 is not a whole number/,
    ],
    [
      'what the catalogue sets',
      { path: 'tube.outsideDiameter', from: 0.019, to: 0.025 },
      /^optimise\.variables\.0: sweeps tube\.outsideDiameter, which sweep\.variables\.0 /,
    ],
  ])('refuse %s', (_, variable, line) => {
    const faults = faultsOf([variable])
    expect(faults).toHaveLength(1)
    expect(faults[0]).toMatch(line)
  })

  it('refuse the same path twice', () => {
    const variable = { path: 'bundle.pitchRatio', from: 1.25, to: 1.5 }
    expect(faultsOf([variable, variable])[0]).toMatch(
      /^optimise\.variables\.1: sweeps bundle\.pitchRatio, which optimise\.variables\.0 sweeps already/,
    )
  })
})

describe('sigmas of an uncertainty study', () => {
  const faultsWith = (sigmas: unknown) => {
    const raw = JSON.parse(
      readFileSync(new URL('../../studies/ammonia-condenser.json', import.meta.url), 'utf8'),
    )
    const parsed = parseStudy({ ...raw, uncertainty: { sigmas } })
    return parsed.ok ? [] : parsed.faults.map(({ path, problem, remedy }) => `${path}: ${problem}; ${remedy}`)
  }

  it('are taken for known groups from 0 to 3, and refused otherwise', () => {
    expect(faultsWith({ film: 0.1, foulingInside: 0 })).toEqual([])
    expect(faultsWith({ flim: 0.1 })[0]).toBe(
      'uncertainty.sigmas.flim: is no group of factors; did you mean "film"?',
    )
    expect(faultsWith({ rain: 0.1 })[0]).toMatch(/known groups: film, shear/)
    expect(faultsWith({ film: -0.1 })[0]).toMatch(/^uncertainty\.sigmas\.film: is -0\.1; at least 0/)
  })
})
