// The live preview: a web worker runs the engine on what is typed; until it answers, the last answer stands.
import { useEffect, useRef, useState } from 'react'
import type { Definition } from './form-fields.ts'
import type { Preview } from './preview.ts'

/** A quiet moment while typing before the engine is asked, ms. */
const PAUSE = 150

export function usePreview(definition: Definition, initial: Preview): { preview: Preview; settled: boolean } {
  const [preview, setPreview] = useState(initial)
  const [answered, setAnswered] = useState(0)
  const [asked, setAsked] = useState(0)
  const worker = useRef<Worker | null>(null)
  const latest = useRef(0)
  const written = JSON.stringify(definition)

  useEffect(() => {
    const started = new Worker(new URL('./preview.worker.ts', import.meta.url), { type: 'module' })
    started.onmessage = ({ data }: MessageEvent<{ id: number; preview: Preview }>) => {
      if (data.id !== latest.current) return
      setPreview(data.preview)
      setAnswered(data.id)
    }
    worker.current = started
    return () => {
      worker.current = null
      started.terminate()
    }
  }, [])

  useEffect(() => {
    const timer = setTimeout(() => {
      latest.current++
      setAsked(latest.current)
      worker.current?.postMessage({ id: latest.current, definition: JSON.parse(written) })
    }, PAUSE)
    return () => clearTimeout(timer)
  }, [written])

  return { preview, settled: asked === answered }
}
