import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import type { listProbesQuery, ProbeDto } from '@/lib/probes/schema'
import type { ProbeRow } from '@/lib/probes/to-probe'
import { probeSelect, toProbe } from '@/lib/probes/to-probe'

/** Probes in use, by number, each with its newest checks. */
export async function listProbes(
  actor: Actor,
  query: z.infer<typeof listProbesQuery>,
): Promise<Page<ProbeDto>> {
  requirePermission(actor, 'room:read')
  const filters = sqlFilters()
  filters.add('p.retired_at is null')
  if (query.hearthId !== undefined) filters.add('p.hearth_id = ?', query.hearthId)
  if (query.q !== undefined && query.q !== '') filters.addLike(['p.name', 'p.serial', 'g.name'], query.q)
  if (query.cursor !== undefined) filters.add('p.no > ?', decodeCursor(query.cursor, 1)[0] ?? null)
  const rows = await queryRows<ProbeRow>(
    await forkEm(),
    `${probeSelect} ${filters.where()} order by p.no limit ?`,
    [...filters.parameters, query.limit + 1],
  )
  return toPage(rows, query.limit, toProbe, (row) => [row.no])
}
