import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { issueCode } from '@/lib/devices/issue-code'
import { lockDevice, readDevice } from '@/lib/devices/read-device'
import type { DeviceCodeDto } from '@/lib/devices/schema'

/**
 * A new code for a device: the former tablet there serves until it is typed at the next.
 * @throws AppError 'not found', 'conflict' for a revoked one
 */
export async function makeDeviceCode(actor: Actor, input: { id: string }): Promise<DeviceCodeDto> {
  requirePermission(actor, 'devices:write')
  const { accountId } = requirePerson(actor)
  return inTransaction(async (em) => {
    const { name } = await lockDevice(em, input.id)
    const { code, expiresAt, enrolmentId } = await issueCode(em, input.id, accountId)
    await writeAuditEntry(
      em,
      actor,
      'device.code made',
      { type: 'device', id: input.id },
      { name, enrolmentId },
    )
    return { device: await readDevice(em, input.id), code, expiresAt }
  })
}
