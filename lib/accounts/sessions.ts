import { randomUUID } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import { pinSessionMaximumS, sealSessionCookie, sessionMaximumS } from '@/lib/auth/session-cookie'
import { queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'

/** What a request tells of the device behind it. */
export type Device = { address: string; userAgent: string | null }

export type StartedSession = { sessionId: string; setCookie: string }

/** Opens a session of an account that has proved itself. */
export async function startSession(
  em: EntityManager,
  accountId: string,
  device: Device,
): Promise<StartedSession> {
  return insertSession(em, accountId, device, { deviceId: null, lengthS: sessionMaximumS })
}

/** Opens a session by PIN: short, and good only beside the cookie of the enrolled device. */
export async function startDeviceSession(
  em: EntityManager,
  accountId: string,
  device: Device,
  deviceId: string,
): Promise<StartedSession> {
  return insertSession(em, accountId, device, { deviceId, lengthS: pinSessionMaximumS })
}

async function insertSession(
  em: EntityManager,
  accountId: string,
  device: Device,
  { deviceId, lengthS }: { deviceId: string | null; lengthS: number },
): Promise<StartedSession> {
  const sessionId = randomUUID()
  const at = now()
  await queryRows(
    em,
    `insert into sessions (id, account_id, kind, device_id, created_at, last_seen_at, expires_at, user_agent, address)
     values (?, ?, ?, ?, ?, ?, ?, ?, ?)`,
    [
      sessionId,
      accountId,
      deviceId === null ? 'person' : 'device',
      deviceId,
      at,
      at,
      new Date(at.getTime() + lengthS * 1000),
      device.userAgent?.slice(0, 400) ?? null,
      device.address,
    ],
  )
  return { sessionId, setCookie: await sealSessionCookie(sessionId) }
}

/** Ends every open session of an account but one; answers how many. */
export async function endSessions(
  em: EntityManager,
  accountId: string,
  exceptId: string | null = null,
): Promise<number> {
  const ended = await queryRows<{ id: string }>(
    em,
    `update sessions set ended_at = ? where account_id = ? and ended_at is null and id is distinct from ?
     returning id`,
    [now(), accountId, exceptId],
  )
  return ended.length
}
