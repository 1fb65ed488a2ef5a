import { describeChanges } from '@/lib/audit/describe-changes'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { explainClash } from '@/lib/devices/explain-clash'
import { lockDevice, readDevice } from '@/lib/devices/read-device'
import type { DeviceDto, UpdateDeviceBody } from '@/lib/devices/schema'

/**
 * Renames a device, moves it to another hearth, or makes it a wall screen (which ends what a PIN opened at it). It
 * counts from its next request on.
 * @throws AppError 'stale', 'not found', 'conflict' for a revoked one, 'invalid' naming `name` or `hearthId`
 */
export async function updateDevice(
  actor: Actor,
  input: UpdateDeviceBody & { id: string },
): Promise<DeviceDto> {
  requirePermission(actor, 'devices:write')
  const { id, revision, name, kind, hearthId, temperatureUnit, idleMinutes } = input
  return inTransaction(async (em) => {
    const before = await lockDevice(em, id, revision)
    const changes = describeChanges(
      {
        name: before.name,
        kind: before.kind,
        hearthId: before.hearth?.id ?? null,
        temperatureUnit: before.temperatureUnit,
        idleMinutes: before.idleMinutes,
      },
      { name, kind, hearthId, temperatureUnit, idleMinutes },
    )
    if (Object.keys(changes).length === 0) return before
    await queryRows(
      em,
      `update devices set name = ?, kind = ?, hearth_id = ?, temperature_unit = ?, idle_minutes = ?,
              revision = revision + 1 where id = ?`,
      [name, kind, hearthId, temperatureUnit, idleMinutes, id],
    )
    await writeAuditEntry(em, actor, 'device.changed', { type: 'device', id }, { changes })
    return readDevice(em, id)
  }).catch(explainClash)
}
