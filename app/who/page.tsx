import type { Metadata } from 'next'
import { redirect } from 'next/navigation'
import { WhoScreen } from '@/components/devices/who-screen'
import { AppKeeper } from '@/components/live/app-keeper'
import { FiresideShell } from '@/components/shell/fireside-shell'
import { pageActor, pageDevice } from '@/lib/auth/page-actor'
import { deviceHome } from '@/lib/devices/device-home'
import { listPinPeople } from '@/lib/devices/list-pin-people'
import { safeNextPath } from '@/lib/http/next-path'
import type { SearchParams } from '@/lib/http/page-query'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Who is at the fire?' }

export default async function WhoPage({ searchParams }: { searchParams: SearchParams }) {
  const device = await pageDevice()
  if (device === null) redirect('/sign-in')
  if (device.place === 'wall screen') redirect('/room/wall')
  const { next } = await searchParams
  const [{ items }, actor, site, home] = await Promise.all([
    listPinPeople(device),
    pageActor(),
    currentSite(),
    deviceHome(device),
  ])
  const asked = safeNextPath(typeof next === 'string' ? next : null)
  return (
    <FiresideShell>
      <WhoScreen
        people={items}
        person={actor === null ? null : { id: actor.accountId, name: actor.name }}
        deviceName={device.name}
        siteName={site.name}
        nextPath={asked === '/' ? home : asked}
      />
      <AppKeeper />
    </FiresideShell>
  )
}
