import type { Metadata } from 'next'
import { WaterView } from '@/components/probes/water-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import type { SearchParams } from '@/lib/http/page-query'
import { readPageQuery } from '@/lib/http/page-query'
import { listWaterChecks } from '@/lib/probes/list-water-checks'
import { listWaterSources } from '@/lib/probes/list-water-sources'
import { listWaterChecksQuery } from '@/lib/probes/schema'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Water' }

export default async function WaterPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  const { query, raw } = await readPageQuery(listWaterChecksQuery, searchParams)
  const [sources, page, { rules, timeZone }] = await Promise.all([
    listWaterSources(actor),
    listWaterChecks(actor, { ...query, limit: 20 }),
    currentSite(),
  ])
  return (
    <WaterView
      sources={sources.items}
      page={page}
      values={raw}
      rules={rules.checks}
      zone={timeZone}
      mayCheck={isAllowed(actor, 'checks:write')}
    />
  )
}
