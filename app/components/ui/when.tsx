// Moments as people say them: how long ago where it is near, the day where it is not.
import { useEffect, useState } from 'react'

const STEPS: [limit: number, seconds: number, unit: string][] = [
  [90, 1, 'second'],
  [5400, 60, 'minute'],
  [129_600, 3600, 'hour'],
  [7 * 86_400, 86_400, 'day'],
]

export function ago(seconds: number): string | null {
  if (seconds < 20) return 'just now'
  const step = STEPS.find(([limit]) => seconds < limit)
  if (!step) return null
  const count = Math.round(seconds / step[1])
  return `${count} ${step[2]}${count === 1 ? '' : 's'} ago`
}

/** The same on server and browser at first, wherever they stand; told relative to now once the page lives. */
export function When({ at }: { at: string }) {
  const [told, setTold] = useState<string | null>(null)
  useEffect(() => {
    const tell = () => setTold(ago((Date.now() - Date.parse(at)) / 1000))
    tell()
    const timer = setInterval(tell, 30_000)
    return () => clearInterval(timer)
  }, [at])
  const day = at.slice(0, 16).replace('T', ' ')
  return (
    <time dateTime={at} title={`${day} UTC`}>
      {told ?? day.slice(0, 10)}
    </time>
  )
}
