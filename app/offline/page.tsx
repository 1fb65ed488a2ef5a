import type { Metadata } from 'next'
import { AppKeeper } from '@/components/live/app-keeper'
import { OfflineShell } from '@/components/live/offline-shell'
import { FiresideShell } from '@/components/shell/fireside-shell'

export const metadata: Metadata = { title: 'Not live' }

/** Kept by the service worker and shown in place of a page of the room when the network is down. Holds no data. */
export default function OfflinePage() {
  return (
    <FiresideShell>
      <OfflineShell />
      <AppKeeper />
    </FiresideShell>
  )
}
