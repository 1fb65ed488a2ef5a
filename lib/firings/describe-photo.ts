import type * as z from 'zod'
import { describeChanges } from '@/lib/audit/describe-changes'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import type { describePhotoSchema, PhotoDto } from '@/lib/firings/photo-schema'
import { findPhotoToChange, readPhoto } from '@/lib/firings/read-photo'

/** Puts right what a photo is said to show. */
export async function describePhoto(
  actor: Actor,
  input: z.infer<typeof describePhotoSchema> & { id: string },
): Promise<PhotoDto> {
  requirePermission(actor, 'firings:run trial')
  return inTransaction(async (em) => {
    const photo = await findPhotoToChange(em, actor, input.id)
    const after = { kind: input.kind, caption: input.caption }
    const changes = describeChanges({ kind: photo.kind, caption: photo.caption }, after)
    if (Object.keys(changes).length > 0) {
      em.assign(photo, after)
      await em.flush()
      await writeAuditEntry(
        em,
        actor,
        'photo.described',
        { type: 'firing', id: photo.firingId },
        { photoId: photo.id, changes },
      )
    }
    return readPhoto(em, photo.id)
  })
}
