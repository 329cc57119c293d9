// How far a long act is: a bar with its numbers in words beside it.
import { digitGroups } from './number-format.ts'

export function ProgressBar({ done, total, label }: { done: number; total: number; label: string }) {
  const share = total > 0 ? Math.min(1, done / total) : 0
  return (
    <div
      role="progressbar"
      aria-label={label}
      aria-valuemin={0}
      aria-valuemax={total}
      aria-valuenow={done}
      aria-valuetext={`${digitGroups(String(done)).join(' ')} of ${digitGroups(String(total)).join(' ')}`}
      className="progress-track"
    >
      <svg className="block h-full w-full" viewBox="0 0 1000 8" preserveAspectRatio="none" aria-hidden="true">
        <rect
          width={share * 1000}
          height="8"
          fill="var(--verdigris)"
          className="transition-[width] duration-500"
        />
      </svg>
    </div>
  )
}
