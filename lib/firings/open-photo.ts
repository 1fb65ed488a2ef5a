import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { openFile } from '@/lib/files/file-store'
import { requireReadableFiring } from '@/lib/firings/may-read-firing'
import type { PhotoSize } from '@/lib/firings/photo-kinds'
import { readFiring } from '@/lib/firings/read-firing'
import { noPhoto } from '@/lib/firings/read-photo'

export type OpenedPhoto = { fileName: string; body: ReadableStream<Uint8Array> }

type Row = { firing_id: string; kind: string; file_key: string; thumbnail_key: string }

/**
 * A photo's bytes, for whoever may read its firing; fetched from storage by an address signed for a minute.
 * @throws AppError 'not found', also for one that was removed and for another's firing
 */
export async function openPhoto(actor: Actor, input: { id: string; size: PhotoSize }): Promise<OpenedPhoto> {
  requirePermission(actor, 'firings:follow')
  const em = await forkEm()
  const [row] = await queryRows<Row>(
    em,
    `select firing_id, kind, file_key, thumbnail_key from firing_photos where id = ? and removed_at is null`,
    [input.id],
  )
  if (row === undefined) throw noPhoto()
  const firing = await readFiring(em, row.firing_id)
  requireReadableFiring(actor, firing)
  const body = await openFile(input.size === 'large' ? row.file_key : row.thumbnail_key)
  return { fileName: `${firing.piece.serial}-${row.kind}.jpg`, body }
}
