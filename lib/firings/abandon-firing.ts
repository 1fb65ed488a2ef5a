import type * as z from 'zod'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { closePeriods } from '@/lib/firings/end-firing'
import { canMove } from '@/lib/firings/firing-states'
import { lockFiring } from '@/lib/firings/lock-firing'
import { markInstant } from '@/lib/firings/mark-instant'
import { readFiring } from '@/lib/firings/read-firing'
import type { abandonFiringSchema, FiringDto } from '@/lib/firings/schema'
import { notifyFiringChanged } from '@/lib/live/notify'

/** Abandons a firing with its reason; it is kept, unscored, and the piece can be fired again. */
export async function abandonFiring(
  actor: Actor,
  input: z.infer<typeof abandonFiringSchema> & { id: string },
): Promise<FiringDto> {
  requirePermission(actor, 'firings:run trial')
  const firing = await inTransaction(async (em) => {
    const row = await lockFiring(em, input.id)
    if (!row.isTrial) requirePermission(actor, 'firings:run')
    if (!canMove(row.state, 'abandoned'))
      throw new AppError('conflict', `This firing is ${row.state} already.`)
    const at = markInstant(input.at, { notBefore: row.restAt ?? row.toastAt ?? row.bendAt ?? row.preheatAt })
    em.assign(row, { state: 'abandoned', endedAt: at, endReason: input.reason, revision: row.revision + 1 })
    await closePeriods(em, row, at)
    await writeAuditEntry(
      em,
      actor,
      'firing.abandoned',
      { type: 'firing', id: row.id },
      { reason: input.reason },
    )
    return readFiring(em, row.id)
  })
  notifyFiringChanged(firing.id, 'abandoned')
  return firing
}
