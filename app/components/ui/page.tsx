// How a page is laid out: the finding on top, the work in the wide column, the margin beside it (below it on a phone).
import type { ReactNode } from 'react'

export function PageHead({
  title,
  reason,
  acts,
  over,
}: {
  title: ReactNode
  /** One line: why. */
  reason?: ReactNode
  acts?: ReactNode
  /** A small line above the title. */
  over?: ReactNode
}) {
  return (
    <header className="flex flex-wrap items-start justify-between gap-x-8 gap-y-3">
      <div className="min-w-0 max-w-[62rem] grow basis-[min(100%,32rem)]">
        {over ? <p className="mb-1 text-note font-semibold text-soft">{over}</p> : null}
        <h1 id="page-title" tabIndex={-1} className="text-head leading-tight sm:text-display">
          {title}
        </h1>
        {reason ? <div className="mt-1.5 max-w-[75ch] text-lead text-soft">{reason}</div> : null}
      </div>
      {acts ? <div className="screen-only flex flex-wrap gap-2">{acts}</div> : null}
    </header>
  )
}

/** A page without a margin column. */
export function PlainPage({ children }: { children: ReactNode }) {
  return (
    <div className="mx-auto grid w-full max-w-[84rem] gap-6 px-4 py-6 sm:px-7 sm:py-8 print:p-0">
      {children}
    </div>
  )
}

/** Work and margin. The margin is a column from 1080 px up and follows the work below that. */
export function MarginPage({
  children,
  margin,
  marginLabel,
}: {
  children: ReactNode
  margin: ReactNode
  marginLabel: string
}) {
  return (
    <div className="grid grow lg:grid-cols-[minmax(0,1fr)_24.5rem] print:block">
      <div className="grid min-w-0 content-start gap-5 px-4 py-6 sm:px-7 sm:py-8 print:p-0">{children}</div>
      <aside
        aria-label={marginLabel}
        className="min-w-0 border-line bg-sheet px-4 py-6 max-lg:border-t sm:px-7 lg:border-s lg:px-6 lg:py-8 print:mt-6 print:border-0 print:p-0"
      >
        <div className="grid content-start gap-6 lg:sticky lg:top-6">{margin}</div>
      </aside>
    </div>
  )
}

export function Sheet({
  title,
  acts,
  children,
  flush,
  className = '',
}: {
  title?: ReactNode
  acts?: ReactNode
  children: ReactNode
  /** No padding around the content: a table that runs to the edges. */
  flush?: boolean
  className?: string
}) {
  return (
    <section className={`sheet min-w-0 ${flush ? 'overflow-hidden' : ''} ${className}`}>
      {title || acts ? (
        <div className="flex flex-wrap items-center justify-between gap-x-4 gap-y-2 px-4 pt-3.5 pb-2 sm:px-5">
          {title ? <h2 className="text-body font-bold">{title}</h2> : <span />}
          {acts ? <div className="screen-only flex flex-wrap items-center gap-2">{acts}</div> : null}
        </div>
      ) : null}
      <div className={flush ? '' : `px-4 pb-4 sm:px-5 sm:pb-5 ${title || acts ? '' : 'pt-4 sm:pt-5'}`}>
        {children}
      </div>
    </section>
  )
}

/** A wide table scrolls inside its sheet, by keyboard too. */
export function Scroll({
  label,
  children,
  className = '',
}: {
  label: string
  children: ReactNode
  className?: string
}) {
  return (
    <section
      aria-label={label}
      // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reachable by keyboard
      tabIndex={0}
      className={`scroll-thin relative min-w-0 overflow-x-auto ${className}`}
    >
      {children}
    </section>
  )
}

/** Nothing here yet: what will be here, and the act that puts it there. */
export function EmptyState({
  title,
  children,
  acts,
}: {
  title: string
  children?: ReactNode
  acts?: ReactNode
}) {
  return (
    <div className="sheet grid justify-items-start gap-2 border-dashed px-5 py-8 sm:px-8">
      <h2 className="text-lead font-bold">{title}</h2>
      {children ? <div className="max-w-[60ch] text-soft">{children}</div> : null}
      {acts ? <div className="mt-2 flex flex-wrap gap-2">{acts}</div> : null}
    </div>
  )
}
