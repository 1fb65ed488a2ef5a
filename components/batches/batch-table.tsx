import Link from 'next/link'
import { EmptyState } from '@/components/ui/empty-state'
import { Table } from '@/components/ui/table'
import type { BatchDto } from '@/lib/batches/schema'

/** Batches as rows, each with how far its pieces are. */
export function BatchTable({
  batches,
  linkTo = '/batches',
}: {
  batches: readonly BatchDto[]
  linkTo?: string
}) {
  return (
    <Table
      caption="Batches"
      rows={batches}
      rowKey={(batch) => batch.id}
      empty={
        <EmptyState title="No batch fits.">
          Change the search, or make a batch from a customer, an approved recipe version and a wood lot.
        </EmptyState>
      }
      columns={[
        {
          key: 'number',
          head: 'Batch',
          isRowHead: true,
          cell: (batch) => (
            <Link href={`${linkTo}/${batch.id}`} className="font-[640] underline-offset-3 hover:underline">
              {batch.number}
            </Link>
          ),
        },
        { key: 'customer', head: 'Customer', cell: (batch) => batch.customer.name },
        {
          key: 'recipe',
          head: 'Recipe',
          cell: (batch) => `${batch.recipeName}, version ${batch.versionNumber}`,
        },
        { key: 'size', head: 'Size and shape', cell: (batch) => batch.sizeAndShape },
        { key: 'lot', head: 'Wood lot', cell: (batch) => batch.woodLot },
        { key: 'due', head: 'Due week', cell: (batch) => batch.dueWeek ?? '' },
        { key: 'count', head: 'Pieces', isNumeric: true, cell: (batch) => batch.pieceCount },
        { key: 'waiting', head: 'Waiting', isNumeric: true, cell: (batch) => batch.waitingCount },
        { key: 'live', head: 'Over the fire', isNumeric: true, cell: (batch) => batch.liveCount },
        { key: 'finished', head: 'Fired', isNumeric: true, cell: (batch) => batch.finishedCount },
      ]}
    />
  )
}
