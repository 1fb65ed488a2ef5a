import type { Metadata } from 'next'
import { RoomView } from '@/components/probes/room-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import type { SearchParams } from '@/lib/http/page-query'
import { readPageQuery } from '@/lib/http/page-query'
import { getRoomPicture } from '@/lib/probes/get-room-picture'
import { listProbesQuery } from '@/lib/probes/schema'

export const metadata: Metadata = { title: 'Probes' }

export default async function ProbesPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  const { query, raw } = await readPageQuery(listProbesQuery, searchParams)
  const room = await getRoomPicture(actor, query)
  return <RoomView room={room} values={raw} unit={actor.temperatureUnit} />
}
