import type { ReactNode } from 'react'
import { homeOf, placesOf } from '@/components/shell/navigation'
import { PersonShell } from '@/components/shell/person-shell'
import { getFrame } from '@/lib/accounts/get-frame'
import { requirePageActor } from '@/lib/auth/page-actor'

/** Everybody has an account page, in the frame of his own side. */
export default async function AccountLayout({ children }: { children: ReactNode }) {
  const actor = await requirePageActor()
  const frame = await getFrame(actor)
  return (
    <PersonShell places={placesOf(actor.role)} homeHref={homeOf(actor.role)} {...frame}>
      {children}
    </PersonShell>
  )
}
