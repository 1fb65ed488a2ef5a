import type { Actor } from '@/lib/auth/actor'
import { listBatches } from '@/lib/batches/list-batches'
import { listPieces } from '@/lib/batches/list-pieces'
import type { BatchDto, PieceDto } from '@/lib/batches/schema'

/** So many batches stand on one page of a customer, each with all its pieces. */
const pageSize = 10

/** A customer's own batches with their pieces in serial order; what is theirs the two lists decide. */
export async function listOrders(
  actor: Actor,
  cursor: string | undefined,
): Promise<{ orders: { batch: BatchDto; pieces: PieceDto[] }[]; nextCursor: string | null }> {
  const page = await listBatches(actor, { limit: pageSize, cursor })
  const orders = await Promise.all(
    page.items.map(async (batch) => ({ batch, pieces: await allPieces(actor, batch.id) })),
  )
  return { orders, nextCursor: page.nextCursor }
}

async function allPieces(actor: Actor, batchId: string): Promise<PieceDto[]> {
  const pieces: PieceDto[] = []
  let cursor: string | undefined
  do {
    const page = await listPieces(actor, { limit: 200, batchId, show: 'all', cursor })
    pieces.push(...page.items)
    cursor = page.nextCursor ?? undefined
  } while (cursor !== undefined)
  return pieces.sort((a, b) => a.position - b.position)
}
