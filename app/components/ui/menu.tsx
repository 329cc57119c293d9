// A menu of acts on one thing, opened from a labelled button.
import { DropdownMenu } from 'radix-ui'
import type { ReactNode } from 'react'
import { Link } from 'react-router'
import { type ButtonLook, buttonClass } from './button.tsx'

export type MenuEntry =
  | { label: string; onSelect: () => void; tone?: 'danger'; disabled?: boolean; detail?: string }
  | { label: string; to: string; detail?: string }
  | { label: string; href: string; download?: string | true; detail?: string }
  | 'rule'

export function Menu({
  label,
  name,
  entries,
  look = 'plain',
  small,
  align = 'end',
}: {
  label: ReactNode
  /** The button's full name where the label alone does not say what it acts on. */
  name?: string
  entries: MenuEntry[]
  look?: ButtonLook
  small?: boolean
  align?: 'start' | 'end'
}) {
  return (
    <DropdownMenu.Root modal={false}>
      <DropdownMenu.Trigger className={buttonClass(look, small)} aria-label={name}>
        {label}
      </DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content
          align={align}
          sideOffset={4}
          collisionPadding={8}
          className="z-50 max-h-(--radix-dropdown-menu-content-available-height) min-w-44 overflow-auto rounded-md border border-line bg-sheet p-1 shadow-float"
        >
          {entries.map((entry, i) => {
            if (entry === 'rule') {
              // biome-ignore lint/suspicious/noArrayIndexKey: a rule has no identity but its place
              return <DropdownMenu.Separator key={i} className="mx-2 my-1 h-px bg-line" />
            }
            const detail = entry.detail ? <span className="text-note text-soft">{entry.detail}</span> : null
            if ('to' in entry) {
              return (
                <DropdownMenu.Item key={entry.label} asChild>
                  <Link to={entry.to} className="menu-item">
                    {entry.label}
                    {detail}
                  </Link>
                </DropdownMenu.Item>
              )
            }
            if ('href' in entry) {
              return (
                <DropdownMenu.Item key={entry.label} asChild>
                  <a href={entry.href} download={entry.download ?? true} className="menu-item">
                    {entry.label}
                    {detail}
                  </a>
                </DropdownMenu.Item>
              )
            }
            return (
              <DropdownMenu.Item
                key={entry.label}
                className="menu-item"
                data-tone={entry.tone}
                disabled={entry.disabled}
                onSelect={entry.onSelect}
              >
                {entry.label}
                {detail}
              </DropdownMenu.Item>
            )
          })}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  )
}
