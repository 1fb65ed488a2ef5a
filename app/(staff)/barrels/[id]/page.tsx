import type { Metadata } from 'next'
import { BarrelView } from '@/components/barrels/barrel-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { getBarrel } from '@/lib/barrels/get-barrel'
import { orNotFound } from '@/lib/http/or-not-found'

export const metadata: Metadata = { title: 'Barrel' }

export default async function BarrelPage({ params }: { params: Promise<{ id: string }> }) {
  const actor = await requirePageActor()
  const { id } = await params
  const barrel = await orNotFound(getBarrel(actor, { id }), id)
  return <BarrelView barrel={barrel} unit={actor.temperatureUnit} />
}
