import { rolesWith } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'

/** Wrong PINs in a row, at whatever device and however slowly, after which only the password opens it again. */
export const wrongPinsAtMost = 10

export type PinTry = {
  /** Null when there is no PIN that may be tried. */
  pinHash: string | null
  /** It was locked before this try. */
  isLocked: boolean
  /** How often it may still be wrong after this try. */
  triesLeft: number
}

/** Counts a try before the PIN is looked at, so that many at once gain nothing. One statement, whoever is asked for. */
export async function takePinTry(accountId: string): Promise<PinTry> {
  const roles = rolesWith('firings:run trial')
  const rows = await inTransaction((em) =>
    queryRows<{ pin_hash: string | null; wrong: number | null; is_locked: boolean }>(
      em,
      `with counted as (
         update account_pins p set wrong_in_a_row = p.wrong_in_a_row + 1 from accounts a
          where a.id = p.account_id and p.account_id = ? and p.ended_at is null and p.wrong_in_a_row < ?
            and a.state = 'active' and a.role in (${roles.map(() => '?').join(', ')})
         returning p.pin_hash, p.wrong_in_a_row)
       select (select pin_hash from counted) as pin_hash, (select wrong_in_a_row from counted) as wrong,
              exists (select from account_pins where account_id = ? and ended_at is null and wrong_in_a_row >= ?)
                as is_locked`,
      [accountId, wrongPinsAtMost, ...roles, accountId, wrongPinsAtMost],
    ),
  )
  const [row] = rows
  return {
    pinHash: row?.pin_hash ?? null,
    isLocked: row?.is_locked === true,
    triesLeft: wrongPinsAtMost - (row?.wrong ?? 0),
  }
}

/** The person proved himself, by the PIN or by the password: the count begins anew. */
export async function forgiveWrongPins(accountId: string): Promise<void> {
  await inTransaction((em) =>
    queryRows(
      em,
      `update account_pins set wrong_in_a_row = 0
        where account_id = ? and ended_at is null and wrong_in_a_row > 0`,
      [accountId],
    ),
  )
}
