import type { Metadata } from 'next'
import { RoomBoard } from '@/components/live/room-board'
import { requireRoomActor } from '@/lib/auth/page-actor'
import { listPieces } from '@/lib/batches/list-pieces'
import { listHearths } from '@/lib/probes/list-hearths'
import { nowMs } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Room, wall screen' }

/** The room for a screen that nobody touches. */
export default async function WallPage() {
  const actor = await requireRoomActor()
  const [hearths, queue, site] = await Promise.all([
    listHearths(actor),
    listPieces(actor, { show: 'waiting', limit: 200 }),
    currentSite(),
  ])
  return (
    <RoomBoard
      isWall
      hearths={hearths.items}
      queue={queue}
      siteName={site.name}
      zone={site.timeZone}
      unit={actor.temperatureUnit}
      canFire={false}
      deskHref="/room"
      person={null}
      device={null}
      serverNowMs={nowMs()}
    />
  )
}
