import type { SignOutQuery } from '@/lib/accounts/schema'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { PersonActor } from '@/lib/auth/actor'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'

/**
 * Ends this session; its cookie opens nothing from now on, wherever it was copied to. A shared tablet says `why` when
 * nobody touched it and it did so by itself.
 */
export async function signOut(actor: PersonActor, input: SignOutQuery = {}): Promise<void> {
  await inTransaction(async (em) => {
    await queryRows(em, 'update sessions set ended_at = ? where id = ? and ended_at is null', [
      now(),
      actor.sessionId,
    ])
    await writeAuditEntry(em, actor, 'session.ended', { type: 'account', id: actor.accountId }, input)
  })
}
