import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'

/**
 * Holds that somebody active stays administrator when this account ceases to be one. Locks all administrators in one
 * order, so that two who remove each other at once do not both succeed. Call it before the account itself is locked.
 * @throws AppError 'conflict'
 */
export async function keepAnAdministrator(em: EntityManager, withoutId: string): Promise<void> {
  const administrators = await queryRows<{ id: string }>(
    em,
    `select id from accounts where role = 'administrator' and state = 'active' order by id for update`,
  )
  const isOne = administrators.some((row) => row.id === withoutId)
  if (isOne && administrators.length === 1) {
    throw new AppError('conflict', 'This is the last administrator. Make another person administrator first.')
  }
}
