import type { SessionDto } from '@/lib/accounts/schema'
import type { PersonActor } from '@/lib/auth/actor'
import { sessionIdleS } from '@/lib/auth/session-cookie'
import { forkEm, queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'

type SessionRow = {
  id: string
  created_at: Date | string
  last_seen_at: Date | string
  user_agent: string | null
  address: string | null
}

/** One's own open sessions, this one first, then by last use. */
export async function listSessions(actor: PersonActor): Promise<{ items: SessionDto[] }> {
  const at = now()
  const rows = await queryRows<SessionRow>(
    await forkEm(),
    `select id, created_at, last_seen_at, user_agent, address from sessions
      where account_id = ? and ended_at is null and expires_at > ? and last_seen_at > ?
      order by (id = ?) desc, last_seen_at desc limit 200`,
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
  }
}
