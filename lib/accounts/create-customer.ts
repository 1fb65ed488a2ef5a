import type { CustomerBody, CustomerDto } from '@/lib/accounts/schema'
import type { CustomerRow } from '@/lib/accounts/to-customer'
import { toCustomer } from '@/lib/accounts/to-customer'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { violatedConstraint } from '@/lib/db/database-errors'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { invalidField } from '@/lib/errors'
import { now } from '@/lib/runtime'

/** Adds a customer. @throws AppError 'invalid' naming `name` when there is one of that name. */
export async function createCustomer(actor: Actor, input: CustomerBody): Promise<CustomerDto> {
  requirePermission(actor, 'customers:write')
  try {
    return await inTransaction(async (em) => {
      const [row] = await queryRows<CustomerRow>(
        em,
        `insert into customers (name, contact_email, created_at) values (?, ?, ?)
         returning id, name, contact_email, created_at`,
        [input.name, input.contactEmail ?? null, now()],
      )
      if (row === undefined) throw new Error('The customer was not stored')
      const customer = toCustomer(row)
      await writeAuditEntry(
        em,
        actor,
        'customer.created',
        { type: 'customer', id: customer.id },
        {
          name: customer.name,
        },
      )
      return customer
    })
  } catch (error) {
    if (violatedConstraint(error) !== 'customers_name_key') throw error
    throw invalidField('name', 'There is a customer of this name already.')
  }
}
