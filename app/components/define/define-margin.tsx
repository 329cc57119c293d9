// The live margin of Define: what is to put right, the bundle as typed, the base case's result, points and time.
import type { ReactNode } from 'react'
import { MarginNote, NoteList } from '#app/components/ui/margin-note.tsx'
import { Digits, Quantity } from '#app/components/ui/number.tsx'
import { duration } from '#app/components/ui/number-format.ts'
import { NOTE_LABELS } from '#engine/notes.ts'
import type { Dimension } from '#engine/units.ts'
import type { Preview } from './preview.ts'

export type MarginFault = { field: string; label: string; problem: string; remedy: string }

export function DefineMargin({
  preview,
  faults,
  settled,
  cores,
  picture,
  onGo,
}: {
  preview: Preview
  faults: MarginFault[]
  settled: boolean
  /** Threads that would share the points. */
  cores: number
  picture: ReactNode
  onGo: (field: string) => void
}) {
  const { base } = preview
  return (
    <>
      {faults.length > 0 ? (
        <section aria-labelledby="to-put-right" className="grid gap-2">
          <h2 id="to-put-right" className="text-body font-bold">
            {faults.length === 1 ? 'One thing to put right' : `${faults.length} things to put right`}
          </h2>
          <ul className="grid gap-3">
            {faults.slice(0, 8).map((fault) => (
              <li key={`${fault.field} ${fault.problem}`}>
                <MarginNote
                  tone="failed"
                  title={
                    <button
                      type="button"
                      className="link text-start font-bold"
                      onClick={() => onGo(fault.field)}
                    >
                      {fault.label}
                    </button>
                  }
                >
                  {fault.problem}
                  {fault.remedy ? `: ${fault.remedy}` : ''}.
                </MarginNote>
              </li>
            ))}
          </ul>
          {faults.length > 8 ? <p className="text-note text-soft">and {faults.length - 8} more</p> : null}
        </section>
      ) : null}

      <section aria-labelledby="the-sweep" className="grid gap-1">
        <h2 id="the-sweep" className="text-body font-bold">
          The sweep
        </h2>
        {preview.points === null ? (
          <p className="text-soft">The number of points stands here once everything above fits together.</p>
        ) : (
          <>
            <p className="text-head font-bold">
              <Digits>{preview.points}</Digits> {preview.points === 1 ? 'point' : 'points'}
            </p>
            {preview.secondsPerPoint !== null ? (
              <p className="text-note text-soft">
                {runTime((preview.secondsPerPoint * preview.points) / Math.max(1, cores))} on {cores}{' '}
                {cores === 1 ? 'core' : 'cores'}, measured on this sweep’s own points
              </p>
            ) : null}
          </>
        )}
        {preview.notes.map((note) => (
          <MarginNote key={note} tone="attention" title={note} />
        ))}
      </section>

      <section aria-labelledby="the-base-case" className="grid gap-3" aria-busy={!settled}>
        <h2 id="the-base-case" className="text-body font-bold">
          The base case
        </h2>
        {picture}
        {base === null ? (
          <p className="text-soft">
            Its result stands here once fluid, state, drive, tube and bundle are given.
          </p>
        ) : (
          <>
            {base.refusal ? (
              <MarginNote tone="failed" title={`${sentence(base.refusal.text)}.`}>
                {sentence(base.refusal.remedy)}.
              </MarginNote>
            ) : (
              <dl className="facts">
                {base.result.question === 'size' ? (
                  <Fact label="Tube length" value={base.result.tubeLength} dimension="length" />
                ) : (
                  <Fact label="Duty" value={base.result.duty} dimension="power" />
                )}
                <Fact label="Outside area" value={base.result.outsideArea} dimension="area" />
                <Fact
                  label="Overall coefficient"
                  value={base.result.overallCoefficient}
                  dimension="heatTransferCoefficient"
                />
                <Fact
                  label="Mean outside coefficient"
                  value={base.result.meanCoefficient}
                  dimension="heatTransferCoefficient"
                />
                {base.result.coolant ? (
                  <>
                    <Fact
                      label="Coolant velocity"
                      value={base.result.coolant.velocity}
                      dimension="velocity"
                    />
                    <Fact
                      label="Coolant outlet"
                      value={base.result.coolant.outletTemperature}
                      dimension="temperature"
                    />
                    <Fact
                      label="Coolant pressure drop"
                      value={base.result.coolant.pressureDrop}
                      dimension="pressure"
                    />
                  </>
                ) : null}
                <Fact
                  label="Vapour pressure drop"
                  value={base.result.vapour.pressureDrop}
                  dimension="pressure"
                />
                <Fact label="Tubes" value={base.result.tubeCount} dimension="count" />
              </dl>
            )}
            {base.limits.length > 0 && !base.refusal ? (
              <ul className="grid gap-2" aria-label="Limits in the base case">
                {base.limits.map((limit) => (
                  <li key={limit.id}>
                    <MarginNote
                      tone={limit.met ? 'sound' : 'attention'}
                      title={
                        limit.met ? `${limit.label} within its limit.` : `${limit.label} outside its limit.`
                      }
                    >
                      <Quantity value={limit.value} dimension={limit.dimension} />{' '}
                      {limit.max !== undefined ? (
                        <>
                          against at most <Quantity value={limit.max} dimension={limit.dimension} />
                        </>
                      ) : null}
                      {limit.min !== undefined ? (
                        <>
                          {limit.max !== undefined ? ' and' : 'against'} at least{' '}
                          <Quantity value={limit.min} dimension={limit.dimension} />
                        </>
                      ) : null}
                    </MarginNote>
                  </li>
                ))}
              </ul>
            ) : null}
            <NoteList notes={base.result.notes} labels={NOTE_LABELS} first={4} />
          </>
        )}
      </section>
    </>
  )
}

function Fact({
  label,
  value,
  dimension,
}: {
  label: string
  value: number | null | undefined
  dimension: Dimension
}) {
  if (value === null || value === undefined) return null
  return (
    <>
      <dt>{label}</dt>
      <dd>
        <Quantity value={value} dimension={dimension} digits={4} />
      </dd>
    </>
  )
}

const sentence = (text: string) => text.charAt(0).toUpperCase() + text.slice(1)

/** "under a second", "about 12 s", "about 3 min 20 s". */
function runTime(seconds: number): string {
  return seconds < 1 ? 'Under a second' : `About ${duration(seconds)}`
}
