import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import type { AuditEntryDto, AuditQuery } from '@/lib/audit/schema'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import { currentSite } from '@/lib/site/current-site'
import { dayBounds } from '@/lib/site/site-day'

type EntryRow = {
  seq: string
  at: Date | string
  actor_id: string | null
  actor_name: string
  action: string
  subject_type: string
  subject_id: string
  detail: Record<string, unknown>
  hash: string
}

/** Entries of the audit trail, newest first. */
export async function listEntries(actor: Actor, query: AuditQuery): Promise<Page<AuditEntryDto>> {
  requirePermission(actor, 'audit:read')
  const em = await forkEm()
  const { timeZone } = await currentSite(em)
  const filters = sqlFilters()
  if (query.actorId !== undefined) filters.add('actor_id = ?', query.actorId)
  if (query.actor !== undefined) filters.addLike(['actor_name'], query.actor)
  if (query.action !== undefined)
    filters.add('(action = ? or starts_with(action, ?))', query.action, `${query.action}.`)
  if (query.subjectType !== undefined) filters.add('subject_type = ?', query.subjectType)
  if (query.subjectId !== undefined) filters.add('subject_id = ?', query.subjectId)
  if (query.from !== undefined) filters.add('at >= ?', dayBounds(query.from, timeZone).fromAt)
  if (query.to !== undefined) filters.add('at < ?', dayBounds(query.to, timeZone).untilAt)
  if (query.cursor !== undefined) filters.add('seq < ?', decodeCursor(query.cursor, 1)[0] ?? null)
  const rows = await queryRows<EntryRow>(
    em,
    `select seq, at, actor_id, actor_name, action, subject_type, subject_id, detail, hash
       from audit_entries ${filters.where()} order by seq desc limit ?`,
    [...filters.parameters, query.limit + 1],
  )
  return toPage(rows, query.limit, toEntry, (row) => [Number(row.seq)])
}

function toEntry(row: EntryRow): AuditEntryDto {
  return {
    seq: Number(row.seq),
    at: new Date(row.at).toISOString(),
    actorId: row.actor_id,
    actorName: row.actor_name,
    action: row.action,
    subjectType: row.subject_type,
    subjectId: row.subject_id,
    detail: row.detail,
    hash: row.hash,
  }
}
