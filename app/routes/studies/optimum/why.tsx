// Why an optimum is one: what its limits are worth, what lies one step away, the best with each choice, how it was checked.
import { LineChart } from '#app/components/charts/line-chart.tsx'
import { Digits, Quantity, useUnits } from '#app/components/ui/number.tsx'
import { significant } from '#app/components/ui/number-format.ts'
import { Scroll, Sheet } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import type { OptimumPage } from '#app/modules/analyses/optimum-page.server.ts'
import { LIMITS } from '#engine/sweep/limits.ts'
import { OBJECTIVE_LABELS, type Objective } from '#engine/sweep/objective.ts'
import { displayUnit, toDisplay } from '#engine/units.ts'
import { Named, objectiveDimension } from './named.tsx'

type Found = NonNullable<OptimumPage['found']>

const percent = (change: number) => {
  const size = Math.abs(change) * 100
  if (size < 0.005) return 'the same'
  return `${change > 0 ? '+' : '−'}${size >= 10 ? size.toFixed(0) : significant(size, 2)} %`
}

export function Worth({ worth, objective }: { worth: Found['worth']; objective: Objective }) {
  if (worth.length === 0) return null
  const dimension = objectiveDimension(objective)
  return (
    <Sheet title="What its limits cost">
      <Scroll label="What each limit is worth">
        <table className="data-table">
          <thead>
            <tr>
              <th scope="col">Limit or end of a range</th>
              <th scope="col" className="numeric">
                Now
              </th>
              <th scope="col" className="numeric">
                {OBJECTIVE_LABELS[objective]} changes
              </th>
              <th scope="col">Moved by a little, searched again</th>
            </tr>
          </thead>
          <tbody>
            {worth.map((each) => (
              <tr key={`${each.kind}${each.id}${each.side}`}>
                <th scope="row">
                  {each.label}, {each.side === 'max' ? 'at most' : 'at least'}
                </th>
                <td className="numeric">
                  <Quantity value={each.value} dimension={each.dimension} digits={4} />
                </td>
                <td className="numeric">
                  {each.perStep === null ? (
                    '–'
                  ) : (
                    <>
                      <Signed value={each.perStep.change} dimension={dimension} /> {each.perStep.words}
                    </>
                  )}
                </td>
                <td className="text-note text-soft">
                  {each.from.map(({ value, objective: least }, i) => (
                    // biome-ignore lint/suspicious/noArrayIndexKey: places of a short list
                    <span key={i} className="me-3 whitespace-nowrap">
                      <Quantity value={value} dimension={each.dimension} digits={4} />
                      {': '}
                      {least === null ? (
                        'nothing'
                      ) : (
                        <Quantity value={least} dimension={dimension} digits={5} />
                      )}
                    </span>
                  ))}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </Scroll>
    </Sheet>
  )
}

function Signed({ value, dimension }: { value: number; dimension: ReturnType<typeof objectiveDimension> }) {
  return (
    <>
      {value < 0 ? '−' : '+'}
      <Quantity value={Math.abs(value)} dimension={dimension} />
    </>
  )
}

const limitLabel = (id: string) => LIMITS.find((limit) => limit.id === id)?.label.toLowerCase() ?? id

export function Neighbours({
  neighbours,
  objective,
}: {
  neighbours: Found['neighbours']
  objective: Objective
}) {
  if (neighbours.length === 0) return null
  const dimension = objectiveDimension(objective)
  return (
    <Sheet title="One step away">
      <p className="mb-3 max-w-[70ch] text-soft">
        One choice changed, everything that can take any value searched again.
      </p>
      <Scroll label="Neighbours of the optimum">
        <table className="data-table">
          <thead>
            <tr>
              <th scope="col">Changed</th>
              <th scope="col">From</th>
              <th scope="col">To</th>
              <th scope="col" className="numeric">
                {OBJECTIVE_LABELS[objective]}
              </th>
              <th scope="col" className="numeric">
                Change
              </th>
            </tr>
          </thead>
          <tbody>
            {neighbours.map((near, i) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: neighbours keep their places
              <tr key={i}>
                <th scope="row">{near.label}</th>
                <td>
                  <Named shown={near.from} />
                </td>
                <td>
                  <Named shown={near.to} />
                </td>
                {near.objective === null ? (
                  <td colSpan={2} className="text-copper-ink">
                    {near.breaks.length > 0
                      ? `breaks ${near.breaks.map(({ id, excess }) => `${limitLabel(id)} by ${significant(excess * 100, 2)} %`).join(', ')}`
                      : (near.reason ?? 'nothing meets every limit')}
                  </td>
                ) : (
                  <>
                    <td className="numeric">
                      <Quantity value={near.objective} dimension={dimension} digits={4} />
                    </td>
                    <td className="numeric">{percent(near.change ?? 0)}</td>
                  </>
                )}
              </tr>
            ))}
          </tbody>
        </table>
      </Scroll>
    </Sheet>
  )
}

export function BestWithEach({ best, objective }: { best: Found['best']; objective: Objective }) {
  const dimension = objectiveDimension(objective)
  return [...new Set(best.map(({ path }) => path))].map((path) => {
    const rows = best.filter((each) => each.path === path)
    if (rows.length < 2) return null
    const label = rows[0].label.toLowerCase()
    return (
      <Sheet key={path} title={`The best with each ${label}`}>
        <Scroll label={`The best with each ${label}`}>
          <table className="data-table">
            <thead>
              <tr>
                <th scope="col">{rows[0].label}</th>
                <th scope="col" className="numeric">
                  {OBJECTIVE_LABELS[objective]}
                </th>
                <th scope="col" className="numeric">
                  Change
                </th>
                <th scope="col">At</th>
              </tr>
            </thead>
            <tbody>
              {rows.map((each, i) => (
                // biome-ignore lint/suspicious/noArrayIndexKey: choices keep their places
                <tr key={i} data-selected={each.isOptimum || undefined}>
                  <th scope="row">
                    <Named shown={each.value} />
                  </th>
                  <td className="numeric">
                    <Quantity value={each.objective} dimension={dimension} digits={4} />
                  </td>
                  <td className="numeric">
                    {each.isOptimum ? (
                      <Tag tone="sound">optimum</Tag>
                    ) : each.change === null ? (
                      'nothing meets every limit'
                    ) : (
                      percent(each.change)
                    )}
                  </td>
                  <td className="text-note">
                    {each.inputs.map((input) => (
                      <span key={input.path} className="me-3 inline-block">
                        <span className="text-soft">{input.label}</span> <Named shown={input.shown} />
                      </span>
                    ))}
                  </td>
                </tr>
              ))}
            </tbody>
          </table>
        </Scroll>
      </Sheet>
    )
  })
}

export function FrontSheet({
  front,
  stale,
  ask,
  following,
}: {
  front: OptimumPage['front']
  stale: boolean
  ask: React.ReactNode
  following: React.ReactNode
}) {
  const units = useUnits()
  const points = front?.points ?? []
  return (
    <Sheet title="Front: least area at each coolant pressure drop" acts={following ? null : ask}>
      {following}
      {points.length > 1 ? (
        <LineChart
          name="Front of outside area against coolant pressure drop"
          height={300}
          dots
          x={{ label: 'coolant pressure drop', unit: displayUnit('pressure', units) }}
          y={{ label: 'outside area', unit: displayUnit('area', units) }}
          lines={[
            {
              label: 'optimum at each pressure drop',
              x: points.map(({ x }) => toDisplay(x, 'pressure', units).value),
              y: points.map(({ y }) => toDisplay(y, 'area', units).value),
            },
            ...(points.every(({ band }) => band?.quantity === 'outsideArea')
              ? (['p10', 'p90'] as const).map((end) => ({
                  label: end === 'p10' ? '10 % of cases need at most' : '90 % of cases need at most',
                  x: points.map(({ x }) => toDisplay(x, 'pressure', units).value),
                  y: points.map(({ band }) => {
                    const value = band?.[end] ?? null
                    return value === null ? null : toDisplay(value, 'area', units).value
                  }),
                }))
              : []),
          ]}
        />
      ) : following ? null : (
        <p className="max-w-[70ch] text-soft">
          {front?.fault ??
            (front?.state === 'done'
              ? 'Nothing meets every limit, so there is no front.'
              : 'Searches the optimum anew at each of a dozen pressure drops; this may take a minute or two.')}
        </p>
      )}
      {stale && points.length > 1 ? (
        <p className="mt-2 text-note text-soft">Of an earlier revision; draw it again.</p>
      ) : null}
    </Sheet>
  )
}

export function Robust({
  robust,
  objective,
}: {
  robust: NonNullable<Found['robust']>
  objective: Objective
}) {
  return (
    <Sheet title="The least that is enough in nine of ten cases">
      <p className="mb-2 text-lead font-bold">
        <Quantity value={robust.objective} dimension={objectiveDimension(objective)} digits={4} />, with tubes
        of <Quantity value={robust.length} dimension="length" digits={4} />
      </p>
      <p className="max-w-[75ch] text-soft">{robust.statement}</p>
      <p className="mt-2 text-note">
        {robust.inputs.map((input) => (
          <span key={input.path} className="me-3 inline-block">
            <span className="text-soft">{input.label}</span> <Named shown={input.shown} />
          </span>
        ))}
      </p>
    </Sheet>
  )
}

export function Certificate({
  certificate,
  searched,
  rerated,
}: {
  certificate: Found['certificate']
  searched: Found['searched']
  rerated: number | null
}) {
  return (
    <Sheet
      title={certificate.holds ? 'Checked: nothing better was found' : 'The check found something better'}
    >
      <p className="mb-3 max-w-[75ch]">{certificate.statement}</p>
      <Scroll label="How the optimum was checked">
        <table className="data-table">
          <thead>
            <tr>
              <th scope="col">Checked</th>
              <th scope="col" className="numeric">
                Points
              </th>
              <th scope="col" className="numeric">
                Meet every limit
              </th>
              <th scope="col" className="numeric">
                Best of them
              </th>
            </tr>
          </thead>
          <tbody>
            {certificate.checks.map(({ how, points, feasible, under }) => (
              <tr key={how}>
                <th scope="row" className="font-normal">
                  {how}
                </th>
                <td className="numeric">
                  <Digits>{points}</Digits>
                </td>
                <td className="numeric">
                  <Digits>{feasible}</Digits>
                </td>
                <td className="numeric">{under === null ? '–' : percent(-under)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </Scroll>
      <p className="mt-3 max-w-[75ch] text-note text-soft">
        Of <Digits>{searched.combinations}</Digits> combinations <Digits>{searched.infeasible}</Digits> can
        meet no limit, <Digits>{searched.leftOut}</Digits> have a lower bound above the optimum,{' '}
        <Digits>{searched.solved}</Digits> were searched, in <Digits>{searched.evaluations}</Digits>{' '}
        evaluations.
        {rerated === null
          ? ''
          : ` Rated again at its length, the duty differs by ${Math.abs(rerated) < 1e-9 ? 'less than 1 part in 10⁹' : `${significant(Math.abs(rerated) * 100, 2)} %`}.`}
      </p>
    </Sheet>
  )
}
