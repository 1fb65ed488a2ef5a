import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import type { BatchDto } from '@/lib/batches/schema'
import type { BatchRow } from '@/lib/batches/to-batch'
import { batchSelect, toBatch } from '@/lib/batches/to-batch'
import { forkEm, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'

/** One batch. @throws AppError 'not found', also for another customer's. */
export async function getBatch(actor: Actor, input: { id: string }): Promise<BatchDto> {
  requirePermission(actor, 'batches:read')
  const [row] = await queryRows<BatchRow>(await forkEm(), `${batchSelect} where b.id = ?`, [input.id])
  const isTheirs = row !== undefined && actor.kind === 'person' && row.customer_id === actor.customerId
  if (row === undefined || !(isAllowed(actor, 'batches:read all') || isTheirs)) {
    throw new AppError('not found', 'There is no such batch.')
  }
  return toBatch(row)
}
