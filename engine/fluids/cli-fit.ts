/** Fits every table of `tables/` and writes `coefficients.ts`: `npm run fit`. */
import { readFileSync, writeFileSync } from 'node:fs'
import { libraryCoefficients } from './fit-library.ts'

const read = (name: string) => readFileSync(new URL(`./tables/${name}`, import.meta.url), 'utf8')
const text = libraryCoefficients(read, ({ id, segments }) => console.error(`${id}: ${segments} segments`))
writeFileSync(new URL('./coefficients.ts', import.meta.url), text)
