// A short state in words, on a wash of its tone.
import type { ReactNode } from 'react'

export type Tone = 'sound' | 'attention' | 'failed' | 'neutral'

export function Tag({ tone = 'neutral', children }: { tone?: Tone; children: ReactNode }) {
  return <span className={`tag tag-${tone}`}>{children}</span>
}
