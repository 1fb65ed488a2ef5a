import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm } from '@/lib/db/orm'
import { readMarkers } from '@/lib/markers/read-markers'
import type { MarkerDto } from '@/lib/markers/schema'

/** Every marker with the response in force, in the list's own order: it is short, and whole. */
export async function listMarkers(actor: Actor): Promise<{ items: MarkerDto[]; nextCursor: null }> {
  requirePermission(actor, 'markers:read')
  return { items: await readMarkers(await forkEm()), nextCursor: null }
}
