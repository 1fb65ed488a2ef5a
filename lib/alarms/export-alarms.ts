import { alarmCatalog } from '@/lib/alarms/alarm-kinds'
import { alarmFilters } from '@/lib/alarms/alarm-filters'
import type { AlarmFilters } from '@/lib/alarms/schema'
import type { AlarmRow } from '@/lib/alarms/to-alarm'
import { alarmSelect, toAlarm } from '@/lib/alarms/to-alarm'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import type { CsvFile } from '@/lib/http/csv-response'
import { csvLine } from '@/lib/http/csv-response'
import { currentSite } from '@/lib/site/current-site'

const heads = [
  'came_utc',
  'over_utc',
  'hearth',
  'barrel',
  'toaster',
  'alarm',
  'priority',
  'words',
  'value',
  'limit',
  'seen_utc',
  'seen_by',
  'shelved_utc',
  'shelved_until_utc',
  'shelved_by',
  'shelved_because',
  'suppressed_because',
  'state',
  'firing',
]

const rowsAtOnce = 2_000

/** Every alarm that the filters leave, newest first, as CSV. */
export async function exportAlarms(actor: Actor, query: AlarmFilters): Promise<CsvFile> {
  requirePermission(actor, 'alarms:read')
  const { timeZone } = await currentSite(await forkEm())
  return { fileName: 'alarms.csv', rows: lines(actor, query, timeZone) }
}

async function* lines(actor: Actor, query: AlarmFilters, timeZone: string): AsyncIterable<string> {
  yield csvLine(heads)
  let before: [string, string] | null = null
  for (;;) {
    const filters = alarmFilters(actor, query, timeZone)
    if (before !== null) filters.add('(e.at, e.id) < (?::timestamptz, ?::bigint)', ...before)
    const rows: AlarmRow[] = await queryRows<AlarmRow>(
      await forkEm(),
      `${alarmSelect} ${filters.where()} order by e.at desc, e.id desc limit ?`,
      [...filters.parameters, rowsAtOnce],
    )
    for (const row of rows) yield lineOf(row)
    const last = rows.at(-1)
    if (last === undefined || rows.length < rowsAtOnce) return
    before = [new Date(last.came_at).toISOString(), last.event_id]
  }
}

function lineOf(row: AlarmRow): string {
  const alarm = toAlarm(row)
  return csvLine([
    alarm.cameAt,
    alarm.overAt,
    alarm.hearthNumber,
    alarm.serial,
    alarm.toaster?.name ?? null,
    alarmCatalog[alarm.kind].name,
    alarmCatalog[alarm.kind].priority,
    alarm.words,
    alarm.value === null ? null : Math.round(alarm.value * 100) / 100,
    alarm.limit,
    alarm.seen?.at ?? null,
    alarm.seen?.by ?? null,
    alarm.shelf?.at ?? null,
    alarm.shelf?.until ?? null,
    alarm.shelf?.by ?? null,
    alarm.shelf?.reason ?? null,
    alarm.suppressedBy,
    alarm.state,
    alarm.firingId,
  ])
}
