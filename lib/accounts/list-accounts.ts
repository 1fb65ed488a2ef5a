import type { AccountDto, AccountListQuery } from '@/lib/accounts/schema'
import type { AccountRow } from '@/lib/accounts/to-account'
import { accountSelect, toAccount } from '@/lib/accounts/to-account'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import { now } from '@/lib/runtime'

/** Accounts by name. */
export async function listAccounts(actor: Actor, query: AccountListQuery): Promise<Page<AccountDto>> {
  requirePermission(actor, 'accounts:read')
  const filters = sqlFilters()
  if (query.q !== undefined && query.q !== '') filters.addLike(['a.name', 'a.email', 'c.name'], query.q)
  if (query.role !== undefined) filters.add('a.role = ?', query.role)
  if (query.state !== undefined) filters.add('a.state = ?', query.state)
  if (query.cursor !== undefined) {
    filters.add('(lower(a.name), a.id) > (?, ?::uuid)', ...decodeCursor(query.cursor, 2))
  }
  const rows = await queryRows<AccountRow>(
    await forkEm(),
    `${accountSelect} ${filters.where()} order by lower(a.name), a.id limit ?`,
    [now(), ...filters.parameters, query.limit + 1],
  )
  return toPage(rows, query.limit, toAccount, (row) => [row.sort_name, row.id])
}
