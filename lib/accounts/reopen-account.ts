import { lockAccount, readAccount } from '@/lib/accounts/read-account'
import type { AccountDto, RevisionBody } from '@/lib/accounts/schema'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'

/**
 * Opens a closed account again, with its role and, if it had one, its password; one that never had is invited still.
 * @throws AppError 'stale'
 */
export async function reopenAccount(actor: Actor, id: string, input: RevisionBody): Promise<AccountDto> {
  requirePermission(actor, 'accounts:write')
  return inTransaction(async (em) => {
    const before = await lockAccount(em, id, input.revision)
    if (before.state !== 'closed') return before
    await queryRows(
      em,
      `update accounts set state = case when password_hash is null then 'invited' else 'active' end,
              updated_at = ?, revision = revision + 1 where id = ?`,
      [now(), id],
    )
    await writeAuditEntry(em, actor, 'account.reopened', { type: 'account', id })
    return readAccount(em, id)
  })
}
