import { randomUUID } from 'node:crypto'
import { hashPin } from '@/lib/accounts/pin-hash'
import type { DeviceActor, DeviceKind } from '@/lib/auth/actor'
import { deviceCookieName, makeDeviceToken } from '@/lib/auth/device-cookie'
import { readDeviceById } from '@/lib/auth/read-device-actor'
import { sealSessionCookie } from '@/lib/auth/session-cookie'
import { forkEm, queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'
import type { TestPeople } from '@/tests/support/people'

export type TestDevice = {
  id: string
  name: string
  /** A Cookie header of the device with nobody signed in. */
  cookie: string
  /** For calling verbs directly. */
  actor: DeviceActor
}

/** An enrolled device, made without the verbs. */
export async function createTestDevice(
  people: Pick<TestPeople, 'administrator'>,
  kind: Exclude<DeviceKind, 'hearth'> = 'room',
): Promise<TestDevice> {
  const id = randomUUID()
  const name = `Tablet ${id.slice(0, 8)}`
  const { token, sha256 } = makeDeviceToken()
  await queryRows(
    await forkEm(),
    `insert into devices (id, name, kind, token_sha256, created_at, created_by, enrolled_at)
     values (?, ?, ?, ?, ?, ?, ?)`,
    [id, name, kind, sha256, now(), people.administrator.accountId, now()],
  )
  const actor = await readDeviceById(id)
  if (actor === null) throw new Error('the device is not there')
  return { id, name, cookie: `${deviceCookieName}=${token}`, actor }
}

/** A session that a PIN opened at the device: both cookies. */
export async function createTestPinSession(
  device: TestDevice,
  accountId: string,
): Promise<{ sessionId: string; cookie: string; sessionCookie: string }> {
  const sessionId = randomUUID()
  const at = now()
  await queryRows(
    await forkEm(),
    `insert into sessions (id, account_id, kind, device_id, created_at, last_seen_at, expires_at)
     values (?, ?, 'device', ?, ?, ?, ?)`,
    [sessionId, accountId, device.id, at, at, new Date(at.getTime() + 3600 * 1000)],
  )
  const sessionCookie = (await sealSessionCookie(sessionId)).split(';')[0] ?? ''
  return { sessionId, sessionCookie, cookie: `${device.cookie}; ${sessionCookie}` }
}

/** Gives an account a PIN without its password. */
export async function giveTestPin(accountId: string, pin: string): Promise<void> {
  await queryRows(
    await forkEm(),
    'insert into account_pins (account_id, pin_hash, set_at) values (?, ?, ?)',
    [accountId, await hashPin(accountId, pin), now()],
  )
}
