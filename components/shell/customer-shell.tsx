import Link from 'next/link'
import type { ReactNode } from 'react'
import { classNames } from '@/components/ui/class-names'
import type { ShellItem } from './desk-shell'
import { PersonMenu } from './person-menu'
import type { ShellPerson } from './person-menu'
import { SkipLink } from './skip-link'

/** A customer's side: the cooperage's name first, their own name beside, and only what is theirs. */
export function CustomerShell({
  siteName,
  customerName,
  items,
  person,
  children,
}: {
  siteName: string
  customerName: string
  items: readonly ShellItem[]
  person: ShellPerson
  children: ReactNode
}) {
  return (
    <div className="min-h-dvh">
      <SkipLink />
      <header
        data-shell="bar"
        className="flex min-h-[51px] flex-wrap items-center gap-x-8 gap-y-1 border-b border-line px-7 py-1"
      >
        <p>
          <span className="text-[17px] font-[720]">{siteName}</span>
          <span className="ml-3 text-soft">for {customerName}</span>
        </p>
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
        <div className="ml-auto">
          <PersonMenu person={person} />
        </div>
      </header>
      <main id="main" tabIndex={-1} className="mx-auto max-w-[72rem] px-7 pt-6 pb-12">
        {children}
      </main>
    </div>
  )
}
