import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import type { listProbesQuery, ProbeDto } from '@/lib/probes/schema'
import type { ProbeRow } from '@/lib/probes/to-probe'
import { probeDueSql, probeSelect, toProbe } from '@/lib/probes/to-probe'
import { now } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

type Query = z.infer<typeof listProbesQuery>
type Filters = ReturnType<typeof sqlFilters>

/** What a list can be ordered by: an expression that is never null, and its type. What was never checked comes first. */
const sortKeys = {
  no: { key: 'p.no', type: 'integer' },
  name: { key: 'lower(p.name)', type: 'text' },
  hearth: { key: 'coalesce(h.number, 1000)', type: 'integer' },
  due: { key: `coalesce(${probeDueSql}, '1970-01-01Z'::timestamptz)`, type: 'timestamptz' },
} as const

function sortOf(sort: Query['sort']) {
  const isDown = sort?.startsWith('-') === true
  const name = (sort ?? 'no').replace('-', '')
  const key = name === 'name' || name === 'hearth' || name === 'due' ? sortKeys[name] : sortKeys.no
  return { ...key, way: isDown ? ('desc' as const) : ('asc' as const) }
}

function addFilters(filters: Filters, query: Query, dueSoonDays: number): void {
  const state = query.state ?? 'in use'
  if (state !== 'all') filters.add(`p.retired_at is ${state === 'retired' ? 'not null' : 'null'}`)
  if (query.hearthId !== undefined) filters.add('p.hearth_id = ?', query.hearthId)
  if (query.gatewayId !== undefined) filters.add('p.gateway_id = ?', query.gatewayId)
  if (query.role !== undefined) filters.add('p.usual_role = ?', query.role)
  if (query.q !== undefined && query.q !== '') filters.addLike(['p.name', 'p.serial', 'g.name'], query.q)
  const at = now()
  if (query.due === 'overdue') {
    filters.add(`p.usual_role <> 'coals' and coalesce(${probeDueSql} <= ?, true)`, at)
  } else if (query.due === 'soon') {
    const soon = new Date(at.getTime() + dueSoonDays * 86_400_000)
    filters.add(`${probeDueSql} > ? and ${probeDueSql} <= ?`, at, soon)
  }
}

/** Probes, those in use in the order in which they were added unless asked otherwise, each with its newest checks. */
export async function listProbes(actor: Actor, query: Query): Promise<Page<ProbeDto>> {
  requirePermission(actor, 'room:read')
  const em = await forkEm()
  const { dueSoonDays } = (await currentSite(em)).rules.checks
  const filters = sqlFilters()
  addFilters(filters, query, dueSoonDays)
  const { key, type, way } = sortOf(query.sort)
  if (query.cursor !== undefined) {
    const [last, no] = decodeCursor(query.cursor, 2)
    filters.add(`(${key}, p.no) ${way === 'asc' ? '>' : '<'} (?::text::${type}, ?::integer)`, last, no)
  }
  const rows = await queryRows<ProbeRow>(
    em,
    `${probeSelect(key)} ${filters.where()} order by ${key} ${way}, p.no ${way} limit ?`,
    [...filters.parameters, query.limit + 1],
  )
  return toPage(
    rows,
    query.limit,
    (row) => toProbe(row, dueSoonDays),
    (row) => [row.sort_key, row.no],
  )
}
