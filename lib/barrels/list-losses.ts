import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { readLosses } from '@/lib/barrels/read-losses'
import type { LossDto } from '@/lib/barrels/schema'
import { getPiece } from '@/lib/batches/get-piece'
import { forkEm } from '@/lib/db/orm'

/** Every loss of a piece, those that do not stand any more with who ended them. For staff. */
export async function listLosses(
  actor: Actor,
  input: { id: string },
): Promise<{ items: LossDto[]; nextCursor: null }> {
  requirePermission(actor, 'batches:read all')
  await getPiece(actor, input)
  return { items: await readLosses(await forkEm(), input.id), nextCursor: null }
}
