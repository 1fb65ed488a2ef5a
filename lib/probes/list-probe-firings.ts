import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import type { listProbeFiringsQuery, ProbeFiringDto } from '@/lib/probes/schema'

type Row = {
  id: string
  firing_id: string
  serial: string
  recipe_name: string
  version_number: number
  role: ProbeFiringDto['role']
  height: string
  side: string
  depth_mm: number
  mounting: string
  from_at: Date
  until_at: Date | null
}

/** The firings that a probe read, newest first, each with the place that it had then. A toaster sees live and own ones. */
export async function listProbeFirings(
  actor: Actor,
  input: z.infer<typeof listProbeFiringsQuery> & { id: string },
): Promise<Page<ProbeFiringDto>> {
  requirePermission(actor, 'room:read')
  requirePermission(actor, 'firings:follow')
  const filters = sqlFilters()
  filters.add('fp.probe_id = ?', input.id)
  if (!isAllowed(actor, 'firings:read all')) {
    filters.add(
      `(f.toaster_id = ? or f.state in ('preheating', 'bending', 'toasting', 'resting'))`,
      actor.kind === 'person' ? actor.accountId : null,
    )
  }
  if (input.cursor !== undefined) {
    filters.add('(fp.from_at, fp.id) < (?::timestamptz, ?::uuid)', ...decodeCursor(input.cursor, 2))
  }
  const rows = await queryRows<Row>(
    await forkEm(),
    `select fp.id, fp.firing_id, p.serial, f.recipe_copy->>'recipeName' as recipe_name,
            (f.recipe_copy->>'versionNumber')::int as version_number, fp.role, fp.height, fp.side, fp.depth_mm,
            fp.mounting, fp.from_at, fp.until_at
       from firing_probes fp join firings f on f.id = fp.firing_id join pieces p on p.id = f.piece_id
      ${filters.where()} order by fp.from_at desc, fp.id desc limit ?`,
    [...filters.parameters, input.limit + 1],
  )
  return toPage(rows, input.limit, toProbeFiring, (row) => [new Date(row.from_at).toISOString(), row.id])
}

function toProbeFiring(row: Row): ProbeFiringDto {
  return {
    firingId: row.firing_id,
    serial: row.serial,
    recipeName: row.recipe_name,
    versionNumber: row.version_number,
    role: row.role,
    place: { height: row.height, side: row.side, depthMm: row.depth_mm, mounting: row.mounting },
    fromAt: new Date(row.from_at).toISOString(),
    untilAt: row.until_at === null ? null : new Date(row.until_at).toISOString(),
  }
}
