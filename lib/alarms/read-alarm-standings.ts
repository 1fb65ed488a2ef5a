import type { EntityManager } from '@mikro-orm/postgresql'
import type { AlarmKind } from '@/lib/alarms/alarm-kinds'
import type { AlarmState } from '@/lib/alarms/alarm-states'
import type { AlarmStanding } from '@/lib/alarms/firing-alarms'
import { queryRows } from '@/lib/db/orm'

type Row = {
  kind: AlarmKind
  subject: string
  occurrence_id: string
  to_state: AlarmState
  words: string
  shelved_until: Date | null
  since: Date
}

/** The alarms of a firing that are not normal, as the table has them. */
export async function readAlarmStandings(em: EntityManager, firingId: string): Promise<AlarmStanding[]> {
  const rows = await queryRows<Row>(
    em,
    `select * from (
       select distinct on (e.kind, e.subject) e.kind, e.subject, e.occurrence_id, e.to_state, e.words, e.shelved_until,
              (select max(o.at) from alarm_events o where o.occurrence_id = e.occurrence_id
                and o.from_state in ('normal', 'returned unacknowledged')) as since
         from alarm_events e where e.firing_id = ? order by e.kind, e.subject, e.id desc) newest
      where to_state <> 'normal'`,
    [firingId],
  )
  return rows.map((row) => ({
    kind: row.kind,
    subject: row.subject,
    occurrenceId: row.occurrence_id,
    state: row.to_state,
    sinceMs: new Date(row.since).getTime(),
    words: row.words,
    shelvedUntilMs: row.shelved_until === null ? null : new Date(row.shelved_until).getTime(),
  }))
}
