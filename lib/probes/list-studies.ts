import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import type { listStudiesQuery, StudyDto } from '@/lib/probes/study-schema'
import type { StudyRow } from '@/lib/probes/to-study'
import { studySelect, toStudy } from '@/lib/probes/to-study'
import { currentSite } from '@/lib/site/current-site'

/** Studies of repeat placements, newest first. */
export async function listStudies(
  actor: Actor,
  query: z.infer<typeof listStudiesQuery>,
): Promise<Page<StudyDto>> {
  requirePermission(actor, 'checks:read')
  const em = await forkEm()
  const { dose } = (await currentSite(em)).rules
  const filters = sqlFilters()
  if (query.state !== undefined) filters.add('s.state = ?', query.state)
  if (query.cursor !== undefined) filters.add('s.no < ?', decodeCursor(query.cursor, 1)[0] ?? null)
  const rows = await queryRows<StudyRow>(em, `${studySelect} ${filters.where()} order by s.no desc limit ?`, [
    ...filters.parameters,
    query.limit + 1,
  ])
  return toPage(
    rows,
    query.limit,
    (row) => toStudy(row, dose),
    (row) => [row.no],
  )
}
