import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { eraseRemovedPhotos } from '@/lib/firings/erase-photos'
import type { PhotoDto } from '@/lib/firings/photo-schema'
import { findPhotoToChange, readPhoto } from '@/lib/firings/read-photo'
import { notifyFiringChanged } from '@/lib/live/notify'
import { now } from '@/lib/runtime'

/** Removes a photo with a reason: its row stays with who, when and why; its picture is erased and shown to nobody. */
export async function removePhoto(actor: Actor, input: { id: string; reason: string }): Promise<PhotoDto> {
  requirePermission(actor, 'firings:run trial')
  const person = requirePerson(actor)
  const photo = await inTransaction(async (em) => {
    const row = await findPhotoToChange(em, actor, input.id)
    em.assign(row, { removedAt: now(), removedBy: person.accountId, removedReason: input.reason })
    await em.flush()
    await writeAuditEntry(
      em,
      actor,
      'photo.removed',
      { type: 'firing', id: row.firingId },
      { photoId: row.id, reason: input.reason, sha256: row.sha256 },
    )
    return readPhoto(em, row.id)
  })
  await eraseRemovedPhotos()
  notifyFiringChanged(photo.firingId, 'details')
  return photo
}
