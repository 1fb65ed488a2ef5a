import type { Metadata } from 'next'
import { RoomBoard } from '@/components/live/room-board'
import { homeOf } from '@/components/shell/navigation'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { listPieces } from '@/lib/batches/list-pieces'
import { listHearths } from '@/lib/probes/list-hearths'
import { nowMs } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Room' }

export default async function RoomPage() {
  const actor = await requirePageActor()
  const [hearths, queue, site] = await Promise.all([
    listHearths(actor),
    listPieces(actor, { show: 'waiting', limit: 200 }),
    currentSite(),
  ])
  const home = homeOf(actor.role)
  return (
    <RoomBoard
      hearths={hearths.items}
      queue={queue}
      rules={site.rules}
      siteName={site.name}
      zone={site.timeZone}
      unit={actor.temperatureUnit}
      canFire={isAllowed(actor, 'firings:run trial')}
      deskHref={home === '/room' ? '/firings' : home}
      serverNowMs={nowMs()}
    />
  )
}
