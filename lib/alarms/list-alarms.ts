import { alarmFilters } from '@/lib/alarms/alarm-filters'
import type { AlarmDto, ListAlarmsQuery } from '@/lib/alarms/schema'
import type { AlarmRow } from '@/lib/alarms/to-alarm'
import { alarmSelect, toAlarm } from '@/lib/alarms/to-alarm'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import { currentSite } from '@/lib/site/current-site'

/** Alarms that came, the newest first. */
export async function listAlarms(actor: Actor, query: ListAlarmsQuery): Promise<Page<AlarmDto>> {
  requirePermission(actor, 'alarms:read')
  const em = await forkEm()
  const { timeZone } = await currentSite(em)
  const filters = alarmFilters(actor, query, timeZone)
  if (query.cursor !== undefined) {
    const [at, id] = decodeCursor(query.cursor, 2)
    filters.add('(e.at, e.id) < (?::timestamptz, ?::bigint)', at, id)
  }
  const rows = await queryRows<AlarmRow>(
    em,
    `${alarmSelect} ${filters.where()} order by e.at desc, e.id desc limit ?`,
    [...filters.parameters, query.limit + 1],
  )
  return toPage(rows, query.limit, toAlarm, (row) => [new Date(row.came_at).toISOString(), row.event_id])
}
