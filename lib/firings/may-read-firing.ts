import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { AppError } from '@/lib/errors'
import { isLive } from '@/lib/firings/firing-states'
import type { FiringSummary } from '@/lib/firings/schema'

/**
 * Staff who compare read every firing; a toaster reads what stands in the room, what waits, and their own; an enrolled
 * device with nobody signed in what stands in the room and what waits.
 * @throws AppError 'not allowed' without the permission, 'not found' for another toaster's finished firing
 */
export function requireReadableFiring(actor: Actor, firing: Pick<FiringSummary, 'state' | 'toaster'>): void {
  requirePermission(actor, 'firings:follow')
  if (isAllowed(actor, 'firings:read all') || isLive(firing.state) || firing.state === 'queued') return
  if (actor.kind === 'person' && firing.toaster?.id === actor.accountId) return
  throw new AppError('not found', 'There is no such firing among yours.')
}
