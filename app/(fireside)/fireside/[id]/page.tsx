import type { Metadata } from 'next'
import { FiresideConsole } from '@/components/live/fireside-console'
import { atTheFire } from '@/components/live/device-view'
import { pageDevice, requireRoomActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { getFiring } from '@/lib/firings/get-firing'
import { orNotFound } from '@/lib/http/or-not-found'
import { nowMs } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Fireside' }

export default async function FiresidePage({ params }: { params: Promise<{ id: string }> }) {
  const actor = await requireRoomActor()
  const { id } = await params
  const [firing, site, device] = await Promise.all([
    orNotFound(getFiring(actor, { id }), id),
    currentSite(),
    pageDevice(),
  ])
  const isAtDesk = actor.kind === 'person' && actor.byPinAt === undefined
  return (
    <FiresideConsole
      key={firing.id}
      firing={firing}
      rules={site.rules}
      siteWords={site.room.words}
      zone={site.timeZone}
      unit={actor.temperatureUnit}
      canRun={isAllowed(actor, firing.isTrial ? 'firings:run trial' : 'firings:run')}
      canShelve={isAllowed(actor, 'alarms:shelve')}
      endedHref={isAtDesk ? `/firings/${id}` : '/room'}
      {...atTheFire(actor, device)}
      serverNowMs={nowMs()}
    />
  )
}
