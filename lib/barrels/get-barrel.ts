import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { listLosses } from '@/lib/barrels/list-losses'
import type { LossDto } from '@/lib/barrels/schema'
import { getPiece } from '@/lib/batches/get-piece'
import type { PieceDto } from '@/lib/batches/schema'
import { listFirings } from '@/lib/firings/list-firings'
import type { FiringSummary } from '@/lib/firings/schema'
import { currentSite } from '@/lib/site/current-site'

export type BarrelPicture = {
  piece: PieceDto
  /** Oldest first; a toaster gets those that live and their own. */
  firings: FiringSummary[]
  losses: LossDto[]
  timeZone: string
  mayChange: boolean
}

/** One barrel or head with its firings and its losses. For staff. */
export async function getBarrel(actor: Actor, input: { id: string }): Promise<BarrelPicture> {
  requirePermission(actor, 'batches:read all')
  const [piece, firings, losses, site] = await Promise.all([
    getPiece(actor, input),
    listFirings(actor, { pieceId: input.id, state: 'all', limit: 50 }),
    listLosses(actor, input),
    currentSite(),
  ])
  return {
    piece,
    firings: firings.items.filter((firing) => firing.state !== 'queued').reverse(),
    losses: losses.items,
    timeZone: site.timeZone,
    mayChange: isAllowed(actor, 'firings:run'),
  }
}
