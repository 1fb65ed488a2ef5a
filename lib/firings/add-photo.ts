import type { EntityManager } from '@mikro-orm/postgresql'
import { FiringPhotoEntity } from '@/entities/firing-photo'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { violatedConstraint } from '@/lib/db/database-errors'
import { forkEm, inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { newFileKey } from '@/lib/files/file-key'
import { putFile } from '@/lib/files/file-store'
import type { PreparedPhoto } from '@/lib/files/prepare-photo'
import { preparePhoto } from '@/lib/files/prepare-photo'
import { removeQuietly } from '@/lib/firings/erase-photos'
import type { PhotoKind } from '@/lib/firings/photo-kinds'
import type { PhotoDto } from '@/lib/firings/photo-schema'
import { photosAtMost } from '@/lib/firings/photo-kinds'
import { readPhoto, requirePhotoFiring } from '@/lib/firings/read-photo'
import { notifyFiringChanged } from '@/lib/live/notify'
import { now } from '@/lib/runtime'

type Input = { firingId: string; id: string; kind: PhotoKind; caption: string; bytes: Buffer }

/**
 * Keeps a photo of a firing: redrawn upright, small and without metadata, under keys that nobody can guess. The same
 * id again is a success that adds nothing.
 * @throws AppError 'invalid' naming `photo` for what is no picture, 'conflict' beyond twelve, 'unavailable' without storage
 */
export async function addPhoto(actor: Actor, input: Input): Promise<PhotoDto> {
  requirePermission(actor, 'firings:run trial')
  const person = requirePerson(actor)
  const known = await askBefore(await forkEm(), actor, input)
  if (known !== null) return known
  const prepared = await preparePhoto(input.bytes)
  const keys = { fileKey: newFileKey('photos', 'jpg'), thumbnailKey: newFileKey('photos', 'jpg') }
  try {
    await putFile(keys.fileKey, prepared.large, 'image/jpeg')
    await putFile(keys.thumbnailKey, prepared.thumbnail, 'image/jpeg')
    const photo = await inTransaction(async (em) => {
      await requirePhotoFiring(em, actor, input.firingId)
      em.create(FiringPhotoEntity, { ...rowOf(input, prepared), ...keys, accountId: person.accountId })
      await em.flush()
      await writeAuditEntry(
        em,
        actor,
        'photo.added',
        { type: 'firing', id: input.firingId },
        { photoId: input.id, kind: input.kind, caption: input.caption, sha256: prepared.sha256 },
      )
      return readPhoto(em, input.id)
    })
    notifyFiringChanged(input.firingId, 'details')
    return photo
  } catch (error) {
    await removeQuietly([keys.fileKey, keys.thumbnailKey])
    if (violatedConstraint(error) === 'firing_photos_at_most_twelve') throw isFull()
    if (violatedConstraint(error) === 'firing_photos_pkey') return sameAgain(await forkEm(), input)
    throw error
  }
}

/** Everything that can be refused is, before the picture is worked on. Answers the photo that is there already, or null. */
async function askBefore(em: EntityManager, actor: Actor, input: Input): Promise<PhotoDto | null> {
  await requirePhotoFiring(em, actor, input.firingId)
  if ((await em.findOne(FiringPhotoEntity, { id: input.id })) !== null) return sameAgain(em, input)
  const count = await em.count(FiringPhotoEntity, { firingId: input.firingId, removedAt: null })
  if (count >= photosAtMost) throw isFull()
  return null
}

async function sameAgain(em: EntityManager, input: Input): Promise<PhotoDto> {
  const photo = await readPhoto(em, input.id)
  if (photo.firingId === input.firingId) return photo
  throw new AppError('conflict', 'A photo of another firing has this id. Make a new one.')
}

function isFull(): AppError {
  return new AppError('conflict', `This firing has its ${photosAtMost} photos. Remove one to add another.`)
}

function rowOf(input: Input, prepared: PreparedPhoto) {
  return {
    id: input.id,
    firingId: input.firingId,
    kind: input.kind,
    caption: input.caption,
    sourceType: prepared.sourceType,
    widthPx: prepared.widthPx,
    heightPx: prepared.heightPx,
    byteCount: prepared.large.byteLength,
    sha256: prepared.sha256,
    addedAt: now(),
  }
}
