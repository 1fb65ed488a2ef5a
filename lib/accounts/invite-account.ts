import type { EntityManager } from '@mikro-orm/postgresql'
import { issueLink } from '@/lib/accounts/account-links'
import { readAccount } from '@/lib/accounts/read-account'
import type { InvitationDto, InviteBody } from '@/lib/accounts/schema'
import { sendInvitation } from '@/lib/accounts/send-invitation'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { violatedConstraint } from '@/lib/db/database-errors'
import { forkEm, inTransaction, queryRows } from '@/lib/db/orm'
import { invalidField } from '@/lib/errors'
import { now } from '@/lib/runtime'

/**
 * Makes an account without a password and mails its person a one-time link.
 * @throws AppError 'invalid' naming `email` when it has an account, or `customerId` when that is unknown.
 */
export async function inviteAccount(actor: Actor, input: InviteBody): Promise<InvitationDto> {
  requirePermission(actor, 'accounts:write')
  const { account, link } = await inTransaction(async (em) => {
    const id = await insertAccount(em, input)
    const issued = await issueLink(em, 'invitation', id)
    const made = await readAccount(em, id)
    await writeAuditEntry(
      em,
      actor,
      'account.invited',
      { type: 'account', id },
      {
        email: made.email,
        name: made.name,
        role: made.role,
        customerId: made.customer?.id ?? null,
      },
    )
    return { account: made, link: issued }
  })
  return sendInvitation(await forkEm(), actor, account, link)
}

async function insertAccount(em: EntityManager, input: InviteBody): Promise<string> {
  await requireCustomer(em, input.customerId ?? null)
  const at = now()
  try {
    const [row] = await queryRows<{ id: string }>(
      em,
      `insert into accounts (email, name, role, customer_id, state, created_at, updated_at)
       values (?, ?, ?, ?, 'invited', ?, ?) returning id`,
      [input.email, input.name, input.role, input.customerId ?? null, at, at],
    )
    if (row === undefined) throw new Error('The account was not stored')
    return row.id
  } catch (error) {
    if (violatedConstraint(error) !== 'accounts_email_key') throw error
    throw invalidField('email', 'This e-mail address has an account already. Look for it in the list.')
  }
}

/** @throws AppError 'invalid' naming `customerId` when there is no such customer. */
export async function requireCustomer(em: EntityManager, customerId: string | null): Promise<void> {
  if (customerId === null) return
  const found = await queryRows(em, 'select 1 from customers where id = ?', [customerId])
  if (found.length === 0)
    throw invalidField('customerId', 'There is no such customer. Choose one from the list.')
}
