import { DeviceEntity } from '@/entities/device'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { explainClash } from '@/lib/devices/explain-clash'
import { issueCode } from '@/lib/devices/issue-code'
import { readDevice } from '@/lib/devices/read-device'
import type { DeviceCodeDto, MakeDeviceBody } from '@/lib/devices/schema'
import { now } from '@/lib/runtime'

/**
 * Makes a place for a tablet or wall screen, and the one-time code that is typed at it.
 * @throws AppError 'invalid' naming `name` or `hearthId`
 */
export async function makeDevice(actor: Actor, input: MakeDeviceBody): Promise<DeviceCodeDto> {
  requirePermission(actor, 'devices:write')
  const { accountId } = requirePerson(actor)
  return inTransaction(async (em) => {
    const device = em.create(DeviceEntity, { ...input, createdAt: now(), createdBy: accountId })
    await em.persistAndFlush(device)
    const { code, expiresAt, enrolmentId } = await issueCode(em, device.id, accountId)
    await writeAuditEntry(
      em,
      actor,
      'device.made',
      { type: 'device', id: device.id },
      { ...input, enrolmentId },
    )
    return { device: await readDevice(em, device.id), code, expiresAt }
  }).catch(explainClash)
}
