import type { Metadata } from 'next'
import { PieceTable } from '@/components/batches/piece-table'
import { LinkButton } from '@/components/ui/link-button'
import { PageHead } from '@/components/ui/page-head'
import { requirePageActor } from '@/lib/auth/page-actor'
import { getBatch } from '@/lib/batches/get-batch'
import { listPieces } from '@/lib/batches/list-pieces'
import { orNotFound } from '@/lib/http/or-not-found'

export const metadata: Metadata = { title: 'Batch' }

export default async function BatchPage({ params }: { params: Promise<{ id: string }> }) {
  const actor = await requirePageActor()
  const { id } = await params
  const batch = await orNotFound(getBatch(actor, { id }), id)
  const pieces = await listPieces(actor, { batchId: id, show: 'all', limit: 200 })
  const inOrder = [...pieces.items].sort((a, b) => a.position - b.position)
  return (
    <>
      <PageHead
        title={`Batch ${batch.number}, ${batch.recipeName}`}
        sub={`${batch.pieceCount} of ${batch.sizeAndShape} for ${batch.customer.name}, lot ${batch.woodLot}, version ${batch.versionNumber}${batch.dueWeek === null ? '' : `, due ${batch.dueWeek}`}.`}
        verdict={`${batch.finishedCount} fired, ${batch.liveCount} over the fire, ${batch.waitingCount} waiting`}
        actions={<LinkButton href={`/firings?batchId=${batch.id}`}>Its firings</LinkButton>}
      />
      {batch.notes === '' ? null : <p className="mb-4 max-w-[70ch]">{batch.notes}</p>}
      <PieceTable pieces={inOrder} unit={actor.temperatureUnit} isBatchShown={false} />
    </>
  )
}
