import { redirect } from 'next/navigation'
import type { ReactNode } from 'react'
import { homeOf, placesOf } from '@/components/shell/navigation'
import { PersonShell } from '@/components/shell/person-shell'
import { getFrame } from '@/lib/accounts/get-frame'
import { requirePageActor } from '@/lib/auth/page-actor'

/** The desk. A customer has a side of his own; what he may not see is refused by the verbs as well. */
export default async function StaffLayout({ children }: { children: ReactNode }) {
  const actor = await requirePageActor()
  if (actor.role === 'customer') redirect('/orders')
  const frame = await getFrame(actor)
  return (
    <PersonShell places={placesOf(actor.role)} homeHref={homeOf(actor.role)} {...frame}>
      {children}
    </PersonShell>
  )
}
