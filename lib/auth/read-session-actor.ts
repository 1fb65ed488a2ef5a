import type { PersonActor, Role } from '@/lib/auth/actor'
import { deviceTokenSha256Of } from '@/lib/auth/device-cookie'
import { rolesWith } from '@/lib/auth/permissions'
import { pinGraceS, sessionIdleS, unsealSessionId } from '@/lib/auth/session-cookie'
import { forkEm, queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'

type SessionRow = {
  id: string
  last_seen_at: Date
  account_id: string
  name: string
  role: Role
  customer_id: string | null
  temperature_unit: 'C' | 'F'
  device_id: string | null
  device_name: string | null
  token_sha256: string | null
  idle_minutes: number | null
}

/** How often a session's last use is written down. */
const seenEveryS = 60

/**
 * The person behind a Cookie header, or null. The session row is read every time, so that signing out, closing
 * an account and a change of role take effect with the next request. A session that a PIN opened is good only beside
 * the cookie of its own device.
 */
export async function readSessionActor(cookieHeader: string | null | undefined): Promise<PersonActor | null> {
  const sessionId = await unsealSessionId(cookieHeader)
  if (sessionId === null) return null
  const row = await readSession(sessionId)
  if (row === null) return null
  if (row.device_id !== null && row.token_sha256 !== deviceTokenSha256Of(cookieHeader)) return null
  return toActor(row)
}

/** The same for a session whose cookies were looked at already (sockets ask again every few seconds). */
export async function readActorOfSession(sessionId: string): Promise<PersonActor | null> {
  const row = await readSession(sessionId)
  return row === null ? null : toActor(row)
}

async function readSession(sessionId: string): Promise<SessionRow | null> {
  const em = await forkEm()
  const at = now()
  const [row] = await queryRows<SessionRow>(
    em,
    `select s.id, s.last_seen_at, a.id as account_id, a.name, a.role, a.customer_id, a.temperature_unit,
            s.device_id, d.name as device_name, d.token_sha256, d.idle_minutes
       from sessions s join accounts a on a.id = s.account_id left join devices d on d.id = s.device_id
      where s.id = ? and s.ended_at is null and s.expires_at > ? and a.state = 'active' and d.revoked_at is null`,
    [sessionId, at],
  )
  if (row === undefined || !isInUse(row, at)) return null
  // Who may not fire any more has no business at the fireside's PIN.
  if (row.device_id !== null && !rolesWith('firings:run trial').includes(row.role)) return null
  if (at.getTime() - new Date(row.last_seen_at).getTime() > seenEveryS * 1000) {
    await queryRows(em, 'update sessions set last_seen_at = ? where id = ?', [at, row.id])
  }
  return row
}

/** Not left alone for too long: 12 h, or at a device its own minutes and the grace for a cut network. */
function isInUse(row: SessionRow, at: Date): boolean {
  const idleS = row.idle_minutes === null ? sessionIdleS : row.idle_minutes * 60 + pinGraceS
  return new Date(row.last_seen_at).getTime() > at.getTime() - idleS * 1000
}

function toActor(row: SessionRow): PersonActor {
  return {
    kind: 'person',
    accountId: row.account_id,
    sessionId: row.id,
    name: row.name,
    role: row.role,
    customerId: row.customer_id,
    temperatureUnit: row.temperature_unit,
    ...(row.device_id === null
      ? {}
      : { byPinAt: { deviceId: row.device_id, deviceName: row.device_name ?? '' } }),
  }
}
