import { checkNewPin } from '@/lib/accounts/check-new-pin'
import { endPin } from '@/lib/accounts/end-pin'
import { hashPin, verifyPin } from '@/lib/accounts/pin-hash'
import { readPin } from '@/lib/accounts/read-pin'
import type { PinDto, SetPinBody } from '@/lib/accounts/schema'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { PersonActor } from '@/lib/auth/actor'
import { requirePasswordSession, requirePermission } from '@/lib/auth/permissions'
import { provePassword } from '@/lib/auth/sign'
import { forkEm, inTransaction, queryRows } from '@/lib/db/orm'
import { invalidField } from '@/lib/errors'
import { now } from '@/lib/runtime'

/** A PIN may not be one of so many former ones. */
const formerCount = 5

/**
 * Sets one's own PIN for shared tablets. The password proves who asks; what the former PIN opened ends.
 * @throws AppError 'invalid' naming `password` or `pin`, 'too many', 'not allowed' for a role that does not fire or by PIN
 */
export async function setPin(actor: PersonActor, input: SetPinBody): Promise<PinDto> {
  requirePasswordSession(actor)
  requirePermission(actor, 'firings:run trial')
  const { accountId } = actor
  await provePassword(await forkEm(), accountId, input.password, 'password')
  checkNewPin(input.pin)
  if (await wasUsed(accountId, input.pin)) {
    throw invalidField('pin', `You have, or lately had, this PIN. Take one that is new.`)
  }
  const pinHash = await hashPin(accountId, input.pin)
  return inTransaction(async (em) => {
    const { hadPin, endedSessions } = await endPin(em, accountId)
    await queryRows(em, 'insert into account_pins (account_id, pin_hash, set_at) values (?, ?, ?)', [
      accountId,
      pinHash,
      now(),
    ])
    await writeAuditEntry(
      em,
      actor,
      hadPin ? 'account.pin changed' : 'account.pin set',
      { type: 'account', id: accountId },
      { endedSessions },
    )
    return readPin(em, accountId)
  })
}

async function wasUsed(accountId: string, pin: string): Promise<boolean> {
  const rows = await queryRows<{ pin_hash: string }>(
    await forkEm(),
    'select pin_hash from account_pins where account_id = ? order by set_at desc limit ?',
    [accountId, formerCount],
  )
  for (const row of rows) if (await verifyPin(row.pin_hash, accountId, pin)) return true
  return false
}
