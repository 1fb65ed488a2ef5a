import { redirect } from 'next/navigation'
import type { ReactNode } from 'react'
import { FiresideShell } from '@/components/shell/fireside-shell'
import { requirePageActor } from '@/lib/auth/page-actor'

/** The room and the fireside: dark, edge to edge, staff only. The verbs refuse the rest as well. */
export default async function FiresideLayout({ children }: { children: ReactNode }) {
  const actor = await requirePageActor()
  if (actor.role === 'customer') redirect('/orders')
  return <FiresideShell>{children}</FiresideShell>
}
