import type { Metadata } from 'next'
import { FiringList } from '@/components/firings/firing-list'
import { requirePageActor } from '@/lib/auth/page-actor'
import { firingFilterOptions } from '@/lib/firings/filter-options'
import { listFirings } from '@/lib/firings/list-firings'
import { listFiringsQuery } from '@/lib/firings/schema'
import type { SearchParams } from '@/lib/http/page-query'
import { readPageQuery } from '@/lib/http/page-query'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Firings' }

export default async function FiringsPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  const { query, raw, faults } = await readPageQuery(listFiringsQuery, searchParams)
  const state = raw['state'] === undefined ? 'fired' : query.state
  const [page, options, site] = await Promise.all([
    listFirings(actor, { ...query, state }),
    firingFilterOptions(actor),
    currentSite(),
  ])
  return (
    <FiringList
      page={page}
      values={raw}
      faults={faults}
      options={options}
      zone={site.timeZone}
      unit={actor.temperatureUnit}
    />
  )
}
