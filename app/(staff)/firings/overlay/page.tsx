import type { Metadata } from 'next'
import { readOverlayIds } from '@/components/firings/overlay-ids'
import { OverlayView } from '@/components/firings/overlay-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { getOverlay } from '@/lib/firings/get-overlay'
import type { SearchParams } from '@/lib/http/page-query'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Compare firings' }

export default async function OverlayPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  const { ids, pickedId } = await readOverlayIds(searchParams)
  const [overlay, site] = await Promise.all([getOverlay(actor, { ids }), currentSite()])
  return (
    <OverlayView
      overlay={overlay}
      ids={ids}
      pickedId={pickedId}
      zone={site.timeZone}
      unit={actor.temperatureUnit}
    />
  )
}
