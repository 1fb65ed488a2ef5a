import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import type { GatewayDto } from '@/lib/probes/schema'

type GatewayRow = {
  id: string
  name: string
  may_replay: boolean
  clock_offset_ms: number | null
  last_seen_at: Date | null
  tokens: string
  probes: string
  refused: string
}

/** All gateways by name, with what each has sent and had refused. */
export async function listGateways(actor: Actor): Promise<{ items: GatewayDto[]; nextCursor: null }> {
  requirePermission(actor, 'room:read')
  const rows = await queryRows<GatewayRow>(
    await forkEm(),
    `select g.id, g.name, g.may_replay, g.clock_offset_ms, g.last_seen_at,
            (select count(*) from gateway_tokens t where t.gateway_id = g.id and t.revoked_at is null) as tokens,
            (select count(*) from probes p where p.gateway_id = g.id and p.retired_at is null) as probes,
            (select count(*) from refused_readings r join gateway_boots b on b.no = r.boot_no
              where b.gateway_id = g.id) as refused
       from gateways g order by g.name`,
  )
  return {
    items: rows.map((row) => ({
      id: row.id,
      name: row.name,
      mayReplay: row.may_replay,
      clockOffsetMs: row.clock_offset_ms,
      lastSeenAt: row.last_seen_at === null ? null : new Date(row.last_seen_at).toISOString(),
      tokenCount: Number(row.tokens),
      probeCount: Number(row.probes),
      refusedCount: Number(row.refused),
    })),
    nextCursor: null,
  }
}
