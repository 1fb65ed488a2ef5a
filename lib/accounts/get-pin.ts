import { readPin } from '@/lib/accounts/read-pin'
import type { PinDto } from '@/lib/accounts/schema'
import type { PersonActor } from '@/lib/auth/actor'
import { requirePasswordSession, requirePermission } from '@/lib/auth/permissions'
import { forkEm } from '@/lib/db/orm'

/** How it stands with one's own PIN. @throws AppError 'not allowed' for a role that does not fire, or by PIN */
export async function getPin(actor: PersonActor): Promise<PinDto> {
  requirePasswordSession(actor)
  requirePermission(actor, 'firings:run trial')
  return readPin(await forkEm(), actor.accountId)
}
