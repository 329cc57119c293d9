// The methods behind a sheet: equation, source, published scatter and how well the numbers are established.
import { Link } from 'react-router'

export type MethodEntry = {
  id: string
  name: string
  equation: string
  source: readonly string[]
  rangeText?: string
  scatter: string
  evidence: string
}

export function MethodList({ methods }: { methods: readonly MethodEntry[] }) {
  return (
    <ul className="grid gap-3.5 md:grid-cols-2 md:gap-x-8 print:grid-cols-2">
      {methods.map((method) => (
        <li key={method.id} className="min-w-0 break-inside-avoid">
          <p className="font-semibold">
            <Link to={`/library/methods/${method.id}`} className="link">
              {method.name}
            </Link>
          </p>
          <p className="text-note [overflow-wrap:anywhere]">{method.equation}</p>
          <p className="text-note text-soft">
            {method.source.join('; ')}. Scatter: {method.scatter}. {sentence(method.evidence)}.
            {method.rangeText ? ` ${method.rangeText}` : ''}
          </p>
        </li>
      ))}
    </ul>
  )
}

const sentence = (text: string) => text.charAt(0).toUpperCase() + text.slice(1)
