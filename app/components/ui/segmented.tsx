// A switch between a few values that posts at once: a form of buttons, so that it works before scripts do.
import type { ReactNode } from 'react'

export type Segment = { value: string; label: ReactNode; name?: string }

export function SegmentedButtons({
  name,
  label,
  value,
  segments,
}: {
  name: string
  label: string
  value: string
  segments: Segment[]
}) {
  return (
    // biome-ignore lint/a11y/useSemanticElements: a fieldset brings a legend's layout that a toolbar does not want
    <span
      role="group"
      aria-label={label}
      className="inline-flex overflow-hidden rounded-md border border-line-strong bg-sheet"
    >
      {segments.map((segment) => (
        <button
          key={segment.value}
          type="submit"
          name={name}
          value={segment.value}
          aria-pressed={segment.value === value}
          aria-label={segment.name}
          className="min-h-8 px-3 text-body font-semibold text-soft hover:text-verdigris-ink focus-visible:-outline-offset-2 aria-pressed:bg-ink aria-pressed:text-sheet"
        >
          {segment.label}
        </button>
      ))}
    </span>
  )
}
