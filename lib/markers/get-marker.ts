import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm } from '@/lib/db/orm'
import { readMarker } from '@/lib/markers/read-markers'
import type { MarkerDetail } from '@/lib/markers/schema'

/** One marker with every response that it ever had. @throws AppError 'not found' */
export async function getMarker(actor: Actor, input: { id: string }): Promise<MarkerDetail> {
  requirePermission(actor, 'markers:read')
  return readMarker(await forkEm(), input.id)
}
