import { getPin } from '@/lib/accounts/get-pin'
import type { PinDto } from '@/lib/accounts/schema'
import type { PersonActor } from '@/lib/auth/actor'
import { isAllowed } from '@/lib/auth/permissions'

/** For one's own account page: how it stands with the PIN, or null for a role that has none. */
export async function getOwnPin(actor: PersonActor): Promise<PinDto | null> {
  return isAllowed(actor, 'firings:run trial') ? getPin(actor) : null
}
