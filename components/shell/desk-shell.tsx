import Link from 'next/link'
import type { ReactNode } from 'react'
import { classNames } from '@/components/ui/class-names'
import { PersonMenu } from './person-menu'
import type { ShellPerson } from './person-menu'
import { SkipLink } from './skip-link'

export type ShellItem = { href: string; label: string; isCurrent: boolean }

export type DeskShellProps = {
  /** What this person's role may open, in order; made by the caller. */
  items: readonly ShellItem[]
  person: ShellPerson
  homeHref?: string
  /** The find box, or a link to it. */
  find?: ReactNode
  children: ReactNode
}

/** The desk: one bar of words above, the page below. */
export function DeskShell({ items, person, homeHref = '/', find, children }: DeskShellProps) {
  return (
    <div className="min-h-dvh">
      <SkipLink />
      <header
        data-shell="bar"
        className="flex min-h-[51px] flex-wrap items-center gap-x-8 gap-y-1 border-b border-line px-7 py-1"
      >
        <Link href={homeHref} className="text-[17px] font-[720]">
          Emberstave
        </Link>
        <nav aria-label="Main" className="flex flex-wrap items-center gap-x-[26px]">
          {items.map((item) => (
            <Link
              key={item.href}
              href={item.href}
              aria-current={item.isCurrent ? 'page' : undefined}
              className={classNames('py-1', item.isCurrent ? 'font-[720]' : 'text-soft hover:text-text')}
            >
              {item.label}
            </Link>
          ))}
        </nav>
        <div className="ml-auto flex flex-wrap items-center gap-x-[26px] text-soft">
          {find}
          <PersonMenu person={person} />
        </div>
      </header>
      <main id="main" tabIndex={-1} className="px-7 pt-6 pb-12">
        {children}
      </main>
    </div>
  )
}
