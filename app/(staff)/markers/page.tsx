import type { Metadata } from 'next'
import { forbidden } from 'next/navigation'
import { MarkerTable } from '@/components/markers/marker-table'
import { PageHead } from '@/components/ui/page-head'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { listMarkers } from '@/lib/markers/list-markers'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Markers' }

export default async function MarkersPage() {
  const actor = await requirePageActor()
  if (!isAllowed(actor, 'markers:read')) forbidden()
  const [{ items }, site] = await Promise.all([listMarkers(actor), currentSite()])
  return (
    <>
      <PageHead
        title="Markers"
        sub="What a toast makes of the oak: each marker’s response to dose, depth or stages, as a formula or as a fit of results. The bench predicts from the one in force."
      />
      <MarkerTable markers={items} zone={site.timeZone} />
    </>
  )
}
