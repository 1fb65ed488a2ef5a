import type { Metadata } from 'next'
import { forbidden } from 'next/navigation'
import { ConditionsView } from '@/components/conditions/conditions-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { getDay } from '@/lib/conditions/get-day'
import { listDays } from '@/lib/conditions/list-days'
import { conditionsPageQuery } from '@/lib/conditions/schema'
import { readPageQuery, type SearchParams } from '@/lib/http/page-query'
import { nowMs } from '@/lib/runtime'

export const metadata: Metadata = { title: 'Conditions' }

export default async function ConditionsPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  if (!isAllowed(actor, 'conditions:read')) forbidden()
  const { query, raw, faults } = await readPageQuery(conditionsPageQuery, searchParams)
  const [day, days] = await Promise.all([
    getDay(actor, { day: query.day }),
    listDays(actor, { cursor: query.cursor, limit: 14 }),
  ])
  return (
    <ConditionsView
      day={day}
      days={days}
      values={raw}
      faults={faults}
      unit={actor.temperatureUnit}
      mayWrite={isAllowed(actor, 'conditions:write')}
      nowMs={nowMs()}
    />
  )
}
