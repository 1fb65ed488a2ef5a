import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import type { listPiecesQuery, PieceDto } from '@/lib/batches/schema'
import type { PieceRow } from '@/lib/batches/to-piece'
import { pieceSelect, toCustomerPiece, toDevicePiece, toPiece } from '@/lib/batches/to-piece'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import { AppError } from '@/lib/errors'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'

/**
 * Barrels and heads: the queue in its order when waiting is asked for, else the newest serial first. An enrolled device
 * with nobody signed in gets the queue alone, and not whose barrels they are.
 */
export async function listPieces(
  actor: Actor,
  query: z.infer<typeof listPiecesQuery>,
): Promise<Page<PieceDto>> {
  requirePermission(actor, 'batches:read')
  const isQueue = query.show === 'waiting'
  if (actor.kind === 'device' && !isQueue) {
    throw new AppError('not signed in', 'Nobody is signed in here. Choose your name and type your PIN.')
  }
  const filters = sqlFilters()
  if (!isAllowed(actor, 'batches:read all')) {
    filters.add('b.customer_id = ?', actor.kind === 'person' ? actor.customerId : null)
  }
  if (query.batchId !== undefined) filters.add('b.id = ?', query.batchId)
  if (query.kind !== undefined) filters.add('p.kind = ?', query.kind)
  if (isQueue) filters.add(`f.state = 'queued'`)
  if (query.show === 'fired') filters.add(`f.state = 'finished'`)
  if (query.show === 'again') filters.add(`f.state in ('finished', 'abandoned')`)
  if (query.q !== undefined && query.q !== '')
    filters.addLike(
      actor.kind === 'device' ? ['p.serial', 'r.name'] : ['p.serial', 'r.name', 'c.name', 'b.wood_lot'],
      query.q,
    )
  if (query.cursor !== undefined) {
    const [position, id] = decodeCursor(query.cursor, 2)
    filters.add(
      isQueue ? '(p.queue_position, p.id) > (?, ?)' : '(p.queue_position, p.id) < (?, ?)',
      position,
      id,
    )
  }
  const order = isQueue ? 'p.queue_position, p.id' : 'p.queue_position desc, p.id desc'
  const rows = await queryRows<PieceRow>(
    await forkEm(),
    `${pieceSelect} ${filters.where()} order by ${order} limit ?`,
    [...filters.parameters, query.limit + 1],
  )
  return toPage(rows, query.limit, dtoFor(actor), (row) => [row.queue_position, row.id])
}

function dtoFor(actor: Actor): (row: PieceRow) => PieceDto {
  if (actor.kind === 'device') return toDevicePiece
  return isAllowed(actor, 'batches:read all') ? toPiece : toCustomerPiece
}
