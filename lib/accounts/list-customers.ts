import type { CustomerDto, CustomerListQuery } from '@/lib/accounts/schema'
import type { CustomerRow } from '@/lib/accounts/to-customer'
import { toCustomer } from '@/lib/accounts/to-customer'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'

/** Customers by name. */
export async function listCustomers(actor: Actor, query: CustomerListQuery): Promise<Page<CustomerDto>> {
  requirePermission(actor, 'customers:read')
  const filters = sqlFilters()
  if (query.q !== undefined && query.q !== '') filters.addLike(['name', 'contact_email'], query.q)
  if (query.cursor !== undefined) {
    filters.add('(lower(name), id) > (?, ?::uuid)', ...decodeCursor(query.cursor, 2))
  }
  const rows = await queryRows<CustomerRow & { sort_name: string }>(
    await forkEm(),
    `select id, name, contact_email, created_at, lower(name) as sort_name from customers ${filters.where()} order by lower(name), id limit ?`,
    [...filters.parameters, query.limit + 1],
  )
  return toPage(rows, query.limit, toCustomer, (row) => [row.sort_name, row.id])
}
