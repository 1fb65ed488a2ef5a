import type { EntityManager } from '@mikro-orm/postgresql'
import { readActorInTransaction } from '@/lib/accounts/read-actor'
import { verifyPin } from '@/lib/accounts/pin-hash'
import { forgiveWrongPins, takePinTry } from '@/lib/accounts/pin-tries'
import type { Device, StartedSession } from '@/lib/accounts/sessions'
import { startDeviceSession } from '@/lib/accounts/sessions'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { DeviceActor } from '@/lib/auth/actor'
import { unsealSessionId } from '@/lib/auth/session-cookie'
import { countPinTry, forgiveTry } from '@/lib/auth/throttle'
import { inTransaction, queryRows } from '@/lib/db/orm'
import type { PinSignInBody } from '@/lib/devices/schema'
import { AppError, invalidField } from '@/lib/errors'
import { log } from '@/lib/log'
import { now } from '@/lib/runtime'

/**
 * Signs a person in at an enrolled device by PIN. Whoever was signed in there is not any more. A name without a PIN,
 * one that may not fire, a wrong PIN and a locked one take the same path: one count each, one argon2 computation.
 * @throws AppError 'invalid' naming `pin`; 'too many' with the seconds to wait, or without when only the password
 *   helps; 'not allowed' at a wall screen
 */
export async function signInByPin(
  device: DeviceActor,
  input: PinSignInBody,
  from: Device,
  cookieHeader: string | null,
): Promise<StartedSession> {
  if (device.place === 'wall screen') {
    throw new AppError('not allowed', 'Nobody signs in at a wall screen. Use a tablet.')
  }
  const tried = await countPinTry(device.deviceId, input.accountId)
  const { pinHash, isLocked, triesLeft } = await takePinTry(input.accountId)
  const isRight = await verifyPin(pinHash, input.accountId, input.pin)
  if (isLocked) throw locked()
  if (!isRight) {
    log().warn({ device: device.deviceId, address: from.address }, 'a PIN was wrong')
    if (pinHash !== null && triesLeft <= 0) await noteLock(device, input.accountId)
    throw triesLeft <= 0 ? locked() : invalidField('pin', 'This PIN is not right. Type it again.')
  }
  await forgiveTry(tried)
  await forgiveWrongPins(input.accountId)
  const formerId = await unsealSessionId(cookieHeader)
  return inTransaction((em) => openSession(em, device, input.accountId, from, formerId))
}

function locked(): AppError {
  return new AppError(
    'too many',
    'Too many wrong PINs in a row. Sign in with your password; that opens the PIN again.',
  )
}

async function noteLock(device: DeviceActor, accountId: string): Promise<void> {
  await inTransaction((em) =>
    writeAuditEntry(
      em,
      device,
      'account.pin locked',
      { type: 'account', id: accountId },
      { deviceId: device.deviceId },
    ),
  )
}

async function openSession(
  em: EntityManager,
  device: DeviceActor,
  accountId: string,
  from: Device,
  formerId: string | null,
): Promise<StartedSession> {
  const at = now()
  // Whatever was open in this browser, and whatever a PIN opened at this device.
  const former = await queryRows<{ account_id: string }>(
    em,
    `update sessions set ended_at = ? where (id = ? or device_id = ?) and ended_at is null returning account_id`,
    [at, formerId, device.deviceId],
  )
  const started = await startDeviceSession(em, accountId, from, device.deviceId)
  const person = await readActorInTransaction(em, accountId, started.sessionId)
  await writeAuditEntry(
    em,
    { ...person, byPinAt: { deviceId: device.deviceId, deviceName: device.name } },
    'session.started',
    { type: 'account', id: accountId },
    { address: from.address, deviceId: device.deviceId, endedSessions: former.length },
  )
  return started
}
