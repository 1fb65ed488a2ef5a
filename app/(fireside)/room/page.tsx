import type { Metadata } from 'next'
import { atTheFire } from '@/components/live/device-view'
import { RoomBoard } from '@/components/live/room-board'
import { homeOf } from '@/components/shell/navigation'
import { pageDevice, requireRoomActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { listPieces } from '@/lib/batches/list-pieces'
import { listHearths } from '@/lib/probes/list-hearths'
import { nowMs } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Room' }

export default async function RoomPage() {
  const actor = await requireRoomActor()
  const [hearths, queue, site, device] = await Promise.all([
    listHearths(actor),
    listPieces(actor, { show: 'waiting', limit: 200 }),
    currentSite(),
    pageDevice(),
  ])
  const home = actor.kind === 'person' ? homeOf(actor.role) : '/room'
  return (
    <RoomBoard
      hearths={hearths.items}
      queue={queue}
      siteName={site.name}
      zone={site.timeZone}
      unit={actor.temperatureUnit}
      canFire={isAllowed(actor, 'firings:run trial')}
      deskHref={home === '/room' ? '/firings' : home}
      {...atTheFire(actor, device)}
      serverNowMs={nowMs()}
    />
  )
}
