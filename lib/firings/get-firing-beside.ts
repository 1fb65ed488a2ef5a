import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { listLosses } from '@/lib/barrels/list-losses'
import type { LossDto } from '@/lib/barrels/schema'
import { getFiringAir } from '@/lib/conditions/get-firing-air'
import type { FiringAir } from '@/lib/conditions/schema'
import { getFiring } from '@/lib/firings/get-firing'
import { listPhotos } from '@/lib/firings/list-photos'
import type { PhotoDto } from '@/lib/firings/photo-schema'

/** What is kept beside the curve of a firing, and never enters its score. */
export type FiringBeside = {
  photos: PhotoDto[]
  /** Of its piece, whichever firing they came in. */
  losses: LossDto[]
  /** Null before the firing has begun. */
  air: FiringAir | null
}

/** Photos, losses and the air of a firing, for its page. */
export async function getFiringBeside(actor: Actor, input: { id: string }): Promise<FiringBeside> {
  requirePermission(actor, 'firings:follow')
  const firing = await getFiring(actor, input)
  const [photos, losses, air] = await Promise.all([
    listPhotos(actor, input),
    listLosses(actor, { id: firing.piece.id }),
    getFiringAir(actor, input),
  ])
  return {
    photos: photos.items,
    losses: losses.items,
    air,
  }
}
