// The four stages of a study, always visible: each with its state as a mark and in words, the present one underlined.
import type { ReactNode } from 'react'
import { NavLink } from 'react-router'

export type StageState = 'none' | 'underway' | 'done' | 'failed'

export type Stage = { id: 'define' | 'run' | 'explore' | 'decide'; state: StageState; detail?: ReactNode }

const LABELS = { define: 'Define', run: 'Run', explore: 'Explore', decide: 'Decide' }
const WORDS: Record<StageState, string> = {
  none: 'nothing yet',
  underway: 'under way',
  done: 'there',
  failed: 'failed',
}

export function Stages({ base, stages }: { base: string; stages: Stage[] }) {
  return (
    <nav aria-label="Stages" className="screen-only border-b border-line bg-sheet">
      <ol className="scroll-thin flex overflow-x-auto px-4 sm:gap-x-6 sm:px-7">
        {stages.map(({ id, state, detail }) => (
          <li key={id} className="shrink-0">
            <NavLink
              to={`${base}/${id}`}
              className="flex min-h-12 items-center gap-2 border-b-3 border-transparent px-2 pt-0.5 font-semibold text-soft hover:text-verdigris-ink aria-[current]:border-copper aria-[current]:text-ink sm:px-1"
            >
              <Dot state={state} />
              {LABELS[id]}
              <span className="visually-hidden">, {WORDS[state]}</span>
              {detail ? <span className="font-medium text-soft max-sm:hidden">{detail}</span> : null}
            </NavLink>
          </li>
        ))}
      </ol>
    </nav>
  )
}

function Dot({ state }: { state: StageState }) {
  const tone =
    state === 'failed' ? 'var(--red-ink)' : state === 'underway' ? 'var(--copper)' : 'var(--verdigris)'
  return (
    <svg viewBox="0 0 10 10" className="size-2.5 shrink-0" aria-hidden="true">
      <circle
        cx="5"
        cy="5"
        r="4"
        fill="none"
        stroke={state === 'none' ? 'var(--soft)' : tone}
        strokeWidth="1.4"
      />
      {state === 'underway' ? <path d="M5 1a4 4 0 0 1 0 8z" fill={tone} /> : null}
      {state === 'done' || state === 'failed' ? <circle cx="5" cy="5" r="4" fill={tone} /> : null}
    </svg>
  )
}
