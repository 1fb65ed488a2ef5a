import type { SessionDto } from '@/lib/accounts/schema'
import type { PersonActor } from '@/lib/auth/actor'
import { requirePasswordSession } from '@/lib/auth/permissions'
import { sessionIdleS } from '@/lib/auth/session-cookie'
import { forkEm, queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'

type SessionRow = {
  id: string
  created_at: Date | string
  last_seen_at: Date | string
  user_agent: string | null
  address: string | null
  device_name: string | null
}

/** One's own open sessions, this one first, then by last use. @throws AppError 'not allowed' by PIN */
export async function listSessions(actor: PersonActor): Promise<{ items: SessionDto[] }> {
  requirePasswordSession(actor)
  const at = now()
  const rows = await queryRows<SessionRow>(
    await forkEm(),
    `select s.id, s.created_at, s.last_seen_at, s.user_agent, s.address, d.name as device_name
       from sessions s left join devices d on d.id = s.device_id
      where s.account_id = ? and s.ended_at is null and s.expires_at > ? and s.last_seen_at > ?
      order by (s.id = ?) desc, s.last_seen_at desc limit 200`,
    [actor.accountId, at, new Date(at.getTime() - sessionIdleS * 1000), actor.sessionId],
  )
  return { items: rows.map((row) => toSession(row, actor.sessionId)) }
}

function toSession(row: SessionRow, thisId: string): SessionDto {
  return {
    id: row.id,
    isThisOne: row.id === thisId,
    startedAt: new Date(row.created_at).toISOString(),
    lastSeenAt: new Date(row.last_seen_at).toISOString(),
    userAgent: row.user_agent,
    address: row.address,
    byPinAt: row.device_name,
  }
}
