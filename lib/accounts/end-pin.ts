import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'

/** Ends an account's present PIN and what it opened; answers whether there was one, and how many sessions ended. */
export async function endPin(
  em: EntityManager,
  accountId: string,
): Promise<{ hadPin: boolean; endedSessions: number }> {
  const at = now()
  // One after the other: two that set a PIN at once leave one.
  await queryRows(em, 'select 1 from accounts where id = ? for update', [accountId])
  const pins = await queryRows<{ id: string }>(
    em,
    `update account_pins set ended_at = greatest(set_at, ?) where account_id = ? and ended_at is null returning id`,
    [at, accountId],
  )
  const sessions = await queryRows<{ id: string }>(
    em,
    `update sessions set ended_at = ? where account_id = ? and kind = 'device' and ended_at is null returning id`,
    [at, accountId],
  )
  return { hadPin: pins.length > 0, endedSessions: sessions.length }
}
