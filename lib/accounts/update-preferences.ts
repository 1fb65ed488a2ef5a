import { readMe } from '@/lib/accounts/get-me'
import type { MeDto, PreferencesBody } from '@/lib/accounts/schema'
import { describeChanges } from '@/lib/audit/describe-changes'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { PersonActor } from '@/lib/auth/actor'
import { requirePasswordSession } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'

/**
 * Changes one's own name or unit of temperature. The name goes into signatures, so its change is kept.
 * @throws AppError 'not allowed' by PIN
 */
export async function updatePreferences(actor: PersonActor, input: PreferencesBody): Promise<MeDto> {
  requirePasswordSession(actor)
  return inTransaction(async (em) => {
    const before = await readMe(em, actor.accountId)
    const name = input.name ?? before.name
    const temperatureUnit = input.temperatureUnit ?? before.temperatureUnit
    const changes = describeChanges(
      { name: before.name, temperatureUnit: before.temperatureUnit },
      { name, temperatureUnit },
    )
    if (Object.keys(changes).length === 0) return before
    await queryRows(
      em,
      'update accounts set name = ?, temperature_unit = ?, updated_at = ?, revision = revision + 1 where id = ?',
      [name, temperatureUnit, now(), actor.accountId],
    )
    await writeAuditEntry(em, actor, 'account.changed', { type: 'account', id: actor.accountId }, { changes })
    return readMe(em, actor.accountId)
  })
}
