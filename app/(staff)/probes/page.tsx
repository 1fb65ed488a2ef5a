import type { Metadata } from 'next'
import { ProbesView } from '@/components/probes/probes-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import type { SearchParams } from '@/lib/http/page-query'
import { readPageQuery } from '@/lib/http/page-query'
import { getProbesPage } from '@/lib/probes/get-probes-page'
import { listProbesQuery } from '@/lib/probes/schema'

export const metadata: Metadata = { title: 'Probes' }

export default async function ProbesPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  const { query, raw, faults } = await readPageQuery(listProbesQuery, searchParams)
  const page = await getProbesPage(actor, query)
  return <ProbesView page={page} values={raw} faults={faults} unit={actor.temperatureUnit} />
}
