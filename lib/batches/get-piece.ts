import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import type { PieceDto } from '@/lib/batches/schema'
import type { PieceRow } from '@/lib/batches/to-piece'
import { pieceSelect, toCustomerPiece, toPiece } from '@/lib/batches/to-piece'
import { forkEm, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'

/** One barrel or head. @throws AppError 'not found', also for another customer's. */
export async function getPiece(actor: Actor, input: { id: string }): Promise<PieceDto> {
  requirePermission(actor, 'batches:read')
  const [row] = await queryRows<PieceRow>(await forkEm(), `${pieceSelect} where p.id = ?`, [input.id])
  const isTheirs = row !== undefined && actor.kind === 'person' && row.customer_id === actor.customerId
  if (row === undefined || !(isAllowed(actor, 'batches:read all') || isTheirs)) {
    throw new AppError('not found', 'There is no such barrel.')
  }
  return isAllowed(actor, 'batches:read all') ? toPiece(row) : toCustomerPiece(row)
}
