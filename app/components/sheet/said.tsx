// A sentence with its long numbers grouped by style, so that what is copied from it is still a number.
import { Fragment } from 'react'
import { Digits } from '#app/components/ui/number.tsx'

/** Numbers of four digits and more that are no part of a name such as R1234ze. */
const LONG = /(?<![\w.])(\d{4,}(?:\.\d+)?)(?!\w)/

export function Said({ children }: { children: string }) {
  return children.split(LONG).map((part, i) =>
    i % 2 === 1 ? (
      // biome-ignore lint/suspicious/noArrayIndexKey: the parts of a sentence are their places
      <Digits key={i}>{part}</Digits>
    ) : (
      // biome-ignore lint/suspicious/noArrayIndexKey: the parts of a sentence are their places
      <Fragment key={i}>{part}</Fragment>
    ),
  )
}
