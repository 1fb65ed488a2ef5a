import type { EntityManager } from '@mikro-orm/postgresql'
import { DeviceEnrolmentEntity } from '@/entities/device-enrolment'
import { queryRows } from '@/lib/db/orm'
import { codeSha256, makeCode } from '@/lib/ingest/enrolment-code'
import { now } from '@/lib/runtime'

const validMs = 30 * 60_000

/** A fresh code for a device: one at a time, 30 minutes, kept as a hash. */
export async function issueCode(
  em: EntityManager,
  deviceId: string,
  accountId: string,
): Promise<{ code: string; expiresAt: string; enrolmentId: string }> {
  const at = now()
  await queryRows(
    em,
    'update device_enrolments set cancelled_at = ? where device_id = ? and used_at is null and cancelled_at is null',
    [at, deviceId],
  )
  const code = makeCode()
  const expiresAt = new Date(at.getTime() + validMs)
  const row = em.create(DeviceEnrolmentEntity, {
    deviceId,
    codeSha256: codeSha256(code),
    createdAt: at,
    createdBy: accountId,
    expiresAt,
  })
  await em.persistAndFlush(row)
  return { code, expiresAt: expiresAt.toISOString(), enrolmentId: row.id }
}
