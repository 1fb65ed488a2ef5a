import type { GatewayDto } from '@/lib/probes/schema'

export type GatewayRow = {
  id: string
  name: string
  may_replay: boolean
  clock_offset_ms: number | null
  last_seen_at: Date | null
  created_at: Date
  retired_at: Date | null
  spooled_readings: string | null
  spooled_bytes: string | null
  oldest_unsent_at: Date | null
  program_version: string | null
  uptime_s: string | null
  status_at: Date | null
  tokens: string
  probes: string
  refused: string
  lost: string
}

/** One row a gateway; its one parameter is the present, for tokens that are being replaced. */
export const gatewaySelect = `
  select g.id, g.name, g.may_replay, g.clock_offset_ms, g.last_seen_at, g.created_at, g.retired_at, g.spooled_readings,
         g.spooled_bytes, g.oldest_unsent_at, g.program_version, g.uptime_s, g.status_at,
         (select count(*) from gateway_tokens t where t.gateway_id = g.id and t.revoked_at is null
           and (t.expires_at is null or t.expires_at > ?)) as tokens,
         (select count(*) from probes p where p.gateway_id = g.id and p.retired_at is null) as probes,
         (select count(*) from refused_readings r join gateway_boots b on b.no = r.boot_no
           where b.gateway_id = g.id) as refused,
         (select coalesce(sum(l.to_seq - l.from_seq + 1), 0) from gateway_losses l
           join gateway_boots b on b.no = l.boot_no where b.gateway_id = g.id) as lost
    from gateways g`

const isoOrNull = (at: Date | null) => (at === null ? null : new Date(at).toISOString())

export function toGateway(row: GatewayRow): GatewayDto {
  return {
    id: row.id,
    name: row.name,
    mayReplay: row.may_replay,
    clockOffsetMs: row.clock_offset_ms,
    lastSeenAt: isoOrNull(row.last_seen_at),
    tokenCount: Number(row.tokens),
    probeCount: Number(row.probes),
    refusedCount: Number(row.refused),
    lostCount: Number(row.lost),
    retiredAt: isoOrNull(row.retired_at),
    status:
      row.status_at === null
        ? null
        : {
            at: new Date(row.status_at).toISOString(),
            spooledReadings: Number(row.spooled_readings),
            spooledBytes: Number(row.spooled_bytes),
            oldestUnsentAt: isoOrNull(row.oldest_unsent_at),
            programVersion: row.program_version ?? '',
            uptimeS: Number(row.uptime_s),
          },
  }
}
