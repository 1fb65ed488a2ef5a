import type { Metadata } from 'next'
import { forbidden } from 'next/navigation'
import { MarkerView } from '@/components/markers/marker-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { orNotFound } from '@/lib/http/or-not-found'
import type { SearchParams } from '@/lib/http/page-query'
import { readPageQuery } from '@/lib/http/page-query'
import { getMarkerDesk } from '@/lib/markers/get-marker-desk'
import { markerPageQuery } from '@/lib/markers/schema'

export const metadata: Metadata = { title: 'Marker' }

export default async function MarkerPage({
  params,
  searchParams,
}: {
  params: Promise<{ id: string }>
  searchParams: SearchParams
}) {
  const actor = await requirePageActor()
  if (!isAllowed(actor, 'markers:read')) forbidden()
  const { id } = await params
  const { query } = await readPageQuery(markerPageQuery, searchParams)
  const desk = await orNotFound(getMarkerDesk(actor, { id }), id)
  return <MarkerView desk={desk} view={query.view} number={query.number} from={query.from} />
}
