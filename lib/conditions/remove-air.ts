import { ConditionReadingEntity } from '@/entities/condition-reading'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'

/** Takes a reading of the air back with a reason; its row stays. */
export async function removeAir(actor: Actor, input: { id: string; reason: string }): Promise<void> {
  requirePermission(actor, 'conditions:write')
  const person = requirePerson(actor)
  await inTransaction(async (em) => {
    const row = await em.findOne(ConditionReadingEntity, { id: input.id, removedAt: null })
    if (row === null) throw new AppError('not found', 'There is no such reading, or it was taken back.')
    em.assign(row, { removedAt: now(), removedBy: person.accountId, removedReason: input.reason })
    await em.flush()
    await writeAuditEntry(
      em,
      actor,
      'conditions.taken back',
      { type: 'condition reading', id: row.id },
      { reason: input.reason },
    )
  })
}
