// The evaluate command: one case to one result, and the engine's registries. JSON on standard output, nothing else.
import { readFileSync } from 'node:fs'
import { faultLine, parseCase } from '#engine/case.ts'
import { cards, findCards } from '#engine/correlations/registry.ts'
import { evaluate } from '#engine/evaluate.ts'
import { coolants, findFluid, fluids, properties } from '#engine/fluids/index.ts'
import { economicsBasis, economicsDefaults, materials } from '#engine/materials.ts'
import { tubeCatalogue, tubeCatalogueSource } from '#engine/tubes.ts'

const USAGE = `evaluate [FILE]                      one case (file or standard input) to its result
evaluate --methods | --method ID     the correlations with source, range and scatter
evaluate --fluids | --materials      fluids and coolants; tubes, materials, economic defaults
evaluate --properties FLUID T [T …]  saturation state at each temperature in K`

class Refusal extends Error {
  readonly lines: string[]
  constructor(...lines: string[]) {
    super(lines.join('\n'))
    this.lines = lines
  }
}

function answer(args: readonly string[]): unknown {
  const [first, ...rest] = args
  switch (first) {
    case '--methods':
      return cards
    case '--method': {
      const found = rest[0] === undefined ? [] : findCards(rest[0])
      if (found.length === 0)
        throw new Refusal(`--method: there is no method "${rest[0] ?? ''}"; --methods lists all ids`)
      return found.length === 1 ? found[0] : found
    }
    case '--fluids':
      return { fluids, coolants }
    case '--materials':
      return {
        materials,
        tubes: { source: tubeCatalogueSource, sizes: tubeCatalogue },
        economics: Object.entries(economicsDefaults).map(([id, value]) => ({
          id,
          value,
          ...economicsBasis[id as keyof typeof economicsBasis],
        })),
      }
    case '--properties':
      return propertiesAt(rest)
    case '--help':
      throw new Refusal(USAGE)
  }
  if (first?.startsWith('--')) throw new Refusal(`${first}: is not known; ${USAGE}`)
  if (rest.length > 0) throw new Refusal('evaluate: one file at a time; give one case per call')
  const parsed = parseCase(read(first))
  if (!parsed.ok) throw new Refusal(...parsed.faults.map(faultLine))
  return evaluate(parsed.case)
}

function propertiesAt([id, ...temperatures]: string[]): unknown {
  if (id === undefined || temperatures.length === 0)
    throw new Refusal(
      '--properties: needs a fluid and at least one temperature; e.g. --properties r134a 313.15',
    )
  const card = findFluid(id)
  if (!card) throw new Refusal(`--properties: there is no fluid "${id}"; --fluids lists all ids`)
  const [low, high] = card.range
  return temperatures.map((text) => {
    const T = Number(text)
    if (!(T >= low && T <= high))
      throw new Refusal(
        `--properties: "${text}" is not a temperature in the table of ${id}; allowed is ${low} to ${high} K`,
      )
    return properties(id, [T])[0]
  })
}

function read(file: string | undefined): unknown {
  const name = file ?? 'standard input'
  let text: string
  try {
    text = readFileSync(file ?? 0, 'utf8')
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException
    throw new Refusal(`${name}: cannot be read (${code}); give a readable file or a case on standard input`)
  }
  try {
    return JSON.parse(text)
  } catch (error) {
    throw new Refusal(`${name}: is not JSON (${(error as Error).message}); give one case as JSON`)
  }
}

try {
  process.stdout.write(`${JSON.stringify(answer(process.argv.slice(2)), null, 2)}\n`)
} catch (error) {
  if (!(error instanceof Refusal)) throw error
  process.stderr.write(`${error.lines.join('\n')}\n`)
  process.exitCode = 2
}
