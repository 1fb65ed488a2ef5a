import type { Metadata } from 'next'
import { FiringView } from '@/components/firings/firing-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { getFiringBeside } from '@/lib/firings/get-firing-beside'
import { getFiringPicture } from '@/lib/firings/get-firing-picture'
import { orNotFound } from '@/lib/http/or-not-found'

export const metadata: Metadata = { title: 'Firing' }

export default async function FiringPage({ params }: { params: Promise<{ id: string }> }) {
  const actor = await requirePageActor()
  const { id } = await params
  const [picture, beside] = await orNotFound(
    Promise.all([getFiringPicture(actor, { id }), getFiringBeside(actor, { id })]),
    id,
  )
  const canRun = isAllowed(actor, picture.firing.isTrial ? 'firings:run trial' : 'firings:run')
  return <FiringView picture={picture} beside={beside} unit={actor.temperatureUnit} canRun={canRun} />
}
