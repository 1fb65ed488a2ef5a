import { keepAnAdministrator } from '@/lib/accounts/keep-an-administrator'
import { lockAccount, readAccount } from '@/lib/accounts/read-account'
import type { AccountDto, RevisionBody } from '@/lib/accounts/schema'
import { endSessions } from '@/lib/accounts/sessions'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'

/**
 * Closes an account: its sessions and links end at once, its name stays on what it did.
 * @throws AppError 'conflict' for one's own or the last administrator's, 'stale'.
 */
export async function closeAccount(actor: Actor, id: string, input: RevisionBody): Promise<AccountDto> {
  requirePermission(actor, 'accounts:write')
  if (actor.kind === 'person' && actor.accountId === id) {
    throw new AppError('conflict', 'Nobody closes his own account. Ask another administrator.')
  }
  return inTransaction(async (em) => {
    await keepAnAdministrator(em, id)
    const before = await lockAccount(em, id, input.revision)
    if (before.state === 'closed') return before
    const at = now()
    await queryRows(
      em,
      `update accounts set state = 'closed', updated_at = ?, revision = revision + 1 where id = ?`,
      [at, id],
    )
    await queryRows(em, 'update account_links set used_at = ? where account_id = ? and used_at is null', [
      at,
      id,
    ])
    const endedSessions = await endSessions(em, id)
    await writeAuditEntry(em, actor, 'account.closed', { type: 'account', id }, { endedSessions })
    return readAccount(em, id)
  })
}
