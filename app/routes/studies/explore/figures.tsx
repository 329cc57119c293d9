// The figures under the headline: the best point's, or those of the point that stands in for it.
import { type Figure, FigureStrip } from '#app/components/ui/figure-strip.tsx'
import { Quantity } from '#app/components/ui/number.tsx'
import { resultColumns } from '#app/modules/explore/columns.ts'
import { OBJECTIVE_LABELS, type Objective } from '#engine/sweep/objective.ts'

const columns = new Map(resultColumns().map((column) => [column.id, column]))

const USUAL = ['outsideArea', 'coolantPressureDrop', 'vapourPressureDrop', 'overallCoefficient', 'tubeLength']

/** The objective first, then what is usually asked of a bundle; a result the point has no value for is left out. */
export function PointFigures({
  results,
  objective,
  label,
}: {
  /** Key results by id. */
  results: Readonly<Record<string, number | null>>
  objective: Objective
  label: string
}) {
  const ids = [objective, ...USUAL.filter((id) => id !== objective)]
  const figures = ids.flatMap((id): Figure[] => {
    const column = columns.get(id)
    const value = results[id]
    if (!column || value === null || value === undefined) return []
    return [
      {
        label: id === objective ? OBJECTIVE_LABELS[objective] : column.label,
        value: (
          <span className="figure-value">
            <Quantity value={value} dimension={column.dimension} hint={column.hint} />
          </span>
        ),
      },
    ]
  })
  return figures.length > 0 ? <FigureStrip figures={figures} label={label} /> : null
}
