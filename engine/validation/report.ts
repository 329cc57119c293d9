// The validation report as text for the repository: the same rows as the Library's page, to six digits.
import { cards } from '#engine/correlations/registry.ts'
import { ENGINE_VERSION } from '#engine/version.ts'
import { EVIDENCE, validationReport } from './records.ts'

const digits = (value: number) => String(Number(value.toPrecision(6)))
const percent = (share: number) => `${Number((100 * share).toPrecision(2))} %`
const cell = (text: string) => text.replaceAll('|', '\\|')

export function reportText(): string {
  const rows = validationReport()
  const printed = new Set(
    rows.filter(({ evidence }) => evidence.startsWith('printed')).flatMap((row) => row.cards),
  )
  const unverified = cards.filter(
    (card) => card.default && card.methodId !== undefined && !printed.has(card.id),
  )
  return `# Validation report, engine ${ENGINE_VERSION}

Written by \`npm run validation\` from \`records.ts\`; a test fails when it is stale. A check is worth what its source is worth.

| evidence | checks |
|---|---|
${EVIDENCE.map((evidence) => `| ${evidence} | ${rows.filter((row) => row.evidence === evidence).length} |`).join('\n')}

| check | source | evidence | expected | obtained | deviation | allowed | why |
|---|---|---|---|---|---|---|---|
${rows
  .map((row) =>
    [
      cell(row.title),
      cell(row.source),
      row.evidence,
      `${digits(row.expected)} ${row.unit}`.trim(),
      `${digits(row.obtained)} ${row.unit}`.trim(),
      `${percent(row.deviation)}${row.within ? '' : ' OUTSIDE'}`,
      percent(row.tolerance),
      cell(row.why),
    ].join(' | '),
  )
  .map((line) => `| ${line} |`)
  .join('\n')}

## Default methods without a printed-value check: unverified

${unverified.map(({ name, evidence }) => `- ${name}: ${evidence}`).join('\n')}
`
}
