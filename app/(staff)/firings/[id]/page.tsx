import type { Metadata } from 'next'
import { FiringView } from '@/components/firings/firing-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { getFiringPicture } from '@/lib/firings/get-firing-picture'
import { orNotFound } from '@/lib/http/or-not-found'

export const metadata: Metadata = { title: 'Firing' }

export default async function FiringPage({ params }: { params: Promise<{ id: string }> }) {
  const actor = await requirePageActor()
  const { id } = await params
  const picture = await orNotFound(getFiringPicture(actor, { id }), id)
  return <FiringView picture={picture} unit={actor.temperatureUnit} />
}
