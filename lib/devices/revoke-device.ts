import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { lockDevice, readDevice } from '@/lib/devices/read-device'
import type { DeviceDto } from '@/lib/devices/schema'
import { now } from '@/lib/runtime'

/**
 * Revokes a device for good: its cookie opens nothing from the next request on, its sockets end within 5 s, its open
 * code and what a PIN opened at it end at once.
 * @throws AppError 'not found', 'conflict' when it is revoked already
 */
export async function revokeDevice(actor: Actor, input: { id: string }): Promise<DeviceDto> {
  requirePermission(actor, 'devices:write')
  const { accountId } = requirePerson(actor)
  return inTransaction(async (em) => {
    const { name } = await lockDevice(em, input.id)
    const at = now()
    await queryRows(
      em,
      'update device_enrolments set cancelled_at = ? where device_id = ? and used_at is null and cancelled_at is null',
      [at, input.id],
    )
    await queryRows(
      em,
      'update devices set revoked_at = ?, revoked_by = ?, revision = revision + 1 where id = ?',
      [at, accountId, input.id],
    )
    await writeAuditEntry(em, actor, 'device.revoked', { type: 'device', id: input.id }, { name })
    return readDevice(em, input.id)
  })
}
