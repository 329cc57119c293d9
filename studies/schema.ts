// Writes study.schema.json, the JSON Schema of a study file, from the schema that reads it.
import { readFileSync, writeFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { z } from 'zod'
import { studySchema } from '#engine/sweep/study.ts'

export const schemaFile = fileURLToPath(new URL('./study.schema.json', import.meta.url))

/** As text, the way the file holds it. */
export function schemaText(): string {
  const schema = z.toJSONSchema(studySchema, { io: 'input', unrepresentable: 'any' })
  return `${JSON.stringify({ title: 'Rowfall study', ...schema }, null, 2)}\n`
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  const before = (() => {
    try {
      return readFileSync(schemaFile, 'utf8')
    } catch {
      return ''
    }
  })()
  const text = schemaText()
  if (text !== before) writeFileSync(schemaFile, text)
  console.log(text === before ? 'study.schema.json is current.' : 'study.schema.json is written.')
}
