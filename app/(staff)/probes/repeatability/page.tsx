import type { Metadata } from 'next'
import { StudiesView } from '@/components/probes/studies-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import type { SearchParams } from '@/lib/http/page-query'
import { readPageQuery } from '@/lib/http/page-query'
import { getStudiesPage } from '@/lib/probes/get-studies-page'
import { listStudiesQuery } from '@/lib/probes/study-schema'

export const metadata: Metadata = { title: 'What this room can judge' }

export default async function RepeatabilityPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  const { query, raw } = await readPageQuery(listStudiesQuery, searchParams)
  const page = await getStudiesPage(actor, query)
  return <StudiesView page={page} values={raw} unit={actor.temperatureUnit} />
}
