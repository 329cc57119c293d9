/** Writes REPORT.md: `npm run validation`. */
import { writeFileSync } from 'node:fs'
import { reportText } from './report.ts'

writeFileSync(new URL('./REPORT.md', import.meta.url), reportText())
