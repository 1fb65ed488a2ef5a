import { ExposureReadingEntity } from '@/entities/exposure-reading'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'

/** Takes a reading of carbon monoxide or heat back with a reason; its row stays. One of a file goes with its file. */
export async function removeExposure(actor: Actor, input: { id: string; reason: string }): Promise<void> {
  requirePermission(actor, 'conditions:write')
  const person = requirePerson(actor)
  await inTransaction(async (em) => {
    const row = await em.findOne(ExposureReadingEntity, { id: input.id, removedAt: null })
    if (row === null) throw new AppError('not found', 'There is no such reading, or it was taken back.')
    if (row.uploadId) throw new AppError('conflict', 'This reading came with a file: take the file back.')
    em.assign(row, { removedAt: now(), removedBy: person.accountId, removedReason: input.reason })
    await em.flush()
    await writeAuditEntry(
      em,
      actor,
      'exposure.taken back',
      { type: 'exposure reading', id: row.id },
      { reason: input.reason },
    )
  })
}
