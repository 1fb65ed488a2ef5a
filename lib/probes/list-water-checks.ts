import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import type { listWaterChecksQuery, WaterCheckDto } from '@/lib/probes/schema'
import { now } from '@/lib/runtime'

type WaterCheckRow = {
  id: string
  source: string
  tca_ng_per_l: number
  free_chlorine_mg_per_l: number
  checked_at: Date
  due_at: Date
  checked_by: string
}

function toWaterCheck(row: WaterCheckRow): WaterCheckDto {
  return {
    id: row.id,
    source: row.source,
    tcaNgPerL: row.tca_ng_per_l,
    freeChlorineMgPerL: row.free_chlorine_mg_per_l,
    checkedAt: new Date(row.checked_at).toISOString(),
    dueAt: new Date(row.due_at).toISOString(),
    checkedBy: row.checked_by,
    isInDate: new Date(row.due_at) > now(),
  }
}

/** Water checks, newest first. */
export async function listWaterChecks(
  actor: Actor,
  query: z.infer<typeof listWaterChecksQuery>,
): Promise<Page<WaterCheckDto>> {
  requirePermission(actor, 'checks:read')
  const [at, id] = query.cursor === undefined ? [null, null] : decodeCursor(query.cursor, 2)
  const rows = await queryRows<WaterCheckRow>(
    await forkEm(),
    `select w.id, w.source, w.tca_ng_per_l, w.free_chlorine_mg_per_l, w.checked_at, w.due_at, a.name as checked_by
       from water_checks w join accounts a on a.id = w.account_id
      where ?::timestamptz is null or (w.checked_at, w.id) < (?::timestamptz, ?::uuid)
      order by w.checked_at desc, w.id desc limit ?`,
    [at, at, id, query.limit + 1],
  )
  return toPage(rows, query.limit, toWaterCheck, (row) => [new Date(row.checked_at).toISOString(), row.id])
}
