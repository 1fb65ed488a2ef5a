import type { PersonActor, Role } from '@/lib/auth/actor'
import { sessionIdleS, unsealSessionId } from '@/lib/auth/session-cookie'
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
}

/** How often a session's last use is written down. */
const seenEveryS = 60

/**
 * The person behind a Cookie header, or null. The session row is read every time, so that signing out, closing
 * an account and a change of role take effect with the next request.
 */
export async function readSessionActor(cookieHeader: string | null | undefined): Promise<PersonActor | null> {
  const sessionId = await unsealSessionId(cookieHeader)
  return sessionId === null ? null : readActorOfSession(sessionId)
}

/** The same for a session id that is known already (sockets ask again every few seconds). */
export async function readActorOfSession(sessionId: string): Promise<PersonActor | null> {
  const em = await forkEm()
  const at = now()
  const idleSince = new Date(at.getTime() - sessionIdleS * 1000)
  const [row] = await queryRows<SessionRow>(
    em,
    `select s.id, s.last_seen_at, a.id as account_id, a.name, a.role, a.customer_id, a.temperature_unit
       from sessions s join accounts a on a.id = s.account_id
      where s.id = ? and s.ended_at is null and s.expires_at > ? and s.last_seen_at > ? and a.state = 'active'`,
    [sessionId, at, idleSince],
  )
  if (row === undefined) return null
  if (at.getTime() - new Date(row.last_seen_at).getTime() > seenEveryS * 1000) {
    await queryRows(em, 'update sessions set last_seen_at = ? where id = ?', [at, row.id])
  }
  return {
    kind: 'person',
    accountId: row.account_id,
    sessionId: row.id,
    name: row.name,
    role: row.role,
    customerId: row.customer_id,
    temperatureUnit: row.temperature_unit,
  }
}
