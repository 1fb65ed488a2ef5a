import type { EntityManager } from '@mikro-orm/postgresql'
import { requireCustomer } from '@/lib/accounts/invite-account'
import { keepAnAdministrator } from '@/lib/accounts/keep-an-administrator'
import { lockAccount, readAccount } from '@/lib/accounts/read-account'
import type { AccountDto, UpdateAccountBody } from '@/lib/accounts/schema'
import { endSessions } from '@/lib/accounts/sessions'
import { describeChanges } from '@/lib/audit/describe-changes'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'

/**
 * Changes name, role and customer. Every request reads the role anew, so it counts from the next one on; who changes
 * between staff and customer, or between customers, is signed out as well, since what stands on the screen is not
 * theirs any more.
 * @throws AppError 'stale', 'conflict' for the last administrator, 'invalid' naming `customerId`.
 */
export async function updateAccount(actor: Actor, id: string, input: UpdateAccountBody): Promise<AccountDto> {
  requirePermission(actor, 'accounts:write')
  return inTransaction(async (em) => {
    if (input.role !== 'administrator') await keepAnAdministrator(em, id)
    const before = await lockAccount(em, id, input.revision)
    const customerId = input.customerId ?? null
    const changes = describeChanges(particularsOf(before), { name: input.name, role: input.role, customerId })
    if (Object.keys(changes).length === 0) return before
    await requireCustomer(em, customerId)
    await storeParticulars(em, id, input, customerId)
    const endedSessions = 'customerId' in changes ? await endSessions(em, id) : 0
    await writeAuditEntry(em, actor, 'account.changed', { type: 'account', id }, { changes, endedSessions })
    return readAccount(em, id)
  })
}

function particularsOf({ name, role, customer }: AccountDto) {
  return { name, role, customerId: customer?.id ?? null }
}

async function storeParticulars(
  em: EntityManager,
  id: string,
  input: UpdateAccountBody,
  customerId: string | null,
): Promise<void> {
  await queryRows(
    em,
    `update accounts set name = ?, role = ?, customer_id = ?, updated_at = ?, revision = revision + 1 where id = ?`,
    [input.name, input.role, customerId, now(), id],
  )
}
