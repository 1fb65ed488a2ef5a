import { redirect } from 'next/navigation'
import type { ReactNode } from 'react'
import { homeOf, placesOf } from '@/components/shell/navigation'
import { PersonShell } from '@/components/shell/person-shell'
import { getFrame } from '@/lib/accounts/get-frame'
import { requirePageActor } from '@/lib/auth/page-actor'

/** A customer's side: only customers' people come here. */
export default async function CustomerLayout({ children }: { children: ReactNode }) {
  const actor = await requirePageActor()
  if (actor.role !== 'customer') redirect(homeOf(actor.role))
  const frame = await getFrame(actor)
  return (
    <PersonShell places={placesOf(actor.role)} homeHref={homeOf(actor.role)} {...frame}>
      {children}
    </PersonShell>
  )
}
