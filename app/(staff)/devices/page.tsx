import type { Metadata } from 'next'
import { forbidden } from 'next/navigation'
import { DevicesView } from '@/components/devices/devices-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { listDevices } from '@/lib/devices/list-devices'
import { deviceListQuery } from '@/lib/devices/schema'
import { readPageQuery, type SearchParams } from '@/lib/http/page-query'
import { listHearths } from '@/lib/probes/list-hearths'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Devices' }

export default async function DevicesPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  if (!isAllowed(actor, 'devices:read')) forbidden()
  const { query, raw } = await readPageQuery(deviceListQuery, searchParams)
  const [page, hearths, site] = await Promise.all([
    listDevices(actor, query),
    listHearths(actor),
    currentSite(),
  ])
  return (
    <DevicesView
      page={page}
      hearths={hearths.items}
      values={raw}
      zone={site.timeZone}
      canWrite={isAllowed(actor, 'devices:write')}
    />
  )
}
