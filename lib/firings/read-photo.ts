import type { EntityManager } from '@mikro-orm/postgresql'
import type { FiringPhoto } from '@/entities/firing-photo'
import { FiringPhotoEntity } from '@/entities/firing-photo'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { requireReadableFiring } from '@/lib/firings/may-read-firing'
import type { PhotoDto } from '@/lib/firings/photo-schema'
import { readFiring } from '@/lib/firings/read-firing'
import type { FiringDto } from '@/lib/firings/schema'
import type { PhotoRow } from '@/lib/firings/to-photo'
import { photoSelect, toPhoto } from '@/lib/firings/to-photo'

/** One photo as it is shown, unauthorised: for verbs that have asked already. @throws AppError 'not found' */
export async function readPhoto(em: EntityManager, id: string): Promise<PhotoDto> {
  const [row] = await queryRows<PhotoRow>(em, `${photoSelect} where o.id = ?`, [id])
  if (row === undefined) throw noPhoto()
  return toPhoto(row)
}

/**
 * The firing whose photos a person wants to change: one that they may read, and run.
 * @throws AppError 'not allowed', 'not found', or 'conflict' before it has begun
 */
export async function requirePhotoFiring(
  em: EntityManager,
  actor: Actor,
  firingId: string,
): Promise<FiringDto> {
  const firing = await readFiring(em, firingId)
  requirePermission(actor, firing.isTrial ? 'firings:run trial' : 'firings:run')
  requireReadableFiring(actor, firing)
  if (firing.state === 'queued') {
    throw new AppError('conflict', 'This firing has not begun. A photo is kept from preheat on.')
  }
  return firing
}

/** A photo that is still there, of a firing that the person may change. @throws AppError 'not found', 'not allowed' */
export async function findPhotoToChange(em: EntityManager, actor: Actor, id: string): Promise<FiringPhoto> {
  const photo = await em.findOne(FiringPhotoEntity, { id, removedAt: null })
  if (photo === null) throw noPhoto()
  await requirePhotoFiring(em, actor, photo.firingId)
  return photo
}

export function noPhoto(): AppError {
  return new AppError('not found', 'There is no such photo, or it was removed.')
}
