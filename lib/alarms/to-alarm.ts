import type { AlarmKind } from '@/lib/alarms/alarm-kinds'
import type { AlarmState } from '@/lib/alarms/alarm-states'
import type { AlarmDto } from '@/lib/alarms/schema'

/**
 * One row a coming of an alarm: `e` is the event with which it came. What became of it stands in the later events of
 * the same occurrence.
 */
export const alarmSelect = `
  select e.occurrence_id as id, e.firing_id, e.kind, e.subject, e.words, e.value, e.limit_value, e.at as came_at,
         newest.to_state as state, newest.reason as suppressed_by, past.over_at, seen.at as seen_at,
         seen.name as seen_by, shelf.at as shelf_at, shelf.shelved_until, shelf.name as shelf_by,
         shelf.reason as shelf_reason, h.number as hearth_number, p.serial, f.toaster_id, t.name as toaster_name,
         e.id as event_id
    from alarm_events e
    join firings f on f.id = e.firing_id
    join pieces p on p.id = f.piece_id
    left join hearths h on h.id = e.hearth_id
    left join accounts t on t.id = f.toaster_id
    join lateral (
      select to_state, case when to_state = 'suppressed' then reason end as reason from alarm_events n
       where n.occurrence_id = e.occurrence_id order by n.id desc limit 1) newest on true
    left join lateral (
      select max(o.at) as over_at from alarm_events o
       where o.occurrence_id = e.occurrence_id and newest.to_state in ('normal', 'returned unacknowledged', 'suppressed')
         and o.to_state in ('normal', 'returned unacknowledged', 'suppressed')
         and not (o.from_state = 'returned unacknowledged' and o.to_state = 'normal')) past on true
    left join lateral (
      select s.at, a.name from alarm_events s join accounts a on a.id = s.account_id
       where s.occurrence_id = e.occurrence_id
         and (s.to_state = 'acknowledged' or (s.from_state = 'returned unacknowledged' and s.to_state = 'normal'))
       order by s.id limit 1) seen on true
    left join lateral (
      select l.at, l.shelved_until, l.reason, a.name from alarm_events l join accounts a on a.id = l.account_id
       where l.occurrence_id = e.occurrence_id and l.to_state = 'shelved' order by l.id desc limit 1) shelf on true`

export type AlarmRow = {
  id: string
  event_id: string
  firing_id: string
  kind: AlarmKind
  subject: string
  words: string
  value: number | null
  limit_value: number | null
  came_at: Date
  over_at: Date | null
  state: AlarmState
  suppressed_by: string | null
  seen_at: Date | null
  seen_by: string | null
  shelf_at: Date | null
  shelved_until: Date | null
  shelf_by: string | null
  shelf_reason: string | null
  hearth_number: number | null
  serial: string
  toaster_id: string | null
  toaster_name: string | null
}

export function toAlarm(row: AlarmRow): AlarmDto {
  const { seen_at: seenAt, seen_by: seenBy, shelf_at: shelfAt, shelved_until: until } = row
  return {
    id: row.id,
    firingId: row.firing_id,
    kind: row.kind,
    subject: row.subject,
    words: row.words,
    value: row.value,
    limit: row.limit_value,
    cameAt: iso(row.came_at),
    overAt: row.over_at === null ? null : iso(row.over_at),
    state: row.state,
    seen: seenAt === null ? null : { at: iso(seenAt), by: seenBy ?? '' },
    shelf:
      shelfAt === null || until === null
        ? null
        : { at: iso(shelfAt), until: iso(until), by: row.shelf_by ?? '', reason: row.shelf_reason ?? '' },
    suppressedBy: row.suppressed_by,
    hearthNumber: row.hearth_number,
    serial: row.serial,
    toaster: row.toaster_id === null ? null : { id: row.toaster_id, name: row.toaster_name ?? '' },
  }
}

function iso(at: Date): string {
  return new Date(at).toISOString()
}
