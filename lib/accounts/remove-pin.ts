import { endPin } from '@/lib/accounts/end-pin'
import { readPin } from '@/lib/accounts/read-pin'
import type { PinDto } from '@/lib/accounts/schema'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { PersonActor } from '@/lib/auth/actor'
import { requirePasswordSession, requirePermission } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'

/** Has no PIN any more: one's name goes from the tablets. @throws AppError 'not allowed' by PIN */
export async function removePin(actor: PersonActor): Promise<PinDto> {
  requirePasswordSession(actor)
  requirePermission(actor, 'firings:run trial')
  return inTransaction(async (em) => {
    const { hadPin, endedSessions } = await endPin(em, actor.accountId)
    if (hadPin) {
      await writeAuditEntry(
        em,
        actor,
        'account.pin removed',
        { type: 'account', id: actor.accountId },
        { endedSessions },
      )
    }
    return readPin(em, actor.accountId)
  })
}
