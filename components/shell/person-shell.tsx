'use client'

import { usePathname } from 'next/navigation'
import type { ReactNode } from 'react'
import { ToastProvider } from '@/components/ui/toast'
import { CustomerShell } from './customer-shell'
import { DeskShell } from './desk-shell'
import type { Place } from './navigation'
import type { ShellPerson } from './person-menu'

export type PersonShellProps = {
  places: readonly Place[]
  person: ShellPerson
  homeHref: string
  /** Given for a customer's person: whose orders these are, and the cooperage that makes them. */
  customer: { name: string; siteName: string } | null
  children: ReactNode
}

/** The frame of a signed-in person's pages: staff's desk or a customer's side, with the present place marked. */
export function PersonShell({ places, person, homeHref, customer, children }: PersonShellProps) {
  const pathname = usePathname()
  const items = places.map((place) => ({
    ...place,
    isCurrent: isWithin(pathname, place.href),
  }))
  return (
    <ToastProvider>
      {customer === null ? (
        <DeskShell items={items} person={person} homeHref={homeHref}>
          {children}
        </DeskShell>
      ) : (
        <CustomerShell
          siteName={customer.siteName}
          customerName={customer.name}
          items={items}
          person={person}
        >
          {children}
        </CustomerShell>
      )}
    </ToastProvider>
  )
}

/** A version's bench belongs to the recipes, though its address does not begin with theirs. */
function isWithin(pathname: string, href: string): boolean {
  const own = pathname.replace(/^\/recipe-versions(?=\/)/, '/recipes')
  return own === href || own.startsWith(`${href}/`)
}
