// What the calculation rests on: fluids, coolants, methods by choice, tubes and materials, each with its source.
import type { ReactNode } from 'react'
import { Link } from 'react-router'
import { CHOICE_LABELS, evidenceTone, GRADE_WORDS, SAFETY_WORDS } from '#app/components/library/words.ts'
import { Digits, Quantity } from '#app/components/ui/number.tsx'
import { PageHead, PlainPage, Scroll, Sheet } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import { cards } from '#engine/correlations/registry.ts'
import { coolants, fluids } from '#engine/fluids/index.ts'
import { economicsBasis, economicsDefaults, materials } from '#engine/materials.ts'
import { tubeCatalogue, tubeCatalogueSource } from '#engine/tubes.ts'
import type { Route } from './+types/library'

export const meta: Route.MetaFunction = () => [{ title: 'Library · Rowfall' }]

export const handle = { crumbs: () => [{ label: 'Library', to: '/library' }] }

export function loader() {
  const choices = [...new Set(cards.map((card) => card.choice))]
  return {
    fluids: fluids.map(({ id, name, formula, ashrae, range, safetyClass, grades }) => ({
      id,
      name,
      formula,
      ashrae,
      range,
      safetyClass: safetyClass?.value,
      grades,
    })),
    coolants: coolants.map(({ id, name, range, freezingTemperature, note }) => ({
      id,
      name,
      range,
      freezingTemperature,
      note,
    })),
    methods: choices.map((choice) => ({
      choice,
      cards: cards
        .filter((card) => card.choice === choice)
        .map(({ id, name, evidence, scatter, available, default: isDefault = false }) => ({
          id,
          name,
          evidence,
          scatter,
          available,
          isDefault,
        })),
    })),
    materials: materials.map(({ id, name, conductivity, density, velocityRange, evidence, source }) => ({
      id,
      name,
      conductivity,
      density,
      velocityRange,
      evidence,
      source,
    })),
    tubes: tubeCatalogue.map(({ id, outsideDiameter, wallThickness, gauge }) => ({
      id,
      outsideDiameter,
      wallThickness,
      gauge,
    })),
    tubeSource: tubeCatalogueSource,
    economics: Object.entries(economicsBasis).map(([id, { label, unit, source }]) => ({
      id,
      label,
      unit,
      source,
      value: economicsDefaults[id as keyof typeof economicsDefaults],
    })),
  }
}

