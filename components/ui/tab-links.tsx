import Link from 'next/link'
import { classNames } from './class-names'

export type TabLink = { href: string; label: string; isCurrent: boolean; count?: number }

/** Views of one thing, each with its own address. */
export function TabLinks({ label, links }: { label: string; links: readonly TabLink[] }) {
  return (
    <nav aria-label={label} className="flex flex-wrap gap-x-6 border-b border-line">
      {links.map((link) => (
        <Link
          key={link.href}
          href={link.href}
          aria-current={link.isCurrent ? 'page' : undefined}
          className={classNames(
            '-mb-px border-b-2 py-2',
            link.isCurrent ? 'border-text font-[640]' : 'border-transparent text-soft hover:text-text',
          )}
        >
          {link.label}
          {link.count === undefined ? null : <span className="font-normal text-mute"> {link.count}</span>}
        </Link>
      ))}
    </nav>
  )
}
