// The few figures under a headline, side by side on one sheet.
import type { ReactNode } from 'react'

export type Figure = { label: ReactNode; value: ReactNode; detail?: ReactNode; tone?: 'attention' | 'failed' }

export function FigureStrip({ figures, label }: { figures: Figure[]; label: string }) {
  return (
    <dl
      aria-label={label}
      className="sheet grid grid-cols-2 overflow-hidden sm:grid-cols-[repeat(auto-fit,minmax(9.5rem,1fr))]"
    >
      {figures.map((figure, i) => (
        <div
          // biome-ignore lint/suspicious/noArrayIndexKey: figures keep their places
          key={i}
          className="-ms-px -mt-px border-s border-t border-line px-4 py-3.5"
        >
          <dt className="text-note text-soft">{figure.label}</dt>
          <dd
            className={`mt-0.5 text-head font-bold tracking-tight [&_.unit]:text-body [&_.unit]:font-semibold [&_.unit]:tracking-normal ${
              figure.tone === 'attention' ? 'text-copper-ink' : figure.tone === 'failed' ? 'text-red-ink' : ''
            }`}
          >
            {figure.value}
          </dd>
          {figure.detail ? <dd className="text-note text-soft">{figure.detail}</dd> : null}
        </div>
      ))}
    </dl>
  )
}
