// The validation report as text for the repository: the same rows as the Library's page, to six digits.
import type { Card } from '#engine/correlations/card.ts'
import { cards } from '#engine/correlations/registry.ts'
import { ENGINE_VERSION } from '#engine/version.ts'
import { EVIDENCE, type ValidationRow, validationRecords, validationReport } from './records.ts'

const digits = (value: number) => String(Number(value.toPrecision(6)))
const percent = (share: number) => `${Number((100 * share).toPrecision(2))} %`
const cell = (text: string) => text.replaceAll('|', '\\|')

/** Default methods that a case may leave unsaid and no printed value stands behind. */
export function unverifiedDefaults(): readonly Card[] {
  const printed = new Set(
    validationRecords
      .filter(({ evidence }) => evidence.startsWith('printed value'))
      .flatMap(({ cards }) => cards),
  )
  return cards.filter((card) => card.default && card.methodId !== undefined && !printed.has(card.id))
}

/** Obtained over expected of the records of one evidence level. */
export function parity(rows: readonly ValidationRow[]) {
  return EVIDENCE.map((evidence) => {
    const deviations = rows.filter((row) => row.evidence === evidence).map(({ deviation }) => deviation)
    const mean = deviations.reduce((sum, one) => sum + one, 0) / deviations.length
    const worst = deviations.reduce((most, one) => (Math.abs(one) > Math.abs(most) ? one : most), 0)
    return { evidence, checks: deviations.length, mean, worst }
  })
}

/** Printed figures that no record uses, and why. */
const NOT_USED = [
  'Condensate rates of Çengel and Ghajar and of Incropera: they divide the duty by the latent heat with 0.68, the energy balance by the one with 3/8; the engine’s rates are 1 to 1.5 % above.',
  'Seven rows in air (Incropera, example 7.7) and the same in line (ht): two readings of one chart differ by 4.5 %, the polynomials by up to 7.7 %, all within the law’s scatter of 15 to 20 %.',
  'Kern’s row of coolant and vapour losses (example 12.1): his friction factors and four heads a pass are another method.',
  'Chlorobenzene on six tubes (McCabe, Smith and Harriott, example 13.1) and propanol areas (Kern): chains of rounded steps with a coefficient inside that no case can give.',
  'Typical overall coefficients (Çengel and Ghajar): steam 1000 to 6000 W/(m² K) holds; refrigerant 300 to 1000 and ammonia 800 to 1400 lie 4 to 5 % below the plausibility cases here, whose water is fast.',
  'Steam with 2.89 % air (Othmer) and measured bands with gas: no case may hold gas yet.',
  'Pressure trend of dropwise condensation (ASHRAE, 6:1 from 91 to 16 kPa): the fits give 1.6:1; low-pressure dropwise is very uncertain.',
]

export function reportText(): string {
  const rows = validationReport()
  return `# Validation report, engine ${ENGINE_VERSION}

Written by \`npm run validation\` from the records beside it; a test fails when it is stale. A check is worth what its source is worth.

| evidence | checks | mean deviation | worst deviation |
|---|---|---|---|
${parity(rows)
  .map(
    ({ evidence, checks, mean, worst }) =>
      `| ${evidence} | ${checks} | ${percent(mean)} | ${percent(worst)} |`,
  )
  .join('\n')}

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

${unverifiedDefaults()
  .map(({ name, evidence }) => `- ${name}: ${evidence}`)
  .join('\n')}

## Printed figures not used

${NOT_USED.map((line) => `- ${line}`).join('\n')}
`
}
