import type { EntityManager } from '@mikro-orm/postgresql'
import type { AccountRow } from '@/lib/accounts/to-account'
import { accountSelect, toAccount } from '@/lib/accounts/to-account'
import type { AccountDto } from '@/lib/accounts/schema'
import { queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'

/** @throws AppError 'not found' */
export async function readAccount(em: EntityManager, id: string): Promise<AccountDto> {
  const [row] = await queryRows<AccountRow>(em, `${accountSelect} where a.id = ?`, [now(), id])
  if (row === undefined) throw new AppError('not found', 'There is no such account.')
  return toAccount(row)
}

/**
 * The account, locked until the transaction ends, as it was when the caller edited it.
 * @throws AppError 'not found', or 'stale' with the account as it is now.
 */
export async function lockAccount(em: EntityManager, id: string, revision?: number): Promise<AccountDto> {
  await queryRows(em, 'select 1 from accounts where id = ? for update', [id])
  const account = await readAccount(em, id)
  if (revision === undefined || account.revision === revision) return account
  throw new AppError('stale', 'Somebody changed this account meanwhile. Look at it and save again.', {
    current: account,
  })
}
