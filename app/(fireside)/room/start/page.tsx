import type { Metadata } from 'next'
import { redirect } from 'next/navigation'
import { RoomStartConsole } from '@/components/live/room-start-console'
import { requireRoomPerson } from '@/lib/auth/page-actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { getStartPicture } from '@/lib/firings/get-start-picture'
import type { SearchParams } from '@/lib/http/page-query'
import { listHearths } from '@/lib/probes/list-hearths'

export const metadata: Metadata = { title: 'Start preheat' }

export default async function StartPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requireRoomPerson()
  requirePermission(actor, 'firings:run trial')
  const { hearth: asked, serial } = await searchParams
  const hearth = (await listHearths(actor)).items.find((one) => String(one.number) === asked && one.isActive)
  if (hearth === undefined) redirect('/room')
  if (hearth.live !== null) redirect(`/fireside/${hearth.live.firingId}`)
  const picture = await getStartPicture(actor, { hearthId: hearth.id })
  return (
    <RoomStartConsole
      {...picture}
      hearth={hearth}
      scannedSerial={typeof serial === 'string' ? serial : null}
      unit={actor.temperatureUnit}
      isTrial={!isAllowed(actor, 'firings:run')}
    />
  )
}
