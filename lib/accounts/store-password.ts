import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'

/** Stores a new hash, makes the account active, and spends every link of it that could set another password. */
export async function storePassword(
  em: EntityManager,
  accountId: string,
  passwordHash: string,
): Promise<void> {
  const at = now()
  await queryRows(
    em,
    `update accounts set password_hash = ?, state = 'active', updated_at = ?, revision = revision + 1 where id = ?`,
    [passwordHash, at, accountId],
  )
  await queryRows(em, 'update account_links set used_at = ? where account_id = ? and used_at is null', [
    at,
    accountId,
  ])
}
