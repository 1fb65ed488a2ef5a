import type { EntityManager } from '@mikro-orm/postgresql'
import { wrongPinsAtMost } from '@/lib/accounts/pin-tries'
import type { PinDto } from '@/lib/accounts/schema'
import { queryRows } from '@/lib/db/orm'

/** How it stands with an account's PIN, unauthorised: for verbs that have asked already. */
export async function readPin(em: EntityManager, accountId: string): Promise<PinDto> {
  const [row] = await queryRows<{ set_at: Date | string; wrong_in_a_row: number }>(
    em,
    'select set_at, wrong_in_a_row from account_pins where account_id = ? and ended_at is null',
    [accountId],
  )
  if (row === undefined) return { setAt: null, isLocked: false }
  return { setAt: new Date(row.set_at).toISOString(), isLocked: row.wrong_in_a_row >= wrongPinsAtMost }
}
