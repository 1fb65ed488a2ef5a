import type * as z from 'zod'
import { WaterCheckEntity } from '@/entities/water-check'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { invalidField } from '@/lib/errors'
import type { recordWaterCheckSchema } from '@/lib/probes/schema'
import { now } from '@/lib/runtime'

/** Records a check of the preheat, leak-test and humidifier water. */
export async function recordWaterCheck(
  actor: Actor,
  input: z.infer<typeof recordWaterCheckSchema>,
): Promise<{ id: string }> {
  requirePermission(actor, 'checks:write')
  const person = requirePerson(actor)
  const checkedAt = input.checkedAt === undefined ? now() : new Date(input.checkedAt)
  const dueAt = new Date(input.dueAt)
  if (dueAt <= checkedAt) throw invalidField('dueAt', 'The next check must be after this one.')
  if (checkedAt > now()) throw invalidField('checkedAt', 'A check cannot be in the future.')
  return inTransaction(async (em) => {
    const check = em.create(WaterCheckEntity, {
      source: input.source,
      tcaNgPerL: input.tcaNgPerL,
      freeChlorineMgPerL: input.freeChlorineMgPerL,
      checkedAt,
      dueAt,
      accountId: person.accountId,
    })
    await em.persistAndFlush(check)
    await writeAuditEntry(
      em,
      actor,
      'water.checked',
      { type: 'water check', id: check.id },
      { source: input.source },
    )
    return { id: check.id }
  })
}
