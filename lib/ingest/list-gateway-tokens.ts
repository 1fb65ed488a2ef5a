import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import type { TokenList } from '@/lib/ingest/schema'

type TokenRow = {
  id: string
  created_at: Date
  created_by: string | null
  last_used_at: Date | null
  revoked_at: Date | null
  expires_at: Date | null
}

/** A gateway's device tokens, newest first; never the tokens themselves. */
export async function listGatewayTokens(actor: Actor, input: { gatewayId: string }): Promise<TokenList> {
  requirePermission(actor, 'room:write')
  const em = await forkEm()
  const [gateway] = await queryRows(em, 'select id from gateways where id = ?', [input.gatewayId])
  if (gateway === undefined) throw new AppError('not found', 'There is no such gateway.')
  const rows = await queryRows<TokenRow>(
    em,
    `select t.id, t.created_at, a.name as created_by, t.last_used_at, t.revoked_at, t.expires_at
       from gateway_tokens t left join accounts a on a.id = t.created_by
      where t.gateway_id = ? order by t.created_at desc, t.id`,
    [input.gatewayId],
  )
  return {
    items: rows.map((row) => ({
      id: row.id,
      createdAt: new Date(row.created_at).toISOString(),
      createdBy: row.created_by,
      lastUsedAt: isoOrNull(row.last_used_at),
      revokedAt: isoOrNull(row.revoked_at),
      expiresAt: isoOrNull(row.expires_at),
    })),
    nextCursor: null,
  }
}

function isoOrNull(at: Date | null): string | null {
  return at === null ? null : new Date(at).toISOString()
}
