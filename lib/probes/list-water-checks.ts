import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import type { listWaterChecksQuery, WaterCheckDto } from '@/lib/probes/schema'
import type { WaterCheckRow } from '@/lib/probes/to-water-check'
import { toWaterCheck, waterCheckSelect } from '@/lib/probes/to-water-check'
import { currentSite } from '@/lib/site/current-site'

/** Water checks, newest first. */
export async function listWaterChecks(
  actor: Actor,
  query: z.infer<typeof listWaterChecksQuery>,
): Promise<Page<WaterCheckDto>> {
  requirePermission(actor, 'checks:read')
  const em = await forkEm()
  const { checks } = (await currentSite(em)).rules
  const filters = sqlFilters()
  if (query.source !== undefined) filters.add('lower(w.source) = lower(?)', query.source)
  if (query.cursor !== undefined) {
    filters.add('(w.checked_at, w.id) < (?::timestamptz, ?::uuid)', ...decodeCursor(query.cursor, 2))
  }
  const rows = await queryRows<WaterCheckRow>(
    em,
    `${waterCheckSelect} ${filters.where()} order by w.checked_at desc, w.id desc limit ?`,
    [...filters.parameters, query.limit + 1],
  )
  return toPage(
    rows,
    query.limit,
    (row) => toWaterCheck(row, checks),
    (row) => [new Date(row.checked_at).toISOString(), row.id],
  )
}