export default function Library({ loaderData }: Route.ComponentProps) {
  const { fluids, coolants, methods, materials, tubes, tubeSource, economics } = loaderData
  const cardCount = methods.reduce((sum, { cards }) => sum + cards.length, 0)
  return (
    <PlainPage>
      <PageHead
        title={`${fluids.length} fluids and ${cardCount} methods, each with its source`}
        reason={
          <>
            What every figure in Rowfall rests on, how far it holds and how well it is known. The{' '}
            <Link to="validation" className="link">
              validation
            </Link>{' '}
            sets the methods against published figures.
          </>
        }
      />
      <nav aria-label="On this page" className="screen-only flex flex-wrap gap-x-5 gap-y-1">
        {[
          ['fluids', 'Condensing fluids'],
          ['methods', 'Methods'],
          ['coolants', 'Coolants'],
          ['materials', 'Tube materials'],
          ['tubes', 'Tube sizes'],
          ['costs', 'Cost assumptions'],
        ].map(([id, label]) => (
          <a key={id} href={`#${id}`} className="link">
            {label}
          </a>
        ))}
      </nav>

      <Part id="fluids" title="Condensing fluids">
        <Table
          caption="Condensing fluids"
          head={[
            'Fluid',
            'Formula',
            '!Lowest state',
            '!Highest state',
            'Viscosity',
            'Conductivity',
            'Safety class',
          ]}
        >
          {fluids.map((fluid) => (
            <tr key={fluid.id}>
              <th scope="row">
                <Link to={`fluids/${fluid.id}`} className="link font-semibold">
                  {fluid.ashrae ?? fluid.name}
                </Link>
                {fluid.ashrae ? <span className="ms-2 font-normal text-soft">{fluid.name}</span> : null}
              </th>
              <td>
                <Chemical>{fluid.formula}</Chemical>
              </td>
              <td className="numeric">
                <Quantity value={fluid.range[0]} dimension="temperature" digits={4} />
              </td>
              <td className="numeric">
                <Quantity value={fluid.range[1]} dimension="temperature" digits={4} />
              </td>
              <td>
                <GradeTag grade={fluid.grades.viscosity} />
              </td>
              <td>
                <GradeTag grade={fluid.grades.conductivity} />
              </td>
              <td>
                <SafetyClass value={fluid.safetyClass} />
              </td>
            </tr>
          ))}
        </Table>
      </Part>

      <section id="methods" className="grid scroll-mt-20 gap-5">
        <h2 className="text-head">Methods</h2>
        <div className="grid items-start gap-5 lg:grid-cols-2">
          {methods.map(({ choice, cards }) => (
            <Sheet key={choice} title={CHOICE_LABELS[choice] ?? choice} flush>
              <ul className="px-4 pb-2 sm:px-5">
                {cards.map((card) => (
                  <li
                    key={card.id}
                    className="flex flex-wrap items-baseline justify-between gap-x-4 gap-y-0.5 border-t border-line py-2 first:border-t-0"
                  >
                    <span>
                      <Link to={`methods/${card.id}`} className="link font-semibold">
                        {card.name}
                      </Link>
                      {card.isDefault ? <span className="text-soft"> · default</span> : null}
                      {card.available ? null : <span className="text-soft"> · not yet selectable</span>}
                    </span>
                    <Tag tone={evidenceTone(card.evidence)}>{card.evidence}</Tag>
                    <span className="w-full text-note text-soft">Scatter: {card.scatter}.</span>
                  </li>
                ))}
              </ul>
            </Sheet>
          ))}
        </div>
      </section>

      <Part id="coolants" title="Coolants">
        <Table caption="Coolants" head={['Coolant', '!Freezes at', '!Lowest', '!Highest', 'Note']}>
          {coolants.map((coolant) => (
            <tr key={coolant.id}>
              <th scope="row">{coolant.name}</th>
              <td className="numeric">
                <Quantity value={coolant.freezingTemperature} dimension="temperature" digits={3} />
              </td>
              {coolant.range.map((bound, i) => (
                <td key={i === 0 ? 'low' : 'high'} className="numeric">
                  <Quantity value={bound} dimension="temperature" digits={3} />
                </td>
              ))}
              <td className="min-w-64 text-note text-soft">{coolant.note}</td>
            </tr>
          ))}
        </Table>
      </Part>

      <Part
        id="materials"
        title="Tube materials"
        note="Conductivities are handbook values at about 40 °C, from memory; the water velocities are usual practice, an assumption and not a limit of nature."
      >
        <Table
          caption="Tube materials"
          head={[
            'Material',
            '!Conductivity',
            '!Density',
            '!Lowest water velocity',
            '!Highest water velocity',
          ]}
        >
          {materials.map((material) => (
            <tr key={material.id}>
              <th scope="row">{material.name}</th>
              <td className="numeric">
                <Quantity value={material.conductivity} dimension="conductivity" />
              </td>
              <td className="numeric">
                <Quantity value={material.density} dimension="density" digits={4} />
              </td>
              {material.velocityRange.map((bound, i) => (
                <td key={i === 0 ? 'low' : 'high'} className="numeric">
                  <Quantity value={bound} dimension="velocity" />
                </td>
              ))}
            </tr>
          ))}
        </Table>
      </Part>

      <Part id="tubes" title="Tube sizes" note={`${tubeSource}.`}>
        <Table caption="Tube sizes" head={['!Outside diameter', '!Wall', '!Gauge, BWG', '!Inside diameter']}>
          {tubes.map((tube) => (
            <tr key={tube.id}>
              <td className="numeric">
                <Quantity value={tube.outsideDiameter} dimension="length" hint="tube" digits={4} />
              </td>
              <td className="numeric">
                <Quantity value={tube.wallThickness} dimension="length" hint="tube" digits={4} />
              </td>
              <td className="numeric">{tube.gauge}</td>
              <td className="numeric">
                <Quantity
                  value={tube.outsideDiameter - 2 * tube.wallThickness}
                  dimension="length"
                  hint="tube"
                  digits={4}
                />
              </td>
            </tr>
          ))}
        </Table>
      </Part>

      <Part
        id="costs"
        title="Cost assumptions"
        note="Every one is an assumption, to be replaced by your own figures in Define."
      >
        <Table caption="Cost assumptions" head={['Assumption', '!Value', 'Basis']}>
          {economics.map(({ id, label, value, unit, source }) => (
            <tr key={id}>
              <th scope="row">{label}</th>
              <td className="numeric">
                <Digits>{value}</Digits>
                {unit === '1' ? null : <span className="unit">{unit}</span>}
              </td>
              <td className="text-soft">{source}</td>
            </tr>
          ))}
        </Table>
      </Part>
    </PlainPage>
  )
}

function Part({
  id,
  title,
  note,
  children,
}: {
  id: string
  title: string
  note?: string
  children: ReactNode
}) {
  return (
    <section id={id} className="grid scroll-mt-20 gap-2">
      <h2 className="text-head">{title}</h2>
      {note ? <p className="max-w-[75ch] text-soft">{note}</p> : null}
      <Scroll label={title} className="sheet">
        {children}
      </Scroll>
    </section>
  )
}

/** A head that begins with "!" stands over numbers. */
function Table({ caption, head, children }: { caption: string; head: string[]; children: ReactNode }) {
  return (
    <table className="data-table">
      <caption className="visually-hidden">{caption}</caption>
      <thead>
        <tr>
          {head.map((label) => (
            <th key={label} scope="col" className={label.startsWith('!') ? 'numeric' : undefined}>
              {label.replace(/^!/, '')}
            </th>
          ))}
        </tr>
      </thead>
      <tbody>{children}</tbody>
    </table>
  )
}

/** "C2F4H2" with its counts as indices. */
function Chemical({ children }: { children: string }) {
  return (
    <span>
      {children.split(/(\d+)/).map((part, i) =>
        // biome-ignore lint/suspicious/noArrayIndexKey: parts have no identity but their place
        /^\d+$/.test(part) ? <sub key={i}>{part}</sub> : <span key={i}>{part}</span>,
      )}
    </span>
  )
}

function GradeTag({ grade }: { grade: string }) {
  const { label, tone, meaning } = GRADE_WORDS[grade]
  return (
    <span title={meaning}>
      <Tag tone={tone}>{label}</Tag>
    </span>
  )
}

function SafetyClass({ value }: { value: string | undefined }) {
  if (!value) return <span className="text-soft">not classified</span>
  const words = SAFETY_WORDS[value]
  return words ? (
    <Tag tone="attention">
      {value}, {words}
    </Tag>
  ) : (
    <Tag>{value}</Tag>
  )
}
