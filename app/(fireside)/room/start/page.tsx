import type { Metadata } from 'next'
import { redirect } from 'next/navigation'
import { RoomStartConsole } from '@/components/live/room-start-console'
import { requireRoomPerson } from '@/lib/auth/page-actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { listPieces } from '@/lib/batches/list-pieces'
import type { SearchParams } from '@/lib/http/page-query'
import { listHearths } from '@/lib/probes/list-hearths'
import { listProbes } from '@/lib/probes/list-probes'
import { listWaterSources } from '@/lib/probes/list-water-sources'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Start preheat' }

export default async function StartPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requireRoomPerson()
  requirePermission(actor, 'firings:run trial')
  const { hearth: asked, serial } = await searchParams
  const hearth = (await listHearths(actor)).items.find((one) => String(one.number) === asked && one.isActive)
  if (hearth === undefined) redirect('/room')
  if (hearth.live !== null) redirect(`/fireside/${hearth.live.firingId}`)
  const [queue, probes, water, site] = await Promise.all([
    listPieces(actor, { show: 'waiting', limit: 50 }),
    listProbes(actor, { hearthId: hearth.id, limit: 50 }),
    listWaterSources(actor),
    currentSite(),
  ])
  return (
    <RoomStartConsole
      hearth={hearth}
      queue={queue.items}
      probes={probes.items}
      waters={water.items}
      scannedSerial={typeof serial === 'string' ? serial : null}
      zone={site.timeZone}
      unit={actor.temperatureUnit}
      isTrial={!isAllowed(actor, 'firings:run')}
    />
  )
}
