import type { Metadata } from 'next'
import { PieceView } from '@/components/batches/piece-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { requirePermission } from '@/lib/auth/permissions'
import { getPiece } from '@/lib/batches/get-piece'
import { listFirings } from '@/lib/firings/list-firings'
import { orNotFound } from '@/lib/http/or-not-found'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Barrel' }

export default async function BarrelPage({ params }: { params: Promise<{ id: string }> }) {
  const actor = await requirePageActor()
  requirePermission(actor, 'batches:read all')
  const { id } = await params
  const [piece, firings, site] = await Promise.all([
    orNotFound(getPiece(actor, { id }), id),
    listFirings(actor, { pieceId: id, state: 'all', limit: 50 }),
    currentSite(),
  ])
  return <PieceView piece={piece} firings={firings.items} zone={site.timeZone} unit={actor.temperatureUnit} />
}
