import { LockMode } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import { DeviceEntity } from '@/entities/device'
import { DeviceEnrolmentEntity } from '@/entities/device-enrolment'
import type { Device } from '@/lib/accounts/sessions'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import { systemActor } from '@/lib/auth/actor'
import { deviceCookie, makeDeviceToken } from '@/lib/auth/device-cookie'
import { countDeviceEnrolmentTry, forgiveTry } from '@/lib/auth/throttle'
import { inTransaction } from '@/lib/db/orm'
import type { EnrolDeviceBody, EnrolledDeviceDto } from '@/lib/devices/schema'
import { invalidField } from '@/lib/errors'
import { codeSha256, readCode } from '@/lib/ingest/enrolment-code'
import { log } from '@/lib/log'
import { now } from '@/lib/runtime'

export type EnrolledDevice = { device: EnrolledDeviceDto; setCookie: string }

/**
 * Makes the browser that asks the tablet or screen of a code. A tablet that had this place before is out from then on.
 * @throws AppError 'invalid' alike for a code that never was, is spent or has run out; 'too many'
 */
export async function enrolDevice(input: EnrolDeviceBody, from: Device): Promise<EnrolledDevice> {
  const tried = await countDeviceEnrolmentTry(from.address)
  const code = readCode(input.code)
  if (code === null) {
    throw invalidField(
      'code',
      'This is not a code from here: look at it letter by letter. It has 12 letters and figures.',
    )
  }
  const enrolled = await inTransaction((em) => redeem(em, code, from))
  if (enrolled === null) {
    log().warn({ address: from.address }, 'a device came with a code that is not good')
    throw invalidField(
      'code',
      'This code is not good any more: it is typed once, within 30 minutes. Ask for a new one.',
    )
  }
  await forgiveTry(tried)
  return enrolled
}

async function redeem(em: EntityManager, code: string, from: Device): Promise<EnrolledDevice | null> {
  const at = now()
  const row = await em.findOne(
    DeviceEnrolmentEntity,
    { codeSha256: codeSha256(code) },
    { lockMode: LockMode.PESSIMISTIC_WRITE },
  )
  if (row === null || row.usedAt || row.cancelledAt || row.expiresAt <= at) return null
  const device = await em.findOne(
    DeviceEntity,
    { id: row.deviceId },
    { lockMode: LockMode.PESSIMISTIC_WRITE },
  )
  if (device === null || device.revokedAt) return null
  const isReplacing = Boolean(device.tokenSha256)
  const { token, sha256 } = makeDeviceToken()
  em.assign(row, { usedAt: at, usedFrom: from.address.slice(0, 64) })
  em.assign(device, {
    tokenSha256: sha256,
    enrolledAt: at,
    lastSeenAt: at,
    userAgent: from.userAgent?.slice(0, 400) ?? null,
    revision: device.revision + 1,
  })
  await writeAuditEntry(
    em,
    systemActor('enrolment of a device'),
    'device.enrolled',
    { type: 'device', id: device.id },
    { name: device.name, enrolmentId: row.id, address: from.address, isReplacing },
  )
  return { device: { name: device.name, kind: device.kind }, setCookie: deviceCookie(token) }
}
