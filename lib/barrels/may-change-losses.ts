import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { queryRows } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'

export type LossPiece = { id: string; woodLot: string }

/**
 * The piece whose losses a person wants to change. Whoever runs firings may; a chemist at a trial of their own making.
 * @throws AppError 'not found', 'not allowed', or 'invalid' naming a firing of another piece
 */
export async function requireLossPiece(
  actor: Actor,
  em: EntityManager,
  pieceId: string,
  firingId: string | null,
): Promise<LossPiece> {
  const [piece] = await queryRows<{ wood_lot: string }>(
    em,
    'select b.wood_lot from pieces p join batches b on b.id = p.batch_id where p.id = ?',
    [pieceId],
  )
  if (piece === undefined) throw new AppError('not found', 'There is no such barrel.')
  requirePermission(actor, 'firings:run trial')
  if (firingId === null) {
    requirePermission(actor, 'firings:run')
    return { id: pieceId, woodLot: piece.wood_lot }
  }
  const [firing] = await queryRows<{ is_trial: boolean }>(
    em,
    'select is_trial from firings where id = ? and piece_id = ?',
    [firingId, pieceId],
  )
  if (firing === undefined) throw invalidField('firingId', 'This firing is of another piece.')
  if (!firing.is_trial) requirePermission(actor, 'firings:run')
  return { id: pieceId, woodLot: piece.wood_lot }
}
