import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { requireReadableFiring } from '@/lib/firings/may-read-firing'
import type { PhotoDto } from '@/lib/firings/photo-schema'
import { readFiring } from '@/lib/firings/read-firing'
import type { PhotoRow } from '@/lib/firings/to-photo'
import { photoSelect, toPhoto } from '@/lib/firings/to-photo'

/** The photos of a firing in the order in which they were added; of one that was removed, what stays of it. */
export async function listPhotos(
  actor: Actor,
  input: { id: string },
): Promise<{ items: PhotoDto[]; nextCursor: null }> {
  requirePermission(actor, 'firings:follow')
  const em = await forkEm()
  requireReadableFiring(actor, await readFiring(em, input.id))
  const rows = await queryRows<PhotoRow>(
    em,
    `${photoSelect} where o.firing_id = ? order by o.added_at, o.id`,
    [input.id],
  )
  return { items: rows.map(toPhoto), nextCursor: null }
}
