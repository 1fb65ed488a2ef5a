import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import type { BatchRow } from '@/lib/batches/to-batch'
import { batchSelect, toBatch } from '@/lib/batches/to-batch'
import type { BatchDto, listBatchesQuery } from '@/lib/batches/schema'
import { forkEm, queryRows } from '@/lib/db/orm'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import { sqlFilters } from '@/lib/db/sql-filters'

/** Batches, newest number first; a customer sees their own only. */
export async function listBatches(
  actor: Actor,
  query: z.infer<typeof listBatchesQuery>,
): Promise<Page<BatchDto>> {
  requirePermission(actor, 'batches:read')
  const filters = sqlFilters()
  if (!isAllowed(actor, 'batches:read all')) {
    filters.add('b.customer_id = ?', actor.kind === 'person' ? actor.customerId : null)
  }
  if (query.customerId !== undefined) filters.add('b.customer_id = ?', query.customerId)
  if (query.recipeId !== undefined) filters.add('v.recipe_id = ?', query.recipeId)
  if (query.q !== undefined && query.q !== '') {
    filters.addLike(['b.number::text', 'c.name', 'r.name', 'b.wood_lot'], query.q)
  }
  if (query.cursor !== undefined) filters.add('b.number < ?', decodeCursor(query.cursor, 1)[0] ?? null)
  const rows = await queryRows<BatchRow>(
    await forkEm(),
    `${batchSelect} ${filters.where()} order by b.number desc limit ?`,
    [...filters.parameters, query.limit + 1],
  )
  return toPage(rows, query.limit, toBatch, (row) => [row.number])
}
