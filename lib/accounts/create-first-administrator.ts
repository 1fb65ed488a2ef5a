import type { EntityManager } from '@mikro-orm/postgresql'
import { findLink, spendLink } from '@/lib/accounts/account-links'
import { checkNewPassword } from '@/lib/accounts/check-new-password'
import { isAnyAccountThere } from '@/lib/accounts/create-first-administrator-link'
import { readActorInTransaction } from '@/lib/accounts/read-actor'
import type { FirstAdministratorBody } from '@/lib/accounts/schema'
import type { Device, StartedSession } from '@/lib/accounts/sessions'
import { startSession } from '@/lib/accounts/sessions'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import { hashPassword } from '@/lib/auth/password'
import { forkEm, inTransaction, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'

/**
 * Makes the first account, an administrator, by the link that set-up printed, and signs in.
 * @throws AppError 'not found' for a spent link, 'conflict' when an account exists, 'invalid' naming `password`.
 */
export async function createFirstAdministrator(
  input: FirstAdministratorBody,
  device: Device,
): Promise<StartedSession> {
  await findLink(await forkEm(), input.token)
  checkNewPassword(input.password, input)
  const passwordHash = await hashPassword(input.password)
  return inTransaction(async (em) => {
    await spendLink(em, input.token, 'first administrator')
    if (await isAnyAccountThere(em)) {
      throw new AppError('conflict', 'There is an account already. Sign in, or ask your administrator.')
    }
    const accountId = await insertAdministrator(em, input, passwordHash)
    const started = await startSession(em, accountId, device)
    const actor = await readActorInTransaction(em, accountId, started.sessionId)
    await writeAuditEntry(
      em,
      actor,
      'account.first administrator made',
      { type: 'account', id: accountId },
      {
        email: input.email,
        name: input.name,
      },
    )
    return started
  })
}

async function insertAdministrator(
  em: EntityManager,
  input: FirstAdministratorBody,
  passwordHash: string,
): Promise<string> {
  const at = now()
  const [row] = await queryRows<{ id: string }>(
    em,
    `insert into accounts (email, name, role, password_hash, state, created_at, updated_at)
     values (?, ?, 'administrator', ?, 'active', ?, ?) returning id`,
    [input.email, input.name, passwordHash, at, at],
  )
  if (row === undefined) throw new Error('The account was not stored')
  return row.id
}
