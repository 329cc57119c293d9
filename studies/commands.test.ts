// The two commands as a script meets them: JSON on standard output alone, faults by line, exit codes.
import { execFile } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { afterAll, describe, expect, it } from 'vitest'
import { parseStudy } from '#engine/sweep/study.ts'
import { schemaFile, schemaText } from './schema.ts'

const root = fileURLToPath(new URL('..', import.meta.url))
const folder = mkdtempSync(join(tmpdir(), 'rowfall-studies-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))

function command(
  name: 'evaluate' | 'study',
  args: string[],
  input?: unknown,
): Promise<{ code: number; out: string; err: string }> {
  return new Promise((done) => {
    const child = execFile(
      process.execPath,
      ['--import', 'tsx', `studies/${name}.ts`, ...args],
      { cwd: root, maxBuffer: 1e8 },
      (error, out, err) => done({ code: error ? Number(error.code) : 0, out, err }),
    )
    child.stdin?.end(input === undefined ? '' : typeof input === 'string' ? input : JSON.stringify(input))
  })
}

const bundle = { layout: 'triangular30', pitchRatio: 1.25, rows: 4, tubesPerRow: 4, length: 1 }
const rated = {
  fluid: 'r134a',
  saturationTemperature: '40 degC',
  drive: { kind: 'wallSubcooling', wallSubcooling: '9 degF' },
  tube: { outsideDiameter: '3/4 in' },
  bundle,
}

describe('evaluate', () => {
  it('turns a case with units into a result, the same bytes each time', async () => {
    const [first, second] = await Promise.all([
      command('evaluate', [], rated),
      command('evaluate', [], rated),
    ])
    expect(first.code).toBe(0)
    expect(first.out).toBe(second.out)
    expect(JSON.parse(first.out).rows[0].wallSubcooling).toBeCloseTo(5, 12)
  })

  it.each([
    ['an unknown fluid', { ...rated, fluid: 'r13a' }, /^fluid: .*; near matches: .*r134a/m],
    [
      'a state outside the table',
      { ...rated, saturationTemperature: '140 degC' },
      /^saturationTemperature: .*outside the table of r134a; allowed is 200 to/m,
    ],
    [
      'a tube of no diameter',
      { ...rated, tube: { outsideDiameter: 0 } },
      /^tube\.outsideDiameter: 0 is out of bounds; allowed is above 0/m,
    ],
    [
      'duty and length',
      { ...rated, duty: '10 kW' },
      /^duty: duty and bundle\.length are both given; .*limits\.duty\.min/m,
    ],
    ['text that is not JSON', '{', /^standard input: is not JSON .*; give one case/m],
  ])('refuses %s by field, problem and remedy', async (_, input, line) => {
    const { code, out, err } = await command('evaluate', [], input)
    expect(code).toBe(2)
    expect(out).toBe('')
    expect(err).toMatch(line)
  })

  it('lists methods, fluids, materials and properties', async () => {
    const [methods, fluids, materials, states] = await Promise.all([
      command('evaluate', ['--methods']),
      command('evaluate', ['--fluids']),
      command('evaluate', ['--materials']),
      command('evaluate', ['--properties', 'water', '373.124']),
    ])
    expect(JSON.parse(methods.out).every((card: { source: string[] }) => card.source.length > 0)).toBe(true)
    expect(JSON.parse(fluids.out).fluids).toHaveLength(31)
    expect(JSON.parse(materials.out).economics[0].evidence).toBe('assumption')
    // The normal boiling point of water: 101 325 Pa at 373.124 K (IAPWS-95).
    expect(JSON.parse(states.out)[0].pressure / 101325).toBeCloseTo(1, 4)
  })
})

describe('study', () => {
  const small = {
    name: 'Small',
    case: { ...rated, bundle },
    sweep: {
      variables: [
        { path: 'bundle.rows', values: [2, 4] },
        { path: 'drive.wallSubcooling', from: '2 K', to: '4 K', count: 3 },
      ],
    },
  }

  it('evaluates every point and writes each form with the same numbers', async () => {
    const file = join(folder, 'small.json')
    writeFileSync(file, JSON.stringify(small))
    const out = (ending: string) => join(folder, `out.${ending}`)
    const runs = await Promise.all(
      ['csv', 'json', 'xlsx'].map((ending) =>
        command('study', [file, '--out', out(ending), '--workers', '1']),
      ),
    )
    expect(runs.map(({ code }) => code)).toEqual([0, 0, 0])
    expect(JSON.parse(runs[0].out)).toMatchObject({ points: 6, evaluated: 6 })
    const json = JSON.parse(readFileSync(out('json'), 'utf8'))
    const lines = readFileSync(out('csv'), 'utf8').trimEnd().split('\r\n')
    expect(lines).toHaveLength(7)
    const column = json.heads.indexOf('duty_w')
    expect(lines.slice(1).map((line) => Number(line.split(',')[column]))).toEqual(
      json.points.map((row: number[]) => row[column]),
    )
  })

  it('finds the optimum with its certificate, or which limit would have to give way', async () => {
    const sized = (most: string) => ({
      name: 'Sized',
      case: {
        ...rated,
        duty: '30 kW',
        drive: { kind: 'coolant', coolant: 'water', inletTemperature: '29 degC', velocity: 2 },
        tube: { outsideDiameter: '3/4 in', wallThickness: '1.245 mm', material: 'copper' },
        bundle: { ...bundle, length: undefined },
      },
      sweep: {
        variables: [
          { path: 'bundle.rows', values: [4, 6] },
          { path: 'drive.velocity', from: 1, to: 3, count: 3 },
        ],
      },
      limits: { coolantPressureDrop: { max: most } },
    })
    const run = async (most: string) => {
      const file = join(folder, `sized-${most.replaceAll(' ', '-')}.json`)
      writeFileSync(file, JSON.stringify(sized(most)))
      const { code, out } = await command('study', [file, '--optimise', '--workers', '1'])
      expect(code).toBe(0)
      return JSON.parse(out)
    }
    const [found, none] = await Promise.all([run('10 kPa'), run('10 Pa')])
    expect(found.optimum.objective).toBeLessThanOrEqual(found.best.results.outsideArea)
    expect(found.optimum).toMatchObject({ binding: ['coolantPressureDrop'], certificate: { holds: true } })
    expect(none).toMatchObject({ best: null, optimum: null })
    expect(none.infeasible.relaxations[0]).toMatchObject({ id: 'coolantPressureDrop', from: 10 })
  })

  it.each([
    [
      'an empty sweep',
      { ...small, sweep: { variables: [] } },
      /^sweep\.variables: is empty; give at least one/m,
    ],
    [
      'a million and one points',
      { ...small, sweep: { variables: [{ path: 'drive.wallSubcooling', from: 1, to: 9, count: 1000001 }] } },
      /^sweep\.variables(\.0\.count)?: .*1000001|1 000 001/m,
    ],
    [
      'a misspelt path',
      { ...small, sweep: { variables: [{ path: 'bundle.row', values: [2] }] } },
      /^sweep\.variables\.0\.path: .*; did you mean "bundle\.rows"/m,
    ],
  ])('refuses %s', async (name, study, line) => {
    const file = join(folder, `${name.replaceAll(' ', '-')}.json`)
    writeFileSync(file, JSON.stringify(study))
    const { code, out, err } = await command('study', [file])
    expect(code).toBe(2)
    expect(out).toBe('')
    expect(err).toMatch(line)
  })
})

describe('the shipped files', () => {
  it.each(['chiller-condenser', 'low-pressure-steam-condenser', 'ammonia-condenser'])(
    '%s is a study',
    (id) => {
      const parsed = parseStudy(JSON.parse(readFileSync(new URL(`./${id}.json`, import.meta.url), 'utf8')))
      expect(parsed.ok ? [] : parsed.faults).toEqual([])
    },
  )

  it('the schema file is the one the reader’s schema makes (npm run study:schema)', () => {
    expect(readFileSync(schemaFile, 'utf8')).toBe(schemaText())
  })
})
