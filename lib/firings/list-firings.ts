import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import type { FiringSummary, listFiringsQuery } from '@/lib/firings/schema'
import type { FiringRow } from '@/lib/firings/to-firing'
import { firingSelect, toFiringSummary } from '@/lib/firings/to-firing'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import { currentSite } from '@/lib/site/current-site'

const started = 'coalesce(f.toast_at, f.preheat_at, f.queued_at)'
const liveStates = `f.state in ('preheating', 'bending', 'toasting', 'resting')`

type Query = z.infer<typeof listFiringsQuery>
type Filters = ReturnType<typeof sqlFilters>

function addState(filters: Filters, state: Query['state']): void {
  if (state === 'live') filters.add(liveStates)
  else if (state === 'fired') filters.add(`f.state in ('finished', 'abandoned')`)
  else if (state !== 'all') filters.add('f.state = ?', state)
}

function addEquals(filters: Filters, query: Query): void {
  const equals: [string, string | number | undefined][] = [
    ['s.verdict', query.verdict],
    ['w.number', query.hearth],
    ['r.id', query.recipeId],
    ['v.id', query.versionId],
    ['b.id', query.batchId],
    ['p.id', query.pieceId],
    ['f.toaster_id', query.toasterId],
  ]
  for (const [column, value] of equals) if (value !== undefined) filters.add(`${column} = ?`, value)
}

/** Firings, the newest start first. A toaster sees what is live and their own. */
export async function listFirings(actor: Actor, query: Query): Promise<Page<FiringSummary>> {
  requirePermission(actor, 'firings:follow')
  const em = await forkEm()
  const filters = sqlFilters()
  addState(filters, query.state)
  addEquals(filters, query)
  if (!isAllowed(actor, 'firings:read all')) {
    filters.add(
      `(${liveStates} or f.state = 'queued' or f.toaster_id = ?)`,
      actor.kind === 'person' ? actor.accountId : null,
    )
  }
  if (query.q !== undefined && query.q !== '') {
    filters.addLike(['p.serial', 'r.name', 'b.number::text', 'b.wood_lot', 'c.name', 'a.name'], query.q)
  }
  if (query.from !== undefined || query.to !== undefined) {
    const { timeZone } = await currentSite(em)
    if (query.from !== undefined)
      filters.add(`${started} >= ?::date::timestamp at time zone ?`, query.from, timeZone)
    if (query.to !== undefined)
      filters.add(`${started} < (?::date + 1)::timestamp at time zone ?`, query.to, timeZone)
  }
  if (query.cursor !== undefined) {
    const [at, id] = decodeCursor(query.cursor, 2)
    filters.add(`(${started}, f.id) < (?::timestamptz, ?::uuid)`, at, id)
  }
  const rows = await queryRows<FiringRow>(
    em,
    `${firingSelect} ${filters.where()} order by ${started} desc, f.id desc limit ?`,
    [...filters.parameters, query.limit + 1],
  )
  return toPage(rows, query.limit, toFiringSummary, (row) => [new Date(row.started_at).toISOString(), row.id])
}
