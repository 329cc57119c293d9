import { formulaParts } from './formula.ts'

/** A card's equation, typeset within a line. */
export function Formula({ children }: { children: string }) {
  return (
    <span className="formula">
      {formulaParts(children).map(({ kind, text }, i) => {
        const Tag = kind === 'text' ? 'span' : kind
        // biome-ignore lint/suspicious/noArrayIndexKey: parts have no identity but their place
        return <Tag key={i}>{text}</Tag>
      })}
    </span>
  )
}
