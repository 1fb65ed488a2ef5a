import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { PersonActor } from '@/lib/auth/actor'
import { requirePasswordSession } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'

/** Ends one of one's own sessions. @throws AppError 'not found' also for another person's. */
export async function endSession(actor: PersonActor, sessionId: string): Promise<void> {
  requirePasswordSession(actor)
  await inTransaction(async (em) => {
    const ended = await queryRows<{ id: string }>(
      em,
      'update sessions set ended_at = ? where id = ? and account_id = ? and ended_at is null returning id',
      [now(), sessionId, actor.accountId],
    )
    if (ended.length === 0) throw new AppError('not found', 'This session has ended already.')
    await writeAuditEntry(em, actor, 'session.ended', { type: 'account', id: actor.accountId }, { sessionId })
  })
}
