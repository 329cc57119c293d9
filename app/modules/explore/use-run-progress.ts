// Follows a run while it is under way: about once a second, slower when the page is hidden or answers fail to come, until
// it ends.
import { useEffect, useState } from 'react'
import { isFinal, type RunProgress } from '#app/modules/runs/progress.ts'

const VISIBLE_MS = 1000
const HIDDEN_MS = 10_000
const LONGEST_MS = 30_000

/** The latest progress, beginning with what the page was loaded with; `onEnd` is called once when the run ends. */
export function useRunProgress(loaded: RunProgress, onEnd: () => void): RunProgress {
  const [polled, setPolled] = useState<RunProgress | null>(null)
  const { runId } = loaded
  const ended = isFinal(loaded.state)
  useEffect(() => {
    if (ended) return
    const controller = new AbortController()
    let timer: ReturnType<typeof setTimeout>
    let lost = 0
    const ask = async () => {
      try {
        const answer = await fetch(`/runs/${runId}/progress`, {
          signal: controller.signal,
          headers: { accept: 'application/json' },
        })
        lost = answer.ok ? 0 : lost + 1
        if (answer.ok) {
          const progress = (await answer.json()) as RunProgress
          setPolled(progress)
          if (isFinal(progress.state)) {
            onEnd()
            return
          }
        }
      } catch {
        if (controller.signal.aborted) return
        // A lost answer is asked for again; what was last known stays on the page.
        lost++
      }
      timer = setTimeout(ask, Math.min(LONGEST_MS, (document.hidden ? HIDDEN_MS : VISIBLE_MS) * 2 ** lost))
    }
    timer = setTimeout(ask, VISIBLE_MS)
    return () => {
      controller.abort()
      clearTimeout(timer)
    }
  }, [runId, ended, onEnd])
  return !ended && polled?.runId === runId ? polled : loaded
}
