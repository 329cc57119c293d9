// One method: its equation and symbols, where it holds, how it scatters, its source and how well its numbers are known.
import { Link } from 'react-router'
import { LineChart } from '#app/components/charts/line-chart.tsx'
import { Formula } from '#app/components/library/formula-text.tsx'
import { CHOICE_LABELS, evidenceTone } from '#app/components/library/words.ts'
import { MarginNote } from '#app/components/ui/margin-note.tsx'
import { Digits } from '#app/components/ui/number.tsx'
import { MarginPage, PageHead, Sheet } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import { AppError } from '#app/http/errors.ts'
import { type Evidence, RANGE_QUANTITIES, type Range, type RangeQuantity } from '#engine/correlations/card.ts'
import { curvePlot } from '#engine/correlations/curves.ts'
import { cardsFor, findCard } from '#engine/correlations/registry.ts'
import type { Route } from './+types/method'

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData?.card.name ?? 'Method'} · Rowfall` },
]

export const handle = {
  crumbs: ({ card }: Route.ComponentProps['loaderData']) => [
    { label: 'Library', to: '/library' },
    { label: card.name, to: `/library/methods/${card.id}` },
  ],
}

export function loader({ params }: Route.LoaderArgs) {
  const card = findCard(params.methodId)
  if (!card) throw new AppError('not-found', `There is no method "${params.methodId}" in the library.`)
  const plot = curvePlot(card.choice)
  return {
    card,
    plot: plot?.curves.some(({ id }) => id === card.id)
      ? {
          ...plot,
          curves: [...plot.curves].sort((a, b) => Number(b.id === card.id) - Number(a.id === card.id)),
        }
      : null,
    ranges: Object.entries(card.range).map(([quantity, range]) => ({
      quantity,
      ...RANGE_QUANTITIES[quantity as RangeQuantity],
      text: rangeText(range),
    })),
    neighbours: cardsFor(card.choice)
      .filter(({ id }) => id !== card.id)
      .map(({ id, name, evidence, default: isDefault = false }) => ({ id, name, evidence, isDefault })),
  }
}

/** The largest number stands for "no upper end". */
const ENDLESS = 1e300

function rangeText(range: Range): string {
  if (range === 'not stated') return 'not stated by the source'
  const [low, high] = range
  return high > ENDLESS ? `from ${low}` : `${low} to ${high}`
}

const EVIDENCE: Record<Evidence, string> = {
  'printed value checked': 'It reproduces a figure printed in a named book or paper.',
  'formula seen': 'The formula was seen in a public copy; its values are our own evaluation.',
  'limit-checked, from memory': 'Constants from memory; they reproduce a known exact limit.',
  'plausibility checked, from memory':
    'Constants from memory; they agree with an independent published band.',
  'from memory, unverified':
    'Constants from memory; no copy was seen. Check the source before relying on it.',
  derived: 'It follows from a stated derivation, checked by an independent route.',
  assumption: 'An engineering choice made here.',
  definition: 'True by definition.',
}

export default function Method({ loaderData }: Route.ComponentProps) {
  const { card, plot, ranges, neighbours } = loaderData
  return (
    <MarginPage
      marginLabel="How well it is known"
      margin={
        <div className="grid gap-3.5">
          <MarginNote
            tone={evidenceTone(card.evidence) === 'attention' ? 'attention' : 'sound'}
            title={`Evidence: ${card.evidence}.`}
          >
            {EVIDENCE[card.evidence]}
          </MarginNote>
          <MarginNote title="Scatter.">
            {card.scatter}.
            {card.sigmaLn === null ? null : (
              <>
                {' '}
                Bands take a spread of {Math.round(card.sigmaLn * 1000) / 10} % (one standard deviation of the
                logarithm).
              </>
            )}
          </MarginNote>
          {card.notes?.map((note) => {
            const { head, rest } = firstClause(note)
            return (
              <MarginNote key={note} title={<Formula>{head}</Formula>}>
                {rest === '' ? null : <Formula>{rest}</Formula>}
              </MarginNote>
            )
          })}
          {card.available || card.methodId === undefined ? null : (
            <MarginNote tone="attention" title="Not yet selectable.">
              It stands here as a reference; no case can choose it.
            </MarginNote>
          )}
        </div>
      }
    >
      <PageHead
        over={`${CHOICE_LABELS[card.choice] ?? card.choice}${card.default ? ' · default' : ''}`}
        title={card.name}
        reason={card.source.join('; ')}
      />
      <Sheet title="Equation">
        <div className="grid gap-1.5 text-lead leading-relaxed">
          {card.equation.split('; ').map((part) => (
            <p key={part}>
              <Formula>{part}</Formula>
            </p>
          ))}
        </div>
        {Object.keys(card.symbols).length > 0 ? (
          <dl className="mt-4 grid grid-cols-[max-content_minmax(0,1fr)] gap-x-6">
            {Object.entries(card.symbols).map(([symbol, meaning]) => (
              <div key={symbol} className="col-span-2 grid grid-cols-subgrid border-t border-line py-1.5">
                <dt className="font-semibold">
                  <Formula>{symbol}</Formula>
                </dt>
                <dd className="text-soft">
                  <Formula>{meaning}</Formula>
                </dd>
              </div>
            ))}
          </dl>
        ) : null}
      </Sheet>
      {plot ? (
        <Sheet title={`${plot.title}, beside its neighbours`}>
          <LineChart
            name={plot.title}
            height={320}
            x={plot.x}
            y={plot.y}
            lines={plot.curves.map(({ name, x, y }) => ({ label: name, x, y }))}
          />
          <p className="mt-2 max-w-[70ch] text-note text-soft">Reference case: {plot.reference}.</p>
        </Sheet>
      ) : null}
      <Sheet title="Where it holds">
        {card.rangeText ? <p className="mb-3 max-w-[70ch]">{card.rangeText}</p> : null}
        {ranges.length > 0 ? (
          <dl>
            {ranges.map(({ quantity, label, unit, text }) => (
              <div
                key={quantity}
                className="flex flex-wrap justify-between gap-x-6 border-t border-line py-1.5"
              >
                <dt className="text-soft">{label}</dt>
                <dd className="font-semibold">
                  <Grouped>{text}</Grouped>
                  {unit && /\d/.test(text) ? <span className="unit">{unit}</span> : null}
                </dd>
              </div>
            ))}
          </dl>
        ) : card.rangeText ? null : (
          <p className="text-soft">It has no range of its own.</p>
        )}
        <p className="mt-3 text-note text-soft">
          Every point is checked against these; a value outside is marked with a note, never hidden or
          clipped.
        </p>
      </Sheet>
      {neighbours.length > 0 ? (
        <Sheet title="Others for the same purpose">
          <ul>
            {neighbours.map(({ id, name, evidence, isDefault }) => (
              <li
                key={id}
                className="flex flex-wrap items-baseline justify-between gap-x-4 border-t border-line py-1.5 first:border-t-0"
              >
                <span>
                  <Link to={`/library/methods/${id}`} className="link font-semibold">
                    {name}
                  </Link>
                  {isDefault ? <span className="text-soft"> · default</span> : null}
                </span>
                <Tag tone={evidenceTone(evidence)}>{evidence}</Tag>
              </li>
            ))}
          </ul>
        </Sheet>
      ) : null}
    </MarginPage>
  )
}

/** A text with the numbers in it grouped. */
function Grouped({ children }: { children: string }) {
  return (
    <>
      {children.split(/(\d[\d.]*)/).map((part, i) =>
        // biome-ignore lint/suspicious/noArrayIndexKey: parts have no identity but their place
        /^\d/.test(part) ? <Digits key={i}>{part}</Digits> : <span key={i}>{part}</span>,
      )}
    </>
  )
}

function firstClause(note: string): { head: string; rest: string } {
  const match = /^(.{12,90}?[.;])\s+(.*)$/s.exec(note)
  return match ? { head: match[1], rest: match[2] } : { head: note, rest: '' }
}
