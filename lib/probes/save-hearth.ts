import type * as z from 'zod'
import { HearthEntity } from '@/entities/hearth'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import type { saveHearthSchema } from '@/lib/probes/schema'
import { now } from '@/lib/runtime'

/** Adds a hearth, or changes the one with the id. A hearth with a live firing stays active. */
export async function saveHearth(
  actor: Actor,
  input: z.infer<typeof saveHearthSchema> & { id?: string },
): Promise<{ id: string }> {
  requirePermission(actor, 'room:write')
  return inTransaction(async (em) => {
    const twin = await em.findOne(HearthEntity, { number: input.number })
    if (twin !== null && twin.id !== input.id)
      throw invalidField('number', `Hearth ${input.number} is there already.`)
    const hearth = input.id === undefined ? null : await em.findOne(HearthEntity, { id: input.id })
    if (input.id !== undefined && hearth === null) throw new AppError('not found', 'There is no such hearth.')
    if (hearth !== null && !input.isActive) {
      const live = await queryRows(
        em,
        'select 1 from firing_placements where hearth_id = ? and until_at is null',
        [hearth.id],
      )
      if (live.length > 0) throw new AppError('conflict', 'A firing stands on this hearth. Finish it first.')
    }
    const fields = { number: input.number, name: input.name, isActive: input.isActive }
    const saved = hearth ?? em.create(HearthEntity, { ...fields, createdAt: now() })
    em.assign(saved, fields)
    await em.persistAndFlush(saved)
    await writeAuditEntry(
      em,
      actor,
      hearth === null ? 'hearth.added' : 'hearth.changed',
      { type: 'hearth', id: saved.id },
      fields,
    )
    return { id: saved.id }
  })
}
