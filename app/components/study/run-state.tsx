// A run's state as a tag.
import type { ReactNode } from 'react'
import { Digits } from '../ui/number.tsx'
import { Tag, type Tone } from '../ui/tag.tsx'

export type RunStateId = 'queued' | 'running' | 'done' | 'cancelled' | 'failed'

const WORDS: Record<RunStateId, [string, Tone]> = {
  queued: ['waiting', 'neutral'],
  running: ['running', 'attention'],
  done: ['done', 'sound'],
  cancelled: ['cancelled', 'neutral'],
  failed: ['failed', 'failed'],
}

export function RunStateTag({ state, paused }: { state: RunStateId; paused?: boolean }) {
  const [word, tone] = WORDS[state]
  return paused ? <Tag>paused</Tag> : <Tag tone={tone}>{word}</Tag>
}

/** "12 400 of 48 000 points", or only the total where all are done. */
export function PointsDone({ done, points }: { done: number; points: number }): ReactNode {
  return done === points ? (
    <>
      <Digits>{points}</Digits> {points === 1 ? 'point' : 'points'}
    </>
  ) : (
    <>
      <Digits>{done}</Digits> of <Digits>{points}</Digits> points
    </>
  )
}
