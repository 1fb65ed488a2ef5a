import { redirect } from 'next/navigation'
import type { ReactNode } from 'react'
import { FiresideShell } from '@/components/shell/fireside-shell'
import { AppKeeper } from '@/components/live/app-keeper'
import { atTheFire } from '@/components/live/device-view'
import { TabletKeeper } from '@/components/live/tablet-keeper'
import { pageDevice, requireRoomActor } from '@/lib/auth/page-actor'

/** The room and the fireside: dark, edge to edge, staff and enrolled devices only. The verbs refuse the rest as well. */
export default async function FiresideLayout({ children }: { children: ReactNode }) {
  const [actor, device] = await Promise.all([requireRoomActor(), pageDevice()])
  if (actor.kind === 'person' && actor.role === 'customer') redirect('/orders')
  return (
    <FiresideShell>
      {children}
      <AppKeeper />
      <TabletKeeper {...atTheFire(actor, device)} />
    </FiresideShell>
  )
}
