import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import type { DeclaredLossDto, listLossesQuery } from '@/lib/probes/schema'

type Row = { boot_no: number; from_seq: string; to_seq: string; reason: string; declared_at: Date }

/** The numbers that a gateway used and said it will never send, newest first. */
export async function listDeclaredLosses(
  actor: Actor,
  input: z.infer<typeof listLossesQuery> & { gatewayId: string },
): Promise<Page<DeclaredLossDto>> {
  requirePermission(actor, 'room:read')
  const filters = sqlFilters()
  filters.add('b.gateway_id = ?', input.gatewayId)
  if (input.cursor !== undefined) {
    filters.add(
      '(l.declared_at, l.boot_no, l.from_seq, l.to_seq) < (?::timestamptz, ?::integer, ?::bigint, ?::bigint)',
      ...decodeCursor(input.cursor, 4),
    )
  }
  const rows = await queryRows<Row>(
    await forkEm(),
    `select l.boot_no, l.from_seq, l.to_seq, l.reason, l.declared_at
       from gateway_losses l join gateway_boots b on b.no = l.boot_no
      ${filters.where()} order by l.declared_at desc, l.boot_no desc, l.from_seq desc, l.to_seq desc limit ?`,
    [...filters.parameters, input.limit + 1],
  )
  return toPage(rows, input.limit, toLoss, (row) => [
    new Date(row.declared_at).toISOString(),
    row.boot_no,
    Number(row.from_seq),
    Number(row.to_seq),
  ])
}

function toLoss(row: Row): DeclaredLossDto {
  const [fromSeq, toSeq] = [Number(row.from_seq), Number(row.to_seq)]
  return {
    boot: row.boot_no,
    fromSeq,
    toSeq,
    count: toSeq - fromSeq + 1,
    reason: row.reason,
    declaredAt: new Date(row.declared_at).toISOString(),
  }
}
