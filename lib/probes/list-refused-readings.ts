import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import type { listRefusedQuery, RefusedReadingDto } from '@/lib/probes/schema'

type Row = {
  boot_no: number
  seq: string
  reason: string
  received_at: Date
  at: string | null
  probe_id: string | null
  probe_name: string | null
}

/** What a gateway sent and the server would not keep as a measurement, newest first. */
export async function listRefusedReadings(
  actor: Actor,
  input: z.infer<typeof listRefusedQuery> & { gatewayId: string },
): Promise<Page<RefusedReadingDto>> {
  requirePermission(actor, 'room:read')
  const filters = sqlFilters()
  filters.add('b.gateway_id = ?', input.gatewayId)
  if (input.reason !== undefined) filters.add('r.reason = ?', input.reason)
  if (input.cursor !== undefined) {
    filters.add(
      '(r.received_at, r.boot_no, r.seq) < (?::timestamptz, ?::integer, ?::bigint)',
      ...decodeCursor(input.cursor, 3),
    )
  }
  const rows = await queryRows<Row>(
    await forkEm(),
    `select r.boot_no, r.seq, r.reason, r.received_at, left(r.reading->>'at', 40) as at, p.id as probe_id,
            p.name as probe_name
       from refused_readings r
       join gateway_boots b on b.no = r.boot_no
       left join probes p on p.id::text = lower(r.reading->>'probeId')
      ${filters.where()} order by r.received_at desc, r.boot_no desc, r.seq desc limit ?`,
    [...filters.parameters, input.limit + 1],
  )
  return toPage(rows, input.limit, toRefused, (row) => [
    new Date(row.received_at).toISOString(),
    row.boot_no,
    Number(row.seq),
  ])
}

function toRefused(row: Row): RefusedReadingDto {
  return {
    boot: row.boot_no,
    seq: Number(row.seq),
    reason: row.reason,
    receivedAt: new Date(row.received_at).toISOString(),
    at: row.at,
    probe:
      row.probe_id === null || row.probe_name === null ? null : { id: row.probe_id, name: row.probe_name },
  }
}
