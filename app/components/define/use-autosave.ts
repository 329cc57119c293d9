// Keeps the draft while one types: waits for a pause, saves over the version it has seen, and stops when another tab
// or person has saved in between.
import { useEffect, useRef, useState } from 'react'
import { useFetcher } from 'react-router'
import type { Definition } from './form-fields.ts'
import { dropUnsaved, keepUnsaved } from './unsaved.ts'

export type SaveAnswer =
  | { saved: { version: number; savedAt: string } }
  | { conflict: { version: number; savedAt: string } }
  | { refused: string }

export type SaveState =
  | { kind: 'kept'; at: string | null }
  | { kind: 'changed' }
  | { kind: 'saving' }
  | { kind: 'conflict'; at: string }
  | { kind: 'failed'; message: string }

const PAUSE = 700
const AGAIN = 5000

export function useAutosave(
  definition: Definition,
  initial: { version: number; savedAt: string | null },
  enabled: boolean,
  /** Names what is typed, for the tab to keep until it is saved. */
  place: string,
) {
  const fetcher = useFetcher<SaveAnswer>()
  const written = JSON.stringify(definition)
  const version = useRef(initial.version)
  const saved = useRef(written)
  const sending = useRef<string | null>(null)
  const [state, setState] = useState<SaveState>({ kind: 'kept', at: initial.savedAt })

  const send = (text: string) => {
    sending.current = text
    setState({ kind: 'saving' })
    fetcher.submit({ intent: 'save', definition: text, version: String(version.current) }, { method: 'post' })
  }
  const sendLatest = useRef(send)
  sendLatest.current = send

  useEffect(() => {
    if (!enabled || written === saved.current || state.kind === 'conflict') return
    if (sending.current !== null) return
    setState((now) => (now.kind === 'failed' ? now : { kind: 'changed' }))
    const timer = setTimeout(() => sendLatest.current(written), state.kind === 'failed' ? AGAIN : PAUSE)
    return () => clearTimeout(timer)
  }, [written, enabled, state.kind])

  useEffect(() => {
    if (fetcher.state !== 'idle' || sending.current === null) return
    const sent = sending.current
    sending.current = null
    const answer = fetcher.data
    if (answer && 'saved' in answer) {
      version.current = answer.saved.version
      saved.current = sent
      dropUnsaved(place)
      setState({ kind: 'kept', at: answer.saved.savedAt })
    } else if (answer && 'conflict' in answer) setState({ kind: 'conflict', at: answer.conflict.savedAt })
    else
      setState({
        kind: 'failed',
        message:
          answer && 'refused' in answer ? answer.refused : 'The draft could not be saved; trying again.',
      })
  }, [fetcher.state, fetcher.data, place])

  // Leaving with something unsaved asks once.
  const unsaved = enabled && written !== saved.current
  useEffect(() => {
    if (unsaved) keepUnsaved(place, version.current, written)
  }, [unsaved, place, written])
  useEffect(() => {
    if (!unsaved) return
    const ask = (event: BeforeUnloadEvent) => event.preventDefault()
    addEventListener('beforeunload', ask)
    return () => removeEventListener('beforeunload', ask)
  }, [unsaved])

  return {
    state,
    version: version.current,
    /** Saves over whatever the other tab saved: what this page shows wins. */
    overwrite: (seen: number) => {
      version.current = seen
      sendLatest.current(written)
    },
    conflictVersion: fetcher.data && 'conflict' in fetcher.data ? fetcher.data.conflict.version : null,
  }
}
