import { wrongPinsAtMost } from '@/lib/accounts/pin-tries'
import type { DeviceActor, Role } from '@/lib/auth/actor'
import { rolesWith } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import type { PinPersonDto } from '@/lib/devices/schema'
import { pinPersonSchema } from '@/lib/devices/schema'

type Row = { id: string; name: string; role: Role; is_locked: boolean }

/** Who may sign in at this device by PIN: those who have one and may fire. Nobody at a wall screen. */
export async function listPinPeople(device: DeviceActor): Promise<{ items: PinPersonDto[] }> {
  if (device.place === 'wall screen') return { items: [] }
  const roles = rolesWith('firings:run trial')
  const rows = await queryRows<Row>(
    await forkEm(),
    `select a.id, a.name, a.role, p.wrong_in_a_row >= ? as is_locked
       from accounts a join account_pins p on p.account_id = a.id and p.ended_at is null
      where a.state = 'active' and a.role in (${roles.map(() => '?').join(', ')})
      order by lower(a.name), a.id limit 200`,
    [wrongPinsAtMost, ...roles],
  )
  return {
    items: rows.map((row) =>
      pinPersonSchema.parse({ id: row.id, name: row.name, role: row.role, isLocked: row.is_locked }),
    ),
  }
}
