import type { Metadata } from 'next'
import { forbidden } from 'next/navigation'
import { AlarmView } from '@/components/alarms/alarm-view'
import { getAlarmRates } from '@/lib/alarms/get-alarm-rates'
import { listAlarms } from '@/lib/alarms/list-alarms'
import { listAlarmsQuery } from '@/lib/alarms/schema'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { firingFilterOptions } from '@/lib/firings/filter-options'
import { readPageQuery, type SearchParams } from '@/lib/http/page-query'
import { nowMs } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Alarms' }

export default async function AlarmsPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  if (!isAllowed(actor, 'alarms:read')) forbidden()
  const { query, raw, faults } = await readPageQuery(listAlarmsQuery, searchParams)
  const { cursor: _cursor, limit: _limit, ...filters } = query
  const [page, rates, { hearths, toasters }, site] = await Promise.all([
    listAlarms(actor, query),
    getAlarmRates(actor, filters),
    firingFilterOptions(actor),
    currentSite(),
  ])
  const view = { page, rates, faults, values: raw, options: { hearths, toasters } }
  return (
    <AlarmView
      {...view}
      isOwnOnly={!isAllowed(actor, 'alarms:read all')}
      canShelve={isAllowed(actor, 'alarms:shelve')}
      nowMs={nowMs()}
      zone={site.timeZone}
      unit={actor.temperatureUnit}
    />
  )
}
