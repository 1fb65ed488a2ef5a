import { ExposureUploadEntity } from '@/entities/exposure-upload'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'

/** Takes a meter's file back with all its readings and a reason; the rows stay. */
export async function removeExposureFile(actor: Actor, input: { id: string; reason: string }): Promise<void> {
  requirePermission(actor, 'conditions:write')
  const person = requirePerson(actor)
  await inTransaction(async (em) => {
    const row = await em.findOne(ExposureUploadEntity, { id: input.id, removedAt: null })
    if (row === null) throw new AppError('not found', 'There is no such file, or it was taken back.')
    const at = now()
    em.assign(row, { removedAt: at, removedBy: person.accountId, removedReason: input.reason })
    await em.flush()
    await queryRows(
      em,
      `update exposure_readings set removed_at = ?, removed_by = ?, removed_reason = ?
        where upload_id = ? and removed_at is null`,
      [at, person.accountId, input.reason, row.id],
    )
    await writeAuditEntry(
      em,
      actor,
      'exposure file.taken back',
      { type: 'exposure file', id: row.id },
      { reason: input.reason, fileName: row.fileName },
    )
  })
}
