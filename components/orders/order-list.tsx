import { EmptyState } from '@/components/ui/empty-state'
import { Facts } from '@/components/ui/facts'
import { Table } from '@/components/ui/table'
import type { BatchDto, PieceDto } from '@/lib/batches/schema'
import { formatCount } from '@/lib/format'
import { pieceWords } from './piece-words'

export type Order = { batch: BatchDto; pieces: readonly PieceDto[] }

/** A customer's batches, newest first, each with its pieces and where they are. */
export function OrderList({ orders }: { orders: readonly Order[] }) {
  if (orders.length === 0) {
    return (
      <EmptyState title="No batch of yours is here yet.">
        As soon as the cooperage has planned barrels for you, they stand here, one by one, with where they are
        on their way.
      </EmptyState>
    )
  }
  return orders.map((order) => <OneOrder key={order.batch.id} {...order} />)
}

function OneOrder({ batch, pieces }: Order) {
  const noun = batch.pieceKind === 'barrel' ? 'barrel' : 'head'
  const facts = [
    { name: 'Pieces', value: `${formatCount(batch.pieceCount, noun)}, ${batch.sizeAndShape}` },
    { name: 'Toast', value: `${batch.recipeName}, version ${batch.versionNumber}` },
    { name: 'Wood lot', value: batch.woodLot },
    ...(batch.dueWeek === null ? [] : [{ name: 'Due', value: weekWords(batch.dueWeek) }]),
    {
      name: 'So far',
      value: `${batch.finishedCount} of ${batch.pieceCount} toasted${batch.liveCount === 0 ? '' : `, ${batch.liveCount} at a hearth now`}`,
    },
  ]
  return (
    <section className="mb-9 grid gap-x-12 gap-y-3 border-t border-line pt-4 md:grid-cols-[20rem_1fr]">
      <div>
        <h2 className="mb-2">Batch {batch.number}</h2>
        <Facts facts={facts} />
      </div>
      <Table
        caption={`Pieces of batch ${batch.number}`}
        rows={pieces}
        rowKey={(piece) => piece.id}
        columns={[
          {
            key: 'serial',
            head: 'Serial',
            isRowHead: true,
            cell: (piece) => <span className="font-mono">{piece.serial}</span>,
          },
          { key: 'kind', head: 'Piece', cell: (piece) => piece.kind },
          { key: 'state', head: 'Where it is', cell: pieceWords },
        ]}
      />
    </section>
  )
}

/** "2027-W05" → "week 5 of 2027". */
function weekWords(week: string): string {
  const [year = '', number = ''] = week.split('-W')
  return `week ${Number(number)} of ${year}`
}
